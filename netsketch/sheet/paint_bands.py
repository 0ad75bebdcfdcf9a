"""Bands along the plates' lower edges: by which first hop, and at what cost."""

from __future__ import annotations

import numpy as np
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter

from netsketch.readings.reading import PlateMark
from netsketch.sheet.frame import Frame
from netsketch.sheet.lettering import LARGER_BELOW, Face
from netsketch.sheet.marks import Marks
from netsketch.sheet.paint_links import pen_of
from netsketch.sheet.paths import corners_of, draw_shapes

BAND_HEIGHT = 14.0
_BELOW = 3.0
_SECOND_OUTLINE = 4.0
READABLE, VISIBLE = 0.42, 0.3
"""The least scales at which band texts and bands are painted; below, the colour fills
the whole plate."""
_NO_PEN = Qt.PenStyle.NoPen

Cell = tuple[str, str, str]
"""Text, colour of the ground ("" for none) and colour of the text."""


def paint_bands(painter: QPainter, frame: Frame) -> None:
    """Paint the bands of the plates that the reading names."""
    if frame.marks is None:
        return
    if frame.scale < VISIBLE:
        _fill_plates(painter, frame, frame.marks)
        return
    plates = frame.marks.plates
    rows = [row for row in np.flatnonzero(frame.nodes).tolist() if row in plates]
    painter.setFont(_face(frame).font)
    for row in rows:
        cells = _cells(frame, frame.marks, plates[row])
        if cells:
            _paint_band(painter, frame, row, cells, plates[row].moved)


def _face(frame: Frame) -> Face:
    lettering = frame.lettering
    return lettering.large_band if frame.scale < LARGER_BELOW else lettering.band


def _cells(frame: Frame, marks: Marks, mark: PlateMark) -> list[Cell]:
    look = frame.look
    if mark.role == "cut off":
        return [("cut off", "", look.ink)]
    cost = "" if mark.cost is None else str(mark.cost)
    if not mark.letters:
        return [(cost, "", look.ink)] if cost and mark.role != "focus" else []
    cells = []
    for place, index in enumerate(mark.letters):
        hue = marks.hues[index] % len(look.first_hops)
        text = f"{marks.letters[index]} {cost}" if place == 0 and cost else marks.letters[index]
        cells.append((text, look.first_hops[hue], look.band_texts[hue]))
    return cells


def _paint_band(painter: QPainter, frame: Frame, row: int, cells: list[Cell], moved: bool) -> None:
    """Paint the cells side by side under the plate, wider than it where they need be."""
    face = _face(frame)
    height = BAND_HEIGHT + 3.0 * (frame.scale < LARGER_BELOW)
    needs = [face.width(text) + 8 for text, _, _ in cells]
    left, _, right, bottom = frame.lines.boxes[row].tolist()
    spare = max(0.0, (right - left - sum(needs)) / len(cells))
    x = min(left, (left + right - sum(needs)) / 2)
    bottom += _SECOND_OUTLINE if moved else 0.0
    outline = QRectF(x, bottom + _BELOW, sum(needs) + spare * len(cells), height)
    painter.fillRect(outline.adjusted(-1, -_BELOW + 1, 1, 1), QColor(frame.look.paper))
    for (text, ground, ink), need in zip(cells, needs, strict=True):
        cell = QRectF(x, outline.top(), need + spare, height)
        painter.setPen(_NO_PEN if ground else pen_of(frame, frame.look.ink, 1.2))
        painter.setBrush(QColor(ground or frame.look.paper))
        painter.drawRoundedRect(cell.adjusted(0.5, 0, -0.5, 0), 3, 3)
        if frame.scale >= READABLE:
            painter.setPen(QColor(ink))
            start = cell.center().x() - face.width(text) / 2
            painter.drawText(QPointF(start, cell.center().y() + face.rise), text)
        x += need + spare


def _fill_plates(painter: QPainter, frame: Frame, marks: Marks) -> None:
    """Where bands could not be seen, colour the plates themselves, one path a colour."""
    painter.setRenderHint(QPainter.RenderHint.Antialiasing, False)
    painter.setPen(_NO_PEN)
    edge = 0.6 / frame.scale  # over the outline, which would show on some sides only
    for hue, (rows, start, end) in marks.shares.items():
        shown = frame.nodes[rows]
        boxes = frame.lines.boxes[rows[shown]]
        width = boxes[:, 2] - boxes[:, 0]
        left = boxes[:, 0] + width * start[shown] - edge
        right = boxes[:, 0] + width * end[shown] + edge
        painter.setBrush(QColor(frame.look.first_hops[hue % len(frame.look.first_hops)]))
        filled = np.stack([left, boxes[:, 1] - edge, right, boxes[:, 3] + edge], axis=1)
        draw_shapes(painter, corners_of(filled))
    painter.setRenderHint(QPainter.RenderHint.Antialiasing, frame.still)
