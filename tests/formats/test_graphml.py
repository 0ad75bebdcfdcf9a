"""GraphML: our own comes back equal, networkx reads and writes the same graph."""

from __future__ import annotations

from pathlib import Path

import networkx as nx
import pytest
from hypothesis import given, settings

from netsketch.formats import FormatError, graphml, read, write
from netsketch.model import Plan, Router, edits
from tests import strategies
from tests.demos import demo

FOREIGN = """<?xml version="1.0" encoding="UTF-8"?>
<graphml xmlns="http://graphml.graphdrawing.org/xmlns">
 <key id="m" for="edge" attr.name="metric" attr.type="int"><default>20</default></key>
 <key id="n" for="node" attr.name="label" attr.type="string"/>
 <graph edgedefault="%s">
  <node id="n0"><data key="n">Mole</data></node><node id="n1"/><node id="n2"/>
  <edge source="n2" target="n0"><data key="m">%s</data></edge>
  <edge id="e" source="n0" target="n2"/>
  <edge id="e" source="n0" target="n1"/>
 </graph>
</graphml>"""


@settings(max_examples=50, deadline=None)
@given(strategies.plans())
def test_any_plan_comes_back_equal(plan: Plan) -> None:
    data, notes = graphml.dumps(plan, "f")
    assert notes == []
    assert graphml.loads(data, "f").plan == plan


def test_networkx_reads_what_is_written(tmp_path: Path) -> None:
    plan = demo("harbour-campus")
    path = tmp_path / "harbour.graphml"
    assert write(plan, path) == []
    graph = nx.read_graphml(path, force_multigraph=True, edge_key_type=str)
    assert not graph.is_directed()
    assert sorted(graph.nodes) == sorted(plan.nodes.keys())
    assert graph.nodes["r1"]["name"] == plan.nodes["r1"].name
    for link in plan.links:
        assert graph[link.source][link.target][link.id]["cost"] == link.cost


def test_what_networkx_writes_is_read(tmp_path: Path) -> None:
    graph = nx.MultiGraph()
    graph.add_node(1, label="Mole", x=4.0, y=5.5)
    graph.add_edge(1, 2, weight=3.0)
    graph.add_edge(1, 2, weight=4)
    path = tmp_path / "g.graphml"
    nx.write_graphml_xml(graph, path)
    plan = read(path).plan
    assert plan.nodes["1"] == Router(id="1", name="Mole", x=4, y=5.5)
    assert [link.cost for link in plan.links] == [3, 4]


def test_undirected_edges_keep_ends_order_and_defaults() -> None:
    loaded = graphml.loads((FOREIGN % ("undirected", 7)).encode(), "f")
    ends = [(x.id, x.source, x.target, x.cost) for x in loaded.plan.links]
    assert ends == [("l1", "n2", "n0", 7), ("l2", "n0", "n2", 20), ("l3", "n0", "n1", 20)]
    assert loaded.plan.nodes["n0"].name == "Mole"


def test_directed_edges_pair_and_the_rest_is_noted() -> None:
    loaded = graphml.loads((FOREIGN % ("directed", 7)).encode(), "f")
    (link,) = loaded.plan.links
    assert (link.source, link.target, link.cost, link.cost_back) == ("n2", "n0", 7, 20)
    assert any("“n0” to “n1”" in note for note in loaded.notes)


def test_a_file_without_the_namespace_is_read() -> None:
    data = (FOREIGN % ("undirected", 7)).replace(' xmlns="http', ' xmlns:other="http')
    assert len(graphml.loads(data.encode(), "f").plan.links) == 3


@pytest.mark.parametrize(
    ("value", "said"),
    [
        ("1.5", r"“n2” to “n0”.*1 to 65535"),
        ("0", r"“n2” to “n0”.*1 to 65535"),
        ("x", "metric.*“x”"),
    ],
)
def test_a_bad_cost_names_its_link(value: str, said: str) -> None:
    with pytest.raises(FormatError, match=said):
        graphml.loads((FOREIGN % ("undirected", value)).encode(), "f")


def test_characters_that_xml_cannot_hold_are_replaced_and_noted() -> None:
    plan = Plan()
    plan.apply(edits.add(plan, Router(id="a", name="bell\x07", site="dock")))
    data, notes = graphml.dumps(plan, "f")
    assert len(notes) == 1
    assert "“name”" in notes[0]
    assert graphml.loads(data, "f").plan.nodes["a"].name == "bell\ufffd"
    plan.apply(edits.add(plan, Router(id="a\x07")))
    with pytest.raises(FormatError, match="cannot hold"):
        graphml.dumps(plan, "f")
