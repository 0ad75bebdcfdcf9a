"""Hops, delays, path counts and shares against plain enumeration of the paths."""

from __future__ import annotations

import math
from fractions import Fraction

import networkx as nx
import pytest
from hypothesis import given

from netsketch.model import Plan, Segment, edits
from netsketch.routing import NextHop, Routes, compile_plan
from netsketch.routing.derive import MANY
from tests import reference, strategies
from tests.examples import examples
from tests.published import plan_of

Walk = list[tuple[str, str, str]]
"""The (tail, head, link) of each step of one path."""


def tight_graph(plan: Plan, source: str) -> nx.MultiDiGraph:
    """Return the arcs on shortest paths from ``source``, by the definition."""
    drained = {router.id for router in plan.routers() if router.drained}
    graph = reference._seen_from(reference.graph_of(plan), drained, source)
    far = nx.single_source_dijkstra_path_length(graph, source, weight="cost")
    tight = nx.MultiDiGraph()
    tight.add_nodes_from(far)
    for tail, head, link, cost in graph.edges(keys=True, data="cost"):
        if tail in far and far[tail] + cost == far[head]:
            tight.add_edge(tail, head, key=link)
    return tight


def walks(graph: nx.MultiDiGraph, source: str, target: str) -> list[Walk]:
    """Return every path from ``source`` to ``target`` link by link."""
    return [list(path) for path in nx.all_simple_edge_paths(graph, source, target)]


def shares_by_definition(
    graph: nx.MultiDiGraph, plan: Plan, source: str, target: str
) -> dict[tuple[str, str], Fraction]:
    """Return (link, tail) -> share: each router splits equally over its next hops, a
    (link, router) pair each; through a segment the router is the one beyond it."""
    useful = nx.ancestors(graph, target) | {target}
    graph = graph.subgraph(useful)
    flow: dict[str, Fraction] = {source: Fraction(1)}
    share: dict[tuple[str, str], Fraction] = {}
    for node in nx.topological_sort(graph):
        if node not in flow or isinstance(plan.nodes[node], Segment):
            continue
        hops = []
        for _, head, link in graph.out_edges(node, keys=True):
            if isinstance(plan.nodes[head], Segment) and head != target:
                hops += [(link, head, beyond) for beyond in set(graph[head])]
            else:
                hops.append((link, head, None))
        for link, head, beyond in hops:
            part = flow[node] / len(hops)
            share[link, node] = share.get((link, node), Fraction(0)) + part
            flow[beyond or head] = flow.get(beyond or head, Fraction(0)) + part
            parallel = list(graph[head][beyond]) if beyond else []
            for second in parallel:
                key = second, head
                share[key] = share.get(key, Fraction(0)) + part / len(parallel)
    return share


@examples(60)
@given(plan=strategies.plans(max_nodes=7, max_links=11, with_trial=False))
def test_along_the_paths(plan: Plan) -> None:
    network = compile_plan(plan)
    s = network.structure
    for source in s.vertex_ids[: s.routers]:
        routes, graph = Routes(network, s.vertex_of[source]), tight_graph(plan, source)
        for target in set(graph) - {source}:
            v, paths = s.vertex_of[target], walks(graph, source, target)
            assert routes.path_count(v) == len(paths)
            assert routes.hops(v) == min(
                sum(not isinstance(plan.nodes[tail], Segment) for tail, _, _ in path)
                for path in paths
            )
            delays = [[plan.links[link].delay_ms for _, _, link in path] for path in paths]
            if any(None in each for each in delays):
                assert routes.delay_ms(v) is None
            else:
                sums = [math.fsum(each) for each in delays]  # type: ignore[arg-type]
                assert routes.delay_ms(v) == pytest.approx((min(sums), max(sums)))
            expected = shares_by_definition(graph, plan, source, target)
            found = {(share.link, share.tail): share.share for share in routes.shares(v)}
            assert found == pytest.approx({key: float(part) for key, part in expected.items()})


