"""A small plot of a survey: for every failure, worst first, the pairs cut off and moved."""

# ruff: noqa: N802  (Qt names the event handlers)

from __future__ import annotations

import math

from PySide6.QtCore import QRectF, QSize, Qt, Signal
from PySide6.QtGui import QKeyEvent, QMouseEvent, QPainter, QPaintEvent
from PySide6.QtWidgets import QWidget


class RankPlot(QWidget):
    """Bars: filled for cut off, outlined for moved, on a logarithmic scale."""

    row_picked = Signal(int)

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setAccessibleName("Pairs cut off and moved by each failure")
        self.setToolTip("Filled: pairs cut off. Outlined: pairs moved. Click a bar to see it")
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setMinimumHeight(60)
        self._totals: list[tuple[int, int]] = []
        self._chosen = -1

    def sizeHint(self) -> QSize:
        return QSize(260, 90)

    def show_totals(self, totals: list[tuple[int, int]]) -> None:
        """Show (cut off, moved) of every failure in the order of the table."""
        self._totals, self._chosen = totals, -1
        self.update()

    def choose(self, row: int) -> None:
        """Mark the bar of a row."""
        self._chosen = row
        self.update()

    def row_at(self, x: float) -> int:
        """Return the row whose bar is at a horizontal place."""
        return min(max(int(x / self._step()), 0), len(self._totals) - 1)

    def x_of(self, row: int) -> float:
        """Return the horizontal middle of a bar."""
        return (row + 0.5) * self._step()

    def _step(self) -> float:
        return self.width() / max(len(self._totals), 1)

    def paintEvent(self, event: QPaintEvent) -> None:
        ink = self.palette().windowText().color()
        with QPainter(self) as painter:
            highest = max((max(pair) for pair in self._totals), default=0)
            step, room = self._step(), self.height() - 14.0
            scale = room / math.log1p(highest) if highest else 0.0
            shown = range(0, len(self._totals), max(1, math.ceil(1 / max(step, 1e-9))))
            for row in shown:
                cut_off, moved = self._totals[row]
                left, wide = row * step, max(step - 1, 1.0)
                for count, filled in ((moved, False), (cut_off, True)):
                    tall = math.log1p(count) * scale
                    bar = QRectF(left, self.height() - 8 - tall, wide, tall)
                    painter.setPen(ink)
                    painter.setBrush(ink if filled else Qt.BrushStyle.NoBrush)
                    if count:
                        painter.drawRect(bar)
                if row == self._chosen:
                    painter.fillRect(QRectF(left, self.height() - 5.0, max(wide, 3), 4), ink)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        if self._totals:
            self.row_picked.emit(self.row_at(event.position().x()))

    def keyPressEvent(self, event: QKeyEvent) -> None:
        step = {Qt.Key.Key_Left: -1, Qt.Key.Key_Right: 1}.get(Qt.Key(event.key()))
        if step is None or not self._totals:
            super().keyPressEvent(event)
        else:
            self.row_picked.emit(min(max(self._chosen + step, 0), len(self._totals) - 1))
