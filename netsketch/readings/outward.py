"""The Outward and Effect readings: the source tree of a router, alone or against the plan."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from netsketch.readings.first_hops import FirstHops
from netsketch.readings.reading import LinkMark, PlateMark, PlateRole, Reading, Travel, TravelRole
from netsketch.routing import Routes


def outward(routes: Routes, label: str) -> Reading:
    """Return the source tree of one router: every equal-cost path to every destination."""
    hops = FirstHops(routes)
    return Reading(
        kind="outward",
        focus=(_id(routes),),
        title=f"Routes from {label}",
        links=_marks(_travels(routes, hops, routes.tight, "tree")),
        plates=_plates(routes, hops, {}),
        first_hops=hops.all,
    )


def effect(before: Routes, after: Routes, changed: Mapping[str, str], label: str) -> Reading:
    """Return what the trial does to one router: its source tree in the trial, the links
    its traffic leaves ("before") and those it moves on to ("after"), and ``changed``
    destinations (id -> "moved", "cut off", "restored")."""
    hops = FirstHops(after, before)
    marks = _travels(after, hops, after.tight & before.tight, "tree")
    for extra in (
        _travels(before, hops, before.tight & ~after.tight, "before"),
        _travels(after, hops, after.tight & ~before.tight, "after"),
    ):
        for link, travels in extra.items():
            marks.setdefault(link, []).extend(travels)
    return Reading(
        kind="effect",
        focus=(_id(after),),
        title=f"Effect of the trial on {label}",
        links=_marks(marks),
        plates=_plates(after, hops, changed),
        first_hops=hops.all,
    )


def _id(routes: Routes) -> str:
    return routes.network.structure.vertex_ids[routes.source]


def _travels(
    routes: Routes, hops: FirstHops, arcs: np.ndarray, role: TravelRole
) -> dict[str, list[Travel]]:
    s = routes.network.structure
    found: dict[str, list[Travel]] = {}
    for a in np.flatnonzero(arcs):
        k = s.link[a]
        direction = 1 if s.arcs[k, 0] == a else -1
        travel = Travel(direction, role, hops.letters(routes.arc_masks[a]))
        found.setdefault(s.link_ids[k], []).append(travel)
    return found


def _marks(travels: Mapping[str, list[Travel]]) -> dict[str, LinkMark]:
    return {link: LinkMark(tuple(each)) for link, each in travels.items()}


def _plates(routes: Routes, hops: FirstHops, changed: Mapping[str, str]) -> dict[str, PlateMark]:
    plates = {}
    for v, key in enumerate(routes.network.structure.vertex_ids):
        cost = routes.cost(v)
        role: PlateRole = "cut off" if cost is None else "reached"
        if v == routes.source:
            role = "focus"
        moved = changed.get(key) in ("moved", "restored")
        plates[key] = PlateMark(role, hops.letters(routes.masks[v]), cost, moved)
    return plates
