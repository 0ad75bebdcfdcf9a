"""Distances between all pairs for whoever works in the background: one thread at a time."""

from __future__ import annotations

from collections.abc import Callable

from netsketch.analysis import Ledger, compare, compare_networks
from netsketch.analysis.tipping import Tipping, tipping
from netsketch.routing import AllPairs, Network

MOST_KEPT = 5_000
"""Routers up to which all pairs are kept: 100 MB for the plan and as much for the trial
with distances of 32 bits, twice that with 64."""


class PairStates:
    """The distances between all pairs in the plan and in the trial, each moved on by what
    changed since they were last asked for. Above :data:`MOST_KEPT` routers nothing is kept
    and every answer is computed anew, ledgers a few sources at a time."""

    def __init__(self) -> None:
        self._planned: AllPairs | None = None
        self._tried: AllPairs | None = None

    def ledger(self, before: Network, after: Network, cancelled: Callable[[], bool]) -> Ledger:
        """Return the ledger of ``after`` against ``before``. Raises ``Cancelled``."""
        if before.structure.routers > MOST_KEPT:
            self._planned = self._tried = None
            return compare_networks(before, after, cancelled)
        if self._planned is None or self._tried is None:
            self._planned = AllPairs(before, cancelled)
            self._tried = self._planned.copy()
        self._planned.move_to(before)
        self._tried.move_to(after)
        return compare(self._planned, self._tried, cancelled)

    def tipping(
        self, network: Network, link: str, cancelled: Callable[[], bool]
    ) -> tuple[Tipping, Tipping]:
        """Return the tipping costs of a link, out and back. Raises ``Cancelled``."""
        if self._tried is None or network.structure.routers > MOST_KEPT:
            pairs = AllPairs(network, cancelled)
        else:
            pairs = self._tried
            pairs.move_to(network)
        return (
            tipping(pairs, link, cancelled=cancelled),
            tipping(pairs, link, back=True, cancelled=cancelled),
        )
