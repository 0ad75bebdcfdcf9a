"""Writing on the sheet: which name or cost a line is open for, and the edit it makes."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import QPointF, QRectF

from netsketch.model import LinkCost, edits
from netsketch.sheet.editors import Accept, WritingLine, cost_hint, cost_text, read_costs

if TYPE_CHECKING:
    from netsketch.sheet.sheet import Sheet


class Writing:
    """Opens one line at a time over a plate or a link."""

    def __init__(self, sheet: Sheet) -> None:
        self._sheet = sheet
        self.line: WritingLine | None = None

    def begin_name(self, key: str) -> None:
        """Open a line over a node to write its name in."""
        node = self._sheet.drawing.plan.nodes[key]
        frame = self._sheet.drawing.frame
        box = frame.lines.boxes[frame.contents.nodes.row[key]].tolist()
        over = QRectF(QPointF(*box[:2]), QPointF(*box[2:]))
        self._open(node.name, over, lambda text: self._keep_name(key, text))
        self._sheet.hint.emit("Type the name; Enter keeps it, Esc drops it")

    def begin_cost(self, key: str, middle: QPointF) -> None:
        """Open a line over the ``middle`` of a link to write its cost in."""
        plan = self._sheet.drawing.plan
        text = cost_text(plan.links[key], edits.costs_in_trial(plan, key), plan)
        self._open(text, QRectF(middle, middle), lambda typed: self._keep_cost(key, typed))
        self._sheet.hint.emit(cost_hint(plan.links[key], plan))

    def close(self) -> None:
        """Close the line, if one is open, and drop what was typed."""
        if self.line is not None:
            self.line.close_line()

    def _open(self, text: str, over: QRectF, accept: Accept) -> None:
        self.close()
        self.line = WritingLine(self._sheet, text, self._sheet.view.rect_to_window(over), accept)
        self.line.refused.connect(self._sheet.hint)
        self.line.closed.connect(self._on_closed)

    def _on_closed(self) -> None:
        self.line = None
        self._sheet.hint.emit("")

    def _keep_name(self, key: str, text: str) -> None:
        self._sheet.propose(edits.rename(self._sheet.drawing.plan, key, text.strip()))

    def _keep_cost(self, key: str, text: str) -> None:
        """Change the trial's cost where the trial holds one, else the plan's."""
        plan = self._sheet.drawing.plan
        costs = read_costs(text, plan.links[key], plan)
        change = edits.set_costs if plan.trial.find(LinkCost, key) is None else edits.try_costs
        self._sheet.propose(change(plan, key, *costs))
