"""The trial strip: every change of the trial as a chip, and the totals over all pairs."""

from __future__ import annotations

from functools import partial

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import (
    QFrame,
    QHBoxLayout,
    QLabel,
    QPushButton,
    QScrollArea,
    QSizePolicy,
    QToolButton,
    QWidget,
)

from netsketch.model import Plan, TrialChange, edits
from netsketch.window.chips import chip_text
from netsketch.window.literal import as_tip

MOST_CHIPS = 24
_LONGEST = 44


class TrialStrip(QFrame):
    """A bar along the bottom. It only shows; every button emits what is wanted."""

    edited = Signal(object)
    ledger_asked = Signal()

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setProperty("role", "strip")
        self.setAccessibleName("Trial")
        self._plan: Plan | None = None
        self._removers: list[QToolButton] = []
        self._chips = QWidget()
        self._row = QHBoxLayout(self._chips)
        self._row.setContentsMargins(0, 0, 0, 0)
        self._row.setSpacing(6)
        self.totals = QLabel()
        self.totals.setAccessibleName("Totals over all pairs")
        self.ledger_button = _button("Ledger", "Show every pair that changes (L)")
        self.adopt_button = _button("Adopt", "Make the trial the plan (Ctrl+Return)")
        self.discard_button = _button("Discard", "Drop every change (Ctrl+Backspace)")
        self.ledger_button.clicked.connect(self.ledger_asked)
        self.adopt_button.clicked.connect(self._adopt)
        self.discard_button.clicked.connect(self._discard)
        self._lay_out()

    def _lay_out(self) -> None:
        area = QScrollArea()
        area.setWidget(self._chips)
        area.setWidgetResizable(True)
        area.setFrameShape(QFrame.Shape.NoFrame)
        area.setVerticalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        area.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAsNeeded)
        area.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        area.setFixedHeight(40)
        area.viewport().setAutoFillBackground(False)
        self._chips.setAutoFillBackground(False)
        row = QHBoxLayout(self)
        row.setContentsMargins(12, 4, 12, 4)
        title = QLabel("Trial")
        title.setProperty("role", "name")
        row.addWidget(title)
        row.addWidget(area, 1)
        row.addWidget(self.totals)
        for button in (self.ledger_button, self.adopt_button, self.discard_button):
            row.addWidget(button)

    def show_trial(self, plan: Plan) -> None:
        """Show the trial of ``plan``."""
        self._plan = plan
        place = self._place_of_keys()
        self._removers.clear()
        while self._row.count():
            item = self._row.takeAt(0)
            widget = item.widget() if item is not None else None
            if widget is not None:
                widget.hide()
                widget.deleteLater()
        changes = plan.trial.changes
        if not changes:
            empty = QLabel("Nothing is tried. Select a link or a router and press D: it goes down.")
            empty.setProperty("role", "soft")
            self._row.addWidget(empty)
        for change in changes[:MOST_CHIPS]:
            self._row.addWidget(self._chip(plan, change))
        if place is not None:
            self._give_keys(place)
        if len(changes) > MOST_CHIPS:
            self._row.addWidget(QLabel(f"and {len(changes) - MOST_CHIPS} more"))
        self._row.addStretch(1)
        for button in (self.ledger_button, self.adopt_button, self.discard_button):
            button.setEnabled(bool(changes))

    def _place_of_keys(self) -> int | None:
        """Return which chip has the keyboard, if one has."""
        for place, remove in enumerate(self._removers):
            if remove.hasFocus():
                return place
        return None

    def _give_keys(self, place: int) -> None:
        """Give the keyboard to the chip that is now at ``place``, or to the last one."""
        if self._removers:
            remove = self._removers[min(place, len(self._removers) - 1)]
            remove.setFocus(Qt.FocusReason.OtherFocusReason)

    def _chip(self, plan: Plan, change: TrialChange) -> QFrame:
        text = chip_text(plan, change)
        chip = QFrame()
        chip.setProperty("role", "chip")
        chip.setFixedHeight(26)
        row = QHBoxLayout(chip)
        row.setContentsMargins(10, 0, 3, 0)
        row.setSpacing(2)
        label = QLabel(text if len(text) <= _LONGEST else text[: _LONGEST - 1] + "…")
        label.setTextFormat(Qt.TextFormat.PlainText)
        label.setToolTip(as_tip(text[:500]))
        remove = QToolButton()
        remove.setText("✕")
        remove.setAutoRaise(True)
        remove.setToolTip("Take this change out of the trial")
        remove.setAccessibleName(f"Take out: {text[:200]}")
        remove.clicked.connect(partial(self._drop, change))
        self._removers.append(remove)
        row.addWidget(label)
        row.addWidget(remove)
        return chip

    def show_totals(self, text: str) -> None:
        """Show what the trial does to all pairs."""
        self.totals.setText(text)

    def _drop(self, change: TrialChange) -> None:
        if self._plan is not None:
            self.edited.emit(edits.drop_changes(self._plan, [change]))

    def _adopt(self) -> None:
        if self._plan is not None:
            self.edited.emit(edits.adopt(self._plan))

    def _discard(self) -> None:
        if self._plan is not None:
            self.edited.emit(edits.discard(self._plan))


def _button(text: str, tip: str) -> QPushButton:
    button = QPushButton(text)
    button.setToolTip(tip)
    return button
