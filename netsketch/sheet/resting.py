"""The resting sheet kept as a picture: panning moves it and paints only what comes in.

What is too much for one event is painted part by part over several; meanwhile the other
parts show what they showed before.
"""

from __future__ import annotations

from PySide6.QtCore import QPoint, QPointF, QRect, QRectF, QSize, QSizeF
from PySide6.QtGui import QColor, QPainter, QPixmap

from netsketch.sheet.drawing import Drawing
from netsketch.sheet.frame import Frame
from netsketch.sheet.paint_plates import READABLE_NAME
from netsketch.sheet.painter import paint_frame
from netsketch.sheet.view import View

AT_ONCE = 5_000
"""Plates and links painted in one part, about 20 ms; with names and texts they take as
long as :data:`_TEXT` times as many, with a reading as :data:`_READ` times."""
_TEXT, _READ = 8, 2
_LEAST_SIDE = 64


class RestingPicture:
    """The last painted picture of the drawing and the view it was painted for."""

    def __init__(self) -> None:
        self._pixmap = QPixmap()
        self._view = View()
        self._still = False
        self._waiting: list[QRect] = []

    @property
    def finished(self) -> bool:
        """Whether every part shows the drawing as it is."""
        return not self._waiting

    def forget(self) -> None:
        """Show nothing of the last drawing while the next is painted."""
        self._pixmap = QPixmap()

    def picture(
        self, drawing: Drawing, view: View, size: QSize, ratio: float, still: bool
    ) -> QPixmap:
        """Return the picture of ``drawing`` for ``view``, painted only where it has to
        be. ``ratio``: device pixels for one pixel of the window."""
        window = QRect(QPoint(0, 0), size)
        fits = self._pixmap.size() == size * ratio and self._view.scale == view.scale
        moved = view != self._view
        finer = still and not self._still
        if drawing.stale or finer or not fits or (moved and not ratio.is_integer()):
            self._still = still
            if moved or not fits:
                self._take_over(drawing, view, size, ratio)
            self._waiting = [window]
        elif moved:
            push = QPoint(round(view.x - self._view.x), round(view.y - self._view.y))
            self._take_over(drawing, view, size, ratio)
            pushed = [part.translated(push) & window for part in self._waiting]
            self._waiting = [part for part in pushed if not part.isEmpty()]
            self._waiting += _strips(size, push)
        drawing.stale = False
        if self._waiting:
            self._paint_some(drawing)
        return self._pixmap

    def _take_over(self, drawing: Drawing, view: View, size: QSize, ratio: float) -> None:
        """Turn the picture into one for ``view``, made of what it shows already."""
        fresh = QPixmap(size * ratio)
        fresh.setDevicePixelRatio(ratio)
        fresh.fill(QColor(drawing.look.paper))
        if not self._pixmap.isNull():
            grown = view.scale / self._view.scale
            with QPainter(fresh) as painter:
                if grown == 1:
                    painter.translate(round(view.x - self._view.x), round(view.y - self._view.y))
                else:
                    painter.translate(view.x - self._view.x * grown, view.y - self._view.y * grown)
                    painter.scale(grown, grown)
                painter.drawPixmap(0, 0, self._pixmap)
        self._pixmap, self._view = fresh, view

    def _paint_some(self, drawing: Drawing) -> None:
        """Paint waiting parts until one event has had its share."""
        frame, spent = drawing.resting(self._view.scale, self._still), 0
        with QPainter(self._pixmap) as painter:
            while self._waiting and spent < AT_ONCE / 2:
                part = self._waiting.pop(0)
                shown = frame.within(_on_sheet(self._view, part))
                effort = _effort(shown)
                if effort > AT_ONCE and max(part.width(), part.height()) > 2 * _LEAST_SIDE:
                    self._waiting[:0] = _halves(part)
                    continue
                spent += effort
                painter.setClipRect(part)
                painter.fillRect(part, QColor(drawing.look.paper))
                painter.save()
                painter.setTransform(self._view.transform(), True)
                paint_frame(painter, shown)
                painter.restore()


def _effort(frame: Frame) -> int:
    """Return how many plates and links of a bare plan without texts take as long."""
    shown = int(frame.nodes.sum()) + int(frame.links.sum())
    if frame.scale >= READABLE_NAME:
        return shown * _TEXT
    return shown * (1 if frame.marks is None else _READ)


def _halves(part: QRect) -> list[QRect]:
    """Return a part of the window cut across its longer side."""
    first, second = QRect(part), QRect(part)
    if part.width() > part.height():
        first.setWidth(part.width() // 2)
        second.setLeft(first.right() + 1)
    else:
        first.setHeight(part.height() // 2)
        second.setTop(first.bottom() + 1)
    return [first, second]


def _strips(size: QSize, push: QPoint) -> list[QRect]:
    """Return what of a window comes into sight when its picture is pushed."""
    width, height = size.width(), size.height()
    aside = min(abs(push.x()), width)
    down = min(abs(push.y()), height)
    strips = [
        QRect(0 if push.x() > 0 else width - aside, 0, aside, height),
        QRect(0, 0 if push.y() > 0 else height - down, width, down),
    ]
    return [strip for strip in strips if not strip.isEmpty()]


def _on_sheet(view: View, part: QRect) -> QRectF:
    corner = view.to_sheet(QPointF(part.topLeft()))
    return QRectF(corner, QSizeF(part.size()) / view.scale)
