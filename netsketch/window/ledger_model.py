"""The ledger as a Qt table model over arrays: a million rows without a million objects."""

# ruff: noqa: N802  (Qt names the methods)

from __future__ import annotations

from collections.abc import Iterator
from functools import lru_cache
from typing import TYPE_CHECKING, Any

import numpy as np
import numpy.typing as npt
from PySide6.QtCore import QAbstractTableModel, QModelIndex, QObject, QPersistentModelIndex, Qt

from netsketch.model import Plan
from netsketch.reports.words import next_hops_text, outcome_text
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
    """Rows of a ledger, chosen and ordered by index arrays."""

    def __init__(self, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self.ledger: Ledger | None = None
        self._labels: list[str] = []
        self._alphabet = np.empty(0, np.int64)
        self._chosen = np.empty(0, np.int64)
        self._order: tuple[int, bool] = (0, False)
        self._text, self._outcome = "", -1
        self._least_cost: int | None = None
        self._least_delay: float | None = None
        self._texts = lru_cache(maxsize=2048)(self._texts_of)

    def show(self, ledger: Ledger | None, plan: Plan) -> None:
        """Show another ledger, or none."""
        self.beginResetModel()
        self.ledger = ledger
        self._plan = plan.snapshot()  # the rows stay readable when the plan moves on
        ids = [] if ledger is None else ledger.routers
        self._labels = [plan.nodes[key].label if key in plan.nodes else key for key in ids]
        self._alphabet = np.argsort(
            np.argsort(np.array([label.casefold() for label in self._labels], object))
        )
        self._texts.cache_clear()
        self._choose()
        self.endResetModel()

    def set_filter(
        self,
        text: str,
        outcome: int,
        least_cost: int | None = None,
        least_delay: float | None = None,
    ) -> None:
        """Show only pairs with ``text`` in the name or id of either router, with this
        outcome code (-1: any), and with at least so much extra cost and extra delay."""
        self._text, self._outcome = text.strip().casefold(), outcome
        self._least_cost, self._least_delay = least_cost, least_delay
        self.beginResetModel()
        self._choose()
        self.endResetModel()

    def sort(self, column: int, order: Qt.SortOrder = Qt.SortOrder.AscendingOrder) -> None:
        if column in _SORTABLE:
            self._order = column, order == Qt.SortOrder.DescendingOrder
            self.beginResetModel()
            self._choose()
            self.endResetModel()

    def _choose(self) -> None:
        ledger = self.ledger
        if ledger is None:
            self._chosen = np.empty(0, np.int64)
            return
        keep = np.ones(len(ledger), np.bool_)
        if self._text:
            named = np.array(
                [
                    self._text in label.casefold() or self._text in key.casefold()
                    for label, key in zip(self._labels, ledger.routers, strict=True)
                ]
            )
            keep &= named[ledger.sources] | named[ledger.targets]
        if self._outcome >= 0:
            keep &= ledger.outcomes == self._outcome
        if self._least_cost is not None:
            both = (ledger.before >= 0) & (ledger.after >= 0)
            keep &= both & (ledger.after - ledger.before >= self._least_cost)
        if self._least_delay is not None:
            keep &= ledger.delay_after - ledger.delay_before >= self._least_delay
        chosen = np.flatnonzero(keep)
        column, backwards = self._order
        key = self._key(ledger, column)[chosen]
        self._chosen = chosen[np.argsort(-key if backwards else key, kind="stable")]

    def _key(self, ledger: Ledger, column: int) -> npt.NDArray[Any]:
        keys: tuple[npt.NDArray[Any], ...] = (
            self._alphabet[ledger.sources] * len(self._labels) + self._alphabet[ledger.targets],
            self._alphabet[ledger.targets] * len(self._labels) + self._alphabet[ledger.sources],
            ledger.outcomes.astype(np.int64),
            ledger.before,
            ledger.after,
            ledger.after - ledger.before,
            ledger.delay_after - ledger.delay_before,
        )
        return keys[column]

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
