"""The sheet: the widget on which a plan is drawn, read and edited."""

from __future__ import annotations

from PySide6.QtCore import Signal
from PySide6.QtWidgets import QWidget


class Sheet(QWidget):
    """Draws a plan with a reading over it and turns gestures into Edits.

    The sheet never applies an edit itself: it emits :attr:`edited`.
    """

    edited = Signal(object)
    focus_asked = Signal(object)
    selection_changed = Signal()
    hint = Signal(str)
    menu_asked = Signal(object, object)
    tool_changed = Signal(str)
