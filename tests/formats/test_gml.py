"""GML: our own comes back equal, networkx reads and writes the same graph."""

from __future__ import annotations

from pathlib import Path

import networkx as nx
import pytest
from hypothesis import given, settings

from netsketch.formats import FormatError, gml, read, write
from netsketch.model import Link, Plan, Router, edits
from tests import strategies
from tests.demos import demo

FOREIGN = """Creator "somebody # not a comment"
# directed 1 graph [
graph [
  %s
  label "Estuary"
  node [ id 0 label "Mole" graphics [ x 10 y 20.5 ] ]
  node [ id 1 label "Pier" graphics [ x 310 y 20.5 ] ]
  edge [ source 1 target 0 cost 4 cost_back 6 ]
  edge [ source 0 target 1 cost 5 ]
]
"""


@settings(max_examples=50, deadline=None)
@given(strategies.plans())
def test_any_plan_comes_back_equal(plan: Plan) -> None:
    data, notes = gml.dumps(plan, "f")
    assert notes == []
    assert gml.loads(data, "f").plan == plan


def test_networkx_reads_what_is_written(tmp_path: Path) -> None:
    plan = demo("water-utility")
    path = tmp_path / "water.gml"
    assert write(plan, path) == []
    graph = nx.read_gml(path)
    assert isinstance(graph, nx.MultiGraph)
    assert list(graph.nodes) == plan.nodes.keys()
    for link in plan.links:
        assert graph[link.source][link.target][link.id]["cost"] == link.cost


def test_what_networkx_writes_is_read(tmp_path: Path) -> None:
    graph = nx.DiGraph()
    graph.add_edge("Möle", "b", weight=3)
    graph.add_edge("b", "Möle", weight=4.0)
    path = tmp_path / "g.gml"
    nx.write_gml(graph, path)
    plan = read(path).plan
    assert plan.nodes.keys() == ["Möle", "b"]
    assert [(x.cost, x.cost_back) for x in plan.links] == [(3, 4)]


def test_undirected_edges_keep_their_ends_and_parallel_ones_need_no_word() -> None:
    plan = gml.loads((FOREIGN % "").encode(), "f").plan
    found = [(x.source, x.target, x.cost, x.cost_back) for x in plan.links]
    assert found == [("Pier", "Mole", 4, 6), ("Mole", "Pier", 5, 5)]
    assert plan.settings.name == "Estuary"
    assert (plan.nodes["Mole"].x, plan.nodes["Mole"].y) == (10, 20.5)


def test_directed_edges_pair() -> None:
    plan = gml.loads((FOREIGN % "directed 1").encode(), "f").plan
    assert [(x.source, x.cost, x.cost_back) for x in plan.links] == [("Pier", 4, 5)]


def test_labels_that_repeat_leave_the_numbers_as_ids() -> None:
    data = (FOREIGN % "").replace("Pier", "Mole").encode()
    plan = gml.loads(data, "f").plan
    assert [(n.id, n.name) for n in plan.nodes] == [("0", "Mole"), ("1", "Mole")]


@pytest.mark.parametrize("cost", ["0", "1.5", "NAN", '"dear"'])
def test_a_bad_cost_names_its_link(cost: str) -> None:
    data = (FOREIGN % "").replace("cost 5", f"cost {cost}").encode()
    with pytest.raises(FormatError, match=r"from “Mole” to “Pier”.*1 to 65535"):
        gml.loads(data, "f")


def test_an_id_that_readers_take_for_a_list_is_refused() -> None:
    plan = Plan()
    plan.apply(edits.add(plan, Router(id="[]"), Router(id="()")))
    link = Link(id="()", source="[]", target="()", cost=1, cost_back=1)
    plan.apply(edits.add(plan, link))
    assert gml.loads(gml.dumps(plan, "f")[0], "f").plan == plan
    plan.apply(edits.add(plan, Link(id="[]", source="[]", target="()", cost=1, cost_back=1)))
    with pytest.raises(FormatError, match="list"):
        gml.dumps(plan, "f")
