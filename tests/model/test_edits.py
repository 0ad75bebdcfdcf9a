"""Edits by name: what each changes, how it is called in "Undo: …", and no more."""

from __future__ import annotations

from collections.abc import Callable

import pytest

from netsketch.model import (
    Demand,
    Edit,
    Link,
    LinkCost,
    LinkState,
    Plan,
    PlanError,
    Router,
    Segment,
    edits,
)
from netsketch.model.edits import replace


@pytest.fixture
def plan() -> Plan:
    """A triangle of routers with a segment at r1, and demands both ways between r1 and r2."""
    made = Plan()
    for x in range(3):
        made.apply(edits.add_router(made, 200 * x, 0))
    made.apply(edits.add_segment(made, 0, 200, "LAN"))
    for ends in (("r1", "r2"), ("r2", "r3"), ("r3", "r1"), ("r1", "s4")):
        made.apply(edits.add_link(made, *ends))
    demands = [Demand(source=a, target=b, mbps=5) for a, b in (("r1", "r2"), ("r2", "r1"))]
    made.apply(edits.set_demands(made, demands))
    return made


def test_drawing_gives_new_ids_names_and_costs(plan: Plan) -> None:
    assert plan.nodes["r2"] == Router(id="r2", name="R2", x=200, y=0)
    assert plan.nodes["s4"] == Segment(id="s4", name="LAN", x=0, y=200)
    assert plan.links["l1"] == Link(id="l1", source="r1", target="r2", cost=10, cost_back=10)
    assert (plan.links["l4"].cost, plan.links["l4"].cost_back) == (10, 0)
    link = edits.new_link(plan, "s4", "r2", 7, capacity_mbps=100)
    assert (link.cost, link.cost_back, link.capacity_mbps) == (0, 7, 100)


@pytest.mark.parametrize(
    ("make", "label"),
    [
        (lambda p: edits.add_router(p, 0, 0, "Mole"), "draw router Mole"),
        (lambda p: edits.add_segment(p, 0, 0), "draw segment S5"),
        (lambda p: edits.add_link(p, "r1", "r3"), "draw link R1 to R3"),
        (lambda p: edits.add(p, Router(id="a"), Router(id="b")), "add 2 things"),
        (lambda p: edits.remove(p, nodes=["r1"]), "delete R1"),
        (lambda p: edits.remove(p, nodes=["r1", "r2"]), "delete 2 routers"),
        (lambda p: edits.remove(p, nodes=["r1", "s4"]), "delete 1 router and 1 segment"),
        (lambda p: edits.remove(p, links=["l1"]), "delete link l1"),
        (lambda p: edits.remove(p, links=["l1", "l2"]), "delete 2 links"),
        (lambda p: edits.move(p, {"r1": (1, 1)}), "move R1"),
        (lambda p: edits.rename(p, "r1", "Mole"), "rename R1"),
        (lambda p: edits.set_costs(p, "l1", 3, 4), "set cost of link l1"),
        (lambda p: edits.toggle_down(p, links=["l1"]), "take link l1 down"),
        (lambda p: edits.toggle_drained(p, ["r1"]), "drain R1"),
        (lambda p: edits.drain_by_cost(p, "r1"), "drain R1 by cost"),
    ],
)
def test_labels_say_what_an_undo_takes_back(
    plan: Plan, make: Callable[[Plan], Edit], label: str
) -> None:
    assert make(plan).label == label


def test_an_edit_is_only_read_off_the_plan(plan: Plan) -> None:
    before = plan.snapshot()
    edits.remove(plan, nodes=["r1"])
    edits.move(plan, {"r1": (9, 9)})
    edits.toggle_down(plan, nodes=["r1"])
    assert plan == before


def test_deleting_takes_what_hangs_on_it_in_the_trial_too(plan: Plan) -> None:
    changes = [LinkState("l1"), LinkState("l2"), LinkCost("l3", 5, 5)]
    plan.apply(edits.try_changes(plan, changes, "try"))
    before = plan.snapshot()
    inverse = plan.apply(edits.remove(plan, nodes=["r1"]))
    assert plan.nodes.keys() == ["r2", "r3", "s4"]
    assert plan.links.keys() == ["l2"]
    assert len(plan.demands) == 0
    assert list(plan.trial) == [LinkState("l2")]
    plan.apply(inverse)
    assert plan == before


def test_changes_to_the_same_value_have_no_steps(plan: Plan) -> None:
    assert not edits.move(plan, {"r1": (0, 0)})
    assert not edits.rename(plan, "r1", "R1")
    assert not edits.set_costs(plan, "l1", 10, 10)
    assert not edits.try_changes(plan, [LinkState("l1", up=True)], "try")
    assert edits.rename(plan, "r1", "Mole")


def test_changing_what_is_not_there_is_refused(plan: Plan) -> None:
    with pytest.raises(PlanError, match="“r9”"):
        edits.change(plan, [replace(plan.nodes["r1"], id="r9")], "change")


def test_nudges_carry_the_name_they_merge_under(plan: Plan) -> None:
    edit = edits.move(plan, {"r1": (5, 0)}, merge="nudge")
    assert edit.merge == edit.inverse().merge == "nudge"


def test_demands_are_set_as_a_whole(plan: Plan) -> None:
    wanted = [Demand(source="r1", target="r3", mbps=9), Demand(source="r1", target="r2", mbps=5)]
    inverse = plan.apply(edits.set_demands(plan, wanted))
    assert list(plan.demands) == wanted
    plan.apply(inverse)
    assert [demand.key for demand in plan.demands] == [("r1", "r2"), ("r2", "r1")]
