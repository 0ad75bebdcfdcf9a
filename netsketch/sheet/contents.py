"""What is on the sheet: a plan as arrays, one row for each node and link.

Built anew when the plan changes, except that moves only change ``x`` and ``y``. Lengths
are sheet units: pixels at scale 1. The ids are found from the rows and the rows from
the ids.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from netsketch.model import Drained, Link, LinkCost, LinkState, NodeState, Plan, Segment
from netsketch.sheet.lettering import Lettering

Floats = NDArray[np.float64]
Flags = NDArray[np.bool_]
Rows = NDArray[np.intp]

WIDEST_NAME = 190.0
PLATE_HEIGHT, PLATE_HEIGHT_WITH_SITE = 30.0, 44.0
_CAPACITY_WIDTHS = ((100.0, 1.0), (1_000.0, 1.4), (10_000.0, 2.1), (100_000.0, 3.0))


@dataclass(slots=True)
class Nodes:
    """Routers and segments. ``sizes`` (n, 2): width and height of plates and labels."""

    ids: list[str]
    row: dict[str, int]
    names: list[str]
    sites: list[str]
    x: Floats
    y: Floats
    sizes: Floats
    segment: Flags
    down: Flags
    drained: Flags
    tried: Flags
    """The trial changes the node."""


@dataclass(slots=True)
class Links:
    """Links. ``lane``: 0, or the place among parallel links counted from the middle.
    ``costs`` as in the trial; ``planned`` the plan's where the trial differs."""

    ids: list[str]
    row: dict[str, int]
    tail: Rows
    head: Rows
    lane: Floats
    width: Floats
    down: Flags
    tried: Flags
    costs: list[tuple[int, int]]
    planned: dict[int, tuple[int, int]]


@dataclass(slots=True)
class Contents:
    """Everything on the sheet. ``unit``: sheet units for one unit of the plan's places."""

    nodes: Nodes
    links: Links
    unit: float


def contents_of(plan: Plan, lettering: Lettering, unit: float) -> Contents:
    """Return the rows for ``plan``. O(nodes + links)."""
    nodes = _nodes_of(plan, lettering, unit)
    return Contents(nodes, _links_of(plan, nodes), unit)


def unit_for(plan: Plan) -> float:
    """Return how many sheet units one unit of the plan's places should take.

    1 for places drawn here or in pixels; for places in degrees or metres the scale that
    makes the median link 180 units long.
    """
    spans = [
        math.hypot(a.x - b.x, a.y - b.y)
        for a, b in ((plan.nodes[link.source], plan.nodes[link.target]) for link in plan.links)
        if a.x is not None and a.y is not None and b.x is not None and b.y is not None
    ]
    median = float(np.median(spans)) if spans else 0.0
    return 180.0 / median if median > 0 and not 60 <= median <= 1500 else 1.0


def _nodes_of(plan: Plan, lettering: Lettering, unit: float) -> Nodes:
    items = list(plan.nodes)
    names, sites, sizes = [], [], np.empty((len(items), 2))
    for row, item in enumerate(items):
        name, name_width = lettering.name.fitted(item.label, WIDEST_NAME)
        site, site_width = lettering.site.fitted(item.site, WIDEST_NAME)
        names.append(name)
        sites.append(site)
        sizes[row, 0] = max(name_width, site_width, 28.0) + 24.0
        sizes[row, 1] = PLATE_HEIGHT_WITH_SITE if site else PLATE_HEIGHT
    places = [_place(item.x, item.y, row, unit) for row, item in enumerate(items)]
    x, y = np.array(places, dtype=float).reshape(-1, 2).T.copy()
    down = {item.id: not item.up for item in items}
    drained = {item.id: getattr(item, "drained", False) for item in items}
    tried = dict.fromkeys(down, False)
    for change in plan.trial:
        if isinstance(change, NodeState):
            down[change.node], tried[change.node] = not change.up, True
        elif isinstance(change, Drained):
            drained[change.node], tried[change.node] = change.drained, True
    return Nodes(
        ids=list(down),
        row={key: row for row, key in enumerate(down)},
        names=names,
        sites=sites,
        x=x,
        y=y,
        sizes=sizes,
        segment=np.array([isinstance(item, Segment) for item in items], dtype=bool),
        down=np.array(list(down.values()), dtype=bool),
        drained=np.array(list(drained.values()), dtype=bool),
        tried=np.array(list(tried.values()), dtype=bool),
    )


def _place(x: float | None, y: float | None, row: int, unit: float) -> tuple[float, float]:
    """A node without a place stands on a grid until it is given one."""
    if x is None or y is None:
        return 180.0 * (row % 12), 120.0 * (row // 12)
    return x * unit, y * unit


def _links_of(plan: Plan, nodes: Nodes) -> Links:
    items = list(plan.links)
    rows = {item.id: row for row, item in enumerate(items)}
    down = np.array([not item.up for item in items], dtype=bool)
    tried = np.zeros(len(items), dtype=bool)
    costs = [(item.cost, item.cost_back) for item in items]
    planned: dict[int, tuple[int, int]] = {}
    for change in plan.trial:
        if isinstance(change, LinkState):
            down[rows[change.link]], tried[rows[change.link]] = not change.up, True
        elif isinstance(change, LinkCost):
            row = rows[change.link]
            planned[row], costs[row] = costs[row], (change.cost, change.cost_back)
            tried[row] = True
    return Links(
        ids=list(rows),
        row=rows,
        tail=np.array([nodes.row[item.source] for item in items], dtype=np.intp),
        head=np.array([nodes.row[item.target] for item in items], dtype=np.intp),
        lane=_lanes(items),
        width=np.array([_width(item.capacity_mbps) for item in items], dtype=float),
        down=down,
        tried=tried,
        costs=costs,
        planned=planned,
    )


def _width(capacity: float | None) -> float:
    if capacity is None:
        return 1.4
    return next((width for limit, width in _CAPACITY_WIDTHS if capacity <= limit), 3.8)


def _lanes(links: list[Link]) -> Floats:
    """Give parallel links places … -1, 0, 1 … (… -0.5, 0.5 … for an even number), on the
    same side whichever end is the source."""
    lanes = np.zeros(len(links))
    beside: dict[tuple[str, str], list[int]] = {}
    for row, link in enumerate(links):
        beside.setdefault((min(link.ends), max(link.ends)), []).append(row)
    for rows in beside.values():
        if len(rows) > 1:
            for place, row in enumerate(rows):
                side = 1 if links[row].source < links[row].target else -1
                lanes[row] = side * (place - (len(rows) - 1) / 2)
    return lanes
