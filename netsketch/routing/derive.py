"""Compiled loops that read answers off distance rows: never stored, always derived.

An arc is tight for a source when it lies on one of its shortest paths. Tight arcs form an
acyclic graph: a cycle would have to cost 0, and every cycle leaves a router at a cost of
at least 1.

Next hops are bits. Each arc out of the source has a block of bits: one for the link
itself, and where it leads to a segment one more for every arc out of that segment, since
a next hop through a segment is the router beyond it (RFC 2328, 16.1.1). The layout
depends on the structure alone, so sets of two networks over one structure compare word
by word.
"""

from __future__ import annotations

import numpy as np

from netsketch.routing.kernels import Array, compiled
from netsketch.routing.network import BLOCKED

MANY = 2**61
"""Path counts at or above this are not exact."""


@compiled
def block_starts(indptr: Array, head: Array, routers: int, source: int) -> Array:
    """Return the first bit of each arc out of ``source``, and behind them their number."""
    first, last = indptr[source], indptr[source + 1]
    starts = np.zeros(last - first + 1, np.int64)
    for a in range(first, last):
        v = head[a]
        width = 1 if v < routers else 1 + indptr[v + 1] - indptr[v]
        starts[a - first + 1] = starts[a - first] + width
    return starts


@compiled
def tight_arcs(
    indptr: Array,
    head: Array,
    weight: Array,
    transit: Array,
    source: int,
    row: Array,
    unreached: int,
    ptr: Array,
    arcs: Array,
    order: Array,
) -> int:
    """Find the arcs on shortest paths from ``source`` and an order in which they all go
    forward. O(arcs).

    ``arcs[ptr[u] : ptr[u + 1]]`` become the tight arcs out of ``u``; ``ptr`` is (V + 1,),
    ``arcs`` (A,). The reached vertices are written into ``order`` (V,), the source first;
    their number is returned.
    """
    vertices = len(indptr) - 1
    waiting = np.zeros(vertices, np.int32)
    found = 0
    for u in range(vertices):
        ptr[u] = found
        d = np.int64(row[u])
        if d == unreached:
            continue
        out = weight if u == source else transit
        for a in range(indptr[u], indptr[u + 1]):
            w = out[a]
            if w != BLOCKED and d + w == row[head[a]]:
                arcs[found] = a
                found += 1
                waiting[head[a]] += 1
    ptr[vertices] = found
    order[0] = source
    reached = 1
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
def carried(
    a: int,
    u: int,
    indptr: Array,
    head: Array,
    first_parallel: Array,
    routers: int,
    source: int,
    starts: Array,
    mask: Array,
    out: Array,
) -> None:
    """Write the next hops whose traffic the tight arc ``a`` out of ``u`` carries into
    ``out`` (W,); ``mask`` (W,) holds those of ``u``."""
    first, last = indptr[source], indptr[source + 1]
    if u == source:
        out[:] = 0
        bit = starts[a - first]
        out[bit >> 6] |= np.uint64(1) << np.uint64(bit & 63)
        return
    for k in range(len(out)):
        out[k] = mask[k]
    if u < routers:
        return
    # Out of a segment attached to the source: the next hop becomes the router beyond.
    for b in range(first, last):
        if head[b] != u:
            continue
        bit = starts[b - first]
        own = np.uint64(1) << np.uint64(bit & 63)
        if out[bit >> 6] & own:
            out[bit >> 6] &= ~own
            bit += 1 + first_parallel[a] - indptr[u]
            out[bit >> 6] |= np.uint64(1) << np.uint64(bit & 63)


@compiled
def next_hop_masks(
    indptr: Array,
    head: Array,
    first_parallel: Array,
    routers: int,
    source: int,
    ptr: Array,
    arcs: Array,
    order: Array,
    reached: int,
    starts: Array,
) -> Array:
    """Return the set of next hops to every vertex (V, W), one bit each. O(arcs x W)."""
    words = max(1, (starts[-1] + 63) >> 6)
    masks = np.zeros((len(indptr) - 1, words), np.uint64)
    spare = np.empty(words, np.uint64)
    for i in range(reached):
        u = order[i]
        inherits = u != source and u < routers
        for j in range(ptr[u], ptr[u + 1]):
            v = head[arcs[j]]
            if inherits:
                for k in range(words):
                    masks[v, k] |= masks[u, k]
                continue
            carried(
                arcs[j], u, indptr, head, first_parallel, routers, source, starts, masks[u], spare
            )
            for k in range(words):
                masks[v, k] |= spare[k]
    return masks


@compiled
def arc_masks(
    indptr: Array,
    head: Array,
    first_parallel: Array,
    routers: int,
    source: int,
    ptr: Array,
    arcs: Array,
    starts: Array,
    masks: Array,
) -> Array:
    """Return the next hops each arc carries (A, W); 0 for arcs that are not tight.

    On an arc from the source to a segment those are the routers beyond the segment.
    """
    out = np.zeros((len(head), masks.shape[1]), np.uint64)
    for u in range(len(indptr) - 1):
        for j in range(ptr[u], ptr[u + 1]):
            carried(
                arcs[j], u, indptr, head, first_parallel, routers, source, starts, masks[u],
                out[arcs[j]],
            )  # fmt: skip
    for j in range(ptr[source], ptr[source + 1]):
        b = arcs[j]
        g = head[b]
        if g < routers:
            continue
        low, high = starts[b - indptr[source]] + 1, starts[b - indptr[source] + 1]
        for i in range(ptr[g], ptr[g + 1]):
            for bit in range(low, high):
                out[b, bit >> 6] |= out[arcs[i], bit >> 6] & (np.uint64(1) << np.uint64(bit & 63))
    return out


