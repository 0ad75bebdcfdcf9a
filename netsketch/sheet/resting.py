"""The resting sheet kept as a picture: panning moves it and paints only what comes in."""

from __future__ import annotations

from PySide6.QtCore import QPoint, QPointF, QRect, QRectF, QSize, QSizeF
from PySide6.QtGui import QColor, QPainter, QPixmap

from netsketch.sheet.drawing import Drawing
from netsketch.sheet.painter import paint_frame
from netsketch.sheet.view import View


class RestingPicture:
    """The last painted picture of the drawing and the view it was painted for."""

    def __init__(self) -> None:
        self._pixmap = QPixmap()
        self._view = View()
        self._still = False

    def picture(
        self, drawing: Drawing, view: View, size: QSize, ratio: float, still: bool
    ) -> QPixmap:
        """Return the picture of ``drawing`` for ``view``, painted only where it has to
        be. ``ratio``: device pixels for one pixel of the window."""
        fits = self._pixmap.size() == size * ratio and self._view.scale == view.scale
        if drawing.stale or not fits or (still and not self._still):
            self._still = still
            self._paint(drawing, view, size, ratio, [QRect(QPoint(0, 0), size)], None)
        elif not ratio.is_integer() and view != self._view:
            self._paint(drawing, view, size, ratio, [QRect(QPoint(0, 0), size)], None)
        elif view != self._view:
            push = QPoint(round(view.x - self._view.x), round(view.y - self._view.y))
            self._paint(drawing, view, size, ratio, _strips(size, push), push)
        drawing.stale = False
        return self._pixmap

    def _paint(
        self,
        drawing: Drawing,
        view: View,
        size: QSize,
        ratio: float,
        parts: list[QRect],
        push: QPoint | None,
    ) -> None:
        fresh = QPixmap(size * ratio)
        fresh.setDevicePixelRatio(ratio)
        frame = drawing.resting(view.scale, self._still)
        with QPainter(fresh) as painter:
            if push is not None:
                painter.drawPixmap(push, self._pixmap)
            for part in parts:
                painter.setClipRect(part)
                painter.fillRect(part, QColor(drawing.look.paper))
                painter.save()
                painter.setTransform(view.transform(), True)
                paint_frame(painter, frame.within(_on_sheet(view, part)))
                painter.restore()
        self._pixmap, self._view = fresh, view


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
