"""Where imported nodes stand: places of a drawing, or of the globe, put on the sheet.

On the sheet y grows downwards. So do ``x``/``y`` and GML's ``graphics``; ``pos`` and
latitudes grow upwards and are turned over.
"""

from __future__ import annotations

import math
import re
from typing import Final

from netsketch.formats.attributes import Found, is_number, number, text

Point = tuple[int | float, int | float]

SPACING: Final = 260
"""Side of the square that each router gets when places are spread over the sheet."""

KINDS: Final = ("x and y", "graphics", "pos", "longitude and latitude")


def place(nodes: list[Found]) -> tuple[list[Point | None], str]:
    """Return a place for each node, ``None`` where it has none, and the kind used: the one
    of :data:`KINDS` that most nodes have, the earlier one when two are even."""
    found = {kind: [_READERS[kind](node) for node in nodes] for kind in KINDS}
    counts = {kind: sum(p is not None for p in points) for kind, points in found.items()}
    best = max(KINDS, key=lambda kind: (counts[kind], -KINDS.index(kind)))
    if not counts[best]:
        return found[best], ""
    points = found[best]
    if best == "longitude and latitude":
        points = _flattened(points)
    if best in ("pos", "longitude and latitude"):
        points = _spread([p and (p[0], -p[1]) for p in points])
    return points, best


def _pair(x: object, y: object) -> Point | None:
    x, y = number(x), number(y)
    return (x, y) if is_number(x) and is_number(y) else None  # type: ignore[return-value]


def _xy(node: Found) -> Point | None:
    return _pair(node.get("x"), node.get("y"))


def _graphics(node: Found) -> Point | None:
    graphics = node.get("graphics")
    return _pair(graphics.get("x"), graphics.get("y")) if isinstance(graphics, dict) else None


def _pos(node: Found) -> Point | None:
    pos = node.get("pos")
    if isinstance(pos, str):
        pos = re.split(r"[\s,;]+", pos.strip(" ()[]!"))
    return _pair(*pos[:2]) if isinstance(pos, list | tuple) and len(pos) in (2, 3) else None


def _globe(node: Found) -> Point | None:
    return _pair(node.get("longitude", "lon", "lng", "long"), node.get("latitude", "lat"))


_READERS: Final = dict(zip(KINDS, (_xy, _graphics, _pos, _globe), strict=True))


def _flattened(points: list[Point | None]) -> list[Point | None]:
    """Shrink longitudes by the cosine of the middle latitude, so that distances are about
    right in both directions (equirectangular projection)."""
    latitudes = [p[1] for p in points if p]
    middle = (min(latitudes) + max(latitudes)) / 2
    factor = max(0.1, math.cos(math.radians(min(abs(middle), 90))))
    return [p and (p[0] * factor, p[1]) for p in points]


def _spread(points: list[Point | None]) -> list[Point | None]:
    """Scale places up until there is room for plates; leave them when there is."""
    known = [p for p in points if p]
    width = max(p[0] for p in known) - min(p[0] for p in known)
    height = max(p[1] for p in known) - min(p[1] for p in known)
    side = max(math.sqrt(width * height), max(width, height) / 4)
    wanted = SPACING * math.sqrt(len(known))
    if side == 0 or side >= wanted / 2:
        return points
    factor = wanted / side
    return [p and (round(p[0] * factor), round(p[1] * factor)) for p in points]


def name_of(value: object) -> str:
    """Return a name on one line."""
    return " ".join(text(value).split())
