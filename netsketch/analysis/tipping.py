"""Tipping costs: which pairs use a link in one direction, and at which cost of it they
move on to it or off it.

A pair (s, t) uses the arc from u to v at cost c when c <= T(s, t), with
T = D0(s, t) - D0(s, u) - D0(v, t) and D0 the distances without that arc. Below T all of
its traffic takes the arc, at T the arc is one of several equal-cost ways, above T it is
none. So the step curve is exact: no cost is tried out.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from netsketch.routing import BLOCKED, AllPairs, Cancelled, Network, distances_from, never
from netsketch.routing.allpairs import unreached
from netsketch.routing.network import Distances

Counts = npt.NDArray[np.int64]

NEVER = -1
ALWAYS = 2**62
"""Tipping cost of a pair that has no way but over the arc."""


@dataclass(frozen=True)
class Tipping:
    """The pairs that one direction of a link can carry, by tipping cost, highest first.

    ``sources`` and ``targets`` are router indexes (P,), ``costs`` (P,) the tipping cost of
    each pair, :data:`ALWAYS` where there is no other way; pairs that never use it at a
    cost of 1 or more are left out.
    """

    link: str
    tail: str
    head: str
    routers: tuple[str, ...]
    sources: npt.NDArray[np.int32]
    targets: npt.NDArray[np.int32]
    costs: Counts

    def using(self, cost: int) -> int:
        """Return how many pairs use the arc at ``cost``, those that share it included."""
        return int((self.costs >= cost).sum())

    def sharing(self, cost: int) -> int:
        """Return how many of them have equal-cost ways besides."""
        return int((self.costs == cost).sum())

    def steps(self, highest: int) -> list[tuple[int, int, int]]:
        """Return the step curve for costs 1 to ``highest``: (cost, pairs using it from the
        cost before up to this one, pairs that share at this one), by rising cost. Above
        the last cost only pairs without another way use it."""
        costs = np.unique(self.costs[self.costs <= highest])
        return [(int(c), self.using(int(c)), self.sharing(int(c))) for c in costs]

    def pairs_at(self, cost: int) -> list[tuple[str, str]]:
        """Return the pairs that move off the arc when its cost rises above ``cost``."""
        return [
            (self.routers[self.sources[i]], self.routers[self.targets[i]])
            for i in np.flatnonzero(self.costs == cost)
        ]

    def pairs_using(self, cost: int, most: int) -> list[tuple[str, str]]:
        """Return up to ``most`` of the pairs that use the arc at ``cost``."""
        return [
            (self.routers[self.sources[i]], self.routers[self.targets[i]])
            for i in np.flatnonzero(self.costs >= cost)[:most]
        ]


def tipping(
    pairs: AllPairs, link: str, *, back: bool = False, cancelled: Callable[[], bool] = never
) -> Tipping:
    """Return the tipping costs of ``link`` from its source to its target, or ``back``.

    ``pairs`` is left as it is: the distances without the arc come from a copy. Where the
    arc carries nothing (link or end down) no pair has a tipping cost. Raises
    :class:`~netsketch.routing.Cancelled`.
    """
    network = pairs.network
    s = network.structure
    arc = int(s.arcs[s.link_of[link], 1 if back else 0])
    u, v = int(s.tail[arc]), int(s.head[arc])
    routers = s.vertex_ids[: s.routers]
    names = s.vertex_ids[u], s.vertex_ids[v]
    if network.weight[arc] == BLOCKED:
        none = np.empty(0, np.int32)
        return Tipping(link, *names, routers, none, none, np.empty(0, np.int64))
    without = pairs.copy()
    without.move_to(network.without_arc(arc))
    if cancelled():
        raise Cancelled
    nothing = without.unreached
    to_u = without.distances[:, u]
    onward = _onward(without.network, v)
    costs = _tipping_costs(network, without.distances[:, : s.routers], to_u, onward, nothing, u, v)
    sources, targets = np.nonzero(costs >= 1)
    order = np.argsort(-costs[sources, targets], kind="stable")
    sources, targets = sources[order], targets[order]
    return Tipping(
        link, *names, routers, sources.astype(np.int32), targets.astype(np.int32),
        costs[sources, targets],
    )  # fmt: skip


def _onward(network: Network, v: int) -> Distances:
    """Return the distances from ``v`` as somebody passing through it."""
    row = distances_from(network, v)
    if network.drained[v]:
        reach = int(row[v])
        row[:] = unreached(row.dtype.type)
        row[v] = reach
    return row


def _tipping_costs(
    network: Network,
    direct: Distances,
    to_u: Distances,
    onward: Distances,
    nothing: int,
    u: int,
    v: int,
) -> Counts:
    """Return T for every pair of routers (R, R); :data:`NEVER` where the arc cannot be on
    a way."""
    routers = direct.shape[0]
    ahead = onward[:routers]
    over = to_u.astype(np.int64)[:, None] + ahead.astype(np.int64)[None, :]
    costs = direct.astype(np.int64) - over
    costs[direct == nothing] = ALWAYS
    reaches = to_u != nothing
    if network.drained[u]:  # only its own traffic leaves a drained router
        reaches = reaches & (np.arange(routers) == u)
    costs[~reaches, :] = NEVER
    costs[:, ahead == nothing] = NEVER
    np.fill_diagonal(costs, NEVER)
    return costs
