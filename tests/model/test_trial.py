"""The trial: one change for each aspect of a thing, adopted or discarded as a whole."""

from __future__ import annotations

import pytest
from hypothesis import given, settings

from netsketch.model import (
    Drained,
    LinkCost,
    LinkState,
    NodeState,
    Plan,
    PlanError,
    Router,
    Segment,
    Settings,
    Trial,
    TrialChange,
    edits,
)
from tests import strategies


@pytest.fixture
def plan() -> Plan:
    made = Plan()
    nodes = [Router(id="r1"), Router(id="r2", drained=True), Segment(id="s3", up=False)]
    made.apply(edits.add(made, *nodes))
    for ends in (("r1", "r2"), ("s3", "r1")):
        made.apply(edits.add_link(made, *ends))
    return made


def lay(plan: Plan, *changes: TrialChange) -> None:
    plan.apply(edits.try_changes(plan, changes, "try"))


def test_a_later_change_takes_the_place_of_an_earlier_one(plan: Plan) -> None:
    lay(plan, LinkCost("l1", 5, 5), LinkState("l1"), LinkCost("l1", 6, 7))
    assert list(plan.trial) == [LinkCost("l1", 6, 7), LinkState("l1")]
    assert edits.costs_in_trial(plan, "l1") == (6, 7)
    assert (plan.links["l1"].cost, plan.links["l1"].cost_back) == (10, 10)


def test_a_change_back_to_the_plan_leaves_the_trial(plan: Plan) -> None:
    lay(plan, LinkState("l1"), NodeState("r1"), Drained("r1"), LinkCost("l1", 5, 5))
    lay(plan, LinkState("l1", up=True), NodeState("r1", up=True))
    lay(plan, Drained("r1", drained=False), LinkCost("l1", 10, 10))
    assert not plan.trial
    lay(plan, NodeState("s3", up=False), Drained("r2", drained=True))
    assert not plan.trial


def test_states_are_read_through_the_trial(plan: Plan) -> None:
    assert edits.is_up(plan, link="l1")
    assert not edits.is_up(plan, node="s3")
    assert edits.is_drained(plan, "r2")
    assert not edits.is_drained(plan, "s3")
    lay(plan, LinkState("l1"), NodeState("s3", up=True), Drained("r2", drained=False))
    assert not edits.is_up(plan, link="l1")
    assert edits.is_up(plan, node="s3")
    assert not edits.is_drained(plan, "r2")


def test_toggling_takes_all_down_or_brings_all_up(plan: Plan) -> None:
    plan.apply(edits.toggle_down(plan, nodes=["r1", "s3"], links=["l1"]))
    assert list(plan.trial) == [NodeState("r1"), LinkState("l1")]
    plan.apply(edits.toggle_down(plan, nodes=["r1", "s3"], links=["l1"]))
    assert list(plan.trial) == [NodeState("s3", up=True)]


def test_only_routers_drain(plan: Plan) -> None:
    plan.apply(edits.toggle_drained(plan, ["r1", "r2", "s3"]))
    assert list(plan.trial) == [Drained("r1")]
    plan.apply(edits.toggle_drained(plan, ["r1", "r2", "s3"]))
    assert list(plan.trial) == [Drained("r2", drained=False)]


def test_draining_by_cost_raises_every_cost_of_leaving(plan: Plan) -> None:
    plan.apply(edits.drain_by_cost(plan, "r1"))
    # RFC 6987, 2: MaxLinkMetric is 0xffff.
    assert list(plan.trial) == [LinkCost("l1", 65_535, 10), LinkCost("l2", 0, 65_535)]


@pytest.mark.parametrize("cost", [0, -1, 65_536])
def test_costs_on_trial_hold_to_the_range(plan: Plan, cost: int) -> None:
    with pytest.raises(PlanError, match=r"“l1”.*1 to 65535"):
        edits.try_costs(plan, "l1", cost, 10)
    plan.apply(edits.try_costs(plan, "l2", 0, 30))
    assert edits.costs_in_trial(plan, "l2") == (0, 30)


def test_single_changes_are_dropped(plan: Plan) -> None:
    lay(plan, LinkState("l1"), Drained("r1"))
    plan.apply(edits.drop_changes(plan, [LinkState("l1")]))
    assert list(plan.trial) == [Drained("r1")]


def test_a_trial_that_the_new_cost_style_cannot_hold_is_refused(plan: Plan) -> None:
    lay(plan, LinkCost("l1", 1000, 10))
    with pytest.raises(PlanError, match=r"“l1”.*1 to 63"):
        plan.apply(edits.set_settings(plan, cost_style="isis-narrow"))
    assert plan.settings == Settings()


def test_adopting_makes_the_trial_the_plan(plan: Plan) -> None:
    lay(plan, LinkState("l1"), LinkCost("l1", 3, 4), Drained("r1"), NodeState("s3", up=True))
    before = plan.snapshot()
    inverse = plan.apply(edits.adopt(plan))
    link = plan.links["l1"]
    assert (link.up, link.cost, link.cost_back) == (False, 3, 4)
    assert plan.nodes["r1"] == Router(id="r1", drained=True)
    assert plan.nodes["s3"].up
    assert plan.trial == Trial()
    plan.apply(inverse)
    assert plan == before


def test_discarding_leaves_the_plan_as_it_was(plan: Plan) -> None:
    before = plan.snapshot()
    lay(plan, LinkState("l1"), Drained("r1"))
    plan.apply(edits.discard(plan))
    assert plan == before


@settings(max_examples=60, deadline=None)
@given(strategies.plans())
def test_adopting_any_trial_changes_no_state(plan: Plan) -> None:
    states = {
        "up": [edits.is_up(plan, node=node.id) for node in plan.nodes],
        "links": [edits.is_up(plan, link=link.id) for link in plan.links],
        "drained": [edits.is_drained(plan, node.id) for node in plan.nodes],
        "costs": [edits.costs_in_trial(plan, link.id) for link in plan.links],
    }
    drawn = plan.links.keys()
    inverse = plan.apply(edits.adopt(plan))
    links = [plan.links[key] for key in drawn]
    assert not plan.trial
    assert states["up"] == [node.up for node in plan.nodes]
    assert states["links"] == [link.up for link in links]
    assert states["drained"] == [isinstance(n, Router) and n.drained for n in plan.nodes]
    assert states["costs"] == [(link.cost, link.cost_back) for link in links]
    assert plan.apply(inverse) == edits.adopt(plan)
