"""Distances between all routers, kept current while the network changes."""

from __future__ import annotations

import os
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass
from functools import cache

import numpy as np

from netsketch.routing import kernels
from netsketch.routing.network import BLOCKED, Distances, Ints, Network, Structure

THREADS = max(1, min(8, os.cpu_count() or 1))


class Cancelled(Exception):  # noqa: N818 - an outcome, not an error
    """The caller asked to stop; nothing half-done is kept."""


def never() -> bool:
    """Answer "is this cancelled?" for work that nobody cancels."""
    return False


@dataclass(frozen=True)
class Update:
    """What a move to another network cost: ordered pairs (router, vertex) whose distance
    changed, and arcs that differed."""

    changed_pairs: int
    changed_arcs: int


def unreached(distance_type: type[np.integer]) -> int:
    """Return the value that stands for "no path" in a distance array of this type."""
    return int(np.iinfo(distance_type).max)


def distances_from(network: Network, source: int) -> Distances:
    """Return the distance from router ``source`` to every vertex (V,), exact integers;
    :func:`unreached` where there is no path. Dijkstra from scratch, O(arcs log arcs)."""
    s = network.structure
    row = np.empty(s.vertices, network.distance_type)
    kernels.source_row(
        s.indptr, s.head, network.weight, network.transit, unreached(row.dtype.type), source, row,
        np.empty(len(s.head) + 1, np.int64),
    )  # fmt: skip
    return row


def distances_between(
    network: Network, first: int, last: int, cancelled: Callable[[], bool] = never
) -> Distances:
    """Return the distances from routers ``first … last - 1`` to every vertex
    (last - first, V), from scratch on all processors. Raises :class:`Cancelled`."""
    s = network.structure
    rows = np.empty((last - first, s.vertices), network.distance_type)

    def work(low: int, high: int) -> None:
        if cancelled():
            raise Cancelled
        kernels.source_rows(
            s.indptr, s.head, network.weight, network.transit, unreached(rows.dtype.type),
            first + low, rows[low:high],
        )  # fmt: skip

    over_sources(last - first, work, chunk=64)
    return rows


@cache
def threads() -> ThreadPoolExecutor:
    """Return the threads over which sources are spread, one a processor."""
    return ThreadPoolExecutor(THREADS, thread_name_prefix="netsketch-routing")


def over_sources(count: int, work: Callable[[int, int], int | None], chunk: int) -> int:
    """Call ``work(first, last)`` for slices of ``chunk`` of ``count`` sources on all
    processors and return the sum of what it returns; a single slice stays in this thread."""
    slices = [(first, min(first + chunk, count)) for first in range(0, count, chunk)]
    if len(slices) <= 1:
        return sum(work(*one) or 0 for one in slices)
    return sum(result or 0 for result in threads().map(lambda one: work(*one), slices))


