"""Writing on the sheet: a line to type in over the name or the cost it changes."""

# ruff: noqa: N802  (Qt names the event handlers)

from __future__ import annotations

from collections.abc import Callable

from PySide6.QtCore import QEvent, QObject, QRectF, Qt, Signal
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import QLineEdit, QWidget

from netsketch.model import COST_RANGES, Link, Plan, PlanError, Segment
from netsketch.model.checks import check_cost

Accept = Callable[[str], None]
"""Takes the text that was typed; raises PlanError when it cannot be used."""


class WritingLine(QLineEdit):
    """Enter keeps the text, Esc drops it; leaving keeps it if it can be used.

    Text that cannot be used stays open, and ``refused`` says why.
    """

    refused = Signal(str)
    closed = Signal()

    def __init__(self, parent: QWidget, text: str, over: QRectF, accept: Accept) -> None:
        super().__init__(text, parent)
        self._sheet, self._before, self._accept = parent, text, accept
        self._open = True
        self.setAlignment(Qt.AlignmentFlag.AlignCenter)
        width = max(over.width(), 90.0)
        height = self.sizeHint().height()
        left = over.center().x() - width / 2
        self.setGeometry(round(left), round(over.center().y() - height / 2), round(width), height)
        self.selectAll()
        self.show()
        self.setFocus()
        self.returnPressed.connect(self.keep)
        self.installEventFilter(self)

    def keep(self) -> bool:
        """Hand over the text; return whether it could be used."""
        try:
            if self.text() != self._before:
                self._accept(self.text())
        except PlanError as error:
            self.refused.emit(str(error))
            return False
        self.close_line()
        return True

    def close_line(self) -> None:
        """Close without handing anything over."""
        if self._open:
            self._open = False
            if self.hasFocus():
                # Before hiding, which would hand the focus on as if Tab were pressed.
                self._sheet.setFocus()
            self.hide()
            self.closed.emit()
            self.deleteLater()

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        if event.type() == QEvent.Type.FocusOut and self._open and not self.keep():
            self.close_line()
        return super().eventFilter(watched, event)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if event.key() == Qt.Key.Key_Escape:
            self.close_line()
        else:
            super().keyPressEvent(event)


def cost_text(link: Link, costs: tuple[int, int], plan: Plan) -> str:
    """Return a link's costs as they are typed: "10", or "10/25" where they differ."""
    if isinstance(plan.nodes[link.source], Segment):
        return str(costs[1])
    if isinstance(plan.nodes[link.target], Segment) or costs[0] == costs[1]:
        return str(costs[0])
    return f"{costs[0]}/{costs[1]}"


def cost_hint(link: Link, plan: Plan) -> str:
    """Return what may be typed as a cost of this link."""
    low, high = COST_RANGES[plan.settings.cost_style]
    source, target = plan.nodes[link.source], plan.nodes[link.target]
    if isinstance(source, Segment) or isinstance(target, Segment):
        return f"Cost {low} to {high}"
    return f"Cost {low} to {high}; two directions: from {source.label} / from {target.label}"


def read_costs(text: str, link: Link, plan: Plan) -> tuple[int, int]:
    """Return the costs that ``text`` gives a link: leaving its source and its target.

    Raises PlanError naming the link and the range.
    """
    segments = [isinstance(plan.nodes[end], Segment) for end in link.ends]
    parts = [part.strip() for part in text.split("/")]
    if len(parts) > (1 if any(segments) else 2):
        raise PlanError(f"link “{link.id}”: type one cost" + ("" if any(segments) else " or two"))
    style = plan.settings.cost_style
    values = [_whole(part) for part in parts]
    for value in values:
        check_cost(value, link.id, style)
    costs = [int(value) for value in (values * 2)[:2]]
    return (0 if segments[0] else costs[0]), (0 if segments[1] else costs[1])


def _whole(text: str) -> int | str:
    """Return the number that plain digits spell; any other text as it is."""
    digits = text.removeprefix("-")
    return int(text) if digits.isdecimal() and len(digits) <= 30 else text
