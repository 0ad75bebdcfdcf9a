"""Plates and rails: shapes and names, with their state in the trial."""

from __future__ import annotations

import numpy as np
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QBrush, QColor, QPainter

from netsketch.sheet.contents import Flags, Rows
from netsketch.sheet.frame import Frame
from netsketch.sheet.lettering import Face
from netsketch.sheet.paint_links import pen_of
from netsketch.sheet.paint_tags import paint_flags
from netsketch.sheet.paths import corners_of, draw_shapes, polylines, rectangles

READABLE_NAME, READABLE_SITE = 0.36, 0.6
"""The least scales at which names and sites are painted."""
_ROUND = 7.0
_NO_PEN = Qt.PenStyle.NoPen
_NO_BRUSH = Qt.BrushStyle.NoBrush


def paint_plates(painter: QPainter, frame: Frame) -> None:
    """Paint the plates and rails of ``frame``."""
    _paint_bars(painter, frame)
    marks, none = frame.marks, np.zeros_like(frame.nodes)
    focus = none if marks is None else marks.focus
    faded = frame.faded_nodes()
    plates = frame.nodes & ~frame.contents.nodes.segment
    look = frame.look
    _paint_shapes(painter, frame, plates & ~faded & ~focus, look.plate, look.ink)
    _paint_shapes(painter, frame, plates & faded, look.plate, look.hairline)
    _paint_shapes(painter, frame, frame.nodes & focus, look.ink, look.ink)
    if marks is not None:
        _paint_outlines(painter, frame, marks.target, 3.4, 0.0)
        _paint_hatching(painter, frame, frame.nodes & marks.cut_off)
        _paint_outlines(painter, frame, marks.moved, 1.5, 4.0)
    _paint_names(painter, frame, focus, faded)
    tried = np.flatnonzero(frame.nodes & frame.contents.nodes.tried)
    if len(tried):
        paint_flags(
            painter, frame, frame.lines.boxes[tried][:, [2, 1]] + np.array([3.0, -3.0]), 10.0, 1
        )


def _paint_bars(painter: QPainter, frame: Frame) -> None:
    nodes, look = frame.contents.nodes, frame.look
    rails = frame.nodes & nodes.segment
    if not rails.any():
        return
    faded = frame.faded_nodes() | nodes.down
    painter.setPen(_NO_PEN)
    for colour, mask in ((look.hairline, faded), (look.ink, ~faded)):
        painter.setBrush(QColor(colour))
        painter.drawPath(rectangles(frame.lines.bars[rails & mask]))
    _paint_rail_breaks(painter, frame, np.flatnonzero(rails & nodes.down))


def _paint_rail_breaks(painter: QPainter, frame: Frame, rows: Rows) -> None:
    """Break a rail that is down as a link is broken: a gap, a bar on each side."""
    for left, top, right, bottom in frame.lines.bars[rows]:
        middle = (left + right) / 2
        painter.fillRect(
            QRectF(middle - 10, top - 1, 20, bottom - top + 2), QColor(frame.look.paper)
        )
        painter.setPen(pen_of(frame, frame.look.ink, 2.2, 1.4))
        for x in (middle - 10, middle + 10):
            painter.drawLine(QPointF(x, top - 6), QPointF(x, bottom + 6))


def _paint_shapes(painter: QPainter, frame: Frame, mask: Flags, fill: str, edge: str) -> None:
    """Paint plates: outlined, dashed when drained, broken when down."""
    nodes = frame.contents.nodes
    for special, dashed in (
        (~nodes.drained & ~nodes.down, False),
        (nodes.drained & ~nodes.down, True),
    ):
        rows = np.flatnonzero(mask & special)
        if len(rows):
            pen = pen_of(frame, edge if not dashed or fill != edge else frame.look.paper, 1.5)
            if dashed:
                pen = pen_of(frame, frame.look.ink if fill != edge else frame.look.paper, 1.8)
                pen.setDashPattern([3.4, 2.4])
            painter.setPen(pen)
            painter.setBrush(QColor(fill))
            _draw_outlines(painter, frame, rows)
    _paint_down(painter, frame, np.flatnonzero(mask & nodes.down), fill, edge)


def _draw_outlines(painter: QPainter, frame: Frame, rows: Rows, grown: float = 0.0) -> None:
    """Draw the plates' shapes; small ones with square corners and sharp edges."""
    boxes = frame.lines.boxes[rows] + np.array([-grown, -grown, grown, grown])
    if frame.scale < READABLE_NAME:
        painter.setRenderHint(QPainter.RenderHint.Antialiasing, False)
        draw_shapes(painter, corners_of(boxes))
        painter.setRenderHint(QPainter.RenderHint.Antialiasing, frame.still)
        return
    for left, top, right, bottom in boxes.tolist():
        shape = QRectF(left, top, right - left, bottom - top)
        painter.drawRoundedRect(shape, _ROUND + grown, _ROUND + grown)


