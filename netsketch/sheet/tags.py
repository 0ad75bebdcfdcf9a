"""Cost tags: what stands on each link, and where it fits without touching a plate."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from netsketch.readings.reading import Reading
from netsketch.sheet.contents import Contents, Flags, Floats, Links, Rows
from netsketch.sheet.lettering import Lettering
from netsketch.sheet.lines import Lines

TAG_HEIGHT = 16.0
_MIDDLE, _AT_TAIL, _AT_HEAD = 0, -1, 1
_CLEAR = 5.0
"""Between a tag and the plate it is nearest to."""
GAP = 11.0
"""Half the gap in a link that is down."""
_BAND_ROOM = 8.0


@dataclass(slots=True)
class Tags:
    """One row for each tag. ``spot``: 0 the middle, -1 near the tail, 1 near the head."""

    link: Rows
    spot: Rows
    width: Floats
    texts: list[str]
    tried: Flags


def tags_of(contents: Contents, lettering: Lettering, reading: Reading | None) -> Tags:
    """Return a tag for each link, or two where its directions differ in cost."""
    rows, spots, texts, tried = [], [], [], []
    marks = reading.links if reading else {}
    for row, key in enumerate(contents.links.ids):
        mark = marks.get(key)
        if mark is not None and mark.text:
            told = [(_MIDDLE, mark.text, bool(contents.links.tried[row]))]
        else:
            told = list(_costs(contents, row))
        for spot, text, changed in told:
            rows.append(row)
            spots.append(spot)
            texts.append(text)
            tried.append(changed)
    fitted = [lettering.tag.fitted(text, 140.0) for text in texts]
    return Tags(
        link=np.array(rows, dtype=np.intp),
        spot=np.array(spots, dtype=np.intp),
        width=np.array([width + 8 for _, width in fitted], dtype=float),
        texts=[text for text, _ in fitted],
        tried=np.array(tried, dtype=bool),
    )


def _costs(contents: Contents, row: int) -> Iterator[tuple[int, str, bool]]:
    links, segment = contents.links, contents.nodes.segment
    cost, back = links.costs[row]
    old, old_back = links.planned.get(row, (cost, back))
    if segment[links.tail[row]]:
        yield _MIDDLE, _changed(old_back, back), old_back != back
    elif segment[links.head[row]] or (cost == back and old == old_back):
        yield _MIDDLE, _changed(old, cost), old != cost
    else:
        yield _AT_TAIL, _changed(old, cost), old != cost
        yield _AT_HEAD, _changed(old_back, back), old_back != back


def _changed(old: int, new: int) -> str:
    return str(new) if old == new else f"{old} → {new}"


def place_tags(tags: Tags, lines: Lines, links: Links) -> tuple[Floats, Flags]:
    """Return the rectangles (k, 4) of the tags, and which of them fit their link."""
    along, length = lines.along[tags.link], lines.length[tags.link]
    extent = np.abs(along[:, 0]) * tags.width + np.abs(along[:, 1]) * TAG_HEIGHT
    down = links.down[tags.link]
    stagger = links.lane[tags.link] * np.abs(along[:, 1]) * 20.0
    middle = np.where(down, length * 0.5 - GAP - 6 - extent / 2, length / 2 + stagger)
    near = extent / 2 + _CLEAR + _BAND_ROOM * np.abs(along[:, 1])
    at = np.select([tags.spot == _AT_TAIL, tags.spot == _AT_HEAD], [near, length - near], middle)
    centre = lines.points[tags.link, 1] + along * at[:, None]
    half = np.stack([tags.width / 2, np.full(len(at), TAG_HEIGHT / 2)], axis=1)
    share = np.where(down, length / 2 - GAP - 6, length) / np.where(tags.spot == 0, 1, 2)
    fits = share >= np.where(tags.spot == 0, extent + 2 * _CLEAR, near + extent / 2 + 2)
    return np.concatenate([centre - half, centre + half], axis=1), _both(tags, fits)


def _both(tags: Tags, fits: Flags) -> Flags:
    """A pair of tags shows only together: one alone would read as both directions."""
    if len(fits) < 2:
        return fits
    pair = np.flatnonzero(tags.spot == _AT_TAIL)
    fits[pair] = fits[pair + 1] = fits[pair] & fits[pair + 1]
    return fits
