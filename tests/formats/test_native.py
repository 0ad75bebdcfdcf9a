"""The native file: its exact bytes, what survives a load and a save, what is refused."""

from __future__ import annotations

import json
from typing import Any

import networkx as nx
import pytest
from hypothesis import given, settings

from netsketch.formats import FormatError
from netsketch.formats.native import dumps, loads
from netsketch.model import (
    Add,
    Edit,
    Link,
    LinkCost,
    LinkState,
    Plan,
    Router,
    Segment,
    SharedRiskGroup,
    edits,
)
from netsketch.model.edits import replace
from tests import strategies

SMALL = """\
{"format": "netsketch", "version": 1, "directed": false, "multigraph": true,
 "graph": {"name": "Kai", "cost_style": "ospf", "reference_mbps": 100000,
  "groups": [
   {"id": "g1", "name": "north duct"}
  ],
  "demands": [
   {"from": "r1", "to": "r2", "mbps": 400}
  ]},
 "nodes": [
  {"id": "r1", "kind": "router", "name": "Quay-1", "site": "Quay", "x": 0, "y": 1.5},
  {"id": "r2", "kind": "router", "up": false, "drained": true},
  {"id": "s1", "kind": "segment", "name": "Hafen“é”"}
 ],
 "edges": [
  {"source": "r1", "target": "r2", "key": "l1", "cost": 10, "cost_back": 25, "capacity_mbps": 10000, "delay_ms": 1.5, "up": false, "groups": ["g1"]},
  {"source": "r1", "target": "r2", "key": "l2", "cost": 10},
  {"source": "r2", "target": "s1", "key": "l3", "cost": 7, "cost_back": 0}
 ]}
"""  # noqa: E501 - one object a line is the layout

FULL: dict[str, Any] = json.loads(SMALL)


def changed(change: dict[str, Any] | None = None, **lists: Any) -> bytes:
    """Return FULL with keys replaced at the top, and items appended to its lists."""
    raw = json.loads(SMALL)
    raw.update(change or {})
    for name, item in lists.items():
        (raw["graph"] if name in ("groups", "demands") else raw).setdefault(name, []).append(item)
    return json.dumps(raw).encode()


def test_every_value_is_read_from_its_key() -> None:
    plan = loads(SMALL.encode(), "f").plan
    assert plan.settings.name == "Kai"
    assert list(plan.nodes) == [
        Router(id="r1", name="Quay-1", site="Quay", x=0, y=1.5),
        Router(id="r2", up=False, drained=True),
        Segment(id="s1", name="Hafen“é”"),
    ]
    assert plan.links["l1"] == Link(
        id="l1",
        source="r1",
        target="r2",
        cost=10,
        cost_back=25,
        capacity_mbps=10000,
        delay_ms=1.5,
        up=False,
        groups=("g1",),
    )
    assert plan.links["l2"].cost_back == 10
    assert [group.name for group in plan.groups] == ["north duct"]
    assert [demand.mbps for demand in plan.demands] == [400]


def test_a_plan_is_written_one_object_a_line_in_stable_key_order() -> None:
    assert dumps(loads(SMALL.encode(), "f").plan).decode() == SMALL


def test_networkx_opens_what_is_written() -> None:
    graph = nx.node_link_graph(json.loads(SMALL), edges="edges")
    assert isinstance(graph, nx.MultiGraph)
    assert graph["r1"]["r2"]["l2"]["cost"] == 10
    assert graph.nodes["s1"]["kind"] == "segment"


@settings(max_examples=60, deadline=None)
@given(strategies.plans())
def test_any_plan_comes_back_equal_and_its_file_byte_for_byte(plan: Plan) -> None:
    data = dumps(plan)
    loaded = loads(data, "f")
    assert loaded.plan == plan
    assert loaded.notes == () or all("drain" in note for note in loaded.notes)
    assert dumps(loaded.plan) == data
    graph = nx.node_link_graph(json.loads(data), edges="edges")
    assert sorted(graph.nodes) == sorted(plan.nodes.keys())
    assert sorted(key for *_, key in graph.edges) == sorted(plan.links.keys())


