"""A line over the sheet for what should be read but need not be answered."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QFrame, QHBoxLayout, QLabel, QToolButton, QWidget

MOST_LINES = 6


class Notice(QFrame):
    """Shows a text until it is put away."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setProperty("role", "notice")
        self.label = QLabel()
        self.label.setWordWrap(True)
        self.label.setTextFormat(Qt.TextFormat.PlainText)
        away = QToolButton()
        away.setText("Put away")
        away.setToolTip("Put this message away")
        away.clicked.connect(self.hide)
        row = QHBoxLayout(self)
        row.setContentsMargins(12, 6, 12, 6)
        row.addWidget(self.label, 1)
        row.addWidget(away)
        self.hide()

    def say(self, text: str) -> None:
        """Show ``text``, its first lines where it is long."""
        lines = text.splitlines()
        if len(lines) > MOST_LINES:
            lines = [*lines[:MOST_LINES], f"and {len(lines) - MOST_LINES} more"]
        self.label.setText("\n".join(line[:300] for line in lines))
        self.show()
