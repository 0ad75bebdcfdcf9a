"""The forwarding table of one router."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from netsketch.analysis.ledger import OUTCOMES, UNCHANGED, outcomes_of
from netsketch.routing import NextHop, Routes


@dataclass(frozen=True, slots=True)
class RouteRow:
    """The route to one destination. ``cost`` is ``None`` where it is cut off; ``delay_ms``
    (least, most) also where a delay on the way is not known."""

    to: str
    kind: str
    cost: int | None
    hops: int | None
    delay_ms: tuple[float, float] | None
    next_hops: tuple[NextHop, ...]


def forwarding_table(routes: Routes) -> list[RouteRow]:
    """Return a row for every other router and every segment, sorted by id."""
    s = routes.network.structure
    rows = [
        RouteRow(
            s.vertex_ids[v],
            "router" if v < s.routers else "segment",
            routes.cost(v),
            routes.hops(v),
            routes.delay_ms(v),
            routes.next_hops(v),
        )
        for v in range(s.vertices)
        if v != routes.source
    ]
    return sorted(rows, key=lambda row: row.to)


def changed_destinations(before: Routes, after: Routes) -> dict[str, str]:
    """Return the destinations of one router whose route changes, each with its outcome
    ("moved", "cut off", "restored"): the ledger's rows for this source, and segments."""
    source = np.array([before.source], np.int32)
    outcomes = outcomes_of(
        before.network, after.network, source, before.row[None, :], after.row[None, :]
    )[0]
    ids = before.network.structure.vertex_ids
    return {ids[v]: OUTCOMES[int(outcomes[v])] for v in np.flatnonzero(outcomes != UNCHANGED)}
