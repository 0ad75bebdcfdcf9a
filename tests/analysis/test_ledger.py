"""The ledger against its definition on random plans and trials."""

from __future__ import annotations

import numpy as np
from hypothesis import given
from hypothesis import strategies as st

from netsketch.analysis import Ledger, changed_destinations, compare, compare_networks
from netsketch.model import ChangeTrial, Edit, LinkState, NodeState, Plan, Trial
from netsketch.routing import AllPairs, Routes, compile_plan
from tests import reference, strategies
from tests.examples import examples
from tests.published import plan_of


def ledger_of(plan: Plan, trial: Trial) -> Ledger:
    held = plan.snapshot()  # the arrays hold the links that the plan's trials add
    held.apply(Edit("lay", (ChangeTrial(held.trial, trial),)))
    before = AllPairs(compile_plan(held))
    after = before.copy()
    after.move_to(before.network.laid_over(trial))
    return compare(before, after)


@examples(60)
@given(plan=strategies.plans(with_trial=False, max_nodes=7), data=st.data())
def test_ledger_is_what_the_definition_says(plan: Plan, data: st.DataObject) -> None:
    if not len(plan.nodes):
        return
    trial = Trial()
    for change in data.draw(st.lists(strategies.trial_changes(plan), max_size=4)):
        trial = trial.with_change(change)
    ledger = ledger_of(plan, trial)
    tried = reference.with_trial(plan, trial)
    expected = reference.outcomes(plan, tried)
    assert {(row.source, row.target): row.outcome for row in ledger} == expected
    counts = [ledger.moved, ledger.cut_off, ledger.restored]
    words = list(expected.values())
    assert counts == [words.count(word) for word in ("moved", "cut off", "restored")]
    old, new = reference.answers(plan), reference.answers(tried)
    for index, row in enumerate(ledger):
        was, now = old[row.source], new[row.source]
        assert row.cost_before == was.distance.get(row.target)
        assert row.cost_after == now.distance.get(row.target)
        assert set(row.next_hops_before) == was.next_hops.get(row.target, set())
        assert set(row.next_hops_after) == now.next_hops.get(row.target, set())
        for network_plan, delay in ((plan, ledger.delay_before), (tried, ledger.delay_after)):
            network = compile_plan(network_plan)
            vertex = network.structure.vertex_of
            known = Routes(network, vertex[row.source]).delay_ms(vertex[row.target])
            assert np.isnan(delay[index]) == (known is None)
            assert known is None or delay[index] == known[1]
        assert ledger.before[index] == (-1 if row.cost_before is None else row.cost_before)
        assert ledger.after[index] == (-1 if row.cost_after is None else row.cost_after)


@examples(30)
@given(plan=strategies.plans(max_nodes=7))
def test_without_kept_distances_the_ledger_is_the_same(plan: Plan) -> None:
    before = compile_plan(plan)
    after = before.laid_over(plan.trial)
    assert list(compare_networks(before, after)) == list(ledger_of(plan, plan.trial))


@examples(30)
@given(plan=strategies.plans(max_nodes=7))
def test_changed_destinations_are_the_ledgers_rows(plan: Plan) -> None:
    before = compile_plan(plan)
    after = before.laid_over(plan.trial)
    rows = list(ledger_of(plan, plan.trial))
    routers = {router.id for router in plan.routers()}
    for source in routers:
        v = before.structure.vertex_of[source]
        changed = changed_destinations(Routes(before, v), Routes(after, v))
        mine = {row.target: row.outcome for row in rows if row.source == source}
        assert {key: word for key, word in changed.items() if key in routers} == mine


def test_a_cost_that_stands_with_fewer_next_hops_has_moved() -> None:
    ledger = ledger_of(plan_of("a-b 1, a-c 1, b-d 1, c-d 1"), Trial((LinkState("a-b"),)))
    row = next(row for row in ledger if (row.source, row.target) == ("a", "d"))
    assert (row.outcome, row.cost_before, row.cost_after) == ("moved", 2, 2)
    assert [len(row.next_hops_before), len(row.next_hops_after)] == [2, 1]


def test_pairs_at_a_failed_router_are_in_neither_count() -> None:
    ledger = ledger_of(plan_of("a-b 1, b-c 1"), Trial((NodeState("b"),)))
    assert {(row.source, row.target) for row in ledger} == {("a", "c"), ("c", "a")}
    assert (ledger.moved, ledger.cut_off) == (0, 2)
