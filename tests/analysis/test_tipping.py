"""Tipping costs against a sweep over every cost, ties and both directions included."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from netsketch.analysis.tipping import ALWAYS, tipping
from netsketch.model import COST_RANGES, Plan, Segment, edits
from netsketch.routing import AllPairs, Routes, compile_plan
from tests import strategies
from tests.examples import examples
from tests.published import plan_of

HIGHEST = COST_RANGES["isis-narrow"][1]


def _part(share: float) -> str:
    return "all" if share > 1 - 1e-9 else "shared"


def sweep(plan: Plan, link: str, back: bool) -> dict[tuple[str, str], dict[int, str]]:
    """Return pair -> cost -> "all" or "shared", by computing every cost."""
    found: dict[tuple[str, str], dict[int, str]] = {}
    item = plan.links[link]
    for cost in range(1, HIGHEST + 1):
        costs = (item.cost, cost) if back else (cost, item.cost_back)
        changed = plan.snapshot()
        changed.apply(edits.set_costs(changed, link, *costs))
        network = compile_plan(changed)
        s = network.structure
        tail = item.target if back else item.source
        for source in range(s.routers):
            routes = Routes(network, source)
            for target in range(s.routers):
                shares = routes.shares(target) if source != target else []
                mine = [x for x in shares if (x.link, x.tail) == (link, tail)]
                if mine:
                    pair = s.vertex_ids[source], s.vertex_ids[target]
                    found.setdefault(pair, {})[cost] = _part(mine[0].share)
    return found


@examples(25)
@given(
    plan=strategies.plans(style="isis-narrow", max_nodes=5, max_links=8, with_trial=False),
    data=st.data(),
)
def test_tipping_costs_equal_a_sweep(plan: Plan, data: st.DataObject) -> None:
    if not len(plan.links):
        return
    link = plan.links[data.draw(st.sampled_from(plan.links.keys()))]
    back = data.draw(st.booleans())
    if isinstance(plan.nodes[link.target if back else link.source], Segment):
        back = not back
    pairs = AllPairs(compile_plan(plan))
    before = pairs.distances.copy()
    found = tipping(pairs, link.id, back=back)
    assert (pairs.distances == before).all()
    expected = sweep(plan, link.id, back)
    for cost in range(1, HIGHEST + 1):
        using = {pair for pair, by_cost in expected.items() if cost in by_cost}
        assert set(found.pairs_using(cost, 10**6)) == using
        assert found.using(cost) == len(using)
    for cost, using_count, sharing in found.steps(HIGHEST):
        at = found.pairs_at(cost)
        assert len(at) == sharing
        assert using_count == found.using(cost)
        for pair in at:
            assert cost in expected[pair]
            assert cost + 1 > HIGHEST or cost + 1 not in expected[pair]


def test_a_triangle_tips_where_the_way_round_costs_the_same() -> None:
    found = tipping(AllPairs(compile_plan(plan_of("a-b 10, b-c 10, c-a 10"))), "a-b")
    assert found.steps(100) == [(20, 1, 1)]
    assert found.pairs_at(20) == [("a", "b")]
    # c to b: 10 direct, never over a; a to c: likewise
    assert (found.using(20), found.using(21), found.sharing(20)) == (1, 0, 1)


def test_a_bridge_is_used_at_any_cost() -> None:
    found = tipping(AllPairs(compile_plan(plan_of("a-b 10, b-c 10"))), "a-b")
    assert set(found.costs.tolist()) == {ALWAYS}
    assert found.using(60_000) == 2
    assert found.steps(65_535) == []


@pytest.mark.parametrize("back", [False, True])
def test_a_link_that_is_down_carries_nothing(back: bool) -> None:
    plan = plan_of("a-b 10, b-c 10")
    plan.apply(edits.toggle_down(plan, links=["a-b"]))
    plan.apply(edits.adopt(plan))
    assert tipping(AllPairs(compile_plan(plan)), "a-b", back=back).using(1) == 0