class AllPairs:
    """``distances[s, t]`` from every router ``s`` to every vertex ``t`` of ``network``."""

    def __init__(self, network: Network, cancelled: Callable[[], bool] = never) -> None:
        self.network = network
        self.distances = distances_between(network, 0, network.structure.routers, cancelled)

    @property
    def unreached(self) -> int:
        """The value in ``distances`` where there is no path."""
        return unreached(self.distances.dtype.type)

    def copy(self) -> AllPairs:
        """Return an independent state over the same network."""
        twin = object.__new__(AllPairs)
        twin.network, twin.distances = self.network, self.distances.copy()
        return twin

    def move_to(self, network: Network) -> Update:
        """Make ``network`` the network, recomputing only the distances that change.

        Networks over different structures are matched by vertex and link id, so drawing
        and deleting are batches like any other.
        """
        if network.distance_type is not self.distances.dtype.type:
            self.network = network
            self.distances = distances_between(network, 0, network.structure.routers)
            return Update(self.distances.size, len(network.cost))
        if network.structure is self.network.structure:
            return self._batch(network.weight, network.transit, network)
        return self._restructure(network)

    def _restructure(self, network: Network) -> Update:
        old, new = self.network.structure, network.structure
        kept = _common_links(old, new)
        gone = np.ones(len(old.link_ids), np.bool_)
        gone[kept[kept >= 0]] = False
        weight, transit = self.network.weight.copy(), self.network.transit.copy()
        lost = old.arcs[gone].ravel()
        weight[lost] = transit[lost] = BLOCKED
        first = self._batch(weight, transit, self.network)
        bare = self._regrid(network, kept, weight, transit)
        second = self._batch(network.weight, network.transit, network, bare)
        return Update(
            first.changed_pairs + second.changed_pairs, first.changed_arcs + second.changed_arcs
        )

    def _regrid(
        self, network: Network, kept: Ints, weight: Ints, transit: Ints
    ) -> tuple[Ints, Ints]:
        """Lay the distances out for the new structure (new vertices are reached by nobody
        yet) and return the old weights on its arcs."""
        old, new = self.network.structure, network.structure
        place = np.array([old.vertex_of.get(key, -1) for key in new.vertex_ids], np.int64)
        # A router that became a segment, or the other way round, is another vertex.
        was_router = place < old.routers
        is_router = np.arange(new.vertices) < new.routers
        place[was_router != is_router] = -1
        grid = np.full((new.routers, new.vertices), self.unreached, self.distances.dtype)
        rows, columns = np.flatnonzero(place[: new.routers] >= 0), np.flatnonzero(place >= 0)
        if rows.size and columns.size:
            grid[np.ix_(rows, columns)] = self.distances[np.ix_(place[rows], place[columns])]
        diagonal = np.arange(new.routers)
        grid[diagonal, diagonal] = 0
        self.distances = grid
        bare_weight = np.full(len(new.head), BLOCKED, np.int32)
        bare_transit = bare_weight.copy()
        there = kept >= 0
        bare_weight[new.arcs[there]] = weight[old.arcs[kept[there]]]
        bare_transit[new.arcs[there]] = transit[old.arcs[kept[there]]]
        return bare_weight, bare_transit

    def _batch(
        self,
        weight: Ints,
        transit: Ints,
        network: Network,
        old: tuple[Ints, Ints] | None = None,
    ) -> Update:
        """Bring every row to ``weight`` and ``transit`` on the structure of ``network``."""
        s = network.structure
        weight_old, transit_old = old or (self.network.weight, self.network.transit)
        changed = np.flatnonzero((weight != weight_old) | (transit != transit_old)).astype(np.int32)
        pairs = 0
        if changed.size:
            weight_mid = np.maximum(weight, weight_old)
            transit_mid = np.maximum(transit, transit_old)
            nothing = self.unreached

            def work(first: int, last: int) -> int:
                return int(
                    kernels.update_rows(
                        s.indptr, s.head, s.tail, s.in_ptr, s.in_arc, changed, weight_old,
                        transit_old, weight_mid, transit_mid, weight, transit, nothing,
                        first, last, self.distances,
                    )
                )  # fmt: skip

            pairs = over_sources(s.routers, work, chunk=256)
        self.network = network
        return Update(pairs, int(changed.size))


def _common_links(old: Structure, new: Structure) -> Ints:
    """Return for each new link the old one with its id and ends, or -1."""
    kept = np.array([old.link_of.get(key, -1) for key in new.link_ids], np.int32)
    old_ends, new_ends = old.ends(), new.ends()
    for k in np.flatnonzero(kept >= 0):
        was = [old.vertex_ids[v] for v in old_ends[kept[k]]]
        now = [new.vertex_ids[v] for v in new_ends[k]]
        same_kinds = ((old_ends[kept[k]] < old.routers) == (new_ends[k] < new.routers)).all()
        if was != now or not same_kinds:
            kept[k] = -1
    return kept
