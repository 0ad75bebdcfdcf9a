"""A reading made ready to paint: strands on the links, roles on the plates.

Each travel over a link becomes one strand (or one for each letter it carries); the
strands of a link lie side by side, each direction on its own right-hand side.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np

from netsketch.readings.reading import PlateMark, Reading, Travel
from netsketch.sheet.contents import Contents, Flags, Floats, Rows
from netsketch.sheet.look import Look, cividis

DASHES: dict[str, tuple[float, ...]] = {"way back": (3.0, 1.6), "before": (0.9, 1.1)}
"""Dash patterns by role, in line widths; the others are solid."""
_HOLLOW = {"way back", "before"}
_RAMP_STEPS = 20


@dataclass(frozen=True, slots=True)
class Stroke:
    """How a strand is drawn. ``edge``: the width of an ink line along both sides, thin
    for load (pale colours need one) and thick for load beyond capacity."""

    colour: str
    width: float
    dash: tuple[float, ...] = ()
    hollow: bool = False
    edge: float = 0.0


@dataclass
class Strands:
    """All strands of one stroke: rows of links that are laid alike, with the offset to the
    side and the direction."""

    laid: list[tuple[Rows, float, int]] = field(default_factory=list)

    @cached_property
    def arrays(self) -> tuple[Rows, Floats, Rows]:
        """Link rows, offsets and directions, one for each strand."""
        rows, offsets, directions = zip(*self.laid, strict=True)
        counts = [len(alike) for alike in rows]
        return (
            np.concatenate(rows),
            np.repeat(np.array(offsets, dtype=float), counts),
            np.repeat(np.array(directions, dtype=np.intp), counts),
        )


@dataclass
class Marks:
    """What a reading says, by row. ``links`` and ``nodes`` flag what it names; the other
    flags tell the nodes of one role."""

    links: Flags
    nodes: Flags
    strands: dict[Stroke, Strands]
    plates: dict[int, PlateMark]
    reach: Floats
    """(m,): half the width that a link's strands take."""
    letters: list[str]
    hues: list[int]
    focus: Flags
    target: Flags
    cut_off: Flags
    moved: Flags

    @cached_property
    def shares(self) -> dict[int, tuple[Rows, Floats, Floats]]:
        """For each hue the plates reached by its first hop: their rows, and where along
        the plate its part begins and ends, 0 to 1."""
        alike: dict[tuple[int, ...], list[int]] = {}
        for row, mark in self.plates.items():
            alike.setdefault(mark.letters, []).append(row)
        parts: dict[int, list[tuple[Rows, Floats, Floats]]] = {}
        for letters, rows in alike.items():
            all_rows = np.array(rows, dtype=np.intp)
            for place, index in enumerate(letters):
                start = np.full(len(rows), place / len(letters))
                part = (all_rows, start, start + 1 / len(letters))
                parts.setdefault(self.hues[index], []).append(part)
        found = {}
        for hue, listed in parts.items():
            shared, start, end = map(np.concatenate, zip(*listed, strict=True))
            found[hue] = shared, start, end
        return found


def marks_of(reading: Reading, contents: Contents, look: Look) -> Marks:
    """Return ``reading`` in the colours of ``look``; ids not on the sheet are passed over."""
    rows = contents.nodes.row
    plates = {rows[key]: mark for key, mark in reading.plates.items() if key in rows}
    count = len(contents.nodes.ids)

    def flags(chosen: list[int]) -> Flags:
        found = np.zeros(count, dtype=bool)
        found[chosen] = True
        return found

    def role(name: str) -> Flags:
        return flags([row for row, mark in plates.items() if mark.role == name])

    strands, named, reach = _strands_of(reading, contents, look)
    return Marks(
        links=named,
        nodes=flags(list(plates)),
        strands=strands,
        plates=plates,
        reach=reach,
        letters=[hop.letter for hop in reading.first_hops],
        hues=[hop.colour for hop in reading.first_hops],
        focus=role("focus"),
        target=role("target"),
        cut_off=role("cut off"),
        moved=flags([row for row, mark in plates.items() if mark.moved]),
    )


def _strands_of(
    reading: Reading, contents: Contents, look: Look
) -> tuple[dict[Stroke, Strands], Flags, Floats]:
    """Return the strands by stroke, which links are named, and half their widths.

    Most links of a reading are alike, so each layout of strands is worked out once.
    """
    alike: dict[tuple[Travel, ...], list[int]] = {}
    row_of = contents.links.row
    for key, mark in reading.links.items():
        if key in row_of:
            alike.setdefault(mark.travels, []).append(row_of[key])
    strands: dict[Stroke, Strands] = {}
    named = np.zeros(len(contents.links.ids), dtype=bool)
    reach = np.zeros(len(contents.links.ids))
    for travels, listed in alike.items():
        rows = np.array(listed, dtype=np.intp)
        laid, half = _layout(travels, reading, look, strands)
        named[rows], reach[rows] = True, half
        for strand, offset, direction in laid:
            strand.laid.append((rows, offset, direction))
    return strands, named, reach


Layout = tuple[list[tuple[Strands, float, int]], float]
"""The strands of a link with their offsets and directions, and half their width."""


def _layout(
    travels: tuple[Travel, ...], reading: Reading, look: Look, strands: dict[Stroke, Strands]
) -> Layout:
    """Set strands side by side across a link, centred on it."""
    strokes = list(_strokes(travels, reading, look))
    total = sum(stroke.width for stroke, _ in strokes) + 1.0 * max(len(strokes) - 1, 0)
    edge, laid = -total / 2, []
    for stroke, direction in strokes:
        strand = strands.setdefault(stroke, Strands())
        laid.append((strand, edge + stroke.width / 2, direction))
        edge += stroke.width + 1.0
    return laid, total / 2


def _strokes(
    travels: tuple[Travel, ...], reading: Reading, look: Look
) -> Iterator[tuple[Stroke, int]]:
    # Positive offsets lie right of tail-to-head (y points down), so -1 comes first.
    for travel in sorted(travels, key=lambda travel: travel.direction):
        for stroke in _strokes_of(travel, reading, look):
            yield stroke, travel.direction


def _strokes_of(travel: Travel, reading: Reading, look: Look) -> Iterator[Stroke]:
    if reading.kind == "load":
        yield _load_stroke(travel.share)
        return
    dash, hollow = DASHES.get(travel.role, ()), travel.role in _HOLLOW
    role_colour = {
        "path": look.path,
        "way back": look.way_back,
        "before": look.before,
        "after": look.after,
    }.get(travel.role)
    if role_colour is not None:
        yield Stroke(role_colour, round(2.2 + 2.0 * min(travel.share, 1.0), 1), dash, hollow)
        return
    colours = [look.first_hops[reading.first_hops[i].colour % 7] for i in travel.letters]
    width = {0: 3.4, 1: 4.0, 2: 3.0}.get(len(colours), 2.4)
    for colour in colours or [look.ink]:
        yield Stroke(colour, width, dash, hollow)


def _load_stroke(share: float) -> Stroke:
    held = min(max(share, 0.0), 1.0)
    step = round(held * _RAMP_STEPS) / _RAMP_STEPS
    return Stroke(cividis(step), round(1.6 + 5.4 * step, 1), edge=2.2 if share > 1 else 0.8)
