"""Trials put by under a name: kept whole, laid again, forgotten, never left dangling."""

from __future__ import annotations

import pytest

from netsketch.model import AddedLink, KeptTrial, LinkCost, LinkState, Plan, PlanError, edits
from tests.published import plan_of


@pytest.fixture
def plan() -> Plan:
    plan = plan_of("a-b 1, b-c 1, c-a 1")
    plan.apply(edits.toggle_down(plan, links=["a-b"]))
    plan.apply(edits.keep_trial(plan, "window 1"))
    return plan


def test_keep_lay_and_forget(plan: Plan) -> None:
    plan.apply(edits.discard(plan))
    plan.apply(edits.lay_kept(plan, "window 1"))
    assert plan.trial.changes == (LinkState("a-b", False),)
    plan.apply(edits.forget_trial(plan, "window 1"))
    assert not len(plan.trials)


def test_keeping_under_the_same_name_replaces(plan: Plan) -> None:
    plan.apply(edits.toggle_down(plan, links=["b-c"]))
    inverse = plan.apply(edits.keep_trial(plan, "window 1"))
    assert len(plan.trials["window 1"].changes) == 2
    plan.apply(inverse)
    assert len(plan.trials["window 1"].changes) == 1


def test_deleting_a_link_prunes_every_kept_trial(plan: Plan) -> None:
    before = plan.snapshot()
    inverse = plan.apply(edits.remove(plan, ["a"]))
    assert plan.trials["window 1"].changes == ()
    plan.apply(inverse)
    assert plan == before


@pytest.mark.parametrize(
    ("kept", "reason"),
    [
        (KeptTrial(name=""), "needs a name"),
        (KeptTrial(name="x", changes=(LinkState("nowhere"),)), "no link “nowhere”"),
        (KeptTrial(name="x", changes=(LinkCost("a-b", 0, 1),)), "outside 1 to 65535"),
        (KeptTrial(name="window 1"), "there already"),
    ],
)
def test_refusals(plan: Plan, kept: KeptTrial, reason: str) -> None:
    with pytest.raises(PlanError, match=reason):
        plan.apply(edits.add(plan, kept))


def test_a_narrower_cost_style_minds_kept_costs(plan: Plan) -> None:
    plan.apply(edits.add(plan, KeptTrial(name="dear", changes=(LinkCost("a-b", 500, 500),))))
    with pytest.raises(PlanError, match="outside 1 to 63"):
        plan.apply(edits.set_settings(plan, cost_style="isis-narrow"))


def test_a_link_that_only_the_trial_has(plan: Plan) -> None:
    plan.apply(edits.discard(plan))
    plan.apply(edits.remove(plan, links=["a-b"]))
    before = plan.snapshot()
    inverse = plan.apply(edits.try_link(plan, "a", "b", 7))
    added = plan.trial.added()[0]
    assert added.link not in plan.links
    assert (added.cost, added.cost_back) == (7, 7)
    adopted = plan.apply(edits.adopt(plan))
    assert plan.links[added.link].ends == ("a", "b")
    plan.apply(adopted)
    plan.apply(inverse)
    assert plan == before


def test_adopting_an_added_link_takes_it_out_of_kept_trials(plan: Plan) -> None:
    plan.apply(edits.try_link(plan, "a", "c"))
    plan.apply(edits.keep_trial(plan, "wider"))
    inverse = plan.apply(edits.adopt(plan))
    assert not plan.trials["wider"].trial.added()
    plan.apply(inverse)
    assert plan.trials["wider"].trial.added()


@pytest.mark.parametrize(
    ("added", "reason"),
    [
        (AddedLink("a-b", "a", "c", 1, 1), "there already"),
        (AddedLink("new", "a", "nowhere", 1, 1), "no router or segment “nowhere”"),
        (AddedLink("new", "a", "c", 0, 1), "outside 1 to 65535"),
    ],
)
def test_added_links_are_checked(plan: Plan, added: AddedLink, reason: str) -> None:
    with pytest.raises(PlanError, match=reason):
        plan.apply(edits.try_changes(plan, [added], "try"))


def test_new_ids_keep_clear_of_added_links(plan: Plan) -> None:
    plan.apply(edits.try_link(plan, "a", "c"))
    added = plan.trial.added()[0].link
    plan.apply(edits.add_link(plan, "b", "c"))
    assert added not in plan.links
