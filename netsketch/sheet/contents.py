"""What is on the sheet: a plan as arrays, one row for each node and link.

Lengths are sheet units: pixels at scale 1. The ids are found from the rows and the rows
from the ids.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from netsketch.model import Plan

Floats = NDArray[np.float64]
Flags = NDArray[np.bool_]
Rows = NDArray[np.intp]
Costs = NDArray[np.int64]


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
    """Links. ``costs`` (m, 2), out and back, as in the trial; ``planned`` the plan's.
    ``lane``: 0, or the place among parallel links counted from the middle. Links that only
    the trial has come last; they cannot be taken hold of."""

    ids: list[str]
    row: dict[str, int]
    tail: Rows
    head: Rows
    lane: Floats
    width: Floats
    down: Flags
    tried: Flags
    costs: Costs
    planned: Costs
    added: Flags
    """Only the trial has the link."""


@dataclass(slots=True)
class Contents:
    """Everything on the sheet. ``unit``: sheet units for one unit of the plan's places."""

    nodes: Nodes
    links: Links
    unit: float

    def lies_like(self, other: Contents) -> bool:
        """Return whether plates and lines lie where those of ``other`` do."""
        a, b = self.nodes, other.nodes
        places = [(a.x, b.x), (a.y, b.y), (a.sizes, b.sizes), (a.segment, b.segment)]
        c, d = self.links, other.links
        ends = [(c.tail, d.tail), (c.head, d.head), (c.lane, d.lane)]
        return all(np.array_equal(one, two) for one, two in (*places, *ends))


def nothing(unit: float) -> Contents:
    """Return the contents of an empty plan."""
    none, flags, rows = np.empty(0), np.empty(0, dtype=bool), np.empty(0, dtype=np.intp)
    pairs, costs = np.empty((0, 2)), np.empty((0, 2), dtype=np.int64)
    nodes = Nodes([], {}, [], [], none, none, pairs, flags, flags, flags, flags)
    links = Links([], {}, rows, rows, none, none, flags, flags, costs, costs, flags)
    return Contents(nodes, links, unit)


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
