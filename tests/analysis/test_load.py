"""Loads against published ones and an independent split hop by hop."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given

from netsketch.analysis.load import demands_by_target, load, load_of
from netsketch.model import Demand, Plan, edits
from netsketch.routing import compile_plan
from tests import open_data, strategies
from tests.examples import examples
from tests.routing.test_routes import shares_by_definition, tight_graph


def by_definition(plan: Plan) -> tuple[dict[tuple[str, str], Fraction], float]:
    """Return (link, tail) -> Mbit/s and what is not delivered, pair by pair."""
    found: dict[tuple[str, str], Fraction] = {}
    lost = 0.0
    for demand in plan.demands:
        graph = tight_graph(plan, demand.source)
        if demand.target not in graph:
            lost += demand.mbps
            continue
        shares = shares_by_definition(graph, plan, demand.source, demand.target)
        for place, share in shares.items():
            found[place] = found.get(place, Fraction(0)) + share * Fraction(demand.mbps)
    return found, lost


@examples(100)
@given(plan=strategies.plans(max_nodes=8, with_trial=False))
def test_load_is_the_sum_of_the_shares(plan: Plan) -> None:
    found = load_of(plan, compile_plan(plan))
    expected, lost = by_definition(plan)
    loads = {(link, tail): mbps for link, tail, _, mbps, _ in found.rows() if mbps}
    assert loads == pytest.approx({k: float(v) for k, v in expected.items() if v}, rel=1e-9)
    assert found.undelivered_mbps == pytest.approx(lost)


@pytest.mark.parametrize("key", open_data.keys("sndlib", most_nodes=40))
@pytest.mark.parametrize("model", ["uni", "deg", "org"])
def test_published_loads(key: str, model: str) -> None:
    """topohub's ecmp_fwd and ecmp_bwd: every cost 1, equal split at every hop, per cent of
    the busiest direction to two decimals. Demands: 1 between all pairs ("uni"), the
    product of the degrees ("deg"), SNDlib's in both directions ("org")."""
    data = open_data.topology(key)
    plan = open_data.plan_of(key)
    plan.apply(edits.set_demands(plan, demands(data, plan, model)))
    found = load_of(plan, compile_plan(plan))
    highest = found.mbps.max()
    rows = {(link, tail): mbps for link, tail, _, mbps, _ in found.rows()}
    for link, edge in zip(plan.links, data["edges"], strict=True):
        for tail, side in ((link.source, "ecmp_fwd"), (link.target, "ecmp_bwd")):
            if model in edge[side]:
                assert 100 * rows[link.id, tail] / highest == pytest.approx(
                    edge[side][model], abs=0.0051
                )


def demands(data: dict, plan: Plan, model: str) -> list[Demand]:  # type: ignore[type-arg]
    ids = [router.id for router in plan.routers()]
    if model == "org":
        both: dict[tuple[str, str], float] = {}
        for source, row in data["graph"].get("demands", {}).items():
            for target, value in row.items():
                for pair in ((str(source), str(target)), (str(target), str(source))):
                    both[pair] = both.get(pair, 0.0) + value
        return [Demand(source=a, target=b, mbps=v) for (a, b), v in both.items() if a != b]
    degree = {key: len(plan.links_at(key)) if model == "deg" else 1 for key in ids}
    return [
        Demand(source=a, target=b, mbps=degree[a] * degree[b]) for a in ids for b in ids if a != b
    ]


def test_utilisation_and_the_worst_link() -> None:
    plan = open_data.plan_of("sndlib/abilene")
    links = [edits.replace(link, capacity_mbps=100) for link in list(plan.links)[:3]]
    plan.apply(edits.change(plan, links, "set capacity"))
    ids = [router.id for router in plan.routers()]
    plan.apply(edits.set_demands(plan, [Demand(source=ids[0], target=ids[1], mbps=50)]))
    found = load_of(plan, compile_plan(plan))
    known = [row for row in found.rows() if row[4] is not None]
    assert len(known) == 6
    worst = found.worst()
    assert worst is not None
    assert worst[0] == max(row[4] for row in known)


def test_no_capacity_no_utilisation() -> None:
    plan = open_data.plan_of("sndlib/abilene")
    assert load_of(plan, compile_plan(plan)).worst() is None
    network = compile_plan(plan)
    assert load(network, demands_by_target(network, [])).undelivered_mbps == 0.0
