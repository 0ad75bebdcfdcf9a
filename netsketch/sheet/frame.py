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
        marks=_marks(reading, contents, look),
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


def edited(
    frame: Frame, plan: Plan, touched: Set[str], reading: Reading | None, look: Look
) -> Frame:
    """Return the frame after an edit of these nodes and links, with this reading and look;
    it takes over what the edit left alone, so a small one costs little. Equal to the plan
    read anew."""
    before, lettering = frame.contents, frame.lettering
    contents, source = brought_up(before, plan, lettering, touched)
    if _retold(frame.reading, reading):
        source = np.full_like(source, -1)
    fresh = tags_of(contents, lettering, reading, np.flatnonzero(source < 0))
    tags = retold(frame.tags, source, fresh)
    lines = frame.lines if contents.lies_like(before) else lines_of(contents)
    boxes, fits = place_tags(tags, lines, contents)
    as_before = contents.nodes.ids == before.nodes.ids and contents.links.ids == before.links.ids
    as_before &= reading is frame.reading and look is frame.look
    return replace(
        frame,
        contents=contents,
        lines=lines,
        tags=tags,
        tag_boxes=boxes,
        tag_fits=fits,
        reading=reading,
        marks=frame.marks if as_before else _marks(reading, contents, look),
        look=look,
        nodes=np.ones(len(contents.nodes.ids), dtype=bool),
        links=np.ones(len(contents.links.ids), dtype=bool),
    )


def with_reading(frame: Frame, reading: Reading | None, look: Look) -> Frame:
    """Return the frame with another reading or look."""
    if reading is frame.reading and look is frame.look:
        return frame
    marks = _marks(reading, frame.contents, look)
    again = replace(frame, reading=reading, marks=marks, look=look)
    if _retold(frame.reading, reading):
        again.tags = tags_of(frame.contents, frame.lettering, reading)
        placed = place_tags(again.tags, frame.lines, frame.contents)
        again.tag_boxes, again.tag_fits = placed
    return again


def _marks(reading: Reading | None, contents: Contents, look: Look) -> Marks | None:
    return None if reading is None else marks_of(reading, contents, look)


def _retold(before: Reading | None, now: Reading | None) -> bool:
    """Return whether another reading changes texts in tags."""
    return now is not before and (_tells(before) or _tells(now))


def _tells(reading: Reading | None) -> bool:
    """Return whether the reading puts texts of its own into tags."""
    return reading is not None and any(mark.text for mark in reading.links.values())


def corners(area: QRectF) -> tuple[float, float, float, float]:
    """Return left, top, right and bottom of a rectangle."""
    return area.left(), area.top(), area.right(), area.bottom()
