"""The ledger: every ordered pair of routers that a trial changes, before and after."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np
import numpy.typing as npt

from netsketch.routing import AllPairs, Cancelled, Network, NextHop, Routes, derive, never
from netsketch.routing.allpairs import distances_between, over_sources, unreached
from netsketch.routing.network import Distances

OUTCOMES = {derive.MOVED: "moved", derive.CUT_OFF: "cut off", derive.RESTORED: "restored"}
"""Outcome code -> the word for it."""

UNCHANGED = derive.UNCHANGED

SOURCES_AT_ONCE = 512

Columns = tuple[npt.NDArray[Any], ...]
"""Sources, targets, outcomes, costs before and after, delays before and after."""


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
    of :data:`OUTCOMES`; ``before`` and ``after`` are costs, -1 where there is no path;
    ``delay_before`` and ``delay_after`` the most delay in ms over equal-cost paths, NaN
    where it is not known.
    Next hops are derived when a row is asked for.
    """

    def __init__(self, before: Network, after: Network, parts: Sequence[Columns]) -> None:
        self.routers = before.structure.vertex_ids[: before.structure.routers]
        self._networks = before, after
        self.sources, self.targets = (_joined(parts, k, np.int32) for k in (0, 1))
        self.outcomes = _joined(parts, 2, np.int8)
        self.before, self.after = (_joined(parts, k, np.int64) for k in (3, 4))
        self.delay_before, self.delay_after = (_joined(parts, k, np.float64) for k in (5, 6))
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


def _joined(parts: Sequence[Columns], column: int, kind: type[np.generic]) -> npt.NDArray[Any]:
    if not parts:
        return np.empty(0, kind)
    return np.concatenate([part[column] for part in parts]).astype(kind, copy=False)


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
    return _collect(
        before.network,
        after.network,
        lambda first, last: (before.distances[first:last], after.distances[first:last]),
        cancelled,
    )


def compare_networks(old: Network, new: Network, cancelled: Callable[[], bool] = never) -> Ledger:
    """Return the ledger of ``new`` against ``old`` with no distances kept: a few rows at a
    time, for plans too large for all pairs at once. Slower than :func:`compare`, equal."""

    def rows(first: int, last: int) -> tuple[Distances, Distances]:
        return distances_between(old, first, last), distances_between(new, first, last)

    return _collect(old, new, rows, cancelled)


def _collect(
    old: Network,
    new: Network,
    rows: Callable[[int, int], tuple[Distances, Distances]],
    cancelled: Callable[[], bool],
) -> Ledger:
    routers = old.structure.routers
    parts: list[Columns] = []
    for first in range(0, routers, SOURCES_AT_ONCE):
        last = min(first + SOURCES_AT_ONCE, routers)
        sources = np.arange(first, last, dtype=np.int32)
        before, after = rows(first, last)
        outcomes = outcomes_of(old, new, sources, before, after, cancelled)[:, :routers]
        row, target = np.nonzero(outcomes != UNCHANGED)
        if row.size:
            was, now = _costs(before, row, target), _costs(after, row, target)
            delays = (
                _delays(network, sources, rows, row, target)
                for network, rows in ((old, before), (new, after))
            )
            parts.append((sources[row], target, outcomes[row, target], was, now, *delays))
    return Ledger(old, new, parts)


def _costs(
    rows: Distances, row: npt.NDArray[np.intp], target: npt.NDArray[np.intp]
) -> npt.NDArray[np.int64]:
    costs = rows[row, target].astype(np.int64)
    costs[costs == unreached(rows.dtype.type)] = -1
    return costs


def _delays(
    network: Network,
    sources: npt.NDArray[np.int32],
    rows: Distances,
    row: npt.NDArray[np.intp],
    target: npt.NDArray[np.intp],
) -> npt.NDArray[np.float64]:
    """Return the most delay of the pairs (``row``, ``target``); only sources that have
    such a pair are looked at."""
    if np.isnan(network.delay).all():
        return np.full(len(row), np.nan)
    s = network.structure
    needed, place = np.unique(row, return_inverse=True)
    worst = np.empty((len(needed), s.vertices))

    def work(first: int, last: int) -> None:
        part = needed[first:last]
        derive.worst_delays(
            s.indptr, s.head, s.link, s.routers, network.weight, network.transit, network.delay,
            unreached(rows.dtype.type), sources[part], rows[part], worst[first:last],
        )  # fmt: skip

    over_sources(len(needed), work, chunk=64)
    found: npt.NDArray[np.float64] = worst[place, target]
    return found


def changed_arcs(old: Network, new: Network) -> npt.NDArray[np.int32]:
    """Return the arcs that carry traffic differently in two networks on one structure."""
    differ = (old.weight != new.weight) | (old.transit != new.transit)
    return np.flatnonzero(differ).astype(np.int32)
