"""One pair of routers: the way hop by hop, why this way, and what if a link of it fails."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from netsketch.model import LinkState, Trial
from netsketch.routing import (
    BLOCKED,
    Network,
    NextHop,
    Routes,
    ShareOfLink,
    distances_from,
)
from netsketch.routing.allpairs import unreached


@dataclass(frozen=True, slots=True)
class Hop:
    """One link of the way, as traffic meets it.

    ``cost`` is that of leaving ``tail``; ``cost_so_far`` is the distance of ``head`` from
    the source. ``delay_ms`` is the link's, ``delay_so_far`` least and most over the
    equal-cost paths to ``head``, ``None`` where a delay is not known.
    """

    link: str
    tail: str
    head: str
    share: float
    cost: int
    cost_so_far: int
    delay_ms: float | None
    delay_so_far: tuple[float, float] | None


@dataclass(frozen=True, slots=True)
class OtherWay:
    """The best way that leaves by another first hop: where, its cost, and how much it
    loses by."""

    next_hops: tuple[NextHop, ...]
    cost: int
    extra: int


@dataclass(frozen=True, slots=True)
class IfDown:
    """What becomes of the pair when ``link`` goes down: its cost (``None``: cut off) and
    its next hops then."""

    link: str
    cost: int | None
    extra: int | None
    next_hops: tuple[NextHop, ...]


def hops(routes: Routes, target: int) -> list[Hop]:
    """Return the way to vertex ``target`` hop by hop in order of travel, every equal-cost
    path with its share; empty when it is cut off."""
    s = routes.network.structure
    return [_hop(routes, share, s.vertex_of[share.head]) for share in routes.shares(target)]


def _hop(routes: Routes, share: ShareOfLink, head: int) -> Hop:
    s, network = routes.network.structure, routes.network
    k = s.link_of[share.link]
    out = s.vertex_ids[s.tail[s.arcs[k, 0]]] == share.tail
    delay = float(network.delay[k])
    so_far = routes.cost(head)
    assert so_far is not None
    return Hop(
        share.link,
        share.tail,
        share.head,
        share.share,
        int(network.cost[s.arcs[k, 0 if out else 1]]),
        so_far,
        None if np.isnan(delay) else delay,
        routes.delay_ms(head),
    )


def parting(out: Routes, back: Routes, target: int) -> str | None:
    """Return where the way out and the way back part: the first vertex on the way from
    the source of ``out`` at which they use different links; ``None`` where they use the
    same ones."""
    there = out.shares(target)
    returning = {(share.link, share.head) for share in back.shares(out.source)}
    going = {(share.link, share.tail) for share in there}
    if going == returning:
        return None
    for share in there:
        if (share.link, share.tail) not in returning:
            return share.tail
    # The way out is part of the way back: they part where the way back brings more in.
    ids = out.network.structure.vertex_ids
    extra = sorted(returning - going, key=lambda each: out.cost(ids.index(each[1])) or 0)
    return extra[0][1]


def other_way(routes: Routes, target: int) -> OtherWay | None:
    """Return the best way to vertex ``target`` that begins with a next hop not in use, of
    those that never come back to where they were; ``None`` where there is none.

    Each candidate (link, router) is its cost plus the router's distance to the target
    with the source, and the segment crossed to the router, taken out.
    """
    network, source = routes.network, routes.source
    primary, closed = set(routes.next_hops(target)), network.closed_towards(target)
    best: tuple[int, list[NextHop]] | None = None
    ahead: dict[tuple[int, int], int | None] = {}
    for hop, cost, head, across in _first_hops(network, source, target):
        if hop in primary or (closed[head] and head != target):
            continue
        if (head, across) not in ahead:
            up = network.vertex_up.copy()
            up[[source, across]] = False
            ahead[head, across] = _distance(replace(network, vertex_up=up), head, target)
        left = ahead[head, across]
        if left is None:
            continue
        if best is None or cost + left < best[0]:
            best = cost + left, [hop]
        elif cost + left == best[0]:
            best[1].append(hop)
    if best is None:
        return None
    own = routes.cost(target)
    return OtherWay(tuple(best[1]), best[0], best[0] - own if own is not None else 0)


def _first_hops(network: Network, source: int, target: int) -> list[tuple[NextHop, int, int, int]]:
    """Return every next hop ``source`` could use: (next hop, cost to it, its vertex, the
    segment crossed to it, or ``source`` where there is none)."""
    s = network.structure
    found = {}
    for a in range(s.indptr[source], s.indptr[source + 1]):
        if network.weight[a] == BLOCKED:
            continue
        head, cost, link = int(s.head[a]), int(network.weight[a]), s.link_ids[s.link[a]]
        if head < s.routers:
            found[NextHop(link, s.vertex_ids[head])] = (cost, head, source)
        elif head == target:
            found[NextHop(link, None)] = (cost, head, source)
        else:
            for b in range(s.indptr[head], s.indptr[head + 1]):
                beyond = int(s.head[b])
                if network.weight[b] != BLOCKED and beyond != source:
                    found[NextHop(link, s.vertex_ids[beyond])] = (cost, beyond, head)
    return [(hop, *values) for hop, values in found.items()]


def _distance(network: Network, source: int, target: int) -> int | None:
    if source == target:
        return 0
    row = distances_from(network, source)
    distance = int(row[target])
    return None if distance == unreached(row.dtype.type) else distance


def if_down(routes: Routes, target: int) -> list[IfDown]:
    """Return, for each link on the way to vertex ``target``, what becomes of the pair when
    that link alone goes down besides what is down already."""
    own = routes.cost(target)
    found = []
    for link in dict.fromkeys(share.link for share in routes.shares(target)):
        down = Routes(routes.network.laid_over(Trial((LinkState(link),))), routes.source)
        cost = down.cost(target)
        extra = None if cost is None or own is None else cost - own
        found.append(IfDown(link, cost, extra, down.next_hops(target)))
    return found
