"""Many lines as one QPainterPath, handed to Qt in one piece of memory.

Building a path call by call costs microseconds a line in Python; Qt's own stream format
(QDataStream, QPainterPath) takes thousands of lines at once.
"""

from __future__ import annotations

import struct

import numpy as np
from PySide6.QtCore import QByteArray, QDataStream
from PySide6.QtGui import QPainter, QPainterPath

from netsketch.sheet.contents import Floats

_ELEMENT = np.dtype([("kind", ">i4"), ("x", ">f8"), ("y", ">f8")])
_MOVE_TO, _LINE_TO = 0, 1
_WINDING = 1
_BUNCH = 64


def polylines(points: Floats, closed: bool = False) -> QPainterPath:
    """Return one path of the k lines through ``points`` (k, p, 2)."""
    if closed:
        points = np.concatenate([points, points[:, :1]], axis=1)
    count, each = points.shape[:2]
    elements = np.empty((count, each), _ELEMENT)
    elements["kind"] = _LINE_TO
    elements["kind"][:, 0] = _MOVE_TO
    elements["x"], elements["y"] = points[..., 0], points[..., 1]
    data = struct.pack(">i", count * each) + elements.tobytes() + struct.pack(">ii", 0, _WINDING)
    path = QPainterPath()
    if count:
        QDataStream(QByteArray(data)) >> path
    return path


def draw_shapes(painter: QPainter, points: Floats) -> None:
    """Draw the polygons ``points`` (k, p, 2) with the painter's pen and brush.

    In bunches, because the time to fill one path grows faster than what is in it.
    """
    for start in range(0, len(points), _BUNCH):
        painter.drawPath(polylines(points[start : start + _BUNCH], closed=True))


def corners_of(boxes: Floats) -> Floats:
    """Return the corners (k, 4, 2) of ``boxes`` (k, 4): left, top, right, bottom."""
    return boxes[:, [0, 1, 2, 1, 2, 3, 0, 3]].reshape(-1, 4, 2)


def rectangles(boxes: Floats) -> QPainterPath:
    """Return one path of the rectangles ``boxes`` (k, 4): left, top, right, bottom."""
    return polylines(corners_of(boxes), closed=True)
