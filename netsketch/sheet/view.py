"""Which part of the sheet the window shows, and how large."""

from __future__ import annotations

from dataclasses import dataclass

from PySide6.QtCore import QPointF, QRectF, QSizeF
from PySide6.QtGui import QTransform

SMALLEST, LARGEST = 0.02, 6.0
_FIT_LARGEST = 1.4
_FIT_MARGIN = 36.0


@dataclass(frozen=True, slots=True)
class View:
    """``scale``: pixels for one sheet unit; ``x``, ``y``: where the sheet's origin is."""

    scale: float = 1.0
    x: float = 0.0
    y: float = 0.0

    def to_sheet(self, at: QPointF) -> QPointF:
        """Return the place on the sheet under a pixel of the window."""
        return QPointF((at.x() - self.x) / self.scale, (at.y() - self.y) / self.scale)

    def to_window(self, at: QPointF) -> QPointF:
        """Return the pixel of the window over a place on the sheet."""
        return QPointF(at.x() * self.scale + self.x, at.y() * self.scale + self.y)

    def rect_to_window(self, area: QRectF) -> QRectF:
        """Return a rectangle of the sheet in pixels of the window."""
        return QRectF(self.to_window(area.topLeft()), area.size() * self.scale)

    def area(self, size: QSizeF) -> QRectF:
        """Return the part of the sheet that a window of ``size`` pixels shows."""
        return QRectF(self.to_sheet(QPointF(0, 0)), size / self.scale)

    def transform(self) -> QTransform:
        """Return the map from sheet units to pixels."""
        return QTransform(self.scale, 0, 0, self.scale, self.x, self.y)

    def panned(self, dx: float, dy: float) -> View:
        """Return the view after the sheet is pushed by whole pixels, so that a picture
        of it stays sharp."""
        return View(self.scale, self.x + round(dx), self.y + round(dy))

    def zoomed(self, factor: float, about: QPointF) -> View:
        """Return the view enlarged by ``factor``; what is under ``about`` stays there."""
        scale = min(max(self.scale * factor, SMALLEST), LARGEST)
        kept = self.to_sheet(about)
        return View(scale, about.x() - kept.x() * scale, about.y() - kept.y() * scale)

    def centred(self, at: QPointF, size: QSizeF) -> View:
        """Return the view with a place on the sheet in the middle."""
        x = size.width() / 2 - at.x() * self.scale
        y = size.height() / 2 - at.y() * self.scale
        return View(self.scale, x, y)


def fitting(extent: QRectF, size: QSizeF) -> View:
    """Return the view that shows all of ``extent``, not larger than is sensible."""
    room_x = max(size.width() - 2 * _FIT_MARGIN, 40.0)
    room_y = max(size.height() - 2 * _FIT_MARGIN, 40.0)
    scale = min(room_x / max(extent.width(), 1.0), room_y / max(extent.height(), 1.0))
    view = View(min(max(scale, SMALLEST), _FIT_LARGEST))
    return view.centred(extent.center(), size)
