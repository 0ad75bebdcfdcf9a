"""Everything one painting needs: the rows, where they lie, what is said about them."""

from __future__ import annotations

from collections.abc import Set
from dataclasses import dataclass, replace

import numpy as np
from PySide6.QtCore import QRectF

from netsketch.model import Plan
from netsketch.readings.reading import Reading
from netsketch.sheet.contents import Contents, Flags, Floats
from netsketch.sheet.lettering import Lettering
from netsketch.sheet.lines import Lines, lines_of
from netsketch.sheet.look import Look
from netsketch.sheet.marks import Marks, marks_of
from netsketch.sheet.rows import brought_up, contents_of
from netsketch.sheet.tags import Tags, place_tags, retold, tags_of

BAND_ROOM = 18.0
"""Below a plate, for its band."""
MARGIN = 14.0


@dataclass(slots=True)
class Frame:
    """One state of the sheet, ready to paint.

    ``scale``: pixels for one sheet unit, which decides the level of detail.
    ``nodes``, ``links``: what to paint of it; ``still``: paint at full quality.
    """

    contents: Contents
    lines: Lines
    tags: Tags
    tag_boxes: Floats
    tag_fits: Flags
    reading: Reading | None
    marks: Marks | None
    look: Look
    lettering: Lettering
    scale: float
    nodes: Flags
    links: Flags
    still: bool = True

    def only(self, nodes: Flags, links: Flags) -> Frame:
        """Return this frame with these nodes and links alone."""
        return replace(self, nodes=nodes, links=links)

    def within(self, area: QRectF) -> Frame:
        """Return this frame with only what can touch ``area`` (sheet units)."""
        left, top, right, bottom = corners(area)
        room = MARGIN + 6 / self.scale
        low = np.minimum(self.lines.boxes[:, :2], self.lines.bars[:, :2]) - room
        high = np.maximum(self.lines.boxes[:, 2:], self.lines.bars[:, 2:]) + room
        high[:, 1] += BAND_ROOM
        nodes = (low[:, 0] <= right) & (low[:, 1] <= bottom)
        nodes &= (high[:, 0] >= left) & (high[:, 1] >= top)
        e = self.lines.extents
        links = (e[:, 0] - room <= right) & (e[:, 1] - room <= bottom)
        links &= (e[:, 2] + room >= left) & (e[:, 3] + room >= top)
        return self.only(self.nodes & nodes, self.links & links)

    def extent(self) -> QRectF:
        """Return the rectangle around everything, bands included; empty for nothing."""
        boxes, bars = self.lines.boxes, self.lines.bars
        if not len(boxes):
            return QRectF()
        left, top = np.minimum(boxes, bars)[:, :2].min(axis=0)
        right, bottom = np.maximum(boxes, bars)[:, 2:].max(axis=0)
        return QRectF(left, top, right - left, bottom - top + BAND_ROOM)

    def faded_nodes(self) -> Flags:
        """Return which nodes the reading passes over."""
        return np.zeros_like(self.nodes) if self.marks is None else ~self.marks.nodes


def frame_of(
    plan: Plan, reading: Reading | None, look: Look, lettering: Lettering, unit: float
) -> Frame:
    """Return a whole plan with a reading as a frame at scale 1."""
    contents = contents_of(plan, lettering, unit)
    lines, tags = lines_of(contents), tags_of(contents, lettering, reading)
    boxes, fits = place_tags(tags, lines, contents)
    return Frame(
        contents=contents,
        lines=lines,
        tags=tags,
        tag_boxes=boxes,
        tag_fits=fits,
        reading=reading,
        marks=None if reading is None else marks_of(reading, contents, look),
        look=look,
        lettering=lettering,
        scale=1.0,
        nodes=np.ones(len(contents.nodes.ids), dtype=bool),
        links=np.ones(len(contents.links.ids), dtype=bool),
    )


def relaid(frame: Frame) -> Frame:
    """Return the frame after places in its contents changed."""
    lines = lines_of(frame.contents)
    boxes, fits = place_tags(frame.tags, lines, frame.contents)
    return replace(frame, lines=lines, tag_boxes=boxes, tag_fits=fits)


def edited(frame: Frame, plan: Plan, touched: Set[str]) -> Frame:
    """Return the frame after an edit of these nodes and links; it takes over what the
    edit left alone, so a small one costs little. Equal to the plan read anew."""
    before, lettering, reading = frame.contents, frame.lettering, frame.reading
    contents, source = brought_up(before, plan, lettering, touched)
    fresh = tags_of(contents, lettering, reading, np.flatnonzero(source < 0))
    same_rows = contents.nodes.ids == before.nodes.ids and contents.links.ids == before.links.ids
    marks = frame.marks
    if reading is not None and not same_rows:
        marks = marks_of(reading, contents, frame.look)
    lines = frame.lines if contents.lies_like(before) else lines_of(contents)
    tags = retold(frame.tags, source, fresh)
    boxes, fits = place_tags(tags, lines, contents)
    return replace(
        frame,
        contents=contents,
        lines=lines,
        tags=tags,
        tag_boxes=boxes,
        tag_fits=fits,
        marks=marks,
        nodes=np.ones(len(contents.nodes.ids), dtype=bool),
        links=np.ones(len(contents.links.ids), dtype=bool),
    )


def with_reading(frame: Frame, reading: Reading | None, look: Look) -> Frame:
    """Return the frame with another reading or look."""
    if reading is frame.reading and look is frame.look:
        return frame
    retell = _tells(reading) or _tells(frame.reading)
    marks = None if reading is None else marks_of(reading, frame.contents, look)
    frame = replace(frame, reading=reading, marks=marks, look=look)
    if retell:
        frame.tags = tags_of(frame.contents, frame.lettering, reading)
        placed = place_tags(frame.tags, frame.lines, frame.contents)
        frame.tag_boxes, frame.tag_fits = placed
    return frame


def _tells(reading: Reading | None) -> bool:
    """Return whether the reading puts texts of its own into tags."""
    return reading is not None and any(mark.text for mark in reading.links.values())


def corners(area: QRectF) -> tuple[float, float, float, float]:
    """Return left, top, right and bottom of a rectangle."""
    return area.left(), area.top(), area.right(), area.bottom()
