"""Reconvergence loops: where packets can circle while routers take up a change in any
order (RFC 5715 describes the problem).

For each destination every router may already use its new next hops or still its old ones.
A loop can form exactly where the union of old and new next hops has a cycle.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

import networkx as nx
import numpy as np

from netsketch.routing import Cancelled, Network, Sink, never


@dataclass(frozen=True, slots=True)
class Loop:
    """Routers among which packets to ``target`` can circle."""

    target: str
    members: tuple[str, ...]


def loops(before: Network, after: Network, cancelled: Callable[[], bool] = never) -> Iterator[Loop]:
    """Yield the loops that can form on the way from ``before`` to ``after``, two networks
    on one structure, for every router as destination. Raises ``ValueError`` for two
    structures and :class:`~netsketch.routing.Cancelled`."""
    s = before.structure
    if s is not after.structure:
        raise ValueError("the two networks have different structures")
    for target in range(s.routers):
        if cancelled():
            raise Cancelled
        for members in loops_to(before, after, target):
            yield Loop(s.vertex_ids[target], tuple(s.vertex_ids[v] for v in members))


def loops_to(before: Network, after: Network, target: int) -> list[list[int]]:
    """Return the sets of routers among which packets to vertex ``target`` can circle.

    The graph is of routers: what a router hands over a segment goes to its next hop there,
    not to whoever else uses the segment.
    """
    old, new = Sink(before, target), Sink(after, target)
    if np.array_equal(old.arcs, new.arcs):
        return []
    graph = nx.DiGraph()
    for sink in (old, new):
        graph.add_edges_from(_handovers(sink))
    return sorted(sorted(part) for part in nx.strongly_connected_components(graph) if len(part) > 1)


def _handovers(sink: Sink) -> Iterator[tuple[int, int]]:
    """Yield (router, next hop router) for everything on its way to the target."""
    s = sink.network.structure
    for u in range(s.routers):
        for a in sink.arcs[sink.ptr[u] : sink.ptr[u + 1]]:
            head = int(s.head[a])
            if head < s.routers:
                yield u, head
            else:
                for b in sink.arcs[sink.ptr[head] : sink.ptr[head + 1]]:
                    yield u, int(s.head[b])
