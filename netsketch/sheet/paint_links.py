"""Links painted in batches, one path for each style: lines, strands, chevrons, breaks."""

from __future__ import annotations

import numpy as np
from PySide6.QtCore import Qt
from PySide6.QtGui import QColor, QPainter, QPen

from netsketch.sheet.contents import Floats, Rows
from netsketch.sheet.frame import Frame
from netsketch.sheet.marks import Marks, Strands, Stroke
from netsketch.sheet.paths import draw_shapes, polylines
from netsketch.sheet.tags import GAP

_FLAT = Qt.PenCapStyle.FlatCap
_ROUND_JOIN = Qt.PenJoinStyle.RoundJoin
_NO_PEN = Qt.PenStyle.NoPen
_NO_BRUSH = Qt.BrushStyle.NoBrush


def paint_links(painter: QPainter, frame: Frame) -> None:
    """Paint the links of ``frame``: plain lines first, then what the reading says."""
    painter.setBrush(_NO_BRUSH)
    _paint_lines(painter, frame)
    if frame.marks is not None:
        _paint_strands(painter, frame, frame.marks)
    _paint_breaks(painter, frame)


def pen_of(frame: Frame, colour: str | QColor, width: float, least: float = 1.0) -> QPen:
    """Return a pen ``width`` sheet units wide, and at least ``least`` pixels."""
    pen = QPen(QColor(colour), max(width, least / frame.scale))
    pen.setCapStyle(_FLAT)
    pen.setJoinStyle(_ROUND_JOIN)
    return pen


def stroke_path(painter: QPainter, frame: Frame, pen: QPen, rows: Rows, points: Floats) -> None:
    """Stroke the lines ``points`` (k, 4, 2) of link ``rows``, broken where one is down."""
    painter.setPen(pen)
    down = frame.contents.links.down[rows]
    bent = frame.lines.bent[rows]
    painter.drawPath(polylines(points[~down & ~bent][:, 1:3]))
    if (bent & ~down).any():
        painter.drawPath(polylines(points[bent & ~down]))
    if down.any():
        painter.drawPath(polylines(_halves(frame, rows[down], points[down])))


def _halves(frame: Frame, rows: Rows, points: Floats) -> Floats:
    """Return both sides of the gap, first ends first, as (2k, 3, 2)."""
    body = points[:, 2] - points[:, 1]
    share = np.minimum(GAP / np.maximum(frame.lines.length[rows], 1e-9), 1 / 3)
    gap = body * share[:, None]
    middle = (points[:, 1] + points[:, 2]) / 2
    return np.concatenate(
        [
            np.stack([points[:, 0], points[:, 1], middle - gap], axis=1),
            np.stack([points[:, 3], points[:, 2], middle + gap], axis=1),
        ]
    )


def _paint_lines(painter: QPainter, frame: Frame) -> None:
    """Paint what carries no strand: ink on the bare sheet, faded under a reading."""
    links, nodes, look = frame.contents.links, frame.contents.nodes, frame.look
    idle = nodes.down[links.tail] | nodes.down[links.head]
    shown = frame.links
    faded = idle
    if frame.marks is not None:
        shown = shown & (frame.marks.reach == 0)
        faded = idle | ~frame.marks.links
    for colour, mask in ((look.hairline, faded), (look.ink, ~faded)):
        for width in np.unique(links.width[shown & mask]):
            rows = np.flatnonzero(shown & mask & (links.width == width))
            thin = float(width) * 0.8 if colour == look.hairline else float(width)
            pen = pen_of(frame, colour, thin, 1.0 if frame.scale > 0.5 else 0.7)
            stroke_path(painter, frame, pen, rows, frame.lines.points[rows])


def _paint_strands(painter: QPainter, frame: Frame, marks: Marks) -> None:
    """Paint the edges of all strands, then their colours, then their arrowheads, so that
    no strand hides what its neighbour says."""
    laid = [(stroke, *_laid(frame, strands)) for stroke, strands in marks.strands.items()]
    for stroke, rows, points in laid:
        if stroke.edge:
            pen = pen_of(frame, frame.look.ink, stroke.width + 2 * stroke.edge, 2.4)
            stroke_path(painter, frame, pen, rows, points)
    for stroke, rows, points in laid:
        pen = pen_of(frame, stroke.colour, stroke.width, 1.6)
        if stroke.dash:
            pen.setDashPattern(list(stroke.dash))
        stroke_path(painter, frame, pen, rows, points)
    for stroke, rows, points in laid:
        _paint_chevrons(painter, frame, stroke, rows, points)


