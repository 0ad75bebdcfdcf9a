"""The compiled survey: every failure of a list over every source, distances untouched.

The source is the outer loop, so its distance row, its tree and its next-hop sets stay in
the cache. Per source each vertex's tight in-arcs and next hops are worked out once; a
failure then walks only what it changes and puts the counts back:

1. what loses its last tight arc is lost: its distance grows or it is cut off;
2. a Dijkstra limited to the lost vertices finds their new distances (Ramalingam and Reps,
   J. Algorithms 21, 1996, for removals);
3. what keeps its distance but lost some tight arc gets its next hops anew, in the order of
   the tree, as far as sets differ. A lost vertex adds no tight arc anywhere: it only moved
   away.

Work per failure and source: the changed vertices and the arcs at them, times a logarithm.
"""

from __future__ import annotations

import numpy as np

from netsketch.routing.derive import block_starts, carried, next_hop_masks, tight_arcs
from netsketch.routing.kernels import (
    VERTEX_BITS,
    VERTEX_MASK,
    Array,
    compiled,
    pop,
    push,
    source_row,
)
from netsketch.routing.network import BLOCKED

THINNED, LOST, REMASKED = 1, 2, 3
MOVED, CUT_OFF, EXTRA, CHANGED = 0, 1, 2, 3
"""Columns of the totals: moved and cut-off pairs, worst extra cost of a moved pair (-1:
none moved), pairs (router, vertex) whose distance changes."""


@compiled
def lose_arcs(
    head: Array,
    ptr: Array,
    arcs: Array,
    is_tight: Array,
    blocked: Array,
    stamp: int,
    gone: Array,
    count: Array,
    state: Array,
    touched: Array,
    lost: Array,
) -> tuple[int, int]:
    """Take the ``blocked`` arcs away: ``count`` (V,) loses them, ``lost`` lists what has
    none left, ``touched`` all that has fewer. Return how many of each."""
    n_touched = 0
    n_lost = 0
    for i in range(len(blocked)):
        gone[blocked[i]] = stamp
    for i in range(len(blocked)):
        if is_tight[blocked[i]]:
            v = head[blocked[i]]
            count[v] -= 1
            if state[v] == 0:
                state[v] = THINNED
                touched[n_touched] = v
                n_touched += 1
            if count[v] == 0:
                state[v] = LOST
                lost[n_lost] = v
                n_lost += 1
    done = 0
    while done < n_lost:
        u = lost[done]
        done += 1
        for i in range(ptr[u], ptr[u + 1]):
            a = arcs[i]
            if gone[a] == stamp:
                continue
            v = head[a]
            count[v] -= 1
            if state[v] == 0:
                state[v] = THINNED
                touched[n_touched] = v
                n_touched += 1
            if count[v] == 0:
                state[v] = LOST
                lost[n_lost] = v
                n_lost += 1
    return n_touched, n_lost


@compiled
def reroute_lost(
    indptr: Array,
    head: Array,
    tail: Array,
    in_ptr: Array,
    in_arc: Array,
    weight: Array,
    transit: Array,
    unreached: int,
    source: int,
    row: Array,
    stamp: int,
    gone: Array,
    state: Array,
    lost: Array,
    n_lost: int,
    fresh: Array,
    heap: Array,
) -> None:
    """Write the new distance of every lost vertex into ``fresh`` (V,)."""
    size = 0
    for i in range(n_lost):
        v = lost[i]
        best = np.int64(unreached)
        for j in range(in_ptr[v], in_ptr[v + 1]):
            a = in_arc[j]
            u = tail[a]
            if state[u] == LOST or gone[a] == stamp or row[u] == unreached:
                continue
            w = weight[a] if u == source else transit[a]
            if w != BLOCKED and row[u] + np.int64(w) < best:
                best = row[u] + np.int64(w)
        fresh[v] = best
        if best < unreached:
            size = push(heap, size, (best << VERTEX_BITS) | v)
    while size > 0:
        key = heap[0]
        size = pop(heap, size)
        u = key & VERTEX_MASK
        d = key >> VERTEX_BITS
        if d != fresh[u]:
            continue
        for a in range(indptr[u], indptr[u + 1]):
            v = head[a]
            w = transit[a]
            if state[v] != LOST or w == BLOCKED or gone[a] == stamp:
                continue
            nd = d + w
            if nd < fresh[v]:
                fresh[v] = nd
                size = push(heap, size, (nd << VERTEX_BITS) | v)


@compiled
def remask_thinned(
    indptr: Array,
    head: Array,
    tail: Array,
    in_ptr: Array,
    in_arc: Array,
    first_parallel: Array,
    routers: int,
    source: int,
    ptr: Array,
    arcs: Array,
    order: Array,
    place: Array,
    is_tight: Array,
    starts: Array,
    stamp: int,
    gone: Array,
    state: Array,
    touched: Array,
    n_touched: int,
    masks: Array,
    fresh_masks: Array,
    spare: Array,
    waiting: Array,
    heap: Array,
) -> tuple[int, int]:
    """Give the next hops of thinned vertices anew, and of what lies beyond them while sets
    differ. Return (vertices touched, routers whose set differs)."""
    words = masks.shape[1]
    size = 0
    for i in range(n_touched):
        v = touched[i]
        if state[v] == THINNED:
            waiting[v] = stamp
            size = push(heap, size, place[v])
    differing = 0
    while size > 0:
        v = order[heap[0]]
        size = pop(heap, size)
        for k in range(words):
            fresh_masks[v, k] = 0
        for j in range(in_ptr[v], in_ptr[v + 1]):
            a = in_arc[j]
            u = tail[a]
            if not is_tight[a] or gone[a] == stamp or state[u] == LOST:
                continue
            mask = fresh_masks[u] if state[u] == REMASKED else masks[u]
            if u != source and u < routers:
                for k in range(words):
                    fresh_masks[v, k] |= mask[k]
                continue
            carried(a, u, indptr, head, first_parallel, routers, source, starts, mask, spare)
            for k in range(words):
                fresh_masks[v, k] |= spare[k]
        same = True
        for k in range(words):
            if fresh_masks[v, k] != masks[v, k]:
                same = False
        if same:
            continue
        if state[v] == 0:
            touched[n_touched] = v
            n_touched += 1
        state[v] = REMASKED
        if v < routers:
            differing += 1
        for i in range(ptr[v], ptr[v + 1]):
            x = head[arcs[i]]
            if state[x] != LOST and waiting[x] != stamp and gone[arcs[i]] != stamp:
                waiting[x] = stamp
                size = push(heap, size, place[x])
    return n_touched, differing


