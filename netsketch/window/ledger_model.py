"""The ledger as a Qt table model over arrays: a million rows without a million objects."""

# ruff: noqa: N802  (Qt names the methods)

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import lru_cache
from typing import TYPE_CHECKING, Any

import numpy as np
from PySide6.QtCore import (
    QAbstractTableModel,
    QModelIndex,
    QObject,
    QPersistentModelIndex,
    Qt,
    Signal,
)

from netsketch.model import Plan
from netsketch.reports.words import next_hops_text, outcome_text
from netsketch.window.ledger_choice import Choice, Rows
from netsketch.window.literal import as_tip

if TYPE_CHECKING:
    from netsketch.analysis.ledger import Ledger

HEADERS = (
    "From", "To", "Outcome", "Cost before", "Cost after", "Extra", "Extra ms", "Next hops before",
    "Next hops after",
)  # fmt: skip
TIPS = (
    "The router that sends",
    "The router that is reached",
    "Moved: another cost or another set of next hops. Cut off: no way left",
    "In the plan",
    "In the trial",
    "Cost after less cost before",
    "Most delay after less most delay before, in ms; empty where a delay is not known",
    "In the plan",
    "In the trial",
)
AT_ONCE = 50_000
"""Rows that are sorted and filtered in the blink of an eye."""

OUTCOMES = ("moved", "cut off", "restored")
_NUMBERS = (3, 4, 5, 6)
_SORTABLE = range(7)

_DISPLAY, _TOOL_TIP = Qt.ItemDataRole.DisplayRole, Qt.ItemDataRole.ToolTipRole
_ALIGN = Qt.ItemDataRole.TextAlignmentRole
_HORIZONTAL = Qt.Orientation.Horizontal
_RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
_LEFT = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
_NO_PARENT = QModelIndex()
Index = QModelIndex | QPersistentModelIndex


class LedgerModel(QAbstractTableModel):
    """Rows of a ledger, chosen and ordered by an index array.

    Up to :data:`AT_ONCE` rows are chosen at once; for more, ``work_asked`` hands out the
    work, whose result comes back by :meth:`take`.
    """

    work_asked = Signal(object)

    def __init__(self, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self.ledger: Ledger | None = None
        self._plan = Plan()
        self._labels: list[str] = []
        self._choice = Choice()
        self._chosen = np.empty(0, np.int64)
        self._texts = lru_cache(maxsize=2048)(self._texts_of)

    def show(self, ledger: Ledger | None, plan: Plan) -> None:
        """Show another ledger, or none."""
        self.beginResetModel()
        self.ledger = ledger
        self._plan = plan.snapshot()  # the rows stay readable when the plan moves on
        ids = [] if ledger is None else ledger.routers
        self._labels = [plan.nodes[key].label if key in plan.nodes else key for key in ids]
        self._chosen = np.arange(0 if ledger is None else len(ledger))
        self._texts.cache_clear()
        self.endResetModel()
        self._choose()

    def set_filter(
        self,
        text: str,
        outcome: int,
        least_cost: int | None = None,
        least_delay: float | None = None,
    ) -> None:
        """Show only pairs with ``text`` in the name or id of either router, with this
        outcome code (-1: any), and with at least so much extra cost and extra delay."""
        wanted = text.strip().casefold()
        self._choice = replace(
            self._choice, text=wanted, outcome=outcome, least_cost=least_cost,
            least_delay=least_delay,
        )  # fmt: skip
        self._choose()

    def sort(self, column: int, order: Qt.SortOrder = Qt.SortOrder.AscendingOrder) -> None:
        if column in _SORTABLE:
            backwards = order == Qt.SortOrder.DescendingOrder
            self._choice = replace(self._choice, column=column, backwards=backwards)
            self._choose()

    def _choose(self) -> None:
        ledger, labels, choice = self.ledger, self._labels, self._choice
        if ledger is None:
            return
        if len(ledger) <= AT_ONCE:
            self.take((ledger, choice.rows(ledger, labels)))
        else:
            self.work_asked.emit(lambda cancelled: (ledger, choice.rows(ledger, labels)))

    def take(self, result: tuple[Ledger, Rows]) -> None:
        """Show the rows that were chosen, unless of another ledger by now."""
        if result[0] is self.ledger:
            self.beginResetModel()
            self._chosen = result[1]
            self.endResetModel()

    def pair(self, index: int) -> tuple[str, str]:
        """Return the routers of a shown row."""
        assert self.ledger is not None
        row = self._chosen[index]
        routers = self.ledger.routers
        return routers[self.ledger.sources[row]], routers[self.ledger.targets[row]]

    def csv_rows(self, first: int, last: int) -> Iterator[list[object]]:
        """Yield shown rows for a CSV."""
        for index in range(first, min(last, len(self._chosen))):
            yield list(self._texts(int(self._chosen[index])))

    def _texts_of(self, row: int) -> tuple[str, ...]:
        assert self.ledger is not None
        found = self.ledger.row(row)
        before, after = found.cost_before, found.cost_after
        extra = "" if before is None or after is None else f"{after - before:+d}"
        delay = float(self.ledger.delay_after[row] - self.ledger.delay_before[row])
        return (
            self._labels[self.ledger.sources[row]],
            self._labels[self.ledger.targets[row]],
            outcome_text(found.outcome),
            "–" if before is None else str(before),
            "–" if after is None else str(after),
            extra,
            "" if np.isnan(delay) else f"{delay:+.4g}",
            next_hops_text(self._plan, found.next_hops_before),
            next_hops_text(self._plan, found.next_hops_after),
        )

    def rowCount(self, parent: Index = _NO_PARENT) -> int:
        return 0 if parent.isValid() else len(self._chosen)

    def columnCount(self, parent: Index = _NO_PARENT) -> int:
        return 0 if parent.isValid() else len(HEADERS)

    def data(self, index: Index, role: int = _DISPLAY) -> Any:
        if role == _DISPLAY:
            return self._texts(int(self._chosen[index.row()]))[index.column()][:400]
        if role == _TOOL_TIP:
            return as_tip(self._texts(int(self._chosen[index.row()]))[index.column()][:400])
        if role == _ALIGN and index.column() in _NUMBERS:
            return _RIGHT
        return None

    def headerData(self, section: int, orientation: Qt.Orientation, role: int = _DISPLAY) -> Any:
        if orientation == _HORIZONTAL:
            if role == _DISPLAY:
                return HEADERS[section]
            if role == _TOOL_TIP:
                return TIPS[section]
            if role == _ALIGN:
                return _RIGHT if section in _NUMBERS else _LEFT
        return None
