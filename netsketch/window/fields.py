"""Lines to write in."""

from __future__ import annotations

from PySide6.QtCore import QEvent
from PySide6.QtGui import QKeyEvent, QKeySequence
from PySide6.QtWidgets import QApplication, QLineEdit

_UNDO, _REDO = QKeySequence.StandardKey.Undo, QKeySequence.StandardKey.Redo
_OVERRIDE = QEvent.Type.ShortcutOverride


class Field(QLineEdit):
    """A line whose undo and redo keys are the window's while it has nothing of its own to
    take back."""

    def event(self, event: QEvent) -> bool:
        if event.type() == _OVERRIDE and isinstance(event, QKeyEvent) and self._is_spent(event):
            event.ignore()
            return False
        return super().event(event)

    def _is_spent(self, event: QKeyEvent) -> bool:
        if event.matches(_UNDO):
            return not self.isUndoAvailable()
        return event.matches(_REDO) and not self.isRedoAvailable()


def finish_writing() -> None:
    """Take what is being written in any line as if the person had left it."""
    field = QApplication.focusWidget()
    if isinstance(field, QLineEdit):
        beneath = field.parentWidget()
        field.clearFocus()
        back = field if field.isVisible() else beneath
        if back is not None:
            back.setFocus()