def test_unknown_keys_survive_a_change_wherever_they_stand() -> None:
    raw = json.loads(SMALL)
    kept = {"note": ["é", {"deep": None}], "extra": 1.5}
    raw.update(kept)
    places = [raw["graph"], raw["nodes"][0], raw["nodes"][2], raw["edges"][1]]
    places += [raw["graph"]["groups"][0], raw["graph"]["demands"][0]]
    for place in places:
        place.update(kept)
    raw["edges"][1]["kind"] = "fibre"
    plan = loads(json.dumps(raw).encode(), "f").plan
    plan.apply(edits.rename(plan, "r1", "Quay-9"))
    raw["nodes"][0]["name"] = "Quay-9"
    assert json.loads(dumps(plan)) == raw


def test_only_the_required_keys_are_needed() -> None:
    data = (
        b'{"format":"netsketch","version":1,"nodes":[{"id":"a","kind":"router"},'
        b'{"id":"b","kind":"router"}],"edges":[{"source":"a","target":"b","key":"l","cost":3}]}'
    )
    link = loads(data, "f").plan.links["l"]
    assert (link.cost, link.cost_back, link.up, link.capacity_mbps) == (3, 3, True, None)


def test_a_byte_order_mark_is_read_over() -> None:
    assert loads(b"\xef\xbb\xbf" + SMALL.encode(), "f").plan == loads(SMALL.encode(), "f").plan


def test_the_trial_is_stored_as_a_list_of_changes_and_read_back() -> None:
    plan = loads(SMALL.encode(), "f").plan
    changes = [LinkState("l2", up=False), LinkCost("l1", 30, 25)]
    plan.apply(edits.try_changes(plan, changes, "try"))
    stored = json.loads(dumps(plan))["graph"]["trial"]
    assert stored == [
        {"change": "link state", "link": "l2", "up": False},
        {"change": "link cost", "link": "l1", "cost": 30, "cost_back": 25},
    ]
    assert loads(dumps(plan), "f").plan.trial == plan.trial
    assert "trial" not in json.loads(SMALL)["graph"]


def test_an_unknown_key_in_the_trial_is_noted() -> None:
    raw = json.loads(SMALL)
    raw["graph"]["trial"] = [{"change": "link state", "link": "l1", "by": "me"}]
    assert loads(json.dumps(raw).encode(), "f").notes == ("left out of the trial: “by”",)


# -- segments ---------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("ends", "given_costs", "read", "noted"),
    [
        (("r1", "s1"), {"cost": 7}, (7, 0), False),
        (("r1", "s1"), {"cost": 7, "cost_back": 0}, (7, 0), False),
        (("r1", "s1"), {"cost": 7, "cost_back": 9}, (7, 0), True),
        (("s1", "r1"), {"cost": 7}, (0, 7), False),
        (("s1", "r1"), {"cost": 0, "cost_back": 7}, (0, 7), False),
        (("s1", "r1"), {"cost": 9, "cost_back": 7}, (0, 7), True),
    ],
)
def test_leaving_a_segment_costs_nothing(
    ends: tuple[str, str], given_costs: dict[str, int], read: tuple[int, int], noted: bool
) -> None:
    edge = {"source": ends[0], "target": ends[1], "key": "l9", **given_costs}
    loaded = loads(changed(edges=edge), "f")
    link = loaded.plan.links["l9"]
    assert (link.cost, link.cost_back) == read
    assert any("“l9”" in note for note in loaded.notes) == noted
    assert loads(dumps(loaded.plan), "f").plan == loaded.plan


def test_a_drained_segment_is_noted() -> None:
    node = {"id": "s2", "kind": "segment", "drained": True}
    loaded = loads(changed(nodes=node), "f")
    assert any("“s2”" in note for note in loaded.notes)


# -- refusals ---------------------------------------------------------------------------

EDGE = {"source": "r1", "target": "r2", "key": "l9", "cost": 5}
RANGE = "1 to 65535 (ospf)"


