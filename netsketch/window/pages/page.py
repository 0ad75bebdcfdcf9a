"""What every page of the inspector has: the document and ways to ask for things."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QFormLayout, QLabel, QPushButton, QVBoxLayout, QWidget

from netsketch.model import Edit, Plan
from netsketch.window.fields import Field

if TYPE_CHECKING:
    from netsketch.session.answers import Answers
    from netsketch.session.document import Document


class Page(QWidget):
    """A page shows; what a person changes on it goes out as an edit."""

    edited = Signal(object)
    focus_asked = Signal(object)
    hint = Signal(str)

    def __init__(self) -> None:
        super().__init__()
        self.document: Document | None = None
        self.answers: Answers | None = None
        self.column = QVBoxLayout(self)
        self.column.setContentsMargins(14, 12, 14, 10)
        self.title = label("", "title")
        self.title.setWordWrap(True)
        self.column.addWidget(self.title)

    @property
    def plan(self) -> Plan:
        """The plan that is shown."""
        assert self.document is not None
        return self.document.plan

    def propose(self, edit: Edit) -> None:
        """Send an edit out, unless it changes nothing."""
        if edit:
            self.edited.emit(edit)


def label(text: str, role: str = "", *, wrap: bool = False) -> QLabel:
    """Return a label of plain text in the style of ``role``."""
    made = QLabel(text)
    made.setTextFormat(Qt.TextFormat.PlainText)
    made.setWordWrap(wrap)
    made.setIndent(0)
    if role:
        made.setProperty("role", role)
    return made


def line(name: str, tip: str) -> Field:
    """Return a line to write in."""
    made = Field()
    made.setAccessibleName(name)
    made.setToolTip(tip)
    return made


def button(text: str, tip: str) -> QPushButton:
    """Return a push button."""
    made = QPushButton(text)
    made.setToolTip(tip)
    return made


def form() -> QFormLayout:
    """Return a form whose fields grow."""
    made = QFormLayout()
    made.setFieldGrowthPolicy(QFormLayout.FieldGrowthPolicy.ExpandingFieldsGrow)
    made.setLabelAlignment(Qt.AlignmentFlag.AlignLeft)
    made.setHorizontalSpacing(10)
    return made


def short(text: str, limit: int = 60) -> str:
    """Return ``text`` on one line, cut where it is long."""
    flat = " ".join(text.split())
    return flat if len(flat) <= limit else flat[: limit - 1] + "…"
