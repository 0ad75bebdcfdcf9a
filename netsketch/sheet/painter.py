"""The order in which the sheet is painted; the same for the window and for pictures."""

from __future__ import annotations

from PySide6.QtGui import QPainter

from netsketch.sheet.frame import Frame
from netsketch.sheet.paint_bands import paint_bands
from netsketch.sheet.paint_links import paint_links
from netsketch.sheet.paint_plates import paint_plates
from netsketch.sheet.paint_tags import paint_tags


def paint_frame(painter: QPainter, frame: Frame) -> None:
    """Paint ``frame`` in sheet units: links, tags over them, plates over all."""
    painter.setRenderHint(QPainter.RenderHint.Antialiasing, frame.still)
    paint_links(painter, frame)
    paint_tags(painter, frame)
    paint_plates(painter, frame)
    paint_bands(painter, frame)
