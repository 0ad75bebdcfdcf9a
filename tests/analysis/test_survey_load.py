"""Loads in the survey equal the load of each failure laid over the plan."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings

from netsketch.analysis import failures_of
from netsketch.analysis.load import load_of
from netsketch.analysis.survey_load import survey_loads
from netsketch.model import LinkState, NodeState, Plan, Trial
from netsketch.routing import Cancelled, compile_plan
from tests import reference, strategies
from tests.demos import demo


@settings(deadline=None, max_examples=40)
@given(plan=strategies.plans(with_trial=False, max_nodes=7, max_links=9))
def test_each_failure_alone(plan: Plan) -> None:
    network = compile_plan(plan)
    before = load_of(plan, network)
    for kind in ("links", "routers", "groups"):
        failures = failures_of(plan, kind)
        found = survey_loads(network, failures, list(plan.demands))
        for index, failure in enumerate(failures):
            changes = [*map(LinkState, failure.links), *map(NodeState, failure.nodes)]
            failed = reference.with_trial(plan, Trial(tuple(changes)))
            after = load_of(failed, compile_plan(failed))
            lost = after.undelivered_mbps - before.undelivered_mbps
            assert found.lost_mbps[index] == pytest.approx(lost)
            worst = after.worst()
            assert (worst is None) == np.isnan(found.worst_utilisation[index])
            if worst is not None:
                assert found.worst_utilisation[index] == pytest.approx(worst[0])


def test_cancelled() -> None:
    plan = demo("water-utility")
    with pytest.raises(Cancelled):
        survey_loads(
            compile_plan(plan), failures_of(plan, "links"), list(plan.demands),
            cancelled=lambda: True,
        )  # fmt: skip
