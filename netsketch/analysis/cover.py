"""Cover: which destinations a router can go on reaching at once when a primary next hop
fails, through a loop-free alternate (RFC 5286) or a remote one (RFC 7490).

With S the router, D the destination, E a primary next hop and N a candidate neighbour, by
RFC 5286: loop-free D(N,D) < D(N,S) + D(S,D) (inequality 1), downstream D(N,D) < D(S,D)
(2), node-protecting D(N,D) < D(N,E) + D(E,D) (3) and, where the primary crosses a segment
PN, link-protecting D(N,D) < D(N,PN) + D(PN,D) (4), never over the primary's own link or
segment. Alternates over a drained neighbour or a link at the maximum cost in either
direction are left out (3.5).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt

from netsketch.routing import BLOCKED, AllPairs, Cancelled, NextHop, Routes, distances_from, never

Flags = npt.NDArray[np.bool_]
Far = npt.NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Alternate:
    """A loop-free alternate: its next hop, the cost of the way over it, and what else
    holds of it."""

    next_hop: NextHop
    cost: int
    protects_link: bool
    protects_node: bool
    downstream: bool


@dataclass(frozen=True, slots=True)
class _Neighbour:
    """A next hop a router could use: ``across`` is the segment on the way, or -1."""

    hop: NextHop
    vertex: int
    link: int
    across: int
    cost: int


@dataclass(frozen=True)
class Cover:
    """How one router is covered for one primary next hop, over all vertices (V,).

    ``uses``: destinations with this primary; ``link``: of those, the ones with an
    alternate that protects against the loss of the link; ``node``: likewise of the router
    at its end. ``node_matters`` leaves out the router itself, which nothing can protect.
    """

    source: int
    primary: NextHop
    uses: Flags
    link: Flags
    node: Flags
    node_matters: Flags


class Fabric:
    """What covers are computed from: the distances between all pairs, as floats with
    infinity for "no path", and rows of segments."""

    def __init__(self, pairs: AllPairs) -> None:
        self.network = pairs.network
        self._pairs = pairs
        self._rows: dict[int, Far] = {}

    def row(self, vertex: int) -> Far:
        """Return the distances from a vertex (V,)."""
        if vertex not in self._rows:
            routers = self.network.structure.routers
            found = (
                self._pairs.distances[vertex]
                if vertex < routers
                else distances_from(self.network, vertex)
            )
            far = found.astype(np.float64)
            far[found == self._pairs.unreached] = np.inf
            self._rows[vertex] = far
        return self._rows[vertex]

    @cached_property
    def _last_resort(self) -> npt.NDArray[np.bool_]:
        """Links (L,) at the maximum cost in either direction."""
        costs = self.network.cost[self.network.structure.arcs]
        return np.asarray((costs >= self.network.highest).any(axis=1))

    def neighbours(self, source: int) -> list[_Neighbour]:
        """Return every next hop a router could use, parallel links told apart."""
        s, weight = self.network.structure, self.network.weight
        found: dict[NextHop, _Neighbour] = {}
        for a in range(s.indptr[source], s.indptr[source + 1]):
            if weight[a] == BLOCKED:
                continue
            head, link, cost = int(s.head[a]), int(s.link[a]), int(weight[a])
            if head < s.routers:
                hop = NextHop(s.link_ids[link], s.vertex_ids[head])
                found[hop] = _Neighbour(hop, head, link, -1, cost)
                continue
            for b in range(s.indptr[head], s.indptr[head + 1]):
                beyond = int(s.head[b])
                if weight[b] != BLOCKED and beyond != source:
                    hop = NextHop(s.link_ids[link], s.vertex_ids[beyond])
                    found[hop] = _Neighbour(hop, beyond, link, head, cost)
        return list(found.values())

    def may_repair(self, neighbour: _Neighbour) -> Flags:
        """Return for which destinations (V,) a neighbour may be an alternate at all."""
        vertices = self.network.structure.vertices
        if self._last_resort[neighbour.link]:
            return np.zeros(vertices, np.bool_)
        if self.network.drained[neighbour.vertex]:
            own = self.network.only_router == neighbour.vertex
            own[neighbour.vertex] = True
            return np.asarray(own)
        return np.ones(vertices, np.bool_)

    def conditions(
        self, source: int, primary: _Neighbour, other: _Neighbour
    ) -> tuple[Flags, Flags, Flags, Flags]:
        """Return for which destinations (V,) ``other`` is a loop-free alternate to
        ``primary``, and which of those it protects from the loss of the link, of the
        router, and which it is downstream for."""
        own, near = self.row(source), self.row(other.vertex)
        loop_free = self.may_repair(other) & (near < near[source] + own)
        downstream = loop_free & (near < own)
        node = loop_free & (other.vertex != primary.vertex)
        node &= near < near[primary.vertex] + self.row(primary.vertex)
        link = loop_free & (other.link != primary.link)
        if primary.across >= 0:
            beyond = self.row(primary.across)
            link &= (other.across != primary.across) & (near < near[primary.across] + beyond)
        return loop_free, link, node, downstream


def alternates(pairs: AllPairs, source: int, target: int) -> dict[NextHop, list[Alternate]]:
    """Return, for each primary next hop from router ``source`` to ``target``, its
    loop-free alternates, the chosen one first: what protects link and router before what
    protects only one, then the downstream and the cheaper, then by id."""
    fabric = Fabric(pairs)
    routes = Routes(pairs.network, source, pairs.distances[source])
    near = {n.hop: n for n in fabric.neighbours(source)}
    found = {}
    for hop in routes.next_hops(target):
        listed = []
        for other in near.values():
            if hop not in near or other.hop == hop:
                continue
            loop_free, link, node, downstream = (
                bool(flags[target]) for flags in fabric.conditions(source, near[hop], other)
            )
            if loop_free:
                cost = other.cost + int(fabric.row(other.vertex)[target])
                node = node and near[hop].vertex != target
                listed.append(Alternate(other.hop, cost, link, node, downstream))
        found[hop] = sorted(listed, key=_preference)
    return found


def _preference(alternate: Alternate) -> tuple[object, ...]:
    return (
        not (alternate.protects_link and alternate.protects_node),
        not alternate.protects_link,
        not alternate.protects_node,
        not alternate.downstream,
        alternate.cost,
        alternate.next_hop,
    )


def covers(
    pairs: AllPairs, sources: Iterator[int] | None = None, cancelled: Callable[[], bool] = never
) -> Iterator[Cover]:
    """Yield the cover of every primary next hop of every router (default: of all).

    Destinations are routers and segments other than the source; an attached segment has no
    next hop router and needs no cover. Raises :class:`~netsketch.routing.Cancelled`.
    """
    fabric = Fabric(pairs)
    s = pairs.network.structure
    for source in sources or range(s.routers):
        if cancelled():
            raise Cancelled
        routes = Routes(pairs.network, source, pairs.distances[source])
        near = fabric.neighbours(source)
        uses = _destinations_by_hop(routes)
        for primary in near:
            used = uses.get(primary.hop)
            if used is not None:
                yield _cover(fabric, source, primary, near, used)


def _destinations_by_hop(routes: Routes) -> dict[NextHop, Flags]:
    s = routes.network.structure
    found: dict[NextHop, Flags] = {}
    for v in range(s.vertices):
        for hop in routes.next_hops(v):
            found.setdefault(hop, np.zeros(s.vertices, np.bool_))[v] = True
    return found


def _cover(
    fabric: Fabric, source: int, primary: _Neighbour, near: list[_Neighbour], used: Flags
) -> Cover:
    link, node = np.zeros(len(used), np.bool_), np.zeros(len(used), np.bool_)
    for other in near:
        if other.hop != primary.hop:
            _, protects_link, protects_node, _ = fabric.conditions(source, primary, other)
            link |= protects_link
            node |= protects_node
    matters = used & (np.arange(len(used)) != primary.vertex)
    return Cover(source, primary.hop, used, link & used, node & matters, matters)


@dataclass(frozen=True)
class Remote:
    """Remote alternates for the link from a router to a next hop (RFC 7490): vertex
    indexes of routers, without the two ends."""

    extended_p: frozenset[int]
    q: frozenset[int]

    @property
    def pq(self) -> frozenset[int]:
        """Routers that can be reached, and reach the far end, without the link."""
        return self.extended_p & self.q


def remote(pairs: AllPairs, source: int, primary: NextHop) -> Remote:
    """Return the extended P-space and the Q-space for the link from ``source`` to its next
    hop ``primary``, by the strict inequalities of RFC 7490 in costs: extended P, over each
    neighbour N other than by the link, D(N,P) < D(N,S) + D(S,E) + D(E,P), the P-space of S
    itself included; Q D(Q,E) < D(Q,S) + D(S,E). Drained routers are in neither."""
    fabric = Fabric(pairs)
    s = pairs.network.structure
    near = {n.hop: n for n in fabric.neighbours(source)}
    end = near[primary].vertex
    own, far = fabric.row(source), fabric.row(end)
    across = own[end]
    reach = own < across + far
    for other in near.values():
        same = other.link == near[primary].link or (
            near[primary].across >= 0 and other.across == near[primary].across
        )
        if not same and other.vertex != end and not pairs.network.drained[other.vertex]:
            ways = fabric.row(other.vertex)
            reach |= ways < ways[source] + across + far
    routers = [v for v in range(s.routers) if v not in (source, end)]
    usable = [v for v in routers if not pairs.network.drained[v]]
    q = {v for v in usable if fabric.row(v)[end] < fabric.row(v)[source] + across}
    return Remote(frozenset(v for v in usable if reach[v]), frozenset(q))


@dataclass(frozen=True, slots=True)
class Coverage:
    """Numbers of (router, primary, destination) triples: all, with the link protected,
    and where the router at the end is not the destination itself: all, protected; with
    remote alternates, the link protected."""

    uses: int
    link: int
    node_matters: int
    node: int
    remote: int

    @property
    def link_share(self) -> float | None:
        """The part protected against the loss of the link; ``None`` of none."""
        return self.link / self.uses if self.uses else None

    @property
    def node_share(self) -> float | None:
        """The part protected against the loss of the router; ``None`` of none."""
        return self.node / self.node_matters if self.node_matters else None

    @property
    def remote_share(self) -> float | None:
        """The part with the link protected, remote alternates included."""
        return self.remote / self.uses if self.uses else None

    def plus(self, other: Coverage) -> Coverage:
        """Return the sum of two."""
        return Coverage(
            self.uses + other.uses,
            self.link + other.link,
            self.node_matters + other.node_matters,
            self.node + other.node,
            self.remote + other.remote,
        )


NOTHING = Coverage(0, 0, 0, 0, 0)


def coverage_of(pairs: AllPairs, cover: Cover) -> Coverage:
    """Return the counts of one cover over destinations that are routers; a remote
    alternate covers every destination of the link when there is one."""
    routers = pairs.network.structure.routers
    uses, link = cover.uses[:routers], cover.link[:routers]
    covered = int(link.sum())
    if covered < int(uses.sum()) and remote(pairs, cover.source, cover.primary).pq:
        covered = int(uses.sum())
    return Coverage(
        int(uses.sum()),
        int(link.sum()),
        int(cover.node_matters[:routers].sum()),
        int(cover.node[:routers].sum()),
        covered,
    )
