"""What lies above the resting picture: lifted plates, hover, selection, a lit path."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import replace

import numpy as np
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from netsketch.sheet.contents import Floats
from netsketch.sheet.frame import Frame
from netsketch.sheet.look import Look
from netsketch.sheet.paint_bands import paint_bands
from netsketch.sheet.paint_links import chevrons, pen_of
from netsketch.sheet.paint_plates import READABLE_NAME, paint_plates
from netsketch.sheet.paths import polylines, rectangles

_HANDLE = 3.0
_NO_BRUSH = Qt.BrushStyle.NoBrush


def paint_selection(
    painter: QPainter, frame: Frame, nodes: Iterable[int], links: Iterable[int]
) -> None:
    """Paint an outline with handles around what is selected."""
    painter.setBrush(_NO_BRUSH)
    rows = np.array(list(nodes), dtype=np.intp)
    if len(rows):
        grown = 6.0
        boxes = frame.lines.bars[rows] + np.array([-grown, -grown, grown, grown])
        painter.setPen(pen_of(frame, frame.look.ink, 1.0))
        painter.drawPath(rectangles(boxes))
        _paint_handles(painter, frame, boxes[:, [0, 1, 2, 1, 0, 3, 2, 3]].reshape(-1, 2))
    rows = np.array(list(links), dtype=np.intp)
    if len(rows):
        paint_edges(painter, frame, rows)
        _paint_handles(painter, frame, frame.lines.points[rows][:, [0, 3]].reshape(-1, 2))


def _paint_handles(painter: QPainter, frame: Frame, places: Floats) -> None:
    size = max(_HANDLE, 2.5 / frame.scale)
    painter.setPen(pen_of(frame, frame.look.paper, 1.0))
    painter.setBrush(QColor(frame.look.ink))
    painter.drawPath(rectangles(np.concatenate([places - size, places + size], axis=1)))
    painter.setBrush(_NO_BRUSH)


def paint_edges(painter: QPainter, frame: Frame, rows: np.ndarray) -> None:
    """Paint a thin line along both sides of links."""
    reach = np.zeros(len(rows)) if frame.marks is None else frame.marks.reach[rows]
    aside = (np.maximum(reach, 1.5) + max(3.0, 3.0 / frame.scale))[:, None] * frame.lines.across[
        rows
    ]
    points = frame.lines.points[rows]
    painter.setBrush(_NO_BRUSH)
    painter.setPen(pen_of(frame, frame.look.ink, 1.1))
    for side in (aside, -aside):
        painter.drawPath(polylines(points + side[:, None, :]))


def paint_hover(painter: QPainter, frame: Frame, node: int | None, link: int | None) -> None:
    """Paint a halo around what the pointer is on; a plate too small to read is shown
    large enough."""
    halo = QColor(frame.look.ink)
    halo.setAlphaF(0.16)
    if node is not None:
        if frame.scale < READABLE_NAME:
            paint_enlarged(painter, frame, node)
            return
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(halo)
        left, top, right, bottom = frame.lines.bars[node].tolist()
        painter.drawRoundedRect(
            QRectF(left - 5, top - 5, right - left + 10, bottom - top + 10), 10, 10
        )
    elif link is not None:
        pen = pen_of(frame, halo, 12.0, 10.0)
        painter.setPen(pen)
        painter.setBrush(_NO_BRUSH)
        painter.drawPath(polylines(frame.lines.points[[link]]))


def paint_enlarged(painter: QPainter, frame: Frame, node: int, scale: float = 1.0) -> None:
    """Paint one plate at a scale at which it reads, about its own middle."""
    x, y = frame.contents.nodes.x[node], frame.contents.nodes.y[node]
    if frame.contents.nodes.segment[node]:
        x, y = frame.lines.boxes[node, 0], frame.lines.boxes[node, 1:4:2].mean()
    nodes = np.zeros_like(frame.nodes)
    nodes[node] = True
    grown = replace(frame, scale=scale, nodes=nodes, links=np.zeros_like(frame.links))
    painter.save()
    painter.translate(x, y)
    painter.scale(scale / frame.scale, scale / frame.scale)
    painter.translate(-x, -y)
    paint_plates(painter, grown)
    paint_bands(painter, grown)
    painter.restore()


def paint_large(painter: QPainter, frame: Frame, focus: Iterable[str], selected: list[int]) -> None:
    """Where names are too small to read, show the focus and one selected plate large."""
    if frame.scale >= READABLE_NAME:
        return
    row_of = frame.contents.nodes.row
    rows = [row_of[key] for key in focus if key in row_of]
    for row in dict.fromkeys([*rows, *(selected if len(selected) == 1 else ())]):
        paint_enlarged(painter, frame, row)


def paint_lit_path(painter: QPainter, frame: Frame, lit: Mapping[str, int]) -> None:
    """Paint the links of one path, picked in a table, in ink with their directions."""
    rows_of = frame.contents.links.row
    found = [(rows_of[key], way) for key, way in lit.items() if key in rows_of]
    if not found:
        return
    rows = np.array([row for row, _ in found], dtype=np.intp)
    backward = np.array([way < 0 for _, way in found])
    paint_edges(painter, frame, rows)
    points = frame.lines.points[rows]
    points[backward] = points[backward][:, ::-1]
    painter.setPen(pen_of(frame, frame.look.paper, 1.4, 0.8))
    painter.setBrush(QColor(frame.look.ink))
    painter.drawPath(polylines(chevrons(frame, rows, points, 8.0), closed=True))
    painter.setBrush(_NO_BRUSH)


def paint_focus(painter: QPainter, look: Look, area: QRectF) -> None:
    """Frame the sheet when it has the keyboard."""
    painter.setBrush(_NO_BRUSH)
    painter.setPen(QPen(QColor(look.ink), 2.0))
    painter.drawRect(area.adjusted(2, 2, -2, -2))


def paint_begin(painter: QPainter, look: Look, area: QRectF) -> None:
    """Say on an empty sheet how to begin."""
    font = painter.font()
    centre = area.center()
    for text, pixels, colour, line in (
        ("Double-click to draw a router", 20, look.ink, -14.0),
        ("or open a plan. Then draw links from plate to plate.", 13, look.soft, 16.0),
    ):
        font.setPixelSize(pixels)
        painter.setFont(font)
        painter.setPen(QColor(colour))
        box = QRectF(area.left(), centre.y() + line - 16, area.width(), 32)
        painter.drawText(box, int(Qt.AlignmentFlag.AlignCenter), text)


def paint_rubber_line(painter: QPainter, frame: Frame, start: QPointF, end: QPointF) -> None:
    """Paint the line of a link that is being drawn."""
    pen = pen_of(frame, frame.look.ink, 1.6, 1.4)
    pen.setDashPattern([5.0, 3.0])
    painter.setPen(pen)
    painter.drawLine(start, end)
