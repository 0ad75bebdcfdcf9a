"""A plot of steps: how many pairs use a link against its cost. A click picks a cost."""

# ruff: noqa: N802  (Qt names the event handlers)

from __future__ import annotations

import math

from PySide6.QtCore import QPointF, QRectF, QSize, Qt, Signal
from PySide6.QtGui import QColor, QKeyEvent, QMouseEvent, QPainter, QPaintEvent, QPen, QPolygonF
from PySide6.QtWidgets import QWidget

_LEFT, _RIGHT, _TOP, _BOTTOM = 46, 12, 10, 34
_SHORT = ("1", "10", "100", "1k", "10k", "100k", "1M", "10M")
"""Powers of ten, short enough to stand side by side."""


class StepPlot(QWidget):
    """Steps over costs 1 to the highest, on a logarithmic cost axis."""

    cost_picked = Signal(int)
    """A cost the person chose by mouse or with Return."""
    cost_hovered = Signal(int)

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setAccessibleName("Pairs that use the link against its cost")
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setMouseTracking(True)
        self.setMinimumHeight(150)
        self._steps: list[tuple[int, int, int]] = []
        self._beyond = 0
        self._highest = 2
        self._now = 1
        self._chosen = 1

    def sizeHint(self) -> QSize:
        return QSize(360, 170)

    def show_steps(
        self, steps: list[tuple[int, int, int]], beyond: int, highest: int, now: int
    ) -> None:
        """Show steps (cost, pairs up to it, pairs that share at it), ``beyond`` pairs above
        the last; ``now`` is the link's cost."""
        self._steps, self._beyond = steps, beyond
        self._highest, self._now, self._chosen = max(highest, 2), now, now
        self.setAccessibleDescription(
            f"{len(steps)} costs at which the number of pairs changes; the link costs {now}"
        )
        self.update()

    def pairs_at(self, cost: int) -> int:
        """Return how many pairs use the link at ``cost``."""
        return next((using for at, using, _ in self._steps if at >= cost), self._beyond)

    # -- places -------------------------------------------------------------------------

    def _area(self) -> QRectF:
        return QRectF(self.rect()).adjusted(_LEFT, _TOP, -_RIGHT, -_BOTTOM)

    def _x(self, cost: float) -> float:
        area = self._area()
        return area.left() + math.log(max(cost, 1)) / math.log(self._highest) * area.width()

    def _y(self, count: float) -> float:
        area = self._area()
        most = max(self.pairs_at(1), 1)
        return area.bottom() - count / most * area.height()

    def cost_at(self, x: float) -> int:
        """Return the cost at a horizontal place in the widget."""
        area = self._area()
        part = min(max((x - area.left()) / max(area.width(), 1), 0.0), 1.0)
        return min(max(round(float(self._highest**part)), 1), self._highest)

    def x_of(self, cost: int) -> float:
        """Return the horizontal place of a cost in the widget."""
        return self._x(cost)

    # -- painting -----------------------------------------------------------------------

    def paintEvent(self, event: QPaintEvent) -> None:
        palette = self.palette()
        ink, soft = palette.windowText().color(), palette.placeholderText().color()
        with QPainter(self) as painter:
            painter.setRenderHint(QPainter.RenderHint.Antialiasing)
            self._paint_axes(painter, soft)
            line = QPolygonF()
            line.append(QPointF(self._x(1), self._y(self.pairs_at(1))))
            for index, (cost, using, _) in enumerate(self._steps):
                after = self._steps[index + 1][1] if index + 1 < len(self._steps) else self._beyond
                line.append(QPointF(self._x(cost), self._y(using)))
                line.append(QPointF(self._x(cost), self._y(after)))
            line.append(QPointF(self._x(self._highest), self._y(self._beyond)))
            painter.setPen(QPen(ink, 2))
            painter.drawPolyline(line)
            painter.setBrush(ink)
            for cost, using, sharing in self._steps:
                if sharing and len(self._steps) < 80:
                    painter.drawEllipse(QPointF(self._x(cost), self._y(using)), 3, 3)
            self._paint_cost(painter, self._now, ink, Qt.PenStyle.DashLine)
            if self._chosen != self._now:
                self._paint_cost(painter, self._chosen, ink, Qt.PenStyle.SolidLine)

    def _paint_axes(self, painter: QPainter, colour: QColor) -> None:
        area = self._area()
        painter.setPen(colour)
        painter.drawLine(area.bottomLeft(), area.bottomRight())
        painter.drawLine(area.bottomLeft(), area.topLeft())
        top = self.pairs_at(1)
        for count in {0, top}:
            place = QRectF(0, self._y(count) - 9, _LEFT - 6, 18)
            painter.drawText(place, int(Qt.AlignmentFlag.AlignRight), f"{count:,}")
        power = 0
        while 10**power <= self._highest:
            place = QRectF(self._x(10**power) - 40, area.bottom() + 2, 80, 16)
            painter.drawText(place, int(Qt.AlignmentFlag.AlignHCenter), _SHORT[power])
            power += 1
        words = QRectF(area.left(), area.bottom() + 17, area.width(), 16)
        painter.drawText(words, int(Qt.AlignmentFlag.AlignHCenter), "cost; dashed: as it is now")

    def _paint_cost(self, painter: QPainter, cost: int, colour: QColor, style: Qt.PenStyle) -> None:
        painter.setPen(QPen(colour, 1, style))
        area = self._area()
        painter.drawLine(QPointF(self._x(cost), area.top()), QPointF(self._x(cost), area.bottom()))

    # -- hands --------------------------------------------------------------------------

    def _choose(self, cost: int) -> None:
        self._chosen = min(max(cost, 1), self._highest)
        self.cost_hovered.emit(self._chosen)
        self.update()

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        self._choose(self.cost_at(event.position().x()))

    def mousePressEvent(self, event: QMouseEvent) -> None:
        self._choose(self.cost_at(event.position().x()))
        self.cost_picked.emit(self._chosen)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Left and right go to the costs just past the next step; Return picks."""
        key = event.key()
        if key in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self.cost_picked.emit(self._chosen)
        elif key == Qt.Key.Key_Right:
            ahead = [cost + 1 for cost, _, _ in self._steps if cost + 1 > self._chosen]
            self._choose(min(ahead, default=self._highest))
        elif key == Qt.Key.Key_Left:
            behind = [cost for cost, _, _ in self._steps if cost < self._chosen]
            self._choose(max(behind, default=1))
        else:
            super().keyPressEvent(event)
