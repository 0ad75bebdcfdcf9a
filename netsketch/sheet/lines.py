"""Where plates, rails and links lie: numpy geometry from the rows of the contents."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from netsketch.sheet.contents import Contents, Flags, Floats, Links, Nodes

BAR = 4.0
"""Half the thickness of a rail."""
_REACH = 700.0
"""A rail stretches this far for a member; a link from farther bends before its end."""
_LANE = 17.0
_KNEE = 22.0


@dataclass(slots=True)
class Lines:
    """Geometry of one moment.

    ``boxes`` (n, 4): left, top, right, bottom of each plate, or of a rail's label.
    ``bars`` (n, 4): the rail itself; for a router the same as its box.
    ``points`` (m, 4, 2): each link from tail to head; its body, which carries tags and
    chevrons, lies between the middle two, and the outer two equal them on a straight link.
    ``along`` and ``across`` (m, 2): unit vectors of the body; ``length`` (m,): its length.
    """

    boxes: Floats
    bars: Floats
    points: Floats
    along: Floats
    across: Floats
    length: Floats
    bent: Flags
    extents: Floats
    """(m, 4): left, top, right, bottom of each link."""


def lines_of(contents: Contents) -> Lines:
    """Return where everything lies."""
    nodes, links = contents.nodes, contents.links
    boxes = _boxes(nodes)
    bars = boxes.copy()
    _lay_rails(nodes, links, boxes, bars)
    points = _straight(nodes, links)
    for row in np.flatnonzero(nodes.segment[links.tail] | nodes.segment[links.head]):
        points[row] = _drop(nodes, links, bars, int(row))
    body = points[:, 2] - points[:, 1]
    length = np.hypot(body[:, 0], body[:, 1])
    along = body / np.maximum(length, 1e-9)[:, None]
    return Lines(
        boxes=boxes,
        bars=bars,
        points=points,
        along=along,
        across=np.stack([-along[:, 1], along[:, 0]], axis=1),
        length=length,
        bent=_differ(points[:, 0], points[:, 1]) | _differ(points[:, 2], points[:, 3]),
        extents=_extents(points),
    )


def _boxes(nodes: Nodes) -> Floats:
    half = nodes.sizes / 2
    return np.stack(
        [nodes.x - half[:, 0], nodes.y - half[:, 1], nodes.x + half[:, 0], nodes.y + half[:, 1]],
        axis=1,
    )


def _lay_rails(nodes: Nodes, links: Links, boxes: Floats, bars: Floats) -> None:
    """Stretch each rail over its members and set its label behind its right end."""
    for rail in np.flatnonzero(nodes.segment):
        x, y = nodes.x[rail], nodes.y[rail]
        members = np.concatenate([links.head[links.tail == rail], links.tail[links.head == rail]])
        beside = np.abs(nodes.y[members] - y) < nodes.sizes[members, 1] / 2 + 14
        near = members[(np.abs(nodes.x[members] - x) <= _REACH) & ~beside]
        left = min([x - 40, *(nodes.x[near] - 24)])
        right = max([x + 40, *(nodes.x[near] + 24)])
        bars[rail] = left, y - BAR, right, y + BAR
        width, height = nodes.sizes[rail] - (12, 8)
        boxes[rail] = right + 6, y - height / 2, right + 6 + width, y + height / 2


def _straight(nodes: Nodes, links: Links) -> Floats:
    """Lines from plate to plate; parallel ones are fanned apart by their lanes."""
    tail = np.stack([nodes.x[links.tail], nodes.y[links.tail]], axis=1)
    head = np.stack([nodes.x[links.head], nodes.y[links.head]], axis=1)
    span = head - tail
    far = np.maximum(np.hypot(span[:, 0], span[:, 1]), 1e-9)
    along = span / far[:, None]
    across = np.stack([-along[:, 1], along[:, 0]], axis=1)
    first, second = _leave(nodes.sizes[links.tail] / 2, along, across, links.lane * _LANE)
    fourth, third = _leave(nodes.sizes[links.head] / 2, -along, across, links.lane * _LANE)
    points = np.stack([tail + first, tail + second, head + third, head + fourth], axis=1)
    body = (points[:, 2] - points[:, 1]) * along
    hidden = body[:, 0] + body[:, 1] <= 0
    points[hidden] = ((tail + head) / 2)[hidden, None, :]
    return points


def _leave(half: Floats, along: Floats, across: Floats, aside: Floats) -> tuple[Floats, Floats]:
    """Return where a line leaves a box around the origin, and its knee: the same point
    unless its lane lies farther out than the box is wide."""
    room = _lesser(half / np.maximum(np.abs(across), 1e-9))
    inner = np.clip(aside, -0.75 * room, 0.75 * room)
    start = across * inner[:, None]
    reach = (half - start * np.sign(along)) / np.maximum(np.abs(along), 1e-9)
    out = start + along * _lesser(reach)[:, None]
    knee = out + across * (aside - inner)[:, None] + along * (np.abs(aside - inner) * 0.9)[:, None]
    return out, knee


def _differ(one: Floats, other: Floats) -> Flags:
    return np.asarray((one != other)[:, 0] | (one != other)[:, 1])


def _extents(points: Floats) -> Floats:
    corners = points.transpose(1, 0, 2).copy()
    return np.concatenate([corners.min(axis=0), corners.max(axis=0)], axis=1)


def _lesser(pairs: Floats) -> Floats:
    """Return the lesser of each pair (k, 2); numpy's own ``min`` is slow along so few."""
    return np.minimum(pairs[:, 0], pairs[:, 1])


def _drop(nodes: Nodes, links: Links, bars: Floats, row: int) -> Floats:
    """Return the points of a link on to a rail: a drop at right angles where the rail
    spans the router, else a line that bends into one."""
    tail, head = int(links.tail[row]), int(links.head[row])
    rail, router = (tail, head) if nodes.segment[tail] else (head, tail)
    x, y = nodes.x[router], nodes.y[router]
    half = nodes.sizes[router] / 2
    left, top, right, bottom = bars[rail]
    middle, aside = (top + bottom) / 2, links.lane[row] * 12
    side = np.sign(y - middle)
    if abs(y - middle) < half[1] + 14:
        end = np.array([np.clip(x, left, right), middle])
        start = end if left < x < right else np.array([x + half[0] * np.sign(end[0] - x), middle])
        points = [start, start, end, end]
    elif left <= x + aside <= right:
        start = np.array([x + aside, y - side * half[1]])
        end = np.array([x + aside, middle + side * BAR])
        points = [start, start, end, end]
    else:
        at = np.clip(x, left + 8, right - 8) + aside
        end, knee = np.array([at, middle]), np.array([at, middle + side * _KNEE])
        span = knee - (x, y)
        start = np.array([x, y]) + span * (half / np.maximum(np.abs(span), 1e-9)).min()
        points = [start, start, knee, end]
    return np.array(points[::-1] if rail == tail else points)
