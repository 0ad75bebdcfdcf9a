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

MANY = 2**62
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
def is_tight(
    a: int, u: int, head: Array, weight: Array, transit: Array, source: int, row: Array,
    unreached: int,
) -> bool:  # fmt: skip
    """Tell whether arc ``a`` out of ``u`` lies on a shortest path from ``source``."""
    w = weight[a] if u == source else transit[a]
    return bool(w != BLOCKED and row[u] != unreached and row[u] + np.int64(w) == row[head[a]])


@compiled
def tight_order(
    indptr: Array,
    head: Array,
    weight: Array,
    transit: Array,
    source: int,
    row: Array,
    unreached: int,
    waiting: Array,
    order: Array,
) -> int:
    """Write the reached vertices into ``order`` so that every tight arc goes forward, the
    source first; return how many. O(arcs). ``waiting`` (V,) is scratch, 0 before and after.
    """
    vertices = len(indptr) - 1
    for u in range(vertices):
        if row[u] == unreached:
            continue
        for a in range(indptr[u], indptr[u + 1]):
            if is_tight(a, u, head, weight, transit, source, row, unreached):
                waiting[head[a]] += 1
    order[0] = source
    found = 1
    done = 0
    while done < found:
        u = order[done]
        done += 1
        for a in range(indptr[u], indptr[u + 1]):
            if is_tight(a, u, head, weight, transit, source, row, unreached):
                v = head[a]
                waiting[v] -= 1
                if waiting[v] == 0:
                    order[found] = v
                    found += 1
    return found


@compiled
def carried(
    a: int,
    u: int,
    indptr: Array,
    head: Array,
    first_parallel: Array,
    routers: int,
    weight: Array,
    source: int,
    row: Array,
    starts: Array,
    masks: Array,
    out: Array,
) -> None:
    """Write the next hops whose traffic the tight arc ``a`` out of ``u`` carries into
    ``out`` (W,); ``masks`` must hold those of ``u``."""
    words = len(out)
    first, last = indptr[source], indptr[source + 1]
    if u == source:
        out[:] = 0
        bit = starts[a - first]
        out[bit >> 6] |= np.uint64(1) << np.uint64(bit & 63)
        return
    for i in range(words):
        out[i] = masks[u, i]
    if u < routers:
        return
    # Out of a segment attached to the source: the next hop becomes the router beyond.
    for b in range(first, last):
        if head[b] == u and weight[b] != BLOCKED and weight[b] == row[u]:
            bit = starts[b - first]
            out[bit >> 6] &= ~(np.uint64(1) << np.uint64(bit & 63))
            bit += 1 + first_parallel[a] - indptr[u]
            out[bit >> 6] |= np.uint64(1) << np.uint64(bit & 63)


@compiled
def next_hop_masks(
    indptr: Array,
    head: Array,
    first_parallel: Array,
    routers: int,
    weight: Array,
    transit: Array,
    source: int,
    row: Array,
    unreached: int,
    order: Array,
    reached: int,
    starts: Array,
    masks: Array,
    spare: Array,
) -> None:
    """Write the set of next hops to every vertex into ``masks`` (V, W), one bit each.
    O(arcs x W). ``spare`` (W,) is scratch."""
    masks[:] = 0
    for i in range(reached):
        u = order[i]
        for a in range(indptr[u], indptr[u + 1]):
            if not is_tight(a, u, head, weight, transit, source, row, unreached):
                continue
            carried(
                a, u, indptr, head, first_parallel, routers, weight, source, row, starts, masks,
                spare,
            )  # fmt: skip
            v = head[a]
            for k in range(len(spare)):
                masks[v, k] |= spare[k]


@compiled
def arc_masks(
    indptr: Array,
    head: Array,
    first_parallel: Array,
    routers: int,
    weight: Array,
    transit: Array,
    source: int,
    row: Array,
    unreached: int,
    starts: Array,
    masks: Array,
    out: Array,
) -> None:
    """Write the next hops each tight arc carries into ``out`` (A, W); 0 for other arcs.

    On an arc from the source to a segment those are the routers beyond the segment.
    """
    out[:] = 0
    for u in range(len(indptr) - 1):
        if row[u] == unreached:
            continue
        for a in range(indptr[u], indptr[u + 1]):
            if is_tight(a, u, head, weight, transit, source, row, unreached):
                carried(
                    a, u, indptr, head, first_parallel, routers, weight, source, row, starts,
                    masks, out[a],
                )  # fmt: skip
    first = indptr[source]
    for b in range(first, indptr[source + 1]):
        g = head[b]
        if g < routers or not is_tight(b, source, head, weight, transit, source, row, unreached):
            continue
        low, high = starts[b - first] + 1, starts[b - first + 1]
        for a in range(indptr[g], indptr[g + 1]):
            for bit in range(low, high):
                if out[a, bit >> 6] & (np.uint64(1) << np.uint64(bit & 63)):
                    out[b, bit >> 6] |= np.uint64(1) << np.uint64(bit & 63)


@compiled
def along_paths(
    indptr: Array,
    head: Array,
    link: Array,
    routers: int,
    weight: Array,
    transit: Array,
    delay: Array,
    source: int,
    row: Array,
    unreached: int,
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
        for a in range(indptr[u], indptr[u + 1]):
            if not is_tight(a, u, head, weight, transit, source, row, unreached):
                continue
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


MOVED, CUT_OFF, RESTORED, UNCHANGED = 0, 1, 2, -1


@compiled
def is_touched(
    indptr: Array,
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
        if is_tight(a, tail[a], head, weight, transit, source, row, unreached):
            return True
    return False


@compiled
def source_masks(
    indptr: Array,
    head: Array,
    first_parallel: Array,
    routers: int,
    weight: Array,
    transit: Array,
    source: int,
    row: Array,
    unreached: int,
    starts: Array,
    waiting: Array,
    order: Array,
) -> Array:
    """Return :func:`next_hop_masks` of one source (V, W)."""
    words = (starts[-1] + 63) >> 6
    masks = np.empty((len(indptr) - 1, words), np.uint64)
    reached = tight_order(indptr, head, weight, transit, source, row, unreached, waiting, order)
    next_hop_masks(
        indptr, head, first_parallel, routers, weight, transit, source, row, unreached, order,
        reached, starts, masks, np.empty(words, np.uint64),
    )  # fmt: skip
    return masks


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
    waiting = np.zeros(vertices, np.int32)
    order = np.empty(vertices, np.int32)
    for i in range(len(sources)):
        source, old, new = sources[i], rows_old[i], rows[i]
        outcomes[i, :] = UNCHANGED
        if not is_touched(
            indptr, head, tail, changed, weight_old, transit_old, source, old, unreached
        ) and not is_touched(indptr, head, tail, changed, weight, transit, source, new, unreached):
            continue
        starts = block_starts(indptr, head, routers, source)
        masks_old = source_masks(
            indptr, head, first_parallel, routers, weight_old, transit_old, source, old,
            unreached, starts, waiting, order,
        )  # fmt: skip
        masks = source_masks(
            indptr, head, first_parallel, routers, weight, transit, source, new, unreached,
            starts, waiting, order,
        )  # fmt: skip
        for t in range(vertices):
            if t == source or (old[t] == unreached and new[t] == unreached):
                continue
            if old[t] == unreached:
                outcomes[i, t] = RESTORED
            elif new[t] == unreached:
                outcomes[i, t] = CUT_OFF
            elif old[t] != new[t] or (masks_old[t] != masks[t]).any():
                outcomes[i, t] = MOVED
