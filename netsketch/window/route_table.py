"""The forwarding table as a Qt table model: sorted and filtered here, not by a proxy."""

# ruff: noqa: N802  (Qt names the methods)

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING, Any

from PySide6.QtCore import QAbstractTableModel, QModelIndex, QObject, QPersistentModelIndex, Qt
from PySide6.QtGui import QGuiApplication

from netsketch.model import Plan
from netsketch.reports.words import delay_text, next_hops_text, outcome_text
from netsketch.window.literal import as_tip

if TYPE_CHECKING:
    from netsketch.analysis.table import RouteRow
    from netsketch.session.answers import Inward, Outward

HEADERS = ("Destination", "Change", "", "Next hop", "Cost", "Hops", "Delay, ms")
CHANGE = 1
TIPS = (
    "The router or segment that is reached",
    "What the trial does to the route",
    "The letter of the first hop, as on the sheet",
    "The next router, and the link over which it is reached; several where costs are equal",
    "The cost of the way; – where it is cut off",
    "The least number of links left by a router on the way",
    "Least and most over the equal-cost paths; empty where a link's delay is not known",
)
_NUMBERS = (4, 5, 6)

_DISPLAY, _TOOL_TIP = Qt.ItemDataRole.DisplayRole, Qt.ItemDataRole.ToolTipRole
_ALIGN, _FOREGROUND = Qt.ItemDataRole.TextAlignmentRole, Qt.ItemDataRole.ForegroundRole
_HORIZONTAL = Qt.Orientation.Horizontal
_RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
_LEFT = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
_NO_PARENT = QModelIndex()
_FAR = float("inf")
Index = QModelIndex | QPersistentModelIndex


class Line:
    """One row as it is shown: texts and sort keys are made when something asks."""

    __slots__ = ("_cells", "_table", "name", "outcome", "row")

    def __init__(self, row: RouteRow, name: str, outcome: str | None, table: RouteTable) -> None:
        self.row, self.name, self.outcome, self._table = row, name, outcome, table
        self._cells: tuple[str, ...] | None = None

    @property
    def letters(self) -> str:
        """The letters of its first hops."""
        return self._table.letters(self.row.to)

    @property
    def cells(self) -> tuple[str, ...]:
        """The texts of its columns."""
        if self._cells is None:
            row = self.row
            self._cells = (
                self.name,
                outcome_text(self.outcome),
                self.letters,
                "cut off" if row.cost is None else self._table.next_hops(row),
                "–" if row.cost is None else str(row.cost),
                "" if row.hops is None else str(row.hops),
                delay_text(row.delay_ms),
            )
        return self._cells

    def key(self, column: int) -> Any:
        """Return what a column sorts by; what is not known comes last."""
        row = self.row
        if column == 0:
            return self.name.casefold()
        if column == CHANGE:
            return self.outcome or "~"
        if column in (2, 3):
            return self.cells[column].casefold()
        if column == 6:
            return _FAR if row.delay_ms is None else row.delay_ms[0]
        value = row.cost if column == 4 else row.hops
        return _FAR if value is None else value


