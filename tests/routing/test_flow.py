"""Sinks: distances, sets of sources and flows towards one destination."""

from __future__ import annotations

import networkx as nx
import numpy as np
import pytest
from hypothesis import given

from netsketch.model import Plan
from netsketch.routing import Routes, Sink, compile_plan
from tests import strategies
from tests.examples import examples
from tests.routing.test_routes import tight_graph


@examples(60)
@given(plan=strategies.plans(max_nodes=7, max_links=11, with_trial=False))
def test_a_sink_is_what_every_source_sees(plan: Plan) -> None:
    network = compile_plan(plan)
    s = network.structure
    routes = [Routes(network, source) for source in range(s.routers)]
    graphs = [tight_graph(plan, s.vertex_ids[source]) for source in range(s.routers)]
    for target in range(s.vertices):
        sink = Sink(network, target)
        name = s.vertex_ids[target]
        for source in range(s.routers):
            assert (int(sink.row[source]) == sink.unreached) == (
                routes[source].cost(target) is None
            )
            if routes[source].cost(target) is not None:
                assert int(sink.row[source]) == routes[source].cost(target)
        counts = sink.sources_on_arcs()
        expected = np.zeros(len(s.head), np.int64)
        for source, graph in enumerate(graphs):
            if name not in graph or source == target:
                continue
            useful = nx.ancestors(graph, name) | {name}
            for tail, head, link in graph.subgraph(useful).edges(keys=True):
                k = s.link_of[link]
                arc = s.arcs[k][0 if s.vertex_ids[s.tail[s.arcs[k][0]]] == tail else 1]
                assert s.vertex_ids[s.head[arc]] == head
                expected[arc] += 1
        assert counts.tolist() == expected.tolist()


@examples(60)
@given(plan=strategies.plans(max_nodes=8, with_trial=False))
def test_flow_is_conserved_at_every_vertex(plan: Plan) -> None:
    network = compile_plan(plan)
    s = network.structure
    rng = np.random.default_rng(3)
    for target in range(s.vertices):
        sink = Sink(network, target)
        amount = np.where(np.arange(s.vertices) < s.routers, rng.integers(0, 9, s.vertices), 0.0)
        amount[target] = 0.0
        flow = sink.pour(amount)
        offered = np.where(sink.row == sink.unreached, 0.0, amount)
        into, out = np.zeros(s.vertices), np.zeros(s.vertices)
        np.add.at(into, s.head, flow)
        np.add.at(out, s.tail, flow)
        for v in range(s.vertices):
            if v == target:
                assert into[v] - out[v] == pytest.approx(offered.sum())
            else:
                assert into[v] + offered[v] == pytest.approx(out[v])
