"""What is under a point or in a rectangle, asked of all rows at once."""

from __future__ import annotations

import numpy as np
from PySide6.QtCore import QPointF, QRectF

from netsketch.sheet.contents import Floats, Rows
from netsketch.sheet.frame import Frame, corners
from netsketch.sheet.paint_tags import READABLE

_NEAR = 5.0
"""Pixels from a line that still count as on it."""


def node_at(frame: Frame, at: QPointF, slack: float = 0.0) -> int | None:
    """Return the row of the topmost plate or rail at a place on the sheet."""
    room = slack + 2.0 / frame.scale
    point = np.array([at.x(), at.y()])
    on = np.zeros(len(frame.nodes), dtype=bool)
    for boxes, more in ((frame.lines.boxes, 0.0), (frame.lines.bars, 3.0)):
        inside = (boxes[:, :2] - room - more <= point) & (point <= boxes[:, 2:] + room + more)
        on |= inside.all(axis=1)
    rows = np.flatnonzero(on)
    return int(rows[-1]) if len(rows) else None


def link_at(frame: Frame, at: QPointF) -> int | None:
    """Return the row of the link whose line is nearest, within a few pixels, or whose
    tag lies there."""
    if not len(frame.links):
        return None
    point = np.array([at.x(), at.y()])
    if frame.scale >= READABLE:
        boxes = frame.tag_boxes
        on = ((boxes[:, :2] <= point) & (point <= boxes[:, 2:])).all(axis=1) & frame.tag_fits
        on &= ~frame.contents.links.added[frame.tags.link]
        if on.any():
            return int(frame.tags.link[np.flatnonzero(on)[-1]])
    room = _NEAR / frame.scale + (0.0 if frame.marks is None else frame.marks.reach)
    distance = distances(frame.lines.points, point) - room
    distance[frame.contents.links.added] = np.inf
    row = int(distance.argmin())
    return row if distance[row] <= 0 else None


def distances(points: Floats, point: Floats) -> Floats:
    """Return how far ``point`` is from each of the lines ``points`` (m, p, 2)."""
    start, span = points[:, :-1], np.diff(points, axis=1)
    squared = np.maximum((span**2).sum(axis=2), 1e-12)
    at = np.clip(((point - start) * span).sum(axis=2) / squared, 0, 1)
    gap = point - (start + span * at[..., None])
    return np.asarray(np.hypot(gap[..., 0], gap[..., 1]).min(axis=1))


def rows_in(frame: Frame, area: QRectF) -> tuple[Rows, Rows]:
    """Return the nodes that ``area`` touches, and the links that lie wholly in it."""
    left, top, right, bottom = corners(area.normalized())
    touched = np.zeros(len(frame.nodes), dtype=bool)
    for boxes in (frame.lines.boxes, frame.lines.bars):
        touched |= (
            (boxes[:, 0] <= right)
            & (boxes[:, 2] >= left)
            & (boxes[:, 1] <= bottom)
            & (boxes[:, 3] >= top)
        )
    e = frame.lines.extents
    within = (e[:, 0] >= left) & (e[:, 1] >= top) & (e[:, 2] <= right) & (e[:, 3] <= bottom)
    return np.flatnonzero(touched), np.flatnonzero(within & ~frame.contents.links.added)
