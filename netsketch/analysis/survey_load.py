"""What every failure does to the traffic: demand lost and the fullest link."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from netsketch.analysis.load import Load, demands_by_target
from netsketch.analysis.survey import Failure
from netsketch.model import Demand, LinkState, NodeState, Trial
from netsketch.routing import Cancelled, Network, Sink, never


def as_trial(failure: Failure) -> Trial:
    """Return the trial that makes a failure happen."""
    links = tuple(LinkState(key) for key in dict.fromkeys(failure.links))
    return Trial((*links, *(NodeState(key) for key in dict.fromkeys(failure.nodes))))


@dataclass(frozen=True)
class SurveyLoads:
    """Per failure (F,): demand lost in Mbit/s beyond what is lost already, the highest
    utilisation (NaN where no capacity is known) and the link it is on ("" for none)."""

    lost_mbps: npt.NDArray[np.float64]
    worst_utilisation: npt.NDArray[np.float64]
    worst_link: tuple[str, ...]


def survey_loads(
    network: Network,
    failures: Sequence[Failure],
    demands: Sequence[Demand],
    progress: Callable[[float], None] = lambda _: None,
    cancelled: Callable[[], bool] = never,
) -> SurveyLoads:
    """Return what each failure alone does to the traffic on ``network``.

    Demands that begin or end at a failed router are lost. Raises
    :class:`~netsketch.routing.Cancelled`.
    """
    flows = _Flows(network, demands_by_target(network, demands))
    lost, worst = np.zeros(len(failures)), np.full(len(failures), np.nan)
    links = []
    for index, failure in enumerate(failures):
        if cancelled():
            raise Cancelled
        found = flows.after(network.laid_over(as_trial(failure)))
        lost[index] = found.undelivered_mbps - flows.undelivered.sum()
        fullest = found.worst()
        if fullest is not None:
            worst[index] = fullest[0]
        links.append(fullest[1] if fullest else "")
        progress((index + 1) / len(failures))
    return SurveyLoads(lost, worst, tuple(links))


class _Flows:
    """The flow towards each target (T, A), so that a failure asks only those anew whose
    sink tree it touches."""

    def __init__(self, network: Network, amounts: dict[int, npt.NDArray[np.float64]]) -> None:
        self._network = network
        self._amounts = list(amounts.items())
        arcs = len(network.structure.head)
        self._used = np.zeros((len(amounts), arcs), np.bool_)
        self._flow = np.zeros((len(amounts), arcs))
        self.undelivered = np.zeros(len(amounts))
        for row, (target, amount) in enumerate(self._amounts):
            sink = Sink(network, target)
            self._used[row, sink.arcs] = True
            self._flow[row] = sink.pour(amount)
            self.undelivered[row] = amount[sink.row == sink.unreached].sum()
        self._total = self._flow.sum(axis=0)

    def after(self, failed: Network) -> Load:
        """Return the load on a network in which some arcs carry nothing any more."""
        gone = np.flatnonzero(failed.weight != self._network.weight)
        touched = np.flatnonzero(self._used[:, gone].any(axis=1))
        mbps = self._total - self._flow[touched].sum(axis=0)
        undelivered = self.undelivered.sum() - self.undelivered[touched].sum()
        for row in touched:
            target, amount = self._amounts[row]
            sink = Sink(failed, target)
            mbps += sink.pour(amount)
            undelivered += amount[sink.row == sink.unreached].sum()
        # What is left of sums that cancel is no load.
        mbps[mbps < 1e-9 * max(self._total.max(initial=0.0), 1e-9)] = 0.0
        return Load(failed, mbps, float(undelivered))
