"""How everyone reaches one router or segment: the sink tree and what it carries."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
import numpy.typing as npt

from netsketch.analysis.table import RouteRow
from netsketch.model import Demand
from netsketch.routing import NextHop, Sink


def inward_table(sink: Sink) -> list[RouteRow]:
    """Return a row for every router but the target itself, sorted by id: ``to`` names the
    router the row is about, its cost, hops, delay and next hops are those of its way to
    the target."""
    s = sink.network.structure
    hops, least, most = _along(sink)
    rows = []
    for v in range(s.routers):
        if v == sink.target:
            continue
        cut_off = int(sink.row[v]) == sink.unreached
        known = not cut_off and not np.isnan(least[v])
        rows.append(
            RouteRow(
                s.vertex_ids[v],
                "router",
                None if cut_off else int(sink.row[v]),
                None if cut_off else int(hops[v]),
                (float(least[v]), float(most[v])) if known else None,
                next_hops(sink, v),
            )
        )
    return sorted(rows, key=lambda row: row.to)


def next_hops(sink: Sink, vertex: int) -> tuple[NextHop, ...]:
    """Return the next hops of router ``vertex`` towards the sink's target."""
    s = sink.network.structure
    found: dict[NextHop, None] = {}
    for a in sink.arcs[sink.ptr[vertex] : sink.ptr[vertex + 1]]:
        link, head = s.link_ids[s.link[a]], int(s.head[a])
        if head < s.routers:
            found[NextHop(link, s.vertex_ids[head])] = None
        elif head == sink.target:
            found[NextHop(link, None)] = None
        else:
            for b in sink.arcs[sink.ptr[head] : sink.ptr[head + 1]]:
                found[NextHop(link, s.vertex_ids[s.head[b]])] = None
    return tuple(found)


def _along(
    sink: Sink,
) -> tuple[npt.NDArray[np.int64], npt.NDArray[np.float64], npt.NDArray[np.float64]]:
    """Return least hops, least delay and most delay to the target for every vertex (V,)."""
    s, delay = sink.network.structure, sink.network.delay
    hops = np.full(s.vertices, np.iinfo(np.int64).max, np.int64)
    least, most = np.full(s.vertices, np.inf), np.full(s.vertices, -np.inf)
    hops[sink.target] = 0
    least[sink.target] = most[sink.target] = 0.0
    for u in sink.order[::-1]:
        step = 1 if u < s.routers else 0
        for a in sink.arcs[sink.ptr[u] : sink.ptr[u + 1]]:
            v, on_link = s.head[a], delay[s.link[a]]
            hops[u] = min(hops[u], hops[v] + step)
            least[u] = np.minimum(least[u], least[v] + on_link)  # NaN spreads
            most[u] = np.maximum(most[u], most[v] + on_link)
    return hops, least, most


def demand_on_arcs(sink: Sink, demands: Iterable[Demand]) -> npt.NDArray[np.float64]:
    """Return the Mbit/s of demands to the target on each arc (A,)."""
    s = sink.network.structure
    amount = np.zeros(s.vertices)
    for demand in demands:
        if s.vertex_of[demand.target] == sink.target:
            amount[s.vertex_of[demand.source]] += demand.mbps
    return sink.pour(amount)
