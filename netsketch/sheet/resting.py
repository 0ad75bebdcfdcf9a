"""The resting sheet kept as a picture: panning moves it and paints only what comes in."""

from __future__ import annotations

from PySide6.QtCore import QPoint, QPointF, QRect, QRectF, QSize, QSizeF
from PySide6.QtGui import QColor, QPainter, QPixmap, QRegion

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
        whole = QRegion(QRect(QPoint(0, 0), size))
        fits = self._pixmap.size() == size * ratio and self._view.scale == view.scale
        if drawing.stale or not fits or (still and not self._still):
            self._paint(drawing, view, size, ratio, still, whole, None)
        elif view != self._view:
            dx, dy = view.x - self._view.x, view.y - self._view.y
            kept = QPoint(round(dx), round(dy))
            exposed = whole - QRegion(QRect(kept, size))
            self._paint(drawing, view, size, ratio, self._still, exposed, kept)
        drawing.stale = False
        return self._pixmap

    def _paint(
        self,
        drawing: Drawing,
        view: View,
        size: QSize,
        ratio: float,
        still: bool,
        exposed: QRegion,
        kept: QPoint | None,
    ) -> None:
        fresh = QPixmap(size * ratio)
        fresh.setDevicePixelRatio(ratio)
        painter = QPainter(fresh)
        if kept is not None:
            painter.drawPixmap(kept, self._pixmap)
        painter.setClipRegion(exposed)
        frame = drawing.resting(view.scale, still)
        for part in exposed:
            painter.fillRect(part, QColor(drawing.look.paper))
        painter.setTransform(view.transform(), True)
        if kept is None:
            paint_frame(painter, frame.within(view.area(QSizeF(size))))
        else:
            for part in exposed:
                painter.setClipRect(view_rect(view, part))
                paint_frame(painter, frame.within(view_rect(view, part)))
        painter.end()
        self._pixmap, self._view = fresh, view
        self._still = still


def view_rect(view: View, part: QRect) -> QRectF:
    """Return a rectangle of the window in sheet units."""
    corner = view.to_sheet(QPointF(part.topLeft()))
    return QRectF(corner, QSizeF(part.size()) / view.scale)
