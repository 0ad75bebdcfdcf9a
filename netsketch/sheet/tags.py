"""Cost tags: what stands on each link, and where it fits without touching a plate."""

from __future__ import annotations

import itertools
from dataclasses import dataclass

import numpy as np

from netsketch.readings.reading import Reading
from netsketch.sheet.contents import Contents, Flags, Floats, Rows
from netsketch.sheet.lettering import Lettering
from netsketch.sheet.lines import Lines

TAG_HEIGHT = 16.0
_MIDDLE, _AT_TAIL, _AT_HEAD = 0, -1, 1
_CLEAR = 5.0
"""Between a tag and the plate it is nearest to."""
GAP = 11.0
"""Half the gap in a link that is down."""
_BAND_ROOM = 14.0


@dataclass(slots=True)
class Tags:
    """One row for each tag. ``spot``: 0 the middle, -1 near the tail, 1 near the head."""

    link: Rows
    spot: Rows
    width: Floats
    texts: list[str]
    tried: Flags


def tags_of(
    contents: Contents, lettering: Lettering, reading: Reading | None, rows: Rows | None = None
) -> Tags:
    """Return a tag for each link, or two where its directions differ in cost; only for
    the links ``rows`` where these are given."""
    links = contents.links
    rows = np.arange(len(links.ids)) if rows is None else rows
    marks = reading.links if reading else {}
    one_way = contents.nodes.segment[links.tail[rows]].tolist()
    other_way = contents.nodes.segment[links.head[rows]].tolist()
    costs, planned = links.costs[rows].tolist(), links.planned[rows].tolist()
    found: list[tuple[int, int, str]] = []
    for row, *told in zip(rows.tolist(), costs, planned, one_way, other_way, strict=True):
        mark = marks.get(links.ids[row])
        if mark is not None and mark.text:
            found.append((row, _MIDDLE, mark.text))
        else:
            found += [(row, spot, text) for spot, text in _costs(*told)]
    fitted = [lettering.tag.fitted(text, 140.0) for _, _, text in found]
    link = np.array([row for row, _, _ in found], dtype=np.intp)
    return Tags(
        link=link,
        spot=np.array([spot for _, spot, _ in found], dtype=np.intp),
        width=np.array([width + 8 for _, width in fitted], dtype=float),
        texts=[text for text, _ in fitted],
        tried=links.tried[link],
    )


def retold(tags: Tags, source: Rows, fresh: Tags) -> Tags:
    """Return ``tags`` after links changed: ``source`` (m,) holds the row each link had, -1
    for those whose tags are the ``fresh`` ones."""
    now = np.full(max(tags.link.max(initial=-1), source.max(initial=-1)) + 1, -1, dtype=np.intp)
    kept_links = np.flatnonzero(source >= 0)
    now[source[kept_links]] = kept_links
    kept = now[tags.link] >= 0
    link = np.concatenate([now[tags.link[kept]], fresh.link])
    order = np.argsort(link, kind="stable")

    def merged(old: np.ndarray, new: np.ndarray) -> np.ndarray:
        return np.concatenate([old[kept], new])[order]

    texts = [*itertools.compress(tags.texts, kept.tolist()), *fresh.texts]
    return Tags(
        link=link[order],
        spot=merged(tags.spot, fresh.spot),
        width=merged(tags.width, fresh.width),
        texts=[texts[row] for row in order.tolist()],
        tried=merged(tags.tried, fresh.tried),
    )


def _costs(
    costs: list[int], planned: list[int], from_segment: bool, to_segment: bool
) -> list[tuple[int, str]]:
    """Return the spots and texts of a link's costs; leaving a segment costs nothing."""
    (cost, back), (old, old_back) = costs, planned
    if from_segment:
        return [(_MIDDLE, _changed(old_back, back))]
    if to_segment or (cost == back and old == old_back):
        return [(_MIDDLE, _changed(old, cost))]
    return [(_AT_TAIL, _changed(old, cost)), (_AT_HEAD, _changed(old_back, back))]


def _changed(old: int, new: int) -> str:
    return str(new) if old == new else f"{old} → {new}"


def place_tags(tags: Tags, lines: Lines, contents: Contents) -> tuple[Floats, Flags]:
    """Return the rectangles (k, 4) of the tags, and which of them fit their link.

    What the trial changes always shows.
    """
    links, rows = contents.links, tags.link
    along, length, down = lines.along[rows], lines.length[rows], links.down[rows]
    reach = (np.abs(along[:, 0]) * tags.width + np.abs(along[:, 1]) * TAG_HEIGHT) / 2 + 2
    from_tail = _nearest(tags, lines, contents, links.tail[rows], lines.points[rows, 1], along)
    from_head = _nearest(tags, lines, contents, links.head[rows], lines.points[rows, 2], -along)
    stagger = links.lane[tags.link] * np.abs(along[:, 1]) * 20.0
    middle = np.where(down, length / 2 - GAP - reach - 3, length / 2 + stagger)
    spots = [tags.spot == _AT_TAIL, tags.spot == _AT_HEAD]
    at = np.select(spots, [from_tail, length - from_head], middle)
    end = np.where(tags.spot == _MIDDLE, length, length / 2) - np.where(down, GAP, 0)
    fits = np.select(
        spots,
        [from_tail + reach <= end, from_head + reach <= end],
        (middle >= from_tail) & (length - middle >= from_head),
    )
    centre = lines.points[tags.link, 1] + along * at[:, None]
    half = np.stack([tags.width / 2, np.full(len(at), TAG_HEIGHT / 2)], axis=1)
    boxes = np.concatenate([centre - half, centre + half], axis=1)
    return boxes, _both(tags, fits) | tags.tried


def _nearest(
    tags: Tags, lines: Lines, contents: Contents, node: Rows, start: Floats, out: Floats
) -> Floats:
    """Return how far along its link a tag clears the plate that the link leaves at
    ``start`` in the direction ``out``: past the plate's side, or past its upper or lower
    edge and the band, whichever comes first. A knee is clear of everything."""
    boxes = lines.bars[node]
    room = np.stack([tags.width, np.full(len(node), TAG_HEIGHT)], axis=1) / 2 + _CLEAR
    ahead = np.where(out > 0, boxes[:, 2:] - start, start - boxes[:, :2])
    ahead[:, 1] += np.where((out[:, 1] > 0) & ~contents.nodes.segment[node], _BAND_ROOM, 0.0)
    clear = (np.maximum(ahead, 0) + room) / np.maximum(np.abs(out), 1e-6)
    touching = (start >= boxes[:, :2] - 1) & (start <= boxes[:, 2:] + 1)
    reach = np.abs(out) * room
    # numpy reduces rows of two slowly; column by column is several times faster
    nearest = np.minimum(clear[:, 0], clear[:, 1])
    return np.where(touching[:, 0] & touching[:, 1], nearest, reach[:, 0] + reach[:, 1])


def _both(tags: Tags, fits: Flags) -> Flags:
    """A pair of tags shows only together: one alone would read as both directions."""
    pair = np.flatnonzero(tags.spot == _AT_TAIL)
    fits[pair] = fits[pair + 1] = fits[pair] & fits[pair + 1]
    return fits
