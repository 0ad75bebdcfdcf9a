"""The plan: every edit whole or not at all, every inverse exact, indexes always right."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from hypothesis.stateful import RuleBasedStateMachine, initialize, invariant, rule

from netsketch.formats import native
from netsketch.model import (
    Add,
    Change,
    ChangeSettings,
    ChangeTrial,
    Demand,
    Drained,
    Edit,
    Link,
    LinkCost,
    LinkState,
    NodeState,
    Plan,
    PlanError,
    Remove,
    Router,
    Segment,
    Settings,
    SharedRiskGroup,
    Step,
    Trial,
    edits,
)
from netsketch.model.edits import replace
from tests import strategies


def link(key: str, source: str, target: str, **fields: object) -> Link:
    values = {"cost": 10, "cost_back": 10, **fields}
    return Link(id=key, source=source, target=target, **values)  # type: ignore[arg-type]


@pytest.fixture
def plan() -> Plan:
    """Two routers and a segment, a parallel pair of links, a group and a demand."""
    made = Plan()
    nodes = [Router(id="r1", x=0, y=0), Router(id="r2"), Segment(id="s1")]
    group = SharedRiskGroup(id="g1", name="duct")
    links = [link("l1", "r1", "r2", groups=("g1",)), link("l2", "r1", "r2", cost_back=25)]
    made.apply(edits.add(made, *nodes, group))
    made.apply(edits.add(made, *links, link("l3", "r1", "s1", cost_back=0)))
    made.apply(edits.add(made, Demand(source="r1", target="r2", mbps=400)))
    return made


def refused(plan: Plan, *steps: Step) -> str:
    """Return the words with which ``plan`` refuses these steps, having changed nothing."""
    before, revision = plan.snapshot(), plan.revision
    with pytest.raises(PlanError) as found:
        plan.apply(Edit("try", steps))
    assert plan == before
    assert plan.revision == revision
    return str(found.value)


# -- applying and taking back -----------------------------------------------------------


def test_a_refused_step_takes_the_steps_before_it_back(plan: Plan) -> None:
    router = Router(id="r9")
    said = refused(plan, Add(router, 0), Add(link("l9", "r9", "r1"), 0), Add(router, 0))
    assert "“r9” is there already" in said
    assert "r9" not in plan.nodes
    assert plan.links_at("r1") == [plan.links[key] for key in ("l1", "l2", "l3")]


def test_an_edit_raises_the_revision_and_returns_its_inverse(plan: Plan) -> None:
    before, revision = native.dumps(plan), plan.revision
    inverse = plan.apply(edits.remove(plan, nodes=["r1"]))
    assert plan.revision == revision + 1
    assert plan.nodes.keys() == ["r2", "s1"]
    assert len(plan.links) == len(plan.demands) == 0
    plan.apply(inverse)
    assert native.dumps(plan) == before
    assert plan.revision == revision + 2


def test_items_stand_where_they_were_put(plan: Plan) -> None:
    plan.apply(Edit("in between", (Add(Router(id="r0"), 1),)))
    assert plan.nodes.keys() == ["r1", "r0", "r2", "s1"]
    plan.apply(Edit("out", (Remove(Router(id="r0"), 1),)))
    assert plan.nodes.keys() == ["r1", "r2", "s1"]


def test_a_snapshot_does_not_move_with_its_plan(plan: Plan) -> None:
    copy, data = plan.snapshot(), native.dumps(plan)
    assert copy == plan
    assert copy.revision == plan.revision
    plan.apply(edits.remove(plan, nodes=["r1"]))
    assert native.dumps(copy) == data
    assert [x.id for x in copy.links_at("r1")] == ["l1", "l2", "l3"]
    copy.apply(edits.remove(copy, links=["l1"]))
    assert copy.links.keys() == ["l2", "l3"]


def test_plans_differ_by_order_and_by_trial(plan: Plan) -> None:
    other = plan.snapshot()
    first = plan.nodes["r1"]
    steps = (Remove(link("l3", "r1", "s1", cost_back=0), 2),)
    other.apply(Edit("out", steps))
    other.apply(Edit("in", (Add(steps[0].item, 0),)))
    assert other != plan
    assert first in list(other.nodes)
    third = plan.snapshot()
    third.apply(edits.toggle_down(third, links=["l1"]))
    assert third != plan


def test_unused_ids_are_new(plan: Plan) -> None:
    assert plan.unused_id("r") == "r4"
    plan.apply(edits.add(plan, Router(id="r5")))
    assert plan.unused_id("r") == "r6"
    assert plan.unused_id("r", taken={"r6"}) == "r7"
    assert plan.unused_id("l") == "l4"


# -- refusals ---------------------------------------------------------------------------

RANGE = "1 to 65535 (ospf)"


@pytest.mark.parametrize(
    ("item", "said"),
    [
        (link("l9", "r1", "r2", cost=0), RANGE),
        (link("l9", "r1", "r2", cost=-7), RANGE),
        (link("l9", "r1", "r2", cost=65_536), RANGE),
        (link("l9", "r1", "r2", cost=1.5), "“1.5” is not a whole number"),
        (link("l9", "r1", "r2", cost=float("nan")), "“nan” is not a whole number"),
        (link("l9", "r1", "r2", cost=True), "“True” is not a whole number"),
        (link("l9", "r1", "r2", cost=10**400), RANGE),
        (link("l9", "r1", "r2", cost_back=0), RANGE),
        (link("l9", "r1", "s1"), "leaving segment “s1” costs 0"),
        (link("l9", "s1", "r1", cost=0, cost_back=0), RANGE),
        (link("l9", "r1", "r1"), "to itself"),
        (link("l9", "r1", "r8"), "no router or segment “r8”"),
        (link("l9", "r8", "r1"), "no router or segment “r8”"),
        (link("l1", "r1", "r2"), "already"),
        (link("", "r1", "r2"), "empty id"),
        (link("l9", "r1", "r2", capacity_mbps=0), "capacity must be above 0"),
        (link("l9", "r1", "r2", capacity_mbps=float("inf")), "capacity"),
        (link("l9", "r1", "r2", delay_ms=-0.1), "delay must be 0 or more"),
        (link("l9", "r1", "r2", groups=("g1", "g1")), "twice"),
        (link("l9", "r1", "r2", groups=("g9",)), "“g9”"),
        (Router(id="r1"), "already"),
        (Segment(id="r1"), "already"),
        (Router(id=""), "empty id"),
        (Router(id="r9", x=1), "x and y go together"),
        (Router(id="r9", x=float("nan"), y=0), "x is not a number"),
        (Router(id="r9", x=0, y=1e300), "y is too large"),
        (SharedRiskGroup(id="g1"), "already"),
        (SharedRiskGroup(id=""), "empty id"),
        (Demand(source="r1", target="r2", mbps=1), "already"),
        (Demand(source="r1", target="s1", mbps=1), "no router “s1”"),
        (Demand(source="r9", target="r1", mbps=1), "no router “r9”"),
        (Demand(source="r1", target="r1", mbps=1), "two different routers"),
        (Demand(source="r2", target="r1", mbps=-1), "volume must be 0 or more"),
    ],
)
def test_what_a_plan_cannot_hold_is_refused_by_name(plan: Plan, item: Link, said: str) -> None:
    message = refused(plan, Add(item, 0))
    assert said in message
    assert message.isprintable()
    if isinstance(item, Link) and item.id:
        assert f"“{item.id}”" in message


def test_segments_are_joined_to_routers_only(plan: Plan) -> None:
    plan.apply(edits.add(plan, Segment(id="s2")))
    assert "two segments" in refused(plan, Add(link("l9", "s1", "s2", cost=0, cost_back=0), 0))


@pytest.mark.parametrize(
    ("style", "low", "high"),
    [
        ("ospf", 1, 65_535),  # RFC 2328, C.3: 16 bits, above 0
        ("isis-wide", 1, 16_777_214),  # RFC 5305, 3: 2**24 - 1 is never used
        ("isis-narrow", 1, 63),  # ISO/IEC 10589: six bits
    ],
)
def test_each_cost_style_has_its_range(style: str, low: int, high: int) -> None:
    plan = Plan(Settings(cost_style=style))
    plan.apply(edits.add(plan, Router(id="r1"), Router(id="r2")))
    plan.apply(edits.add(plan, link("l1", "r1", "r2", cost=low, cost_back=high)))
    for cost in (low - 1, high + 1):
        said = refused(plan, Add(link("l2", "r1", "r2", cost=cost), 1))
        assert f"{low} to {high} ({style})" in said


def test_a_cost_style_too_small_for_a_link_is_refused(plan: Plan) -> None:
    plan.apply(edits.set_costs(plan, "l1", 10, 64))
    (step,) = edits.set_settings(plan, cost_style="isis-narrow").steps
    assert "“l1”" in refused(plan, step)
    assert "“rip”" in refused(plan, ChangeSettings(plan.settings, Settings(cost_style="rip")))
    zero = ChangeSettings(plan.settings, Settings(reference_mbps=0))
    assert "reference capacity must be above 0" in refused(plan, zero)
    with pytest.raises(PlanError, match="reference capacity"):
        Plan(Settings(reference_mbps=-1))


def test_edits_made_for_another_state_are_refused(plan: Plan) -> None:
    router, first = plan.nodes["r2"], plan.links["l1"]
    assert "no position 7" in refused(plan, Add(Router(id="r9"), 7))
    assert "not as this edit expects" in refused(plan, Remove(replace(router, name="x"), 1))
    assert "not as this edit expects" in refused(plan, Change(replace(router, name="x"), router))
    assert "cannot become" in refused(plan, Change(router, Segment(id="r2")))
    assert "keeps its ends" in refused(plan, Change(first, replace(first, target="s1")))
    assert "settings are not" in refused(plan, ChangeSettings(Settings(name="x"), Settings()))
    trial = Trial((LinkState("l1"),))
    assert "trial is not" in refused(plan, ChangeTrial(trial, Trial()))


def test_what_others_hang_on_is_not_taken_out(plan: Plan) -> None:
    assert "still has links" in refused(plan, Remove(plan.nodes["r1"], 0))
    assert "still has links" in refused(plan, Remove(plan.groups["g1"], 0))
    plan.apply(edits.remove(plan, links=["l1", "l2", "l3"]))
    assert "still has demands" in refused(plan, Remove(plan.nodes["r1"], 0))
    plan.apply(edits.set_demands(plan, []))
    plan.apply(edits.toggle_drained(plan, ["r1"]))
    assert "changed by the trial" in refused(plan, Remove(plan.nodes["r1"], 0))
    plan.apply(edits.discard(plan))
    plan.apply(Edit("out", (Remove(plan.nodes["r1"], 0),)))
    assert plan.nodes.keys() == ["r2", "s1"]


@pytest.mark.parametrize(
    ("change", "said"),
    [
        (LinkState("l9"), "“l9”"),
        (NodeState("r9"), "“r9”"),
        (Drained("s1"), "“s1” is a segment"),
        (LinkCost("l1", 0, 1), RANGE),
        (LinkCost("l3", 5, 5), "leaving segment"),
    ],
)
def test_a_trial_that_fits_nothing_is_refused(plan: Plan, change: LinkState, said: str) -> None:
    assert said in refused(plan, ChangeTrial(Trial(), Trial((change,))))


def test_a_message_stays_on_one_short_line(plan: Plan) -> None:
    said = refused(plan, Add(link("l\n\x1b[31m" + "x" * 500, "r1", "r2", cost=0), 0))
    assert said.isprintable()
    assert len(said) < 200


# -- random runs ------------------------------------------------------------------------


class EditsOnAPlan(RuleBasedStateMachine):
    """Random edits and undos. The indexes always agree with the items, and undoing all
    gives the bytes of the start."""

    @initialize(start=strategies.plans(max_nodes=5, max_links=6))
    def draw(self, start: Plan) -> None:
        self.plan, self.start = start, native.dumps(start)
        self.undo: list[Edit] = []

    @rule(data=st.data())
    def edit(self, data: st.DataObject) -> None:
        edit = data.draw(strategies.edits_on(self.plan))
        before = self.plan.snapshot()
        inverse = self.plan.apply(edit)
        assert inverse == edit.inverse()
        assert inverse.inverse() == edit
        copy = self.plan.snapshot()
        copy.apply(inverse)
        assert copy == before
        self.undo.append(inverse)

    @rule()
    def take_back(self) -> None:
        if self.undo:
            self.plan.apply(self.undo.pop())

    @invariant()
    def indexes_agree_with_the_items(self) -> None:
        for node in self.plan.nodes:
            joined = [x.id for x in self.plan.links if node.id in x.ends]
            assert sorted(x.id for x in self.plan.links_at(node.id)) == sorted(joined)
        for shelf in (self.plan.nodes, self.plan.links, self.plan.groups, self.plan.demands):
            keys = shelf.keys()
            assert len(shelf) == len(keys) == len(set(keys))
            assert [item.key for item in shelf] == keys
            assert [shelf.position(key) for key in keys] == list(range(len(keys)))

    def teardown(self) -> None:
        if hasattr(self, "plan"):
            for inverse in reversed(self.undo):
                self.plan.apply(inverse)
            assert native.dumps(self.plan) == self.start


TestEditsOnAPlan = EditsOnAPlan.TestCase
TestEditsOnAPlan.settings = settings(max_examples=25, stateful_step_count=15, deadline=None)


@settings(max_examples=60, deadline=None)
@given(strategies.plans(with_trial=False), st.data())
def test_a_refused_edit_changes_nothing(plan: Plan, data: st.DataObject) -> None:
    good = data.draw(strategies.edits_on(plan))
    said = refused(plan, *good.steps, Remove(Router(id="nobody"), 0))
    assert "nobody" in said
    plan.apply(good)
