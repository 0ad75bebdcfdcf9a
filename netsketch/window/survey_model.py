"""The survey as a Qt table model: columns over arrays, the worst first."""

# ruff: noqa: N802  (Qt names the methods)

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING, Any

import numpy as np
import numpy.typing as npt
from PySide6.QtCore import QAbstractTableModel, QModelIndex, QObject, QPersistentModelIndex, Qt

from netsketch.model import Plan

if TYPE_CHECKING:
    from netsketch.analysis.survey import Failure
    from netsketch.window.surveys import Done

HEADERS = (
    "Failed", "Cut off", "Moved", "Worst extra cost", "Lost, Mbit/s", "Fullest, %", "On link",
)  # fmt: skip
TIPS = (
    "What goes down, alone",
    "Ordered pairs of routers that lose every way",
    "Ordered pairs whose cost or set of next hops changes",
    "Of a pair that moves",
    "Demand that cannot be delivered any more",
    "The highest utilisation of any link then",
    "Which link that is",
)
_DISPLAY, _TOOL_TIP = Qt.ItemDataRole.DisplayRole, Qt.ItemDataRole.ToolTipRole
_ALIGN = Qt.ItemDataRole.TextAlignmentRole
_HORIZONTAL = Qt.Orientation.Horizontal
_RIGHT = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
_NO_PARENT = QModelIndex()
Index = QModelIndex | QPersistentModelIndex


class SurveyModel(QAbstractTableModel):
    """Failures in rank order; every column but the first and last sorts."""

    def __init__(self, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self.done: Done | None = None
        self._plan = Plan()
        self._order: npt.NDArray[np.intp] = np.empty(0, np.intp)

    def show(self, done: Done | None, plan: Plan) -> None:
        """Show another survey, or none."""
        self.beginResetModel()
        self.done, self._plan = done, plan
        self._order = np.empty(0, np.intp) if done is None else done.survey.ranked()
        self.endResetModel()

    def sort(self, column: int, order: Qt.SortOrder = Qt.SortOrder.AscendingOrder) -> None:
        if self.done is None or column in (0, 6):
            return
        self.beginResetModel()
        ranked = self.done.survey.ranked()
        key = self._key(column)[ranked]
        backwards = order == Qt.SortOrder.DescendingOrder
        self._order = ranked[np.argsort(-key if backwards else key, kind="stable")]
        self.endResetModel()

    def _key(self, column: int) -> npt.NDArray[np.float64]:
        assert self.done is not None
        survey, loads = self.done.survey, self.done.loads
        nothing = np.zeros(len(survey.failures))
        columns: tuple[npt.NDArray[Any], ...] = (
            survey.cut_off,
            survey.moved,
            survey.extra,
            loads.lost_mbps if loads else nothing,
            np.nan_to_num(loads.worst_utilisation) if loads else nothing,
        )
        return columns[column - 1].astype(np.float64)

    def failure(self, row: int) -> Failure:
        """Return the failure in a row."""
        assert self.done is not None
        found: Failure = self.done.survey.failures[int(self._order[row])]
        return found

    def totals(self, row: int) -> tuple[int, int]:
        """Return (cut off, moved) of a row."""
        assert self.done is not None
        index = self._order[row]
        return int(self.done.survey.cut_off[index]), int(self.done.survey.moved[index])

    def name_of(self, failure: Failure) -> str:
        """Return a failure in words."""
        names = []
        for key in failure.ids:
            if key in failure.nodes and key in self._plan.nodes:
                names.append(self._plan.nodes[key].label)
            elif key in self._plan.links:
                ends = self._plan.links[key].ends
                names.append(f"{key} {'–'.join(self._plan.nodes[end].label for end in ends)}")
            elif key in self._plan.groups:
                names.append(self._plan.groups[key].label)
            else:
                names.append(key)
        return " and ".join(names)

    def cells(self, row: int) -> list[str]:
        """Return the texts of a row."""
        assert self.done is not None
        index, survey, loads = self._order[row], self.done.survey, self.done.loads
        extra = int(survey.extra[index])
        found = [
            self.name_of(survey.failures[index]),
            f"{survey.cut_off[index]:,}",
            f"{survey.moved[index]:,}",
            "" if extra < 0 else f"+{extra:,}",
        ]
        if loads is None:
            return [*found, "", "", ""]
        used = loads.worst_utilisation[index]
        percent = "" if np.isnan(used) else f"{100 * used:.1f}"
        return [*found, f"{loads.lost_mbps[index]:,.6g}", percent, loads.worst_link[index]]

    def csv_rows(self) -> Iterator[list[object]]:
        """Yield every row for a CSV, numbers as numbers."""
        for row in range(self.rowCount()):
            yield [cell.replace(",", "") if k else cell for k, cell in enumerate(self.cells(row))]

    def rowCount(self, parent: Index = _NO_PARENT) -> int:
        return 0 if parent.isValid() else len(self._order)

    def columnCount(self, parent: Index = _NO_PARENT) -> int:
        return 0 if parent.isValid() else len(HEADERS)

    def data(self, index: Index, role: int = _DISPLAY) -> Any:
        if role in (_DISPLAY, _TOOL_TIP):
            return self.cells(index.row())[index.column()][:400]
        if role == _ALIGN and index.column() in (1, 2, 3, 4, 5):
            return _RIGHT
        return None

    def headerData(self, section: int, orientation: Qt.Orientation, role: int = _DISPLAY) -> Any:
        if orientation == _HORIZONTAL:
            if role == _DISPLAY:
                return HEADERS[section]
            if role == _TOOL_TIP:
                return TIPS[section]
        return None