def test_cut_off_has_no_answer() -> None:
    network = compile_plan(plan_of("a-b 1, c-d 1"))
    routes, c = Routes(network, network.structure.vertex_of["a"]), network.structure.vertex_of["c"]
    assert (routes.cost(c), routes.hops(c), routes.delay_ms(c)) == (None, None, None)
    assert (routes.next_hops(c), routes.shares(c), routes.path_count(c)) == ((), [], 0)


def test_hops_are_the_least_though_a_longer_way_is_found_first() -> None:
    """v is 2 hops away over u2, which also has a way of 3 hops, and 3 hops over u1; all
    cost 4."""
    plan = plan_of("a-u2 3, a-p 1, p-q 1, q-u2 1, a-r 1, r-u1 2, u1-v 1, u2-v 1")
    network = compile_plan(plan)
    vertex = network.structure.vertex_of
    routes = Routes(network, vertex["a"])
    assert (routes.cost(vertex["v"]), routes.path_count(vertex["v"])) == (4, 3)
    assert [routes.hops(vertex[v]) for v in ("u1", "u2", "v")] == [2, 1, 2]


@pytest.mark.parametrize("unknown", ["a-b", "b-d", "a-c", "c-d"])
def test_one_unknown_delay_among_equal_cost_paths_hides_the_rest(unknown: str) -> None:
    plan = plan_of("a-b 1, a-c 1, b-d 1, c-d 1, d-e 1")
    known = [edits.replace(k, delay_ms=2.5) for k in plan.links if k.id != unknown]
    plan.apply(edits.change(plan, known, "set delays"))
    network = compile_plan(plan)
    vertex = network.structure.vertex_of
    routes = Routes(network, vertex["a"])
    assert [routes.delay_ms(vertex[v]) for v in "de"] == [None, None]
    other = "c" if unknown in ("a-b", "b-d") else "b"
    assert routes.delay_ms(vertex[other]) == (2.5, 2.5)


def test_path_counts_saturate() -> None:
    """70 diamonds in a row hold 2**70 equal-cost paths: more than is counted exactly."""
    parts = [f"n{i}-a{i} 1, n{i}-b{i} 1, a{i}-n{i + 1} 1, b{i}-n{i + 1} 1" for i in range(70)]
    network = compile_plan(plan_of(", ".join(parts)))
    routes, vertex = Routes(network, network.structure.vertex_of["n0"]), network.structure.vertex_of
    assert routes.path_count(vertex["n60"]) == 2**60
    assert routes.path_count(vertex["n70"]) == MANY


def test_many_next_hops_need_many_words() -> None:
    """A segment of 100 routers, each also one hop from the far router: 99 next hops."""
    members = [f"m{i}" for i in range(100)]
    text = ", ".join([f"{m}-lan 5" for m in members] + [f"{m}-far 5" for m in members[1:]])
    network = compile_plan(plan_of(text, "lan"))
    routes, vertex = Routes(network, network.structure.vertex_of["m0"]), network.structure.vertex_of
    assert routes.masks.shape[1] == 2
    hops = routes.next_hops(vertex["far"])
    assert set(hops) == {NextHop("m0-lan", m) for m in members[1:]}
    assert routes.next_hops(vertex["lan"]) == (NextHop("m0-lan", None),)
    shares = {(share.link, share.tail): share.share for share in routes.shares(vertex["far"])}
    assert shares["m0-lan", "m0"] == pytest.approx(1.0)
    assert shares["m7-far", "m7"] == pytest.approx(1 / 99)


def test_two_links_into_one_segment_are_one_next_hop_beyond() -> None:
    """b hangs on the segment by two links: from a it is still the one next hop (link, b)."""
    plan = plan_of("a-s 1, b-s 1", "s")
    plan.apply(edits.add_link(plan, "b", "s", 1))
    network = compile_plan(plan)
    routes, vertex = Routes(network, network.structure.vertex_of["a"]), network.structure.vertex_of
    assert routes.next_hops(vertex["b"]) == (NextHop("a-s", "b"),)
    assert routes.path_count(vertex["b"]) == 2
    assert len(Routes(network, vertex["b"]).next_hops(vertex["a"])) == 2
