"""Hop by hop, the other way, and what if a link fails: against plain recomputation."""

from __future__ import annotations

import networkx as nx
import pytest
from hypothesis import given

from netsketch.analysis import pair
from netsketch.model import LinkState, Plan, Segment, Trial
from netsketch.routing import Network, NextHop, Routes, compile_plan
from tests import open_data, reference, strategies
from tests.examples import examples
from tests.published import plan_of


def routes_of(network: Network, router: str) -> Routes:
    return Routes(network, network.structure.vertex_of[router])


def best_other_way(plan: Plan, source: str, target: str) -> int | None:
    """Return the least cost of a simple path whose first hop is none of those in use."""
    answer = reference.answers(plan)[source]
    primary = answer.next_hops.get(target, set())
    drained = {router.id for router in plan.routers() if router.drained}
    graph = reference._seen_from(reference.graph_of(plan), drained, source)
    costs = []
    for path in nx.all_simple_edge_paths(graph, source, target):
        _, head, link = path[0]
        if isinstance(plan.nodes[head], Segment):
            first = (link, path[1][1] if len(path) > 1 else None)
        else:
            first = (link, head)
        if first not in primary:
            costs.append(sum(graph.edges[edge]["cost"] for edge in path))
    return min(costs, default=None)


@examples(60)
@given(plan=strategies.plans(max_nodes=6, max_links=9, with_trial=False))
def test_the_other_way_is_the_best_that_starts_otherwise(plan: Plan) -> None:
    network = compile_plan(plan)
    s = network.structure
    for source in s.vertex_ids[: s.routers]:
        routes = routes_of(network, source)
        for target, v in s.vertex_of.items():
            if target == source or routes.cost(v) is None:
                continue
            found = pair.other_way(routes, v)
            expected = best_other_way(plan, source, target)
            assert (found.cost if found else None) == expected
            if found is not None:
                assert found.extra == found.cost - routes.cost(v) >= 0
                assert not set(found.next_hops) & set(routes.next_hops(v))


@examples(60)
@given(plan=strategies.plans(max_nodes=6, max_links=9, with_trial=False))
def test_hops_add_up_and_failures_are_recomputed(plan: Plan) -> None:
    network = compile_plan(plan)
    s = network.structure
    for source in s.vertex_ids[: s.routers]:
        routes = routes_of(network, source)
        for target, v in s.vertex_of.items():
            steps = pair.hops(routes, v)
            at = {source: 0}
            for hop in steps:
                assert hop.cost_so_far == at[hop.tail] + hop.cost
                at[hop.head] = hop.cost_so_far
                assert hop.delay_ms == plan.links[hop.link].delay_ms
            if steps:
                assert at[target] == routes.cost(v)
            found = {each.link: each for each in pair.if_down(routes, v)}
            assert set(found) == {hop.link for hop in steps}
            for link, each in found.items():
                down = reference.with_trial(plan, Trial((LinkState(link),)))
                answer = reference.answers(down)[source]
                assert each.cost == answer.distance.get(target)
                assert set(each.next_hops) == answer.next_hops.get(target, set())


def test_rfc5286_figure_1_second_best() -> None:
    """RFC 5286, Figure 1: S reaches D by E at 9; by N1 it costs 8 + 3 = 11."""
    plan = plan_of("S-E 5, E-D 4, S-N1 8, N1-D 3")
    found = pair.other_way(
        routes_of(compile_plan(plan), "S"), compile_plan(plan).structure.vertex_of["D"]
    )
    assert found == pair.OtherWay((NextHop("S-N1", "N1"),), 11, 2)


@pytest.mark.parametrize(
    ("links", "source", "target", "parts_at"),
    [
        ("a-b 1", "a", "b", None),
        ("a-b 1/10, b-c 1, c-a 1", "a", "b", "a"),
        ("z-a 1, a-b 1/10, b-c 1, c-a 1", "z", "b", "a"),
        # The way back has a second, equal-cost path that the way out has not.
        ("a-b 1/2, a-c 5/1, c-b 1", "a", "b", "a"),
    ],
)
def test_where_way_out_and_way_back_part(
    links: str, source: str, target: str, parts_at: str | None
) -> None:
    network = compile_plan(plan_of(links))
    out, back = routes_of(network, source), routes_of(network, target)
    assert pair.parting(out, back, back.source) == parts_at


@pytest.mark.parametrize("key", ["sndlib/abilene", "sndlib/polska"])
def test_on_open_data(key: str) -> None:
    plan = open_data.plan_of(key, "unequal")
    network = compile_plan(plan)
    s = network.structure
    for source in s.vertex_ids[:4]:
        routes = routes_of(network, source)
        for v in range(s.vertices):
            for each in pair.if_down(routes, v):
                down = reference.with_trial(plan, Trial((LinkState(each.link),)))
                graph = reference.graph_of(down)
                target = s.vertex_ids[v]
                cost = nx.single_source_dijkstra_path_length(graph, source, weight="cost")
                assert each.cost == cost.get(target)
