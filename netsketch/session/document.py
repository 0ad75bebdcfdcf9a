"""An open document: the plan with its trial, its history and its file."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

from netsketch import formats
from netsketch.model import ChangeSet, Edit, Plan
from netsketch.session.history import History

Listener = Callable[[ChangeSet], None]

NATIVE_SUFFIXES = formats.names()[0].suffixes


class Document:
    """The one place where a plan is edited, undone, opened and saved.

    Not thread-safe: it belongs to the thread that edits. Background work takes
    ``plan.snapshot()`` or the arrays compiled from it.
    """

    def __init__(self, plan: Plan | None = None) -> None:
        self.plan = plan or Plan()
        self.path: Path | None = None
        self.suggested: Path | None = None
        """Where an imported plan could be saved: its own name without the suffix."""
        self.notes: tuple[str, ...] = ()
        self._original: bytes | None = None
        self._history = History()
        self._listeners: list[Listener] = []

    @classmethod
    def new(cls) -> Document:
        """Return an empty document."""
        return cls()

    @classmethod
    def open(cls, path: Path) -> Document:
        """Return the document in a file of any readable format; what has no position gets
        one. Only the native format is saved back to the same path.

        Raises :class:`~netsketch.formats.FormatError`.
        """
        loaded = formats.read(path)
        document = cls(loaded.plan)
        document.notes = loaded.notes
        document._original = loaded.original
        if loaded.original is not None:
            document.path = path
        else:
            document.suggested = path.with_name(path.name.split(".")[0])
        if any(node.x is None for node in document.plan.nodes):
            from netsketch.session.layout import place_missing  # loads networkx

            place_missing(document.plan)
        return document

    @property
    def title(self) -> str:
        """The name to show: the file's, else the plan's, else "Untitled"."""
        if self.path is not None:
            return self.path.name
        return self.plan.settings.name or (self.suggested.name if self.suggested else "Untitled")

    @property
    def is_modified(self) -> bool:
        """Whether there is something to save."""
        return not self._history.is_saved

    @property
    def undo_label(self) -> str | None:
        """What undo takes back; ``None`` when there is nothing to undo."""
        return self._history.done.label if self._history.done else None

    @property
    def redo_label(self) -> str | None:
        """What redo does again; ``None`` when there is nothing to redo."""
        return self._history.undone.label if self._history.undone else None

    def apply(self, edit: Edit) -> None:
        """Apply ``edit`` and note it for undo; nothing happens when it has no steps.

        Raises :class:`~netsketch.model.PlanError`; the plan is then as before.
        """
        if not edit:
            return
        self.plan.apply(edit)
        self._history.record(edit)
        self._tell(edit)

    def undo(self) -> None:
        """Take the last edit back, if there is one."""
        edit = self._history.done
        if edit is not None:
            inverse = edit.inverse()
            self.plan.apply(inverse)
            self._history.step_back()
            self._tell(inverse)

    def redo(self) -> None:
        """Do the last undone edit again, if there is one."""
        edit = self._history.undone
        if edit is not None:
            self.plan.apply(edit)
            self._history.step_forward()
            self._tell(edit)

    def subscribe(self, listener: Listener) -> Callable[[], None]:
        """Call ``listener`` with the change set after every edit, undo and redo; return
        what ends it."""
        self._listeners.append(listener)
        return lambda: self._listeners.remove(listener)

    def _tell(self, edit: Edit) -> None:
        changes = ChangeSet(self.plan.revision, edit.steps)
        for listener in tuple(self._listeners):
            listener(changes)

    def save(self, path: Path | None = None) -> list[str]:
        """Write the plan to ``path`` (default: where it came from) in the format of the
        suffix; return what the format could not carry.

        A file in the native format becomes the document's own; any other is a copy.
        Raises :class:`~netsketch.formats.FormatError`; nothing is lost then.
        """
        target = path or self.path
        if target is None:
            raise ValueError("a document without a file needs a path to be saved to")
        notes = formats.write(self.plan, target, self._original)
        if target.name.endswith(NATIVE_SUFFIXES):
            self.path = target
            self._original = target.read_bytes()
            self._history.mark_saved()
        return notes
