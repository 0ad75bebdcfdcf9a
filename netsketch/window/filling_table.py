"""A table in which one column takes the room that the others leave."""

# ruff: noqa: N802  (Qt names the event handlers)

from __future__ import annotations

from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import QTableView


class FillingTable(QTableView):
    """Below ``least`` pixels the column shrinks no more: the table then scrolls."""

    def __init__(self, column: int, least: int) -> None:
        super().__init__()
        self._column, self._least = column, least

    def resizeEvent(self, event: QResizeEvent) -> None:
        super().resizeEvent(event)
        self.fill()

    def show_column(self, column: int, shown: bool) -> None:
        """Show or hide a column."""
        self.setColumnHidden(column, not shown)
        self.fill()

    def fill(self) -> None:
        """Give the column its width; call this after other columns changed."""
        others = self.horizontalHeader().length() - self.columnWidth(self._column)
        left = self.viewport().width() - others
        self.setColumnWidth(self._column, max(left, self._least))