@pytest.mark.parametrize(
    ("lists", "said"),
    [
        ({"edges": {**EDGE, "cost": 0}}, ["edges[3]", "“l9”", RANGE]),
        ({"edges": {**EDGE, "cost": -4}}, ["edges[3]", "“l9”", RANGE]),
        ({"edges": {**EDGE, "cost": 1.5}}, ["edges[3]", "“l9”", "whole number", RANGE]),
        ({"edges": {**EDGE, "cost": 5.0}}, ["edges[3]", "“l9”", "whole number", RANGE]),
        ({"edges": {**EDGE, "cost": float("nan")}}, ["edges[3]", "“l9”", RANGE]),
        ({"edges": {**EDGE, "cost": 10**30}}, ["edges[3]", "“l9”", RANGE]),
        ({"edges": {**EDGE, "cost": "5"}}, ["edges[3]", "“l9”", RANGE]),
        ({"edges": {**EDGE, "cost": True}}, ["edges[3]", "“l9”", RANGE]),
        ({"edges": {**EDGE, "cost": None}}, ["edges[3]", "“l9”", RANGE]),
        ({"edges": {**EDGE, "cost_back": 65536}}, ["edges[3]", "“l9”", "65536", RANGE]),
        ({"edges": {**EDGE, "key": "l1"}}, ["edges[3]", "“l1”", "already"]),
        ({"edges": {**EDGE, "target": "r1"}}, ["edges[3]", "“l9”", "itself"]),
        ({"edges": {**EDGE, "target": "r8"}}, ["edges[3]", "“l9”", "“r8”"]),
        ({"edges": {**EDGE, "groups": ["g7"]}}, ["edges[3]", "“l9”", "“g7”"]),
        ({"edges": {**EDGE, "groups": "g1"}}, ["edges[3] (link “l9”)", "groups", "a list"]),
        ({"edges": {**EDGE, "groups": [1]}}, ["edges[3] (link “l9”)", "groups[0]", "text"]),
        ({"edges": {**EDGE, "up": 1}}, ["edges[3] (link “l9”)", "up", "true or false"]),
        ({"edges": {**EDGE, "delay_ms": -1}}, ["edges[3]", "delay", "0 or more"]),
        ({"edges": {**EDGE, "capacity_mbps": 0}}, ["edges[3]", "capacity", "above 0"]),
        ({"edges": {**EDGE, "capacity_mbps": "1G"}}, ["edges[3] (link “l9”)", "capacity_mbps"]),
        ({"edges": {"source": "r1", "target": "r2", "cost": 5}}, ["edges[3]", "“key”"]),
        ({"edges": {"source": "r1", "target": "r2", "key": "l9"}}, ["edges[3]", "“cost”"]),
        ({"edges": ["r1", "r2"]}, ["edges[3]", "object"]),
        ({"nodes": {"id": "r1", "kind": "router"}}, ["nodes[3]", "“r1”", "already"]),
        ({"nodes": {"id": "", "kind": "router"}}, ["nodes[3]", "empty id"]),
        ({"nodes": {"id": 4, "kind": "router"}}, ["nodes[3]", "id", "text"]),
        ({"nodes": {"id": "q", "kind": "hub"}}, ["nodes[3] (“q”)", "kind", "“hub”"]),
        ({"nodes": {"id": "q"}}, ["nodes[3] (“q”)", "“kind”"]),
        ({"nodes": {"id": "q", "kind": "router", "x": "1"}}, ["nodes[3] (“q”)", "x"]),
        ({"nodes": {"id": "q", "kind": "router", "x": 1}}, ["nodes[3]", "“q”", "x and y"]),
        ({"groups": {"id": "g1"}}, ["groups[1]", "“g1”", "already"]),
        ({"groups": {"name": "duct"}}, ["groups[1]", "“id”"]),
        ({"demands": {"from": "r1", "to": "r2", "mbps": 1}}, ["demands[1]", "already"]),
        ({"demands": {"from": "r1", "to": "s1", "mbps": 1}}, ["demands[1]", "“s1”"]),
        ({"demands": {"from": "r2", "to": "r1", "mbps": "1"}}, ["demands[1]", "mbps"]),
    ],
)
def test_a_wrong_item_is_refused_with_its_place(lists: dict[str, Any], said: list[str]) -> None:
    with pytest.raises(FormatError) as refused:
        loads(changed(**lists), "kai.json")
    text = str(refused.value)
    assert text.startswith("kai.json: ")
    assert text.isprintable()
    assert [part for part in said if part not in text] == []


