"""The ledger: every ordered pair of routers that a trial changes, before and after."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
import numpy.typing as npt

from netsketch.routing import AllPairs, Cancelled, Network, NextHop, Routes, derive, never
from netsketch.routing.allpairs import over_sources, unreached
from netsketch.routing.network import Distances

OUTCOMES = {derive.MOVED: "moved", derive.CUT_OFF: "cut off", derive.RESTORED: "restored"}
"""Outcome code -> the word for it."""

UNCHANGED = derive.UNCHANGED


@dataclass(frozen=True, slots=True)
class LedgerRow:
    """One pair of routers: ids, what becomes of it, costs and next hops before and after."""

    source: str
    target: str
    outcome: str
    cost_before: int | None
    cost_after: int | None
    next_hops_before: tuple[NextHop, ...]
    next_hops_after: tuple[NextHop, ...]


class Ledger:
    """Trial against plan over all pairs, as columns of equal length.

    ``sources`` and ``targets`` are indexes into ``routers``; ``outcomes`` holds the codes
    of :data:`OUTCOMES`; ``before`` and ``after`` are costs, -1 where there is no path.
    Next hops are derived when a row is asked for.
    """

    def __init__(self, before: AllPairs, after: AllPairs, outcomes: npt.NDArray[np.int8]) -> None:
        self.routers = before.network.structure.vertex_ids[: before.network.structure.routers]
        self._networks = before.network, after.network
        sources, targets = np.nonzero(outcomes != UNCHANGED)
        self.sources, self.targets = sources.astype(np.int32), targets.astype(np.int32)
        self.outcomes = outcomes[sources, targets]
        self.before, self.after = (_costs(pairs, sources, targets) for pairs in (before, after))
        self.moved = int((self.outcomes == derive.MOVED).sum())
        self.cut_off = int((self.outcomes == derive.CUT_OFF).sum())
        self.restored = int((self.outcomes == derive.RESTORED).sum())
        self._routes = lru_cache(maxsize=64)(self._routes_from)

    def __len__(self) -> int:
        return len(self.sources)

    def __iter__(self) -> Iterator[LedgerRow]:
        return (self.row(index) for index in range(len(self)))

    def _routes_from(self, source: int) -> tuple[Routes, Routes]:
        return Routes(self._networks[0], source), Routes(self._networks[1], source)

    def row(self, index: int) -> LedgerRow:
        """Return one row in full."""
        source, target = int(self.sources[index]), int(self.targets[index])
        before, after = self._routes(source)
        return LedgerRow(
            self.routers[source],
            self.routers[target],
            OUTCOMES[int(self.outcomes[index])],
            before.cost(target),
            after.cost(target),
            before.next_hops(target),
            after.next_hops(target),
        )


def _costs(
    pairs: AllPairs, sources: npt.NDArray[np.intp], targets: npt.NDArray[np.intp]
) -> npt.NDArray[np.int64]:
    costs = pairs.distances[sources, targets].astype(np.int64)
    costs[costs == pairs.unreached] = -1
    return costs


def outcomes_of(
    old: Network,
    new: Network,
    sources: npt.NDArray[np.int32],
    before: Distances,
    after: Distances,
    cancelled: Callable[[], bool] = never,
) -> npt.NDArray[np.int8]:
    """Return what becomes of every vertex (S, V) for each of ``sources`` (S,), whose
    distances are ``before`` in ``old`` and ``after`` in ``new``: codes of
    :data:`OUTCOMES`, or :data:`UNCHANGED`.

    A pair is moved when it is connected in both and its cost or its set of next hops
    differs, cut off when connected before only, restored when connected after only. Pairs
    that begin or end at a vertex that failed (up before, down after) count as unchanged.
    Raises ``ValueError`` where the networks have different structures, and
    :class:`~netsketch.routing.Cancelled`.
    """
    s = old.structure
    if s is not new.structure:
        raise ValueError("the two networks have different structures")
    changed = changed_arcs(old, new)
    outcomes = np.full((len(sources), s.vertices), UNCHANGED, np.int8)

    def work(first: int, last: int) -> None:
        if cancelled():
            raise Cancelled
        part = slice(first, last)
        derive.compare_rows(
            s.indptr, s.head, s.tail, s.first_parallel, s.routers, changed, old.weight,
            old.transit, new.weight, new.transit, unreached(before.dtype.type), sources[part],
            before[part], after[part], outcomes[part],
        )  # fmt: skip

    over_sources(len(sources), work, chunk=64)
    failed = old.vertex_up & ~new.vertex_up
    outcomes[failed[sources], :] = UNCHANGED
    outcomes[:, failed] = UNCHANGED
    return outcomes


def compare(before: AllPairs, after: AllPairs, cancelled: Callable[[], bool] = never) -> Ledger:
    """Return the ledger of ``after`` against ``before``: :func:`outcomes_of` every ordered
    pair of routers."""
    old, new = before.network, after.network
    routers = np.arange(old.structure.routers, dtype=np.int32)
    outcomes = outcomes_of(old, new, routers, before.distances, after.distances, cancelled)
    return Ledger(before, after, outcomes[:, : len(routers)])


def changed_arcs(old: Network, new: Network) -> npt.NDArray[np.int32]:
    """Return the arcs that carry traffic differently in two networks on one structure."""
    differ = (old.weight != new.weight) | (old.transit != new.transit)
    return np.flatnonzero(differ).astype(np.int32)
