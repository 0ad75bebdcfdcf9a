"""The path page: hop by hop, the way back, why this way, and what if a link fails."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

from PySide6.QtCore import Qt
from PySide6.QtWidgets import (
    QAbstractItemView,
    QHeaderView,
    QTableWidget,
    QTableWidgetItem,
)

from netsketch.model import Plan
from netsketch.reports.words import delay_text, next_hops_text
from netsketch.window.literal import as_tip
from netsketch.window.pages.page import Page, label, short

if TYPE_CHECKING:
    from netsketch.session.answers import Pair, Way

HOP_HEADERS = ("Leaves", "Over", "Cost", "So far", "Delay", "So far", "Share")
DOWN_HEADERS = ("If down", "Cost then", "Extra", "Next hops then")
_ITEM_FLAGS = Qt.ItemFlag.ItemIsSelectable | Qt.ItemFlag.ItemIsEnabled


class PathPage(Page):
    """Answers for a pair of routers."""

    def __init__(self) -> None:
        super().__init__()
        self.summary = label("", wrap=True)
        self.out = _table("Way out", HOP_HEADERS)
        self.back_title = label("", "heading", wrap=True)
        self.back = _table("Way back", HOP_HEADERS)
        self.why = label("", wrap=True)
        self.down = _table("If a link goes down", DOWN_HEADERS)
        self.column.addWidget(self.summary)
        for title, widget in (
            (label("Way out", "heading"), self.out),
            (self.back_title, self.back),
            (label("Why this way", "heading"), self.why),
            (label("If a link of it goes down", "heading"), self.down),
        ):
            self.column.addWidget(title)
            self.column.addWidget(widget)
        self.column.addStretch(1)
        for table in (self.out, self.back, self.down):
            table.itemDoubleClicked.connect(self._go)

    def show_pair(self, answer: Pair) -> None:
        """Show everything about a pair."""
        plan, out = self.plan, answer.out
        names = plan.nodes[out.source].label, plan.nodes[out.target].label
        self.title.setText(f"{short(names[0], 24)} to {short(names[1], 24)}")
        self.summary.setText(_summary(out))
        _fill_hops(self.out, plan, out)
        self.back_title.setText(_back_title(answer, plan))
        self.back.setVisible(answer.back is not None and answer.parts_at is not None)
        if answer.back is not None:
            _fill_hops(self.back, plan, answer.back)
        self.why.setText(_why(answer, plan))
        rows = [
            (
                each.link,
                "cut off" if each.cost is None else str(each.cost),
                "" if each.extra is None else f"+{each.extra}",
                next_hops_text(plan, each.next_hops),
            )
            for each in answer.if_down
        ]
        _fill(self.down, rows, [each.link for each in answer.if_down], plan)

    def _go(self, item: QTableWidgetItem) -> None:
        link = item.data(Qt.ItemDataRole.UserRole)
        if link in self.plan.links:
            self.focus_asked.emit(("link", link))


def _summary(way: Way) -> str:
    if way.cost is None:
        return "Cut off: there is no way in the trial."
    delay = delay_text(way.delay_ms)
    paths = "one path" if way.path_count == 1 else f"{_count(way.path_count)} equal-cost paths"
    return f"Cost {way.cost}, {paths}, delay {delay + ' ms' if delay else 'not known'}."


def _count(number: int) -> str:
    return f"{number:,}" if number < 2**61 else "more than 2,000,000,000,000,000,000"


def _back_title(answer: Pair, plan: Plan) -> str:
    if answer.back is None:
        return "A segment sends nothing back"
    if answer.parts_at is None:
        return "The way back is the same"
    return f"Way back: parts at {short(plan.nodes[answer.parts_at].label, 30)}. " + _summary(
        answer.back
    )


def _why(answer: Pair, plan: Plan) -> str:
    if answer.out.cost is None:
        return "Nothing is left to compare."
    if answer.other_way is None:
        return "There is no other first hop from which the destination can be reached."
    hops = next_hops_text(plan, answer.other_way.next_hops)
    if answer.other_way.extra == 0:
        return f"The best way by another first hop, {hops}, costs the same."
    return (
        f"The best way by another first hop, {hops}, costs {answer.other_way.cost}: "
        f"it loses by {answer.other_way.extra}."
    )


def _fill_hops(table: QTableWidget, plan: Plan, way: Way) -> None:
    rows = [
        (
            plan.nodes[hop.tail].label,
            f"{hop.link} to {plan.nodes[hop.head].label}",
            str(hop.cost),
            str(hop.cost_so_far),
            "" if hop.delay_ms is None else f"{hop.delay_ms:.6g}",
            delay_text(hop.delay_so_far),
            f"{100 * hop.share:.4g} %",
        )
        for hop in way.hops
    ]
    _fill(table, rows, [hop.link for hop in way.hops], plan)


def _fill(
    table: QTableWidget, rows: Sequence[Sequence[str]], links: Sequence[str], plan: Plan
) -> None:
    table.setRowCount(len(rows))
    for row, (cells, link) in enumerate(zip(rows, links, strict=True)):
        for column, cell in enumerate(cells):
            item = QTableWidgetItem(cell[:200])
            item.setFlags(_ITEM_FLAGS)
            item.setToolTip(as_tip(f"{cell[:400]}\nDouble-click goes to link {link[:100]}"))
            item.setData(Qt.ItemDataRole.UserRole, link)
            table.setItem(row, column, item)
    table.resizeColumnsToContents()
    shown = min(len(rows), 9)
    height = table.horizontalHeader().sizeHint().height() + 24 * shown + 16
    table.setFixedHeight(height)


def _table(name: str, headers: Sequence[str]) -> QTableWidget:
    table = QTableWidget(0, len(headers))
    table.setHorizontalHeaderLabels(list(headers))
    table.setAccessibleName(name)
    table.setShowGrid(False)
    table.setTabKeyNavigation(False)
    table.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
    table.verticalHeader().hide()
    table.verticalHeader().setSectionResizeMode(QHeaderView.ResizeMode.Fixed)
    table.verticalHeader().setDefaultSectionSize(24)
    table.horizontalHeader().setStretchLastSection(True)
    return table