def _paint_down(painter: QPainter, frame: Frame, rows: Rows, fill: str, edge: str) -> None:
    """Break the outline of a plate that is down at the middle of its upper and lower
    edge, with a short bar on each side of the gap."""
    if not len(rows):
        return
    look = frame.look
    painter.setBrush(QColor(fill))
    painter.setPen(pen_of(frame, edge, 1.5))
    _draw_outlines(painter, frame, rows)
    boxes = frame.lines.boxes[rows]
    middle = boxes[:, 0:3:2].mean(axis=1)
    for y in (boxes[:, 1], boxes[:, 3]):
        gap = np.stack([np.stack([middle - 8, y], 1), np.stack([middle + 8, y], 1)], axis=1)
        painter.setPen(pen_of(frame, look.paper, 4.0))
        painter.drawPath(polylines(gap))
        ends, wing = gap.reshape(-1, 2), np.array([0.0, 5.0])
        painter.setPen(pen_of(frame, look.ink, 2.2, 1.4))
        painter.drawPath(polylines(np.stack([ends - wing, ends + wing], axis=1)))


def _paint_hatching(painter: QPainter, frame: Frame, mask: Flags) -> None:
    rows = np.flatnonzero(mask)
    if not len(rows):
        return
    painter.setPen(_NO_PEN)
    painter.setBrush(QBrush(QColor(frame.look.faded), Qt.BrushStyle.BDiagPattern))
    _draw_outlines(painter, frame, rows)
    painter.drawPath(rectangles(frame.lines.bars[rows]))
    painter.setBrush(_NO_BRUSH)
    painter.setPen(pen_of(frame, frame.look.ink, 1.5))
    _draw_outlines(painter, frame, rows[~frame.contents.nodes.segment[rows]])
    inner = frame.lines.boxes[rows] + np.array([8.0, 5.0, -8.0, -5.0])
    painter.fillPath(rectangles(inner), QColor(frame.look.plate))


def _paint_outlines(
    painter: QPainter, frame: Frame, mask: Flags, width: float, grown: float
) -> None:
    """Paint the heavier outline of a target, or the second one that says: moved."""
    rows = np.flatnonzero(frame.nodes & mask)
    if len(rows):
        painter.setBrush(_NO_BRUSH)
        painter.setPen(pen_of(frame, frame.look.ink, width, width * 0.6))
        _draw_outlines(painter, frame, rows, grown)


def _paint_names(painter: QPainter, frame: Frame, focus: Flags, faded: Flags) -> None:
    if frame.scale < READABLE_NAME:
        return
    look, nodes = frame.look, frame.contents.nodes
    quiet = (faded | nodes.down) & ~focus
    groups = (
        (frame.nodes & ~focus & ~quiet, look.ink, look.soft),
        (frame.nodes & quiet, look.faded, look.faded),
        (frame.nodes & focus, look.paper, look.focus_soft),
    )
    for mask, name, site in groups:
        rows = np.flatnonzero(mask)
        for face, chosen in _name_faces(frame, rows):
            _paint_text(painter, frame, chosen, nodes.names, face, name)
        if frame.scale >= READABLE_SITE:
            with_site = np.array([row for row in rows if nodes.sites[row]], dtype=np.intp)
            _paint_text(
                painter, frame, with_site, nodes.sites, frame.lettering.site, site, below=True
            )


def _name_faces(frame: Frame, rows: Rows) -> list[tuple[Face, Rows]]:
    """Return which names take which face: the larger one where no site stands below the
    name and the plate has room for it."""
    usual, large = frame.lettering.name, frame.lettering.large_name
    if frame.scale >= READABLE_SITE:
        return [(usual, rows)]
    names = frame.contents.nodes.names
    room = frame.lines.boxes[rows, 2] - frame.lines.boxes[rows, 0] - 4
    room += np.where(frame.contents.nodes.segment[rows], 30.0, 0.0)  # no outline to touch
    widths = np.array([large.width(names[row]) for row in rows])
    return [(large, rows[widths <= room]), (usual, rows[widths > room])]


def _paint_text(
    painter: QPainter,
    frame: Frame,
    rows: Rows,
    texts: list[str],
    face: Face,
    colour: str,
    below: bool = False,
) -> None:
    """Paint the name of each row in the middle of its box, or its site below the name."""
    painter.setPen(QColor(colour))
    painter.setFont(face.font)
    sites, two_lines = frame.contents.nodes.sites, frame.scale >= READABLE_SITE
    boxes = frame.lines.boxes[rows]
    middles = zip(
        rows.tolist(),
        boxes[:, 0:3:2].mean(axis=1).tolist(),
        boxes[:, 1:4:2].mean(axis=1).tolist(),
        strict=True,
    )
    for row, x, y in middles:
        line = 9.0 if below else (-6.5 if sites[row] and two_lines else 0.0)
        painter.drawText(QPointF(x - face.width(texts[row]) / 2, y + line + face.rise), texts[row])
