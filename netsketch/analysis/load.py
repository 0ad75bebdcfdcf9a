"""Load: what every link carries of the demands, split equally at every hop."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from netsketch.model import Demand, Plan
from netsketch.routing import Cancelled, Network, Sink, never

Floats = npt.NDArray[np.float64]


@dataclass(frozen=True)
class Load:
    """Loads by arc (A,) in Mbit/s on ``network``, and what cannot be delivered.

    ``utilisation`` is load over capacity, NaN where the capacity is not known.
    """

    network: Network
    mbps: Floats
    undelivered_mbps: float

    @property
    def utilisation(self) -> Floats:
        capacity = self.network.capacity[self.network.structure.link]
        found: Floats = self.mbps / capacity
        return found

    def worst(self) -> tuple[float, str] | None:
        """Return the highest utilisation and the link it is on; ``None`` where no capacity
        is known."""
        used = self.utilisation
        if not len(used) or np.isnan(used).all():
            return None
        arc = int(np.nanargmax(used))
        s = self.network.structure
        return float(used[arc]), s.link_ids[s.link[arc]]

    def rows(self) -> list[tuple[str, str, str, float, float | None]]:
        """Return (link, tail, head, Mbit/s, utilisation or ``None``) for both directions of
        every link, in the order of the links."""
        s, used = self.network.structure, self.utilisation
        return [
            (
                link,
                s.vertex_ids[s.tail[arc]],
                s.vertex_ids[s.head[arc]],
                float(self.mbps[arc]),
                None if np.isnan(used[arc]) else float(used[arc]),
            )
            for k, link in enumerate(s.link_ids)
            for arc in s.arcs[k]
        ]


def demands_by_target(network: Network, demands: Iterable[Demand]) -> dict[int, Floats]:
    """Return what every vertex (V,) has for each target that has any demand."""
    s = network.structure
    found: dict[int, Floats] = {}
    for demand in demands:
        target = s.vertex_of[demand.target]
        if target not in found:
            found[target] = np.zeros(s.vertices)
        found[target][s.vertex_of[demand.source]] += demand.mbps
    return found


def load(
    network: Network, amounts: dict[int, Floats], cancelled: Callable[[], bool] = never
) -> Load:
    """Return the load of the demands ``amounts`` (see :func:`demands_by_target`).

    Demands from or to a router that is down count as undelivered. Raises
    :class:`~netsketch.routing.Cancelled`.
    """
    mbps = np.zeros(len(network.structure.head))
    undelivered = 0.0
    for target, amount in amounts.items():
        if cancelled():
            raise Cancelled
        sink = Sink(network, target)
        mbps += sink.pour(amount)
        undelivered += float(amount[sink.row == sink.unreached].sum())
    return Load(network, mbps, undelivered)


def load_of(plan: Plan, network: Network) -> Load:
    """Return the load of a plan's own demands on ``network``."""
    return load(network, demands_by_target(network, plan.demands))