class RouteTable(QAbstractTableModel):
    """The routes of one router."""

    def __init__(self, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._outward: Outward | None = None
        self._plan = Plan()
        self.inwards = False
        """Whether the rows are ways to the router rather than from it."""
        self._lines: list[Line] = []
        self._shown: list[Line] = []
        self._filter = ""
        self._order: tuple[int, bool] = (0, False)

    def show(self, outward: Outward | None, plan: Plan) -> None:
        """Show another router's routes, or none."""
        self.beginResetModel()
        self._outward, self._plan, self.inwards = outward, plan, False
        self._lines = []
        if outward is not None:
            self._lines = [
                Line(row, plan.nodes[row.to].label, outward.changed.get(row.to), self)
                for row in outward.rows
            ]
        self._choose()
        self.endResetModel()

    def show_ways(self, inward: Inward, plan: Plan) -> None:
        """Show every router's way to one of them."""
        self.beginResetModel()
        self._outward, self._plan, self.inwards = None, plan, True
        self._lines = [Line(row, plan.nodes[row.to].label, None, self) for row in inward.rows]
        self._choose()
        self.endResetModel()
        self.headerDataChanged.emit(_HORIZONTAL, 0, 0)

    def letters(self, destination: str) -> str:
        """Return the letters of the first hops to a destination, as on the sheet."""
        if self._outward is None:
            return ""
        reading = self._outward.reading
        return " ".join(reading.first_hops[i].letter for i in reading.plates[destination].letters)

    def next_hops(self, row: RouteRow) -> str:
        """Return a row's next hops in words."""
        return next_hops_text(self._plan, row.next_hops)

    def set_filter(self, text: str) -> None:
        """Show only rows that hold ``text`` in a name, an id, a next hop or a change."""
        self._filter = text.strip().casefold()
        self._reset(self._choose)

    def sort(self, column: int, order: Qt.SortOrder = Qt.SortOrder.AscendingOrder) -> None:
        if column >= 0:
            self._order = column, order == Qt.SortOrder.DescendingOrder
            self._reset(self._choose)

    def _reset(self, change: Callable[[], None]) -> None:
        self.beginResetModel()
        change()
        self.endResetModel()

    def _choose(self) -> None:
        wanted = self._filter
        lines = self._lines
        if wanted:
            lines = [
                line
                for line in lines
                if wanted in line.row.to.casefold()
                or any(wanted in cell.casefold() for cell in line.cells)
            ]
        column, backwards = self._order
        self._shown = sorted(lines, key=lambda line: line.key(column), reverse=backwards)

    def line(self, index: int) -> Line:
        """Return a shown row."""
        return self._shown[index]

    def row_of(self, destination: str) -> int | None:
        """Return where a destination stands among the shown rows."""
        found = (i for i, line in enumerate(self._shown) if line.row.to == destination)
        return next(found, None)

    def counts(self) -> tuple[int, int]:
        """Return how many rows are shown, of how many."""
        return len(self._shown), len(self._lines)

    def as_rows(self) -> list[list[object]]:
        """Return the shown rows for a CSV, as :data:`CSV_HEADER` names them."""
        return [
            [
                line.row.to, line.cells[0], *line.cells[2:4], line.row.cost, line.row.hops,
                *(line.row.delay_ms or (None, None)), line.cells[CHANGE],
            ]
            for line in self._shown
        ]  # fmt: skip

    def rowCount(self, parent: Index = _NO_PARENT) -> int:
        return 0 if parent.isValid() else len(self._shown)

    def columnCount(self, parent: Index = _NO_PARENT) -> int:
        return 0 if parent.isValid() else len(HEADERS)

    def data(self, index: Index, role: int = _DISPLAY) -> Any:
        if role == _DISPLAY:
            return self._shown[index.row()].cells[index.column()][:400]
        if role == _TOOL_TIP:
            return as_tip(self._shown[index.row()].cells[index.column()][:400])
        if role == _ALIGN and index.column() in _NUMBERS:
            return _RIGHT
        if role == _FOREGROUND and index.column() == CHANGE:
            return QGuiApplication.palette().link()
        return None

    def headerData(self, section: int, orientation: Qt.Orientation, role: int = _DISPLAY) -> Any:
        if orientation == _HORIZONTAL:
            if role == _DISPLAY:
                return "From" if self.inwards and section == 0 else HEADERS[section]
            if role == _TOOL_TIP:
                return TIPS[section]
            if role == _ALIGN:
                return _RIGHT if section in _NUMBERS else _LEFT
        return None


CSV_HEADER = (
    "id", "destination", "first hops", "next hops", "cost", "hops", "least delay ms",
    "most delay ms", "change",
)  # fmt: skip
