"""Layout: every node gets a place of its own, plates apart, in bounded time."""

from __future__ import annotations

import math
import statistics

import networkx as nx
import numpy as np
import pytest

from netsketch.model import Plan, Router, edits
from netsketch.session.layout import SPACING, place_missing, spread
from tests.published import plan_of, rfc2328_figure_2


def nearest(places: dict[str, tuple[float, float]]) -> list[float]:
    points = np.array(list(places.values()))
    return [float(np.sort(np.hypot(*(points - p).T))[1]) for p in points]


@pytest.mark.parametrize(
    "graph",
    [
        nx.path_graph(2),
        nx.cycle_graph(12),
        nx.star_graph(30),
        nx.empty_graph(9),
        nx.random_geometric_graph(400, 0.09, seed=3),
        nx.barabasi_albert_graph(350, 2, seed=1),
        nx.complete_graph(310),
    ],
    ids=["pair", "ring", "star", "apart", "geometric", "hubs", "mesh"],
)
def test_plates_stand_apart(graph: nx.Graph) -> None:
    graph = nx.relabel_nodes(graph, str)
    places = spread(graph)
    assert set(places) == set(graph)
    assert all(math.isfinite(c) for place in places.values() for c in place)
    assert statistics.median(nearest(places)) > 0.4 * SPACING


def test_the_same_network_is_drawn_the_same_way_twice() -> None:
    graph = nx.relabel_nodes(nx.random_geometric_graph(60, 0.2, seed=5), str)
    assert spread(graph) == spread(graph)


def test_placed_nodes_stay() -> None:
    plan = plan_of("a-b 1, b-c 1, c-d 1, d-a 1")
    plan.apply(edits.move(plan, {"a": (0, 0), "b": (300, 0)}))
    place_missing(plan)
    assert (plan.nodes["a"].x, plan.nodes["b"].x) == (0, 300)
    assert len({(node.x, node.y) for node in plan.nodes}) == 4


def test_nothing_missing_changes_nothing() -> None:
    plan = Plan()
    place_missing(plan)
    plan.apply(edits.add(plan, Router(id="a", x=1, y=2)))
    revision = plan.revision
    place_missing(plan)
    assert plan.revision == revision


def test_linked_nodes_are_nearer_than_others() -> None:
    plan = rfc2328_figure_2()
    place_missing(plan)
    at = {node.id: (node.x, node.y) for node in plan.nodes}
    linked = statistics.mean(math.dist(at[k.source], at[k.target]) for k in plan.links)
    every = statistics.mean(math.dist(a, b) for a in at.values() for b in at.values() if a != b)
    assert linked < 0.6 * every
