"""Cost tags painted over the links, from the zoom at which they can be read."""

from __future__ import annotations

import numpy as np
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QColor, QPainter

from netsketch.sheet.contents import Floats, Rows
from netsketch.sheet.frame import Frame
from netsketch.sheet.lettering import LARGER_BELOW
from netsketch.sheet.paint_links import pen_of
from netsketch.sheet.paths import corners_of, draw_shapes, polylines

READABLE = 0.42
"""The least scale at which tags are painted."""


def paint_tags(painter: QPainter, frame: Frame) -> None:
    """Paint the tags of the links in ``frame`` that fit."""
    rows = np.flatnonzero(frame.tag_fits & frame.links[frame.tags.link])
    if frame.scale >= READABLE:
        _paint_texts(painter, frame, rows)
    _paint_tried(painter, frame, rows)


def _paint_texts(painter: QPainter, frame: Frame, rows: Rows) -> None:
    tags, look, face, grown = frame.tags, frame.look, frame.lettering.tag, 0.0
    if frame.scale < LARGER_BELOW:
        face = frame.lettering.large_tag
        grown = face.font.pixelSize() / frame.lettering.tag.font.pixelSize() - 1
    size = (frame.tag_boxes[:, 2:] - frame.tag_boxes[:, :2]) * grown / 2
    all_boxes = frame.tag_boxes + np.concatenate([-size, size], axis=1)
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(QColor(look.tag))
    draw_shapes(painter, corners_of(all_boxes[rows]))
    painter.setFont(face.font)
    named = np.ones(len(rows), bool) if frame.marks is None else frame.marks.links[tags.link[rows]]
    for colour, chosen in ((look.faded, rows[~named]), (look.ink, rows[named])):
        painter.setPen(QColor(colour))
        boxes = all_boxes[chosen]
        lefts = (boxes[:, 0] + 4).tolist()
        bases = (boxes[:, 1:4:2].mean(axis=1) + face.rise).tolist()
        for row, left, base in zip(chosen.tolist(), lefts, bases, strict=True):
            painter.drawText(QPointF(left, base), tags.texts[row])


def _paint_tried(painter: QPainter, frame: Frame, rows: Rows) -> None:
    """Rule off what the trial changes: a line under the tag, ending in a flag."""
    boxes = frame.tag_boxes[rows[frame.tags.tried[rows]]]
    if not len(boxes):
        return
    base = boxes[:, [0, 3, 2, 3]].reshape(-1, 2, 2)
    painter.setPen(pen_of(frame, frame.look.ink, 1.4))
    painter.drawPath(polylines(base))
    paint_flags(painter, frame, boxes[:, [2, 3]] + np.array([1.0, 1.0]), 8.0, -1)


def paint_flags(painter: QPainter, frame: Frame, corners: Floats, size: float, side: int) -> None:
    """Paint the trial's mark, a filled corner, in each of ``corners`` (k, 2): right
    corners of a box, at its top (``side`` 1) or its bottom (-1)."""
    size = max(size, 4.0 / frame.scale)
    legs = np.array([[0.0, 0.0], [-size, 0.0], [0.0, side * size]])
    corner = corners[:, None, :] + legs
    painter.setPen(pen_of(frame, frame.look.paper, 1.0))
    painter.setBrush(QColor(frame.look.ink))
    painter.drawPath(polylines(corner, closed=True))
    painter.setBrush(Qt.BrushStyle.NoBrush)
