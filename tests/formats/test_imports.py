"""What foreign graphs are taken to mean, and what the notes say about it."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest
import topohub

from netsketch.formats import FormatError, Loaded, read


def load(
    tmp_path: Path,
    edges: list[dict[str, Any]],
    nodes: list[dict[str, Any]] | None = None,
    **rest: Any,
) -> Loaded:
    """Return what node-link JSON with these edges between a, b, c gives."""
    listed = nodes if nodes is not None else [{"id": name} for name in "abc"]
    path = tmp_path / "foreign.json"
    path.write_text(json.dumps({"nodes": listed, "links": edges, **rest}))
    return read(path)


def arc(source: str, target: str, **attributes: Any) -> dict[str, Any]:
    return {"source": source, "target": target, **attributes}


def costs(loaded: Loaded) -> list[tuple[str, str, int, int]]:
    return [(x.source, x.target, x.cost, x.cost_back) for x in loaded.plan.links]


def said(loaded: Loaded, *words: str) -> bool:
    """Whether one note holds all these words."""
    return any(all(word in note for word in words) for note in loaded.notes)


# -- costs ------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("attributes", "cost", "source"),
    [
        ({"cost": 7, "metric": 8, "weight": 9}, 7, "“cost”"),
        ({"metric": 8, "weight": 9, "capacity_mbps": 10}, 8, "“metric”"),
        ({"weight": 9, "capacity_mbps": 10}, 9, "“weight”"),
        ({"capacity_mbps": 25_000}, 4, "reference capacity (100000 Mbit/s)"),
        ({"capacity_mbps": 30_000}, 3, "reference capacity"),
        ({"capacity_mbps": 400_000}, 1, "reference capacity"),
        ({"capacity_mbps": 0.5}, 65_535, "reference capacity"),
        ({}, 1, "1 where nothing else"),
        ({"cost": 10.0}, 10, "“cost”"),
        ({"Weight": "12"}, 12, "“weight”"),
        ({"cost": None, "metric": 3}, 3, "“metric”"),
    ],
)
def test_the_cost_comes_from_the_first_there_is_and_the_note_says_which(
    tmp_path: Path, attributes: dict[str, Any], cost: int, source: str
) -> None:
    loaded = load(tmp_path, [arc("a", "b", **attributes)])
    assert costs(loaded) == [("a", "b", cost, cost)]
    assert said(loaded, "costs come from", source)


def test_the_graphs_own_reference_capacity_counts(tmp_path: Path) -> None:
    loaded = load(tmp_path, [arc("a", "b", capacity_mbps=100)], graph={"reference_mbps": 1000})
    assert costs(loaded) == [("a", "b", 10, 10)]


def test_mixed_sources_are_counted(tmp_path: Path) -> None:
    loaded = load(tmp_path, [arc("a", "b", metric=3), arc("b", "c"), arc("a", "c")])
    assert said(loaded, "“metric” (1)", "(2)")


@pytest.mark.parametrize("cost", [0, -1, 1.5, 65_536, 1e30, "cheap", True, [1]])
def test_a_cost_no_plan_can_hold_is_refused_by_link_and_range(tmp_path: Path, cost: object) -> None:
    with pytest.raises(FormatError, match=r"from “b” to “c”.*1 to 65535 \(ospf\)"):
        load(tmp_path, [arc("a", "b", cost=1), arc("b", "c", cost=cost)])


# -- directed graphs --------------------------------------------------------------------


def test_opposites_become_one_link_with_a_cost_each_way(tmp_path: Path) -> None:
    edges = [arc("a", "b", cost=3), arc("c", "b", cost=5), arc("b", "a", cost=4)]
    loaded = load(tmp_path, [*edges, arc("b", "c", cost=6)], directed=True)
    assert costs(loaded) == [("a", "b", 3, 4), ("c", "b", 5, 6)]
    assert not said(loaded, "opposite")


def test_parallel_opposites_pair_in_order(tmp_path: Path) -> None:
    edges = [arc("a", "b", cost=1), arc("a", "b", cost=2), arc("b", "a", cost=3)]
    loaded = load(tmp_path, [*edges, arc("b", "a", cost=4)], directed=True, multigraph=True)
    assert costs(loaded) == [("a", "b", 1, 3), ("a", "b", 2, 4)]


def test_an_edge_without_an_opposite_is_left_out_and_named(tmp_path: Path) -> None:
    edges = [arc("a", "b", cost=1), arc("b", "a", cost=1), arc("b", "c", cost=1)]
    loaded = load(tmp_path, [*edges, arc("a", "b", cost=1)], directed=True)
    assert costs(loaded) == [("a", "b", 1, 1)]
    assert said(loaded, "left out", "“b” to “c”", "“a” to “b”")


def test_a_self_link_is_refused_in_a_directed_graph_too(tmp_path: Path) -> None:
    with pytest.raises(FormatError, match="itself"):
        load(tmp_path, [arc("a", "a", cost=1)], directed=True)


def test_a_directed_link_is_up_only_when_both_its_edges_are(tmp_path: Path) -> None:
    edges = [arc("a", "b", up=True), arc("b", "a", up="false")]
    assert not next(iter(load(tmp_path, edges, directed=True).plan.links)).up


def test_leaving_a_segment_costs_nothing_in_a_directed_graph(tmp_path: Path) -> None:
    nodes = [{"id": "a"}, {"id": "lan", "kind": "segment"}]
    edges = [arc("lan", "a", cost=9), arc("a", "lan", cost=9)]
    assert costs(load(tmp_path, edges, nodes, directed=True)) == [("lan", "a", 0, 9)]


# -- names, ids and the rest ------------------------------------------------------------


def test_ids_that_are_numbers_become_text_and_names_come_from_name_or_label(
    tmp_path: Path,
) -> None:
    nodes = [{"id": 1, "name": "Mole"}, {"id": 2.5, "label": "Pier"}, {"id": "3", "label": "3"}]
    loaded = load(tmp_path, [arc(1, 2.5)], nodes)  # type: ignore[arg-type]
    assert [(n.id, n.name, n.label) for n in loaded.plan.nodes] == [
        ("1", "Mole", "Mole"),
        ("2.5", "Pier", "Pier"),
        ("3", "", "3"),
    ]


def test_parallel_edges_stay_apart_and_keys_name_links_where_they_are_unique(
    tmp_path: Path,
) -> None:
    edges = [arc("a", "b", key="north"), arc("a", "b", key="x"), arc("b", "c", key="x")]
    loaded = load(tmp_path, [*edges, arc("b", "c", key=0)], multigraph=True)
    assert loaded.plan.links.keys() == ["north", "l2", "l3", "l4"]


def test_ends_of_an_undirected_edge_keep_their_order(tmp_path: Path) -> None:
    loaded = load(tmp_path, [arc("b", "a", cost=1, cost_back=2)])
    assert costs(loaded) == [("b", "a", 1, 2)]


def test_capacities_and_delays_under_other_names_are_noted(tmp_path: Path) -> None:
    edges = [arc("a", "b", bandwidth=100, latency=2), arc("b", "c", LinkSpeedRaw=1e9)]
    loaded = load(tmp_path, edges)
    first, second = loaded.plan.links
    assert (first.capacity_mbps, first.delay_ms, second.capacity_mbps) == (100, 2, 1000)
    assert said(loaded, "“bandwidth”", "Mbit/s")
    assert said(loaded, "“linkspeedraw”", "bit/s")


def test_groups_named_on_links_are_declared(tmp_path: Path) -> None:
    edges = [arc("a", "b", groups=["duct"]), arc("b", "c", groups=["duct", "mast"])]
    plan = load(tmp_path, edges).plan
    assert plan.groups.keys() == ["duct", "mast"]
    assert [link.id for link in plan.links_in_group("duct")] == ["l1", "l2"]


def test_unknown_plain_attributes_are_kept_and_others_named(tmp_path: Path) -> None:
    nodes = [{"id": "a", "vendor": "x"}, {"id": "b", "ports": {"1": 2}}]
    loaded = load(tmp_path, [arc("a", "b", length=4.5)], nodes)
    assert loaded.plan.nodes["a"].extra == {"vendor": "x"}
    assert loaded.plan.links["l1"].extra == {"length": 4.5}
    assert said(loaded, "left out", "“ports”")


# -- places -----------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("attributes", "places"),
    [
        ([{"x": 1, "y": 2.5}, {"x": "-3", "y": 0}], [(1, 2.5), (-3, 0)]),
        ([{"pos": [1000, 500]}, {"pos": [0, 0]}], [(1000, -500), (0, 0)]),
        ([{"pos": "1000,500!"}, {"pos": "(0, 0)"}], [(1000, -500), (0, 0)]),
        ([{"graphics": {"x": 5, "y": 6}}, {}], [(5, 6), (None, None)]),
        ([{"x": 1}, {"x": "east", "y": 2}], [(None, None), (None, None)]),
        ([{"x": 1, "y": float("inf")}, {"x": 3, "y": 4}], [(None, None), (3, 4)]),
    ],
)
def test_places_come_from_what_there_is(
    tmp_path: Path, attributes: list[dict[str, Any]], places: list[tuple[Any, Any]]
) -> None:
    nodes = [{"id": str(i), **found} for i, found in enumerate(attributes)]
    assert [(n.x, n.y) for n in load(tmp_path, [], nodes).plan.nodes] == places


@pytest.mark.parametrize(
    ("east", "north"), [("longitude", "latitude"), ("Longitude", "Latitude"), ("lon", "lat")]
)
def test_degrees_are_spread_over_the_sheet_with_north_upwards(
    tmp_path: Path, east: str, north: str
) -> None:
    nodes = [
        {"id": "south-west", east: 5.0, north: 50.0},
        {"id": "north-west", east: 5.0, north: 52.0},
        {"id": "north-east", east: 8.0, north: 52.0},
    ]
    loaded = load(tmp_path, [], nodes)
    sw, nw, ne = ((float(n.x or 0), float(n.y or 0)) for n in loaded.plan.nodes)
    assert sw[0] == nw[0] < ne[0]
    assert sw[1] > nw[1] == ne[1]
    assert sw[1] - nw[1] > 150
    assert (ne[0] - nw[0]) / (sw[1] - nw[1]) == pytest.approx(3 / 2 * 0.629, rel=0.01)  # cos 51°
    assert said(loaded, "places come from", "longitude")


# -- published topologies ---------------------------------------------------------------


@pytest.mark.parametrize("name", ["gabriel/25/0", "topozoo/Abilene", "sndlib/germany50"])
def test_published_topologies_are_read(tmp_path: Path, name: str) -> None:
    topology = topohub.get(name)
    path = tmp_path / "topology.json"
    path.write_text(json.dumps(topology))
    plan = read(path).plan
    assert len(plan.routers()) == len(topology["nodes"])
    assert len(plan.links) == len(topology["edges"])
    assert [node.name for node in plan.nodes] == [node["name"] for node in topology["nodes"]]
    assert all(node.x is not None for node in plan.nodes)
    assert len({(node.x, node.y) for node in plan.nodes}) == len(topology["nodes"])
