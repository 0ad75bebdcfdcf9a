"""Reconvergence loops: where packets can circle while routers take up a change in any
order (RFC 5715 describes the problem).

For each destination every router may already use its new next hops or still its old ones.
A loop can form exactly where the union of old and new next hops has a cycle.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

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
    onward: dict[int, set[int]] = {}
    for sink in (old, new):
        for router, hop in _handovers(sink):
            onward.setdefault(router, set()).add(hop)
    return cycles(onward)


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


def cycles(onward: dict[int, set[int]]) -> list[list[int]]:
    """Return the sets of two or more vertices that reach each other, each sorted.

    What nothing enters or nothing leaves is peeled off first, which leaves little; then two
    vertices share a set when each is reachable from the other.
    """
    left = _peeled(_peeled(onward, backwards=True), backwards=False)
    found = []
    todo = set(left)
    while todo:
        start = todo.pop()
        members = {v for v in _reachable(left, start) if start in _reachable(left, v)}
        if len(members | {start}) > 1:
            found.append(sorted(members | {start}))
        todo -= members
    return sorted(found)


def _peeled(onward: dict[int, set[int]], *, backwards: bool) -> dict[int, set[int]]:
    """Return the graph without what leads nowhere (``backwards``: what nobody leads to)."""
    kept = {u: set(heads) for u, heads in onward.items()}
    while True:
        if backwards:
            entered = {v for heads in kept.values() for v in heads}
            bare = kept.keys() - entered
        else:
            bare = {v for heads in kept.values() for v in heads if not kept.get(v)}
            bare |= {u for u, heads in kept.items() if not heads}
        if not bare:
            return kept
        kept = {u: heads - bare for u, heads in kept.items() if u not in bare}


def _reachable(onward: dict[int, set[int]], start: int) -> set[int]:
    seen: set[int] = set()
    ahead = [start]
    while ahead:
        for v in onward.get(ahead.pop(), ()):
            if v not in seen:
                seen.add(v)
                ahead.append(v)
    return seen
