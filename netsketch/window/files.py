"""Opening and saving: nothing is lost, and a bad file leaves the open plan as it is."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from pathlib import Path
from typing import Any

from PySide6.QtCore import QObject, Signal

from netsketch import formats
from netsketch.formats import FormatError
from netsketch.session.document import NATIVE_SUFFIXES, Document
from netsketch.window import questions
from netsketch.window.desk import Desk
from netsketch.window.fields import finish_writing
from netsketch.window.questions import Questions
from netsketch.window.relay import Relay
from netsketch.window.settings import Settings


class Files(QObject):
    """The File menu."""

    noted = Signal(str)
    """What an import assumed or left out, or a save could not carry."""
    recent_changed = Signal()
    came = Signal()
    """A file to open was read, or is about to be refused."""
    state_changed = Signal(str)

    def __init__(
        self, desk: Desk, relay: Relay, settings: Settings, ask: Questions, parent: QObject
    ) -> None:
        super().__init__(parent)
        self._desk, self._relay, self._settings, self.ask = desk, relay, settings, ask

    def new(self) -> None:
        """Start an empty plan."""
        if self.may_leave():
            self._desk.set_document(Document.new())

    def open(self) -> None:
        """Ask for a file and open it."""
        if self.may_leave():
            path = self.ask.file_to_open(self._folder())
            if path is not None:
                self._read(path)

    def open_path(self, path: Path) -> None:
        """Open a file that was already chosen (recent, command line)."""
        if self.may_leave():
            self._read(path)

    def open_demo(self, path: Path) -> None:
        """Open a copy of a demo network: saving asks where to; the demo stays as it is."""
        if self.may_leave():
            self._read(path, _copy_of)

    def begin_with(self, demo: Path | None) -> None:
        """Open a copy of a demo network; ``None`` asks for a file."""
        if demo is None:
            self.open()
        else:
            self.open_demo(demo)

    def _read(self, path: Path, read: Callable[[Path], Document] = Document.open) -> None:
        left = self._as_it_is()
        self.state_changed.emit(f"Opening {path.name}")
        self._relay.submit("open", lambda cancelled: read(path), partial(self._opened, path, left))

    def _as_it_is(self) -> tuple[Document, int]:
        return self._desk.document, self._desk.document.plan.revision

    def _opened(self, path: Path, left: tuple[Document, int], result: Any) -> None:
        self.state_changed.emit("")
        self.came.emit()
        if isinstance(result, FormatError):
            self._settings.drop_recent(path)
            self.recent_changed.emit()
            self.ask.refuse(f"{result}\n\nThe plan on the sheet is as it was.")
        elif isinstance(result, Exception):
            raise result
        elif left == self._as_it_is() or self.may_leave():  # edits can be made while it is read
            self._desk.set_document(result)
            if not _is_copy_of(path, result):
                self._settings.add_recent(path)
                self.recent_changed.emit()
            if result.notes:
                self.noted.emit("\n".join(result.notes))

    def _folder(self) -> Path:
        path = self._desk.document.path
        if path is not None:
            return path.parent
        recent = self._settings.recent
        return recent[0].parent if recent else Path.home()

    def save(self) -> bool:
        """Save to the document's file, asking for one where there is none; return whether
        the plan is saved."""
        path = self._desk.document.path
        return self._write(path) if path is not None else self.save_as()

    def save_as(self) -> bool:
        """Ask for a file and save to it; return whether the plan is saved."""
        document = self._desk.document
        name = document.path or document.suggested or Path("plan")
        stem = name.name.removesuffix(".netsketch.json") + ".netsketch.json"
        folder = name.parent if name.is_absolute() else self._folder()
        path = self.ask.file_to_save(folder / stem)
        if path is None:
            return False
        if path.name.endswith(NATIVE_SUFFIXES):
            return self._write(path)
        plan = document.plan.snapshot()
        self._write_apart("copy", lambda: formats.write(plan, path), path)
        return not document.is_modified

    def _write(self, path: Path) -> bool:
        try:
            notes = self._desk.document.save(path)
        except FormatError as error:
            self.ask.refuse(f"{error}\n\nNothing was saved; the plan is still here.")
            return False
        if notes:
            self.noted.emit("\n".join(notes))
        self._settings.add_recent(path)
        self.recent_changed.emit()
        self._desk.plan_changed.emit()
        return True

    def _write_apart(self, job: str, write: Callable[[], list[str] | None], path: Path) -> None:
        """Write a file that is not the document's own, in the background."""
        self.state_changed.emit(f"Writing {path.name}")
        self._relay.submit(job, lambda cancelled: write(), partial(self._written, path))

    def _written(self, path: Path, result: Any) -> None:
        self.state_changed.emit("")
        if isinstance(result, FormatError):
            self.ask.refuse(f"{result}\n\nThe file was not written.")
        elif isinstance(result, Exception):
            raise result
        else:
            self.noted.emit("\n".join([f"{path.name} is written.", *(result or ())]))

    def save_picture(self) -> None:
        """Ask for a file and save the sheet with its reading as a picture."""
        from netsketch.sheet.picture import write_picture
        from netsketch.window.theme import look_named

        document = self._desk.document
        stem = document.title.removesuffix(".netsketch.json") + ".svg"
        path = self.ask.file_for_picture(self._folder() / stem)
        if path is not None:
            plan, reading = document.plan.snapshot(), self._desk.reading
            look = look_named(self._settings.look)
            self._write_apart("picture", lambda: write_picture(plan, reading, path, look), path)

    def may_leave(self) -> bool:
        """Return whether the open document may be left: it is saved, or thrown away on
        purpose."""
        finish_writing()
        document = self._desk.document
        if not document.is_modified:
            return True
        answer = self.ask.unsaved(document.title)
        if answer == questions.SAVE:
            return self.save()
        return answer == questions.THROW_AWAY


def _copy_of(path: Path) -> Document:
    document = Document.open(path)
    document.path, document.suggested = None, _copy_name(path)
    return document


def _copy_name(path: Path) -> Path:
    return Path(path.name.split(".")[0])


def _is_copy_of(path: Path, document: Document) -> bool:
    return document.path is None and document.suggested == _copy_name(path)
