"""Survey totals against a recompute by definition, failure by failure."""

from __future__ import annotations

import threading

import numpy as np
import pytest
from hypothesis import given

from netsketch.analysis import Failure, Survey, failures_of, survey
from netsketch.analysis.survey import KINDS
from netsketch.model import LinkState, NodeState, Plan, Trial
from netsketch.routing import Cancelled, compile_plan
from tests import open_data, reference, strategies
from tests.examples import examples
from tests.published import plan_of

Answers = dict[str, reference.Answer]


def totals_by_definition(plan: Plan, old: Answers, failure: Failure) -> tuple[int, int, int]:
    """Return moved, cut off and worst extra cost (-1: none moved) of one failure; ``old``
    are the answers of the plan itself."""
    changes = [*(LinkState(key) for key in failure.links), *(NodeState(k) for k in failure.nodes)]
    new = reference.answers(reference.with_trial(plan, Trial(tuple(changes))))
    found = reference.outcomes_of(old, new, {k for k in failure.nodes if plan.nodes[k].up})
    extra = [
        new[a].distance[b] - old[a].distance[b]
        for (a, b), outcome in found.items()
        if outcome == "moved"
    ]
    words = list(found.values())
    assert "restored" not in words
    return words.count("moved"), words.count("cut off"), max(extra, default=-1)


def assert_as_defined(plan: Plan, found: Survey) -> None:
    old = reference.answers(plan)
    for index, failure in enumerate(found.failures):
        totals = int(found.moved[index]), int(found.cut_off[index]), int(found.extra[index])
        assert totals == totals_by_definition(plan, old, failure), failure


@examples(200)
@given(plan=strategies.plans(with_trial=False, max_nodes=7, max_links=10))
def test_totals_on_random_plans(plan: Plan) -> None:
    network = compile_plan(plan)
    before = network.weight.copy()
    for kind in KINDS:
        failures = failures_of(plan, kind)
        chosen = failures if kind != "link-pairs" else failures[:: max(1, len(failures) // 12)]
        assert_as_defined(plan, survey(network, kind, chosen))
    assert (network.weight == before).all()


@pytest.mark.parametrize("key", ["sndlib/abilene", "sndlib/polska", "topozoo/Arpanet19706"])
def test_totals_on_open_data(key: str) -> None:
    plan = open_data.plan_of(key, "ties")
    for kind in ("links", "routers"):
        assert_as_defined(plan, survey(compile_plan(plan), kind, failures_of(plan, kind)))


def test_bridges_and_articulation_points_cut_the_arpanet() -> None:
    """topozoo/Arpanet19706, derived: two bridges, and BBN, RAND and UCLA cut the network."""
    plan = open_data.plan_of("topozoo/Arpanet19706")
    links = survey(compile_plan(plan), "links", failures_of(plan, "links"))
    assert int((links.cut_off > 0).sum()) == 2
    routers = survey(compile_plan(plan), "routers", failures_of(plan, "routers"))
    cutting = {
        plan.nodes[f.ids[0]].label
        for f, cut in zip(routers.failures, routers.cut_off, strict=True)
        if cut
    }
    assert cutting == {"BBN", "RAND", "UCLA"}


def test_worst_first() -> None:
    plan = plan_of("a-b 1, b-c 1, c-a 1, c-d 1")
    found = survey(compile_plan(plan), "links", failures_of(plan, "links"))
    first = found.failures[found.ranked()[0]]
    assert first.ids == ("c-d",)
    assert int(found.cut_off[found.ranked()[0]]) == 6


def test_a_link_named_twice_fails_once() -> None:
    plan = plan_of("a-b 1, a-b2 1, b2-b 1")
    twice = Failure(("a-b", "a-b"), links=("a-b", "a-b"), nodes=("b",))
    assert_as_defined(plan, survey(compile_plan(plan), "links", [twice]))
    # Taken away twice, b-d would leave d without its other equal-cost way, and x with a move.
    plan = plan_of("x-a 1, a-b 1, a-c 1, b-d 1, c-d 1")
    twice = Failure(("b-d", "b-d"), links=("b-d", "b-d"))
    assert_as_defined(plan, survey(compile_plan(plan), "links", [twice]))


def test_progress_ends_at_one_and_no_failures_is_an_answer() -> None:
    plan = plan_of("a-b 1, b-c 1")
    parts: list[float] = []
    survey(compile_plan(plan), "links", failures_of(plan, "links"), parts.append)
    assert parts == sorted(parts)
    assert parts[-1] == 1.0
    assert len(survey(compile_plan(plan), "groups", []).moved) == 0


def test_cancelled_while_running() -> None:
    plan = open_data.plan_of("sndlib/germany50")
    asked = threading.Event()
    with pytest.raises(Cancelled):
        survey(
            compile_plan(plan),
            "link-pairs",
            failures_of(plan, "link-pairs"),
            lambda _: asked.set(),
            asked.is_set,
        )
    assert asked.is_set()


def test_unknown_kind_is_refused() -> None:
    with pytest.raises(ValueError, match="links, routers, groups, link-pairs"):
        failures_of(plan_of("a-b 1"), "planets")


def test_changed_pairs_are_those_whose_distance_changes() -> None:
    plan = plan_of("a-b 1, b-c 1, c-d 1")
    found = survey(compile_plan(plan), "links", failures_of(plan, "links"))
    assert found.changed.tolist() == [6, 8, 6]
    assert found.changed.dtype == np.int64
