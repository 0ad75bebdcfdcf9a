"""Every source of real networks: distances and complete next-hop sets equal networkx's,
before and after links go down. Data: topohub (SNDlib, Internet Topology Zoo)."""

from __future__ import annotations

import random

import pytest

from netsketch.model import LinkState, Plan, Trial
from netsketch.routing import AllPairs, Network, Routes, compile_plan
from tests import open_data, reference

TOPOLOGIES = open_data.keys("sndlib", most_nodes=28) + open_data.keys("topozoo", most_nodes=17)
ALL = open_data.keys("sndlib", "topozoo", most_nodes=60)


def assert_same(network: Network, pairs: AllPairs, plan: Plan) -> None:
    """Hold distances and next hops of every source against the reference."""
    expected = reference.answers(plan)
    ids = network.structure.vertex_ids
    for source in range(network.structure.routers):
        routes = Routes(network, source, pairs.distances[source])
        answer = expected[ids[source]]
        found = {t: routes.cost(v) for v, t in enumerate(ids) if routes.cost(v) is not None}
        assert found == answer.distance
        for target, hops in answer.next_hops.items():
            assert set(routes.next_hops(network.structure.vertex_of[target])) == hops


def check(key: str, costs: str) -> None:
    plan = open_data.plan_of(key, costs)
    network = compile_plan(plan)
    pairs = AllPairs(network)
    assert_same(network, pairs, plan)
    rng = random.Random(key)
    down = rng.sample(plan.links.keys(), min(2, len(plan.links)))
    trial = Trial(tuple(LinkState(link) for link in down))
    pairs.move_to(network.laid_over(trial))
    assert_same(pairs.network, pairs, reference.with_trial(plan, trial))


def test_at_least_sixty_topologies() -> None:
    assert len(TOPOLOGIES) >= 60


@pytest.mark.parametrize("key", TOPOLOGIES)
def test_routes_equal_networkx(key: str) -> None:
    check(key, "ties" if len(key) % 2 else "unequal")


@pytest.mark.slow
@pytest.mark.parametrize("key", ALL)
@pytest.mark.parametrize("costs", ["ones", "ties", "unequal"])
def test_routes_equal_networkx_on_all(key: str, costs: str) -> None:
    check(key, costs)


@pytest.mark.parametrize("key", open_data.keys("sndlib", "topozoo", most_nodes=60))
def test_hop_diameter(key: str) -> None:
    """topohub's published stats.diameter_hops; Sprint and Arpanet19706 have 4."""
    pairs = AllPairs(compile_plan(open_data.plan_of(key)))
    assert pairs.distances.max() == open_data.topology(key)["graph"]["stats"]["diameter_hops"]


@pytest.mark.parametrize(
    "key", ["sndlib/abilene", "sndlib/polska", "sndlib/geant", "sndlib/nobel-us", "topozoo/Sprint"]
)
def test_equal_cost_loads(key: str) -> None:
    """topohub's ecmp_fwd and ecmp_bwd "uni": loads of one unit between every ordered pair,
    every cost 1, split equally over next hops at each hop, as a percentage of the largest,
    printed to two decimals."""
    plan = open_data.plan_of(key)
    network = compile_plan(plan)
    load: dict[tuple[str, str], float] = {}
    for source in range(network.structure.routers):
        routes = Routes(network, source)
        for target in range(network.structure.routers):
            for share in routes.shares(target) if target != source else []:
                arc = share.link, share.tail
                load[arc] = load.get(arc, 0.0) + share.share
    highest = max(load.values())
    for link, edge in zip(plan.links, open_data.topology(key)["edges"], strict=True):
        for tail, side in ((link.source, "ecmp_fwd"), (link.target, "ecmp_bwd")):
            percent = 100 * load.get((link.id, tail), 0.0) / highest
            assert percent == pytest.approx(edge[side]["uni"], abs=0.0051)