@compiled
def along_paths(
    head: Array,
    link: Array,
    routers: int,
    delay: Array,
    source: int,
    ptr: Array,
    arcs: Array,
    order: Array,
    reached: int,
    hops: Array,
    least: Array,
    most: Array,
    paths: Array,
) -> None:
    """Write for every vertex (V,) the least number of hops, the least and most delay, and
    the number of equal-cost paths, counted link by link (:data:`MANY` at most). O(arcs).

    A hop is a link left by a router, so crossing a segment is one hop. NaN delays spread:
    where the delay of one equal-cost path is not known, neither least nor most is.
    """
    hops[:] = -1
    least[:] = np.nan
    most[:] = np.nan
    paths[:] = 0
    hops[source] = 0
    least[source] = 0.0
    most[source] = 0.0
    paths[source] = 1
    for i in range(reached):
        u = order[i]
        step = 1 if u < routers else 0
        for j in range(ptr[u], ptr[u + 1]):
            a = arcs[j]
            v = head[a]
            low, high = least[u] + delay[link[a]], most[u] + delay[link[a]]
            if hops[v] < 0:
                hops[v] = hops[u] + step
                least[v] = low
                most[v] = high
            else:
                hops[v] = min(hops[v], hops[u] + step)
                if np.isnan(low) or np.isnan(least[v]):
                    least[v] = np.nan
                    most[v] = np.nan
                else:
                    least[v] = min(least[v], low)
                    most[v] = max(most[v], high)
            paths[v] = min(MANY, paths[v] + paths[u])


@compiled
def worst_delays(
    indptr: Array,
    head: Array,
    link: Array,
    routers: int,
    weight: Array,
    transit: Array,
    delay: Array,
    unreached: int,
    sources: Array,
    rows: Array,
    worst: Array,
) -> None:
    """Write the most delay over equal-cost paths from each of ``sources`` (S,) to every
    vertex into ``worst`` (S, V); NaN where it is not known. ``rows`` (S, V) are distances.
    """
    vertices = len(indptr) - 1
    ptr = np.empty(vertices + 1, np.int32)
    arcs = np.empty(len(head), np.int32)
    order = np.empty(vertices, np.int32)
    hops = np.empty(vertices, np.int32)
    least = np.empty(vertices, np.float64)
    paths = np.empty(vertices, np.int64)
    for i in range(len(sources)):
        reached = tight_arcs(
            indptr, head, weight, transit, sources[i], rows[i], unreached, ptr, arcs, order
        )
        along_paths(
            head, link, routers, delay, sources[i], ptr, arcs, order, reached, hops, least,
            worst[i], paths,
        )  # fmt: skip


MOVED, CUT_OFF, RESTORED, UNCHANGED = 0, 1, 2, -1


@compiled
def is_touched(
    head: Array,
    tail: Array,
    changed: Array,
    weight: Array,
    transit: Array,
    source: int,
    row: Array,
    unreached: int,
) -> bool:
    """Tell whether any of the ``changed`` arcs lies on a shortest path from ``source``."""
    for i in range(len(changed)):
        a = changed[i]
        u = tail[a]
        w = weight[a] if u == source else transit[a]
        if w != BLOCKED and row[u] != unreached and row[u] + np.int64(w) == row[head[a]]:
            return True
    return False


@compiled
def differ(masks_old: Array, masks: Array, t: int) -> bool:
    """Tell whether two sets of next hops to ``t`` differ."""
    for k in range(masks.shape[1]):  # noqa: SIM110 - no generators in compiled code
        if masks_old[t, k] != masks[t, k]:
            return True
    return False


@compiled
def compare_rows(
    indptr: Array,
    head: Array,
    tail: Array,
    first_parallel: Array,
    routers: int,
    changed: Array,
    weight_old: Array,
    transit_old: Array,
    weight: Array,
    transit: Array,
    unreached: int,
    sources: Array,
    rows_old: Array,
    rows: Array,
    outcomes: Array,
) -> None:
    """Write what becomes of each pair into ``outcomes`` (S, V), one row for each of
    ``sources`` (S,); ``rows_old`` and ``rows`` are their distances before and after.

    A source no changed arc is tight for, before or after, keeps every next hop.
    """
    vertices = len(indptr) - 1
    ptr = np.empty(vertices + 1, np.int32)
    arcs = np.empty(len(head), np.int32)
    order = np.empty(vertices, np.int32)
    for i in range(len(sources)):
        source, old, new = sources[i], rows_old[i], rows[i]
        outcomes[i, :] = UNCHANGED
        if not is_touched(
            head, tail, changed, weight_old, transit_old, source, old, unreached
        ) and not is_touched(head, tail, changed, weight, transit, source, new, unreached):
            continue
        starts = block_starts(indptr, head, routers, source)
        reached = tight_arcs(
            indptr, head, weight_old, transit_old, source, old, unreached, ptr, arcs, order
        )
        masks_old = next_hop_masks(
            indptr, head, first_parallel, routers, source, ptr, arcs, order, reached, starts,
        )  # fmt: skip
        reached = tight_arcs(
            indptr, head, weight, transit, source, new, unreached, ptr, arcs, order
        )
        masks = next_hop_masks(
            indptr, head, first_parallel, routers, source, ptr, arcs, order, reached, starts,
        )  # fmt: skip
        for t in range(vertices):
            if t == source or (old[t] == unreached and new[t] == unreached):
                continue
            if old[t] == unreached:
                outcomes[i, t] = RESTORED
            elif new[t] == unreached:
                outcomes[i, t] = CUT_OFF
            elif old[t] != new[t] or differ(masks_old, masks, t):
                outcomes[i, t] = MOVED
