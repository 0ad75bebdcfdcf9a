"""Traffic towards one destination, split equally at every router.

Each router splits over its next hops, a (link, router) pair each (RFC 2991, 2992
practice); a segment hands on what came for each router beyond it, equally over parallel
arcs to it. Shares of a pair, sink trees and loads are all this one loop.
"""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from netsketch.routing import kernels
from netsketch.routing.allpairs import unreached
from netsketch.routing.kernels import Array, compiled
from netsketch.routing.network import BLOCKED, Distances, Network

Floats = npt.NDArray[np.float64]


def distances_to(network: Network, target: int) -> Distances:
    """Return the distance from every vertex (V,) to vertex ``target``: Dijkstra's
    algorithm against the arcs. A drained router is at its own distance, but nobody else
    is through it, unless to a segment that is its alone."""
    s = network.structure
    weight = network.weight[s.in_arc]
    transit = np.where(network.closed_towards(target)[s.head[s.in_arc]], BLOCKED, weight)
    row = np.empty(s.vertices, network.distance_type)
    kernels.source_row(
        s.in_ptr, s.tail[s.in_arc], weight, transit, unreached(row.dtype.type), target, row,
        np.empty(len(s.head) + 1, np.int64),
    )  # fmt: skip
    return row


@compiled
def sink_arcs(
    indptr: Array,
    head: Array,
    weight: Array,
    closed: Array,
    target: int,
    row: Array,
    unreached: int,
    ptr: Array,
    arcs: Array,
    order: Array,
) -> int:
    """Find the arcs on shortest paths to ``target`` and an order in which all go forward.

    ``row`` (V,) is the distance to the target; ``arcs[ptr[u] : ptr[u + 1]]`` become the
    arcs out of ``u`` that lead there; all vertices that reach it go into ``order`` (V,),
    their number is returned. O(arcs).
    """
    vertices = len(indptr) - 1
    waiting = np.zeros(vertices, np.int32)
    found = 0
    for u in range(vertices):
        ptr[u] = found
        d = np.int64(row[u])
        if d == unreached or u == target:
            continue
        for a in range(indptr[u], indptr[u + 1]):
            v = head[a]
            w = weight[a]
            if w == BLOCKED or row[v] == unreached or (closed[v] and v != target):
                continue
            if d == w + np.int64(row[v]):
                arcs[found] = a
                found += 1
                waiting[v] += 1
    ptr[vertices] = found
    reached = 0
    for u in range(vertices):
        if row[u] != unreached and waiting[u] == 0:
            order[reached] = u
            reached += 1
    done = 0
    while done < reached:
        u = order[done]
        done += 1
        for i in range(ptr[u], ptr[u + 1]):
            v = head[arcs[i]]
            waiting[v] -= 1
            if waiting[v] == 0:
                order[reached] = v
                reached += 1
    return reached


@compiled
def pour(
    head: Array,
    routers: int,
    target: int,
    ptr: Array,
    arcs: Array,
    order: Array,
    reached: int,
    amount: Array,
    flow: Array,
) -> None:
    """Send ``amount`` (V,), what each vertex has for the target, along the arcs of
    :func:`sink_arcs` and add it to ``flow`` (A,). ``amount`` is left with what passed."""
    for i in range(reached):
        u = order[i]
        if amount[u] == 0.0 or u == target:
            continue
        first, last = ptr[u], ptr[u + 1]
        parts = 0.0
        for j in range(first, last):
            parts += next_hop_count(arcs[j], j, u, head, routers, target, ptr, arcs, first, last)
        for j in range(first, last):
            a = arcs[j]
            part = next_hop_count(a, j, u, head, routers, target, ptr, arcs, first, last)
            share = amount[u] * part / parts
            flow[a] += share
            amount[head[a]] += share


@compiled
def next_hop_count(
    a: int,
    j: int,
    u: int,
    head: Array,
    routers: int,
    target: int,
    ptr: Array,
    arcs: Array,
    first: int,
    last: int,
) -> float:
    """Return how many next hops of ``u`` the arc ``a`` stands for: the routers beyond a
    segment, else one; out of a segment one for each router, shared by parallel arcs.
    Arcs to one head stand side by side in ``arcs[first:last]``."""
    v = head[a]
    if u >= routers:
        beside = 0
        for k in range(first, last):
            if head[arcs[k]] == v:
                beside += 1
        return 1.0 / beside
    if v < routers or v == target:
        return 1.0
    count = 0
    before = -1
    for k in range(ptr[v], ptr[v + 1]):
        if head[arcs[k]] != before:
            before = head[arcs[k]]
            count += 1
    return float(count)


class Sink:
    """Everything on its way to vertex ``target``: the arcs that lead there from every
    vertex, and what traffic they carry. ``row`` (V,) is the distance to it, computed
    where not given."""

    def __init__(self, network: Network, target: int, row: Distances | None = None) -> None:
        self.network, self.target = network, target
        self.row = distances_to(network, target) if row is None else row
        self.unreached = unreached(self.row.dtype.type)
        s = network.structure
        self.ptr = np.empty(s.vertices + 1, np.int32)
        arcs, order = np.empty(len(s.head), np.int32), np.empty(s.vertices, np.int32)
        reached = sink_arcs(
            s.indptr, s.head, network.weight, network.closed_towards(target), target, self.row,
            self.unreached, self.ptr, arcs, order,
        )  # fmt: skip
        self.arcs, self.order = arcs[: self.ptr[-1]], order[:reached]

    def pour(self, amount: Floats) -> Floats:
        """Return what each arc (A,) carries when every vertex has ``amount`` (V,) for the
        target. What cannot get there is carried nowhere."""
        s = self.network.structure
        flow = np.zeros(len(s.head))
        passing = np.where(self.row == self.unreached, 0.0, amount).astype(np.float64)
        pour(
            s.head, s.routers, self.target, self.ptr, self.arcs, self.order, len(self.order),
            passing, flow,
        )  # fmt: skip
        return flow

    def sources_on_arcs(self) -> npt.NDArray[np.int64]:
        """Return on how many routers' paths to the target each arc (A,) lies, ties
        included: a set of routers for every vertex, handed on along the arcs."""
        s = self.network.structure
        counts = np.zeros(len(s.head), np.int64)
        sets = np.zeros((s.vertices, (s.routers + 63) // 64), np.uint64)
        routers = np.arange(s.routers)
        sets[routers, routers // 64] = np.uint64(1) << (routers % 64).astype(np.uint64)
        for u in self.order:
            here = int(np.bitwise_count(sets[u]).sum())
            for arc in self.arcs[self.ptr[u] : self.ptr[u + 1]]:
                counts[arc] = here
                sets[s.head[arc]] |= sets[u]
        return counts