@pytest.mark.parametrize(
    ("change", "said"),
    [
        ({"version": 2}, "newer netsketch"),
        ({"version": 10**60}, "newer netsketch"),
        ({"version": "1"}, "version"),
        ({"version": 0}, "version"),
        ({"version": True}, "version"),
        ({"directed": True}, "directed"),
        ({"multigraph": False}, "multigraph"),
        ({"format": "other"}, "format"),
        ({"nodes": {}}, "nodes: must be a list"),
        ({"graph": []}, "graph: must be an object"),
        ({"graph": {"cost_style": "rip"}}, "“rip”"),
        ({"graph": {"reference_mbps": 0}}, "reference"),
        ({"graph": {"name": 5}}, "name"),
        ({"graph": {"groups": {}}}, "groups"),
    ],
)
def test_a_wrong_head_is_refused(change: dict[str, Any], said: str) -> None:
    with pytest.raises(FormatError, match=said):
        loads(changed(change), "f")


@pytest.mark.parametrize("key", ["nodes", "edges"])
def test_a_file_without_nodes_or_edges_is_refused(key: str) -> None:
    raw = json.loads(SMALL)
    del raw[key]
    with pytest.raises(FormatError, match=f"“{key}”"):
        loads(json.dumps(raw).encode(), "f")


@pytest.mark.parametrize(
    ("changes", "said"),
    [
        ([{"change": "link state", "link": "l8"}], "“l8”"),
        ([{"change": "link state", "link": "l1"}] * 2, "twice"),
        ([{"change": "melted", "link": "l1"}], "“melted”"),
        ([{"change": "drained", "node": "s1"}], "“s1”"),
        ([{"change": "link cost", "link": "l1", "cost": 0, "cost_back": 1}], "1 to 65535"),
        ([{"change": "link cost", "link": "l1", "cost": 1.5, "cost_back": 1}], "cost"),
    ],
)
def test_a_wrong_trial_is_refused(changes: list[dict[str, Any]], said: str) -> None:
    raw = json.loads(SMALL)
    raw["graph"]["trial"] = changes
    with pytest.raises(FormatError, match=r"trial.*" + said):
        loads(json.dumps(raw).encode(), "f")


@pytest.mark.parametrize("number", ["NaN", "Infinity", "1e999", "1" * 400])
def test_a_number_nobody_can_use_is_refused_in_an_unknown_key_too(number: str) -> None:
    data = SMALL.replace('"name": "Quay-1"', f'"name": "Quay-1", "load": {number}').encode()
    with pytest.raises(FormatError, match=r"nodes\[0\]"):
        loads(data, "f")


def test_a_long_text_and_half_a_character_are_refused() -> None:
    with pytest.raises(FormatError, match=r"nodes\[0\].*100,000"):
        loads(SMALL.replace("Quay-1", "q" * 100_001).encode(), "f")
    with pytest.raises(FormatError, match=r"nodes\[0\].*half a character"):
        loads(SMALL.replace("Quay-1", "\\ud800").encode(), "f")


def test_deep_nesting_is_refused() -> None:
    deep = "[" * 100 + "]" * 100
    data = SMALL.replace('"name": "Quay-1"', f'"name": "Quay-1", "deep": {deep}').encode()
    with pytest.raises(FormatError, match="nested"):
        loads(data, "f")


def test_an_item_after_many_good_ones_is_the_one_that_is_named() -> None:
    plan = Plan()
    routers = [Router(id=f"r{i}") for i in range(50)]
    plan.apply(edits.add(plan, *routers))
    data = dumps(plan).replace(b'"id": "r41"', b'"id": "r7"')
    with pytest.raises(FormatError, match=r"nodes\[41\].*“r7”"):
        loads(data, "f")


def test_equal_plans_have_equal_bytes_whatever_way_they_came_about() -> None:
    plan = loads(SMALL.encode(), "f").plan
    group = SharedRiskGroup(id="g2", name="mast")
    inverse = plan.apply(Edit("add", (Add(group, 1),)))
    link = plan.links["l2"]
    back = plan.apply(edits.change(plan, [replace(link, groups=("g2",))], "group"))
    plan.apply(back)
    plan.apply(inverse)
    assert dumps(plan).decode() == SMALL