@compiled
def survey_sources(
    indptr: Array,
    head: Array,
    tail: Array,
    in_ptr: Array,
    in_arc: Array,
    first_parallel: Array,
    routers: int,
    weight: Array,
    transit: Array,
    unreached: int,
    sources: Array,
    rows: Array,
    arc_ptr: Array,
    blocked: Array,
    vertex_ptr: Array,
    failed: Array,
    stop: Array,
    totals: Array,
) -> None:
    """Add what every failure does to the pairs of each of ``sources`` (S,) to ``totals``
    (F, 4); ``rows`` (S, V) is scratch in the distance type.

    Failure ``f`` blocks the arcs ``blocked[arc_ptr[f] : arc_ptr[f + 1]]``, among them all
    arcs at its failed vertices ``failed[vertex_ptr[f] : vertex_ptr[f + 1]]``, whose own
    pairs do not count. Returns early once ``stop[0]`` is set.
    """
    vertices = len(indptr) - 1
    heap = np.empty(len(head) + 2 * vertices + 1, np.int64)
    ptr = np.empty(vertices + 1, np.int32)
    arcs = np.empty(len(head), np.int32)
    order = np.empty(vertices, np.int32)
    place = np.empty(vertices, np.int32)
    is_tight = np.zeros(len(head), np.bool_)
    gone = np.full(len(head), -1, np.int32)
    waiting = np.full(vertices, -1, np.int32)
    spared = np.full(vertices, -1, np.int32)
    tight_in = np.empty(vertices, np.int32)
    count = np.empty(vertices, np.int32)
    state = np.zeros(vertices, np.int8)
    touched = np.empty(vertices, np.int32)
    lost = np.empty(vertices, np.int32)
    fresh = np.empty(vertices, np.int64)
    for s in range(len(sources)):
        source, row = sources[s], rows[s]
        source_row(indptr, head, weight, transit, unreached, source, row, heap)
        reached = tight_arcs(
            indptr, head, weight, transit, source, row, unreached, ptr, arcs, order
        )
        starts = block_starts(indptr, head, routers, source)
        masks = next_hop_masks(
            indptr, head, first_parallel, routers, source, ptr, arcs, order, reached, starts
        )
        fresh_masks = np.empty_like(masks)
        spare = np.empty(masks.shape[1], np.uint64)
        is_tight[:] = False
        tight_in[:] = 0
        for i in range(ptr[vertices]):
            is_tight[arcs[i]] = True
            tight_in[head[arcs[i]]] += 1
        count[:] = tight_in
        for i in range(reached):
            place[order[i]] = i
        gone[:] = -1
        waiting[:] = -1
        spared[:] = -1
        for f in range(len(arc_ptr) - 1):
            if stop[0]:
                return
            mine = blocked[arc_ptr[f] : arc_ptr[f + 1]]
            hit = False
            for i in range(len(mine)):
                if is_tight[mine[i]]:
                    hit = True
                    break
            if not hit:
                continue
            own = False
            for i in range(vertex_ptr[f], vertex_ptr[f + 1]):
                spared[failed[i]] = f
                if failed[i] == source:
                    own = True
            if own:
                continue
            n_touched, n_lost = lose_arcs(
                head, ptr, arcs, is_tight, mine, f, gone, count, state, touched, lost
            )
            if n_lost > 0:
                reroute_lost(
                    indptr, head, tail, in_ptr, in_arc, weight, transit, unreached, source, row,
                    f, gone, state, lost, n_lost, fresh, heap,
                )  # fmt: skip
                totals[f, CHANGED] += n_lost
                for i in range(n_lost):
                    v = lost[i]
                    if v >= routers or spared[v] == f:
                        continue
                    if fresh[v] == unreached:
                        totals[f, CUT_OFF] += 1
                    else:
                        totals[f, MOVED] += 1
                        totals[f, EXTRA] = max(totals[f, EXTRA], fresh[v] - row[v])
            if n_touched > n_lost:
                n_touched, differing = remask_thinned(
                    indptr, head, tail, in_ptr, in_arc, first_parallel, routers, source, ptr,
                    arcs, order, place, is_tight, starts, f, gone, state, touched, n_touched,
                    masks, fresh_masks, spare, waiting, heap,
                )  # fmt: skip
                if differing > 0:
                    totals[f, MOVED] += differing
                    totals[f, EXTRA] = max(totals[f, EXTRA], 0)
            for i in range(n_touched):
                count[touched[i]] = tight_in[touched[i]]
                state[touched[i]] = 0
