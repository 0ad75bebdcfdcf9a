"""The compiled loops: one source at a time over CSR arrays.

Every kernel takes two weight arrays: ``weight`` for arcs that leave the source itself and
``transit`` for all others, in which arcs out of a drained router are BLOCKED but for those
to a segment that is its alone; so a drained router is reached and reaches, but nobody
passes through it to another router.

A heap entry is ``distance << VERTEX_BITS | vertex`` in one int64, which orders by distance
and needs no second array. Distances stay below 2**42.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numba import njit

from netsketch.routing.network import BLOCKED

VERTEX_BITS = 21
VERTEX_MASK = (1 << VERTEX_BITS) - 1

Array = Any

compiled = njit(cache=True, nogil=True, boundscheck=False, error_model="numpy")


@compiled
def push(heap: Array, size: int, key: int) -> int:
    """Put ``key`` on a 4-ary min-heap of ``size`` entries; return the new size."""
    i = size
    while i > 0:
        parent = (i - 1) >> 2
        above = heap[parent]
        if above <= key:
            break
        heap[i] = above
        i = parent
    heap[i] = key
    return size + 1


@compiled
def pop(heap: Array, size: int) -> int:
    """Close the gap at the top of a 4-ary min-heap of ``size`` entries (read ``heap[0]``
    first); return the new size."""
    size -= 1
    key = heap[size]
    i = 0
    child = 1
    while child < size:
        best = child
        low = heap[child]
        last = child + 4
        if last > size:
            last = size
        for c in range(child + 1, last):
            if heap[c] < low:
                low = heap[c]
                best = c
        if low >= key:
            break
        heap[i] = low
        i = best
        child = (i << 2) + 1
    heap[i] = key
    return size


@compiled
def source_row(
    indptr: Array,
    head: Array,
    weight: Array,
    transit: Array,
    unreached: int,
    source: int,
    row: Array,
    heap: Array,
) -> None:
    """Dijkstra's algorithm from ``source`` into ``row`` (V,). O(arcs log arcs).

    Invariant: ``row[v]`` is the length of some path, or ``unreached``; an entry popped with
    its vertex's present distance is final.
    """
    row[:] = unreached
    row[source] = 0
    size = 0
    for a in range(indptr[source], indptr[source + 1]):
        w = weight[a]
        v = head[a]
        if w != BLOCKED and w < row[v]:
            row[v] = w
            size = push(heap, size, (np.int64(w) << VERTEX_BITS) | v)
    while size > 0:
        key = heap[0]
        size = pop(heap, size)
        u = key & VERTEX_MASK
        d = key >> VERTEX_BITS
        if d != row[u]:
            continue
        for a in range(indptr[u], indptr[u + 1]):
            w = transit[a]
            if w == BLOCKED:
                continue
            v = head[a]
            nd = d + w
            if nd < row[v]:
                row[v] = nd
                size = push(heap, size, (nd << VERTEX_BITS) | v)


@compiled
def source_rows(
    indptr: Array,
    head: Array,
    weight: Array,
    transit: Array,
    unreached: int,
    first: int,
    rows: Array,
) -> None:
    """:func:`source_row` for the sources from ``first`` on into ``rows`` (S, V)."""
    heap = np.empty(len(head) + 1, np.int64)
    for i in range(len(rows)):
        source_row(indptr, head, weight, transit, unreached, first + i, rows[i], heap)


@compiled
def tight_in_arcs(
    v: int,
    in_ptr: Array,
    in_arc: Array,
    tail: Array,
    weight: Array,
    transit: Array,
    source: int,
    row: Array,
    state: Array,
) -> int:
    """Count the arcs into ``v`` that lie on a shortest path and whose tail is not lost."""
    count = 0
    for i in range(in_ptr[v], in_ptr[v + 1]):
        a = in_arc[i]
        u = tail[a]
        w = weight[a] if u == source else transit[a]
        if w != BLOCKED and state[u] != LOST and row[u] + w == row[v]:
            count += 1
    return count


COUNTED, QUEUED, LOST, IMPROVED = 1, 2, 3, 4


@compiled
def update_row(
    indptr: Array,
    head: Array,
    tail: Array,
    in_ptr: Array,
    in_arc: Array,
    changed: Array,
    weight_old: Array,
    transit_old: Array,
    weight_mid: Array,
    transit_mid: Array,
    weight: Array,
    transit: Array,
    unreached: int,
    source: int,
    row: Array,
    state: Array,
    count: Array,
    stamp: Array,
    seen: Array,
    listed: Array,
    before: Array,
    heap: Array,
) -> int:
    """Bring ``row`` from the old weights to the new; return how many distances changed.

    Ramalingam and Reps (J. Algorithms 21, 1996) for a batch: first every vertex that loses
    its last tight arc to removals and increases (``*_mid`` holds the larger of the old and
    the new weight), then one Dijkstra limited to those and to what the decreases improve.
    Work is bounded by the changed vertices and the arcs at them, times a logarithm.

    Invariant: ``state``, all 0 on entry, is all 0 again on return.
    """
    lost = 0
    marked = 0
    # What loses an arc directly. A vertex is counted when it is first met and from then
    # on loses one for each tight arc whose tail is lost.
    for i in range(len(changed)):
        a = changed[i]
        u = tail[a]
        v = head[a]
        if v == source or row[u] == unreached or state[v] != 0:
            continue
        if u == source:
            was, now = weight_old[a], weight[a]
        else:
            was, now = transit_old[a], transit[a]
        if now <= was or row[u] + was != row[v]:
            continue
        n = tight_in_arcs(v, in_ptr, in_arc, tail, weight_mid, transit_mid, source, row, state)
        seen[marked] = v
        marked += 1
        count[v] = n
        stamp[v] = -1
        if n == 0:
            state[v] = QUEUED
            listed[lost] = v
            lost += 1
        else:
            state[v] = COUNTED
    # What loses its last arc because the tails before it are lost.
    done = 0
    while done < lost:
        u = listed[done]
        done += 1
        state[u] = LOST
        for a in range(indptr[u], indptr[u + 1]):
            w = transit_mid[a]
            v = head[a]
            if w == BLOCKED or row[u] + w != row[v] or state[v] >= QUEUED:
                continue
            if state[v] == 0:
                count[v] = tight_in_arcs(
                    v, in_ptr, in_arc, tail, weight_mid, transit_mid, source, row, state
                )
                state[v] = COUNTED
                stamp[v] = u  # parallel arcs from u are not in this count
                seen[marked] = v
                marked += 1
            elif stamp[v] != u:
                count[v] -= 1
            if count[v] == 0:
                state[v] = QUEUED
                listed[lost] = v
                lost += 1
    for i in range(lost):
        before[i] = row[listed[i]]
        row[listed[i]] = unreached
    size = 0
    # The best way into each lost vertex from one that is not.
    for i in range(lost):
        v = listed[i]
        best = np.int64(unreached)
        for j in range(in_ptr[v], in_ptr[v + 1]):
            a = in_arc[j]
            u = tail[a]
            if state[u] == LOST or row[u] == unreached:
                continue
            w = weight[a] if u == source else transit[a]
            if w != BLOCKED and row[u] + np.int64(w) < best:
                best = row[u] + np.int64(w)
        if best < unreached:
            row[v] = best
            size = push(heap, size, (best << VERTEX_BITS) | v)
    # Heads that a decrease or a new arc improves.
    touched = lost
    for i in range(len(changed)):
        a = changed[i]
        u = tail[a]
        v = head[a]
        w = weight[a] if u == source else transit[a]
        if w == BLOCKED or row[u] == unreached:
            continue
        nd = row[u] + np.int64(w)
        if nd < row[v]:
            if state[v] < LOST:
                state[v] = IMPROVED
                listed[touched] = v
                before[touched] = row[v]
                touched += 1
            row[v] = nd
            size = push(heap, size, (nd << VERTEX_BITS) | v)
    while size > 0:
        key = heap[0]
        size = pop(heap, size)
        u = key & VERTEX_MASK
        d = key >> VERTEX_BITS
        if d != row[u]:
            continue
        for a in range(indptr[u], indptr[u + 1]):
            w = transit[a]
            if w == BLOCKED:
                continue
            v = head[a]
            nd = d + w
            if nd < row[v]:
                if state[v] < LOST:
                    state[v] = IMPROVED
                    listed[touched] = v
                    before[touched] = row[v]
                    touched += 1
                row[v] = nd
                size = push(heap, size, (nd << VERTEX_BITS) | v)
    differing = 0
    for i in range(touched):
        if row[listed[i]] != before[i]:
            differing += 1
        state[listed[i]] = 0
    for i in range(marked):
        state[seen[i]] = 0
    return differing


@compiled
def update_rows(
    indptr: Array,
    head: Array,
    tail: Array,
    in_ptr: Array,
    in_arc: Array,
    changed: Array,
    weight_old: Array,
    transit_old: Array,
    weight_mid: Array,
    transit_mid: Array,
    weight: Array,
    transit: Array,
    unreached: int,
    first: int,
    last: int,
    rows: Array,
) -> int:
    """:func:`update_row` for sources ``first … last - 1``; return the changed pairs."""
    vertices = len(indptr) - 1
    state = np.zeros(vertices, np.int8)
    count = np.zeros(vertices, np.int32)
    stamp = np.zeros(vertices, np.int32)
    seen = np.empty(vertices, np.int32)
    listed = np.empty(vertices, np.int32)
    before = np.empty(vertices, rows.dtype)
    heap = np.empty(2 * len(head) + vertices + 1, np.int64)
    differing = 0
    for source in range(first, last):
        row = rows[source]
        hit = False
        for i in range(len(changed)):
            a = changed[i]
            u = tail[a]
            if row[u] == unreached:
                continue
            if u == source:
                was, now = weight_old[a], weight[a]
            else:
                was, now = transit_old[a], transit[a]
            d = row[head[a]]
            if (now > was and row[u] + was == d) or (now < was and row[u] + np.int64(now) < d):
                hit = True
                break
        if hit:
            differing += update_row(
                indptr, head, tail, in_ptr, in_arc, changed, weight_old, transit_old,
                weight_mid, transit_mid, weight, transit, unreached, source, row,
                state, count, stamp, seen, listed, before, heap,
            )  # fmt: skip
    return differing
