"""What every failure does to the traffic: demand lost and the fullest link."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from netsketch.analysis.load import demands_by_target, load
from netsketch.analysis.survey import Failure
from netsketch.model import Demand, LinkState, NodeState, Trial
from netsketch.routing import Cancelled, Network, never


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
    amounts = demands_by_target(network, demands)
    before = load(network, amounts).undelivered_mbps
    lost, worst = np.zeros(len(failures)), np.full(len(failures), np.nan)
    links = []
    for index, failure in enumerate(failures):
        if cancelled():
            raise Cancelled
        found = load(network.laid_over(as_trial(failure)), amounts)
        lost[index] = found.undelivered_mbps - before
        fullest = found.worst()
        if fullest is not None:
            worst[index] = fullest[0]
        links.append(fullest[1] if fullest else "")
        progress((index + 1) / len(failures))
    return SurveyLoads(lost, worst, tuple(links))