def _laid(frame: Frame, strands: Strands) -> tuple[Rows, Floats]:
    """Return the links of those strands that are shown, and the lines along them in the
    direction of travel."""
    rows, offsets, directions = strands.arrays
    shown = frame.links[rows]
    rows, backward = rows[shown], directions[shown] < 0
    aside = frame.lines.across[rows] * offsets[shown][:, None]
    points = frame.lines.points[rows] + aside[:, None, :]
    points[backward] = points[backward][:, ::-1]
    return rows, points


def _paint_chevrons(
    painter: QPainter, frame: Frame, stroke: Stroke, rows: Rows, points: Floats
) -> None:
    """Paint arrowheads along the direction of travel, clear of the tags."""
    arrows = chevrons(frame, rows, points, max(stroke.width, 1.6 / frame.scale))
    if not len(arrows):
        return
    if frame.scale > 0.4:
        edge = frame.look.ink if stroke.edge else frame.look.paper
        painter.strokePath(polylines(arrows, closed=True), pen_of(frame, edge, 2.4))
    painter.setPen(pen_of(frame, stroke.colour, 1.5) if stroke.hollow else QPen(_NO_PEN))
    painter.setBrush(QColor(frame.look.paper if stroke.hollow else stroke.colour))
    draw_shapes(painter, arrows)
    painter.setBrush(_NO_BRUSH)


def chevrons(frame: Frame, rows: Rows, points: Floats, width: float) -> Floats:
    """Return arrowheads (k, 4, 2) on the lines ``points``, as many as their length asks.

    Lines beside a link's middle carry theirs a little farther on, so that two directions
    of travel do not cover each other's.
    """
    length = frame.lines.length[rows]
    size = min(max(9.0 + width, 11.0), 16.0) / min(1.0, max(frame.scale * 1.5, 0.2))
    seen = length * min(1.0, frame.scale)
    limits = [(length < 2.4 * size) | (seen < 24), seen < 90, seen < 230, seen < 420]
    count = np.select(limits, [0, 1, 2, 4], 6)
    along = points[:, 2] - points[:, 1]
    along /= np.maximum(np.hypot(along[:, 0], along[:, 1]), 1e-9)[:, None]
    across = np.stack([-along[:, 1], along[:, 0]], axis=1)
    middle = frame.lines.points[rows, 1:3].mean(axis=1)
    beside = ((points[:, 1:3].mean(axis=1) - middle) * across).sum(axis=1)
    further = np.sign(np.round(beside, 2)) * 0.7 * size + size / 2
    found = []
    for number in np.unique(count[count > 0]):
        chosen = count == number
        for place in _places(int(number)):
            at = length[chosen] * place + further[chosen]
            tip = points[chosen, 1] + along[chosen] * at[:, None]
            back, wing = along[chosen] * size, across[chosen] * size * 0.54
            corners = [tip, tip - back + wing, tip - back * 0.78, tip - back - wing]
            found.append(np.stack(corners, axis=1))
    return np.concatenate(found) if found else np.empty((0, 4, 2))


def _places(count: int) -> list[float]:
    """An even number leaves the middle to the tag; a single one stands behind it."""
    return [0.74] if count == 1 else [(i + 0.5) / count for i in range(count)]


def _paint_breaks(painter: QPainter, frame: Frame) -> None:
    """Paint a short bar on each side of the gap in a link that is down."""
    rows = np.flatnonzero(frame.links & frame.contents.links.down)
    if not len(rows):
        return
    ends = _halves(frame, rows, frame.lines.points[rows])[:, 2]
    wing = np.concatenate([frame.lines.across[rows]] * 2) * max(7.0, 4.0 / frame.scale)
    painter.setPen(pen_of(frame, frame.look.ink, 2.2, 1.4))
    painter.drawPath(polylines(np.stack([ends - wing, ends + wing], axis=1)))
