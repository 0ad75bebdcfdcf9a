"""The edit history: what can be undone and redone, and where the saved plan stands."""

from __future__ import annotations

from netsketch.model import Edit


class History:
    """Edits done, and edits taken back that can be done again.

    An edit with the ``merge`` of the one before it joins that one, unless the plan was
    saved between the two. States are told apart by identity: the plan is as saved when
    the last edit done is the one it was saved after.
    """

    def __init__(self) -> None:
        self._done: list[Edit] = []
        self._undone: list[Edit] = []
        self._saved: Edit | None = None

    @property
    def done(self) -> Edit | None:
        """The edit that undo takes back."""
        return self._done[-1] if self._done else None

    @property
    def undone(self) -> Edit | None:
        """The edit that redo does again."""
        return self._undone[-1] if self._undone else None

    def record(self, edit: Edit) -> None:
        """Note an edit that was just applied; what was undone is given up."""
        last = self.done
        if last is not None and last is not self._saved and edit.merge and edit.merge == last.merge:
            self._done.pop()
            edit = Edit(edit.label, (*last.steps, *edit.steps), edit.merge)
        self._undone.clear()
        self._done.append(edit)

    def step_back(self) -> None:
        """Note that the last edit was undone."""
        self._undone.append(self._done.pop())

    def step_forward(self) -> None:
        """Note that the last undone edit was done again."""
        self._done.append(self._undone.pop())

    @property
    def is_saved(self) -> bool:
        """Whether the plan is as it was when last saved or opened."""
        return self.done is self._saved

    def mark_saved(self) -> None:
        """Note that the plan as it stands is what the file holds."""
        self._saved = self.done
