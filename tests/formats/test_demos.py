"""The demo networks: they open, hold what they are there to show, and can be drawn."""

from __future__ import annotations

from itertools import combinations

import networkx as nx
import pytest

from netsketch.formats import native, read
from netsketch.model import Plan
from tests.benchmarks.backbone import backbone
from tests.demos import demo, demo_path

DRAWN = ["harbour-campus", "water-utility"]
ALL = [*DRAWN, "backbone-1000"]


def graph_of(plan: Plan) -> nx.MultiGraph[str]:
    graph: nx.MultiGraph[str] = nx.MultiGraph()
    graph.add_nodes_from(plan.nodes.keys())
    graph.add_edges_from((x.source, x.target, x.id) for x in plan.links if x.up)
    return graph


@pytest.mark.parametrize("name", ALL)
def test_a_demo_opens_without_notes_in_its_own_bytes_and_is_connected(name: str) -> None:
    path = demo_path(name)
    loaded = read(path)
    assert loaded.notes == ()
    assert native.dumps(loaded.plan) == path.read_bytes()
    assert nx.is_connected(graph_of(loaded.plan))


@pytest.mark.parametrize("name", DRAWN)
def test_plates_keep_their_distance_and_links_keep_off_them(name: str) -> None:
    plan = demo(name)
    places = {n.id: (float(n.x or 0), float(n.y or 0)) for n in plan.nodes}
    for (ax, ay), (bx, by) in combinations(places.values(), 2):
        assert abs(ax - bx) >= 150 or abs(ay - by) >= 90
    segments = {segment.id for segment in plan.segments()}
    for link in plan.links:
        if segments.isdisjoint(link.ends):
            (ax, ay), (bx, by) = places[link.source], places[link.target]
            points = [(ax + (bx - ax) * t / 100, ay + (by - ay) * t / 100) for t in range(101)]
            for node, (x, y) in places.items():
                if node not in link.ends:
                    assert not any(abs(px - x) < 52 and abs(py - y) < 24 for px, py in points)


@pytest.mark.parametrize("name", DRAWN)
def test_a_drawn_demo_shows_what_a_plan_can_hold(name: str) -> None:
    plan = demo(name)
    assert plan.segments()
    assert len({frozenset(x.ends) for x in plan.links}) < len(plan.links)
    assert any(x.cost != x.cost_back and 0 not in (x.cost, x.cost_back) for x in plan.links)
    assert all(plan.links_in_group(group.id) for group in plan.groups)
    assert all(x.capacity_mbps and x.delay_ms for x in plan.links)
    assert len(plan.demands) > 10


def test_the_harbours_sea_lock_is_a_single_point_of_failure() -> None:
    plan = demo("harbour-campus")
    cut = {plan.nodes[key].label for key in nx.articulation_points(nx.Graph(graph_of(plan)))}
    assert "Lock-1" in cut


def test_the_backbone_is_what_its_generator_makes() -> None:
    plan = backbone()
    assert plan == demo("backbone-1000")
    assert len(plan.routers()) == 1000
    assert 1850 <= len(plan.links) <= 1950
    assert len({node.name for node in plan.nodes}) == 1000
    assert plan != backbone(seed=21)


@pytest.mark.parametrize("routers", [200, 2000])
def test_the_generator_makes_connected_backbones_of_other_sizes(routers: int) -> None:
    plan = backbone(routers)
    assert len(plan.routers()) == routers
    assert nx.is_connected(graph_of(plan))
