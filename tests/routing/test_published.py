"""Routes against published values. Sources stand beside the checks."""

from __future__ import annotations

import json
from pathlib import Path

import networkx as nx
import numpy as np
import pytest

from netsketch.formats import read
from netsketch.model import Drained, LinkCost, LinkState, NodeState, Plan, Trial, edits
from netsketch.routing import AllPairs, Network, Routes, Structure, compile_plan
from tests import reference
from tests.published import (
    RFC8102_FIGURE_1,
    RFC8102_FIGURE_7,
    plan_of,
    rfc2328_area_1,
    rfc2328_backbone,
    rfc2328_figure_2,
)


class Table:
    """The forwarding table of one router, read by name."""

    def __init__(self, plan: Plan, source: str, *changes: object) -> None:
        network = compile_plan(plan, Trial(changes))  # type: ignore[arg-type]
        self._vertex = network.structure.vertex_of
        self.routes = Routes(network, self._vertex[source])

    def cost(self, target: str) -> int | None:
        return self.routes.cost(self._vertex[target])

    def via(self, target: str) -> set[str | None]:
        """The routers of the next hops; None stands for "directly connected"."""
        return {hop.router for hop in self.routes.next_hops(self._vertex[target])}

    def links(self, target: str) -> dict[tuple[str, str], float]:
        shares = self.routes.shares(self._vertex[target])
        return {(share.tail, share.head): share.share for share in shares}


# RFC 2328, section 2.2, Table 2: destination, next hop, distance, for RT6.
TABLE_2 = {
    "N1": ("RT3", 10), "N2": ("RT3", 10), "N3": ("RT3", 7), "N4": ("RT3", 8), "Ib": (None, 7),
    "Ia": ("RT10", 12), "N6": ("RT10", 8), "N7": ("RT10", 12), "N8": ("RT10", 10),
    "N9": ("RT10", 11), "N10": ("RT10", 13), "N11": ("RT10", 14), "H1": ("RT10", 21),
    "RT5": ("RT5", 6), "RT7": ("RT10", 8),
}  # fmt: skip

# RFC 2328, section 2.3, Table 3: type 1 external destinations, for RT6.
TABLE_3 = {"N12": ("RT10", 10), "N13": ("RT5", 14), "N14": ("RT5", 14), "N15": ("RT10", 17)}


@pytest.mark.parametrize("target", TABLE_2)
def test_rfc2328_table_2(target: str) -> None:
    table = Table(rfc2328_figure_2(), "RT6")
    via, distance = TABLE_2[target]
    assert table.cost(target) == distance
    assert table.via(target) == {via}


@pytest.mark.parametrize("target", TABLE_3)
def test_rfc2328_table_3(target: str) -> None:
    table = Table(rfc2328_figure_2(externals=True), "RT6")
    via, distance = TABLE_3[target]
    assert table.cost(target) == distance
    assert table.via(target) == {via}


def test_rfc2328_figure_5_is_the_source_tree_of_rt6() -> None:
    """RFC 2328, Figure 5: the arcs of RT6's tree, of the internal part."""
    table = Table(rfc2328_figure_2(), "RT6")
    s = table.routes.network.structure
    arcs = {
        (s.vertex_ids[s.tail[a]], s.vertex_ids[s.head[a]])
        for a in np.flatnonzero(table.routes.tight)
    }
    assert arcs == {
        ("RT6", "RT5"), ("RT6", "RT3"), ("RT6", "Ib"), ("RT6", "RT10"), ("RT3", "N4"),
        ("RT3", "N3"), ("N3", "RT1"), ("N3", "RT2"), ("N3", "RT4"), ("RT1", "N1"), ("RT2", "N2"),
        ("RT10", "Ia"), ("RT10", "N8"), ("RT10", "N6"), ("N6", "RT7"), ("N6", "RT8"),
        ("RT8", "N7"), ("N8", "RT11"), ("RT11", "N9"), ("N9", "RT9"), ("N9", "RT12"),
        ("RT9", "N11"), ("RT12", "H1"), ("RT12", "N10"),
    }  # fmt: skip


def test_rfc2328_section_3_4_load_shares_n8() -> None:
    """RFC 2328, text after Table 6: RT1 uses RT4 for N6, RT3 for the Area 3 range, and
    both for N8. Erratum 2953 would make N8 25 by RT4; Figure 8 (14 + 4 = 18) and the
    text on load sharing contradict it, so 18 stands."""
    table = Table(rfc2328_area_1(), "RT1")
    assert (table.cost("N6"), table.via("N6")) == (16, {"RT4"})
    assert (table.cost("N8"), table.via("N8")) == (19, {"RT3", "RT4"})
    assert (table.cost("N9to11H1"), table.via("N9to11H1")) == (30, {"RT3"})
    assert table.links("N8")["RT3", "N8"] == pytest.approx(0.5)


def test_rfc2328_table_4() -> None:
    """RFC 2328, section 3.4, Table 4: what RT3 and RT4 advertise of Area 1."""
    for router, costs in (("RT3", [4, 4, 1, 2]), ("RT4", [4, 4, 1, 3])):
        table = Table(rfc2328_area_1(), router)
        assert [table.cost(network) for network in ("N1", "N2", "N3", "N4")] == costs


# RFC 2328, section 3.4, Table 5: backbone distances of RT3 and RT4.
TABLE_5 = {
    "RT3": {"RT4": 22, "RT7": 20, "RT10": 15, "RT11": 18, "Ia": 20, "Ib": 15, "RT5": 14},
    "RT4": {"RT3": 21, "RT7": 14, "RT10": 22, "RT11": 25, "Ia": 27, "Ib": 22, "RT5": 8},
}

# RFC 2328, Figure 8: what the border routers say of Areas 2 and 3.
FIGURE_8 = {
    "N6": {"RT7": 1, "RT10": 1, "RT11": 3},
    "N7": {"RT7": 5, "RT10": 5, "RT11": 7},
    "N8": {"RT7": 4, "RT10": 3, "RT11": 2},
    "N9-N11,H1": {"RT11": 11},
}

# RFC 2328, section 3.4, Table 6: what RT3 and RT4 then advertise into Area 1. Erratum 2953
# would make RT4's N8 25; Figure 8 (RT7 14 + 4) and the text on load sharing say 18.
TABLE_6 = {"N6": (16, 15), "N7": (20, 19), "N8": (18, 18), "N9-N11,H1": (29, 36)}


@pytest.mark.parametrize("router", TABLE_5)
def test_rfc2328_table_5(router: str) -> None:
    table = Table(rfc2328_backbone(), router)
    assert {target: table.cost(target) for target in TABLE_5[router]} == TABLE_5[router]


@pytest.mark.parametrize("network", TABLE_6)
def test_rfc2328_table_6(network: str) -> None:
    for router, printed in zip(("RT3", "RT4"), TABLE_6[network], strict=True):
        table = Table(rfc2328_backbone(), router)
        said = FIGURE_8[network].items()
        assert min(table.cost(border) + cost for border, cost in said) == printed


def test_rfc2328_losing_rt6_rt10_parts_the_backbone() -> None:
    """RFC 2328, section 3.4: it disconnects the backbone; a virtual link RT7-RT10 through
    Area 2 (cost 1, by N6) would repair it."""
    plan = rfc2328_backbone()
    assert Table(plan, "RT6", LinkState("RT6-RT10")).cost("RT11") is None
    plan.apply(edits.add_link(plan, "RT7", "RT10", 1))
    assert Table(plan, "RT6", LinkState("RT6-RT10")).cost("RT11") == 12 + 1 + 3


# Derived from the input of RFC 2328, Figure 2, not printed there: distances between all
# routers, row from, column to RT1 … RT12.
ALL_DISTANCES = """
0 1 1 1 9 9 15 16 20 16 19 20
1 0 1 1 9 9 15 16 20 16 19 20
1 1 0 1 9 8 15 16 19 15 18 19
1 1 1 0 8 9 14 15 19 15 18 19
9 9 9 8 0 7 6 7 11 7 10 11
7 7 6 7 6 0 8 8 11 7 10 11
13 13 12 13 6 6 0 1 5 1 4 5
13 13 12 13 7 6 1 0 5 1 4 5
15 15 14 15 10 8 4 4 0 3 1 1
12 12 11 12 7 5 1 1 4 0 3 4
14 14 13 14 9 7 3 3 1 2 0 1
15 15 14 15 10 8 4 4 1 3 1 0
"""


def test_rfc2328_figure_2_all_distances() -> None:
    pairs = AllPairs(compile_plan(rfc2328_figure_2()))
    vertex = pairs.network.structure.vertex_of
    order = [vertex[f"RT{i}"] for i in range(1, 13)]
    expected = [[int(x) for x in row.split()] for row in ALL_DISTANCES.strip().splitlines()]
    assert pairs.distances[np.ix_(order, order)].tolist() == expected


# Derived likewise: cost and next hop from RT6 with one link down.
REROUTED = {
    "RT6-RT10": "N1 10 RT3, N4 8 RT3, N6 13 RT5, N7 17 RT5, N8 16 RT5, N9 17 RT5, N10 19 RT5,"
    "N11 20 RT5, H1 27 RT5, RT5 6 RT5, RT7 12 RT5",
    "RT3-RT6": "N1 18 RT5, N4 17 RT5, N6 8 RT10, N7 12 RT10, N8 10 RT10, N9 11 RT10,"
    "N10 13 RT10, N11 14 RT10, H1 21 RT10, RT5 6 RT5, RT7 8 RT10",
    "RT5-RT6": "N1 10 RT3, N4 8 RT3, N6 8 RT10, N7 12 RT10, N8 10 RT10, N9 11 RT10,"
    "N10 13 RT10, N11 14 RT10, H1 21 RT10, RT5 14 RT10, RT7 8 RT10",
}


@pytest.mark.parametrize("link", REROUTED)
def test_rfc2328_figure_2_with_a_link_down(link: str) -> None:
    table = Table(rfc2328_figure_2(), "RT6", LinkState(link))
    for text in REROUTED[link].split(","):
        target, cost, via = text.split()
        assert (table.cost(target), table.via(target)) == (int(cost), {via}), target


def test_rfc2328_two_way_check(tmp_path: Path) -> None:
    """RFC 2328, section 16.1 (2) (b): a link is used only if its far end has one back. A
    directed graph without RT10->RT6 routes as the one without the whole link; derived."""
    plan = rfc2328_figure_2()
    graph = nx.MultiDiGraph()
    for node in plan.nodes:
        kind = "router" if node.id.startswith("RT") else "segment"
        graph.add_node(node.id, kind=kind)
    graph.add_edges_from(reference.graph_of(plan).edges(data=True))
    graph.remove_edge("RT10", "RT6")
    path = tmp_path / "fault.json"
    path.write_text(json.dumps(nx.node_link_data(graph, edges="links")))
    loaded = read(path)
    assert any("RT6" in note and "RT10" in note for note in loaded.notes)
    table = Table(loaded.plan, "RT6")
    for text in REROUTED["RT6-RT10"].split(","):
        target, cost, via = text.split()
        assert (table.cost(target), table.via(target)) == (int(cost), {via}), target


def test_rfc2328_figure_2_without_rt10() -> None:
    """Derived: what hangs on RT10 is cut off from RT6, the rest goes by RT5."""
    table = Table(rfc2328_figure_2(), "RT6", NodeState("RT10"))
    assert [table.cost(t) for t in ("N8", "N9", "N10", "N11", "H1")] == [None] * 5
    assert [(table.cost(t), table.via(t)) for t in ("N6", "N7", "RT7")] == [
        (13, {"RT5"}), (17, {"RT5"}), (12, {"RT5"}),
    ]  # fmt: skip


def test_rfc6987_max_link_metric_on_rt10() -> None:
    """RFC 6987: non-stub links of a stub router cost 65535, so it carries transit only as
    a last resort. Values derived from RFC 2328, Figure 2, with RT10 stubbed."""
    plan = rfc2328_figure_2()
    changes = [
        LinkCost(link.id, 65535, link.cost_back)
        if link.source == "RT10"
        else LinkCost(link.id, link.cost, 65535)
        for link in plan.links_at("RT10")
        if link.id != "RT10-Ia"  # a stub link keeps its cost
    ]
    table = Table(plan, "RT6", *changes)
    by_rt5 = {"N6": 13, "N7": 17, "RT7": 12}
    by_rt10 = {"RT10": 7, "N8": 65542, "N9": 65543, "N10": 65545, "N11": 65546, "H1": 65553}
    for via, costs in (("RT5", by_rt5), ("RT10", by_rt10)):
        for target, cost in costs.items():
            assert (table.cost(target), table.via(target)) == (cost, {via}), target


def test_drain_by_cost_is_rfc6987_on_every_link() -> None:
    plan = rfc2328_figure_2()
    plan.apply(edits.drain_by_cost(plan, "RT10"))
    table = Table(plan, "RT6", *plan.trial.changes)
    assert (table.cost("N8"), table.cost("RT10"), table.cost("N6")) == (65542, 7, 13)


def test_rfc3277_overloaded_router_is_reached_but_never_transit() -> None:
    """RFC 3277, Figure 1: a diamond A-B-D, A-C-D; the figure gives no costs, 10 is ours."""
    plan = plan_of("A-B 10, B-D 10, A-C 10, C-D 10, D-E 10")
    assert Table(plan, "A").via("D") == {"B", "C"}
    table = Table(plan, "A", Drained("B"))
    assert table.via("D") == {"C"}
    assert (table.cost("B"), table.via("B")) == (10, {"B"})
    only_way = Table(plan, "A", Drained("B"), Drained("C"))
    assert only_way.cost("D") is None
    assert only_way.cost("C") == 10
    assert Table(plan, "B", Drained("B")).cost("E") == 20, "a drained router sends its own"


def test_rfc3277_networks_of_an_overloaded_router_stay_reachable() -> None:
    """RFC 3277: an overloaded router's own prefixes are still reached through it. RFC 2328,
    Figure 2, with RT12 or RT10 drained, seen from RT6; derived."""
    table = Table(rfc2328_figure_2(), "RT6", Drained("RT12"))
    assert [table.cost(t) for t in ("RT12", "N9", "N10", "H1")] == [11, 11, 13, 21]
    assert table.links("H1")["RT12", "H1"] == 1.0
    table = Table(rfc2328_figure_2(), "RT6", Drained("RT10"))
    assert [table.cost(t) for t in ("RT10", "Ia", "N6", "RT11")] == [7, 12, 13, None]
    # With RT11 gone N8 is RT10's alone.
    table = Table(rfc2328_figure_2(), "RT6", Drained("RT10"), NodeState("RT11"))
    assert table.cost("N8") == 10


def directed(arcs: str) -> tuple[Network, dict[str, int]]:
    """Return a network of one-way arcs "s->t 10": the other direction never carries."""
    parts = [text.split() for text in arcs.split(",")]
    names = sorted({end for pair, _ in parts for end in pair.split("->")})
    at = {name: i for i, name in enumerate(names)}
    pairs = [tuple(at[end] for end in pair.split("->")) for pair, _ in parts]
    structure = Structure.build(names, [], [pair for pair, _ in parts], pairs)
    cost = np.full(2 * len(parts), 10**6, np.int32)
    cost[structure.arcs[:, 0]] = [int(c) for _, c in parts]
    up = np.ones(len(parts), np.bool_), np.ones(len(names), np.bool_)
    unknown = np.full(len(parts), np.nan)
    network = Network(structure, cost, *up, np.zeros(len(names), np.bool_), unknown, unknown, 65535)
    return network, at


def test_textbook_worked_example() -> None:
    """Cormen, Leiserson, Rivest, Stein, Introduction to Algorithms, Dijkstra's worked
    figure (24.6 in the third edition), from memory, verified as arithmetic."""
    network, at = directed(
        "s->t 10, s->y 5, t->x 1, t->y 2, y->t 3, y->x 9, y->z 2, x->z 4, z->x 6, z->s 7"
    )
    routes = Routes(network, at["s"])
    assert {n: routes.cost(at[n]) for n in "txyz"} == {"t": 8, "x": 9, "y": 5, "z": 7}
    s = network.structure
    tree = {s.link_ids[s.link[a]] for a in np.flatnonzero(routes.tight)}
    assert tree == {"y->t", "t->x", "s->y", "y->z"}


def test_peterson_davie_node_d() -> None:
    """Peterson and Davie, Computer Networks: A Systems Approach, "Steps for Building
    Routing Table for Node D": C 2 via C, B 5 via C, A 10 via C."""
    table = Table(plan_of("D-B 11, D-C 2, C-B 3, C-A 10, B-A 5"), "D")
    assert {t: (table.cost(t), table.via(t)) for t in "CBA"} == {
        "C": (2, {"C"}), "B": (5, {"C"}), "A": (10, {"C"}),
    }  # fmt: skip


def test_rfc2328_figure_17_virtual_link_does_not_dictate_the_path() -> None:
    """RFC 2328, Figure 17, section 16.3: N1 costs RT4 100 and RT5 20; RT1, RT2 and RT3
    all send to it by RT5, at 22, 23 and 21."""
    plan = plan_of("RT1-RT2 1, RT2-RT4 1, RT1-RT3 1, RT3-RT5 1, RT4-N1 100, RT5-N1 20", "N1")
    assert [Table(plan, f"RT{i}").cost("N1") for i in (1, 2, 3)] == [22, 23, 21]
    assert Table(plan, "RT2").via("N1") == {"RT1"}


def test_rfc5286_figure_4_three_primaries() -> None:
    """RFC 5286, Figure 4: S reaches D at 17 over L2 by E1, over L2 by E2, over L3 by E3."""
    plan = plan_of(
        "N-S 20, S-E3 3, S-L2 5, E1-L2 5, E2-L2 5, E3-E2 2, N-A 20, E1-A 10, E2-B 10, A-D 2,B-D 2",
        "L2",
    )
    table = Table(plan, "S")
    assert table.cost("D") == 17
    hops = table.routes.next_hops(table.routes.network.structure.vertex_of["D"])
    assert set(hops) == {("S-L2", "E1"), ("S-L2", "E2"), ("S-E3", "E3")}


@pytest.mark.parametrize(
    ("links", "source", "target", "cost", "via"),
    [
        # RFC 5286, Figures 1, 2, 5 and 6 (p as a router): the primary next hop of S.
        ("S-E 5, E-D 4, S-N1 8, N1-D 3", "S", "D", 9, "E"),
        ("S-N 5, S-E 5, N-E 4, E-D 10", "S", "D", 15, "E"),
        ("N2-S 1, S-N1 10, N2-D 10, S-E 1, E-D 1, N1-D 10", "S", "D", 2, "E"),
        ("S-C 5, S-E 5, S-A 8, A-B 5, B-F 5, C-E 5, E-p 5, F-p 7", "S", "p", 10, "E"),
        # RFC 6571, Figure 1: S to D after S-C has failed goes S-E-C-H-D at 23.
        ("D-G 10, D-H 10, G-B 1, H-C 1, H-F 10, C-E 6, B-A 7, E-S 6, F-S 5, A-S 7",
         "S", "D", 23, "E"),
        # RFC 8333, Figure 5: G to F is G-D-C-E-F.
        ("A-B 1, B-E 1, E-C 1, E-F 1, D-C 1, G-D 1, A-D 1", "G", "F", 4, "D"),
        # RFC 7490, Figure 3: PE1 reaches P1 by PE2 once PE1-P1 is down.
        ("P1-P2 100, P2-PE2 1000, PE1-PE2 5", "PE1", "P1", 1105, "PE2"),
    ],
)  # fmt: skip
def test_primary_next_hops_of_the_fast_reroute_documents(
    links: str, source: str, target: str, cost: int, via: str
) -> None:
    table = Table(plan_of(links), source)
    assert (table.cost(target), table.via(target)) == (cost, {via})


def test_rfc5286_figure_5_after_the_failure() -> None:
    """RFC 5286, Figure 5: once S-E has failed S reaches D by N2 at 11."""
    plan = plan_of("N2-S 1, S-N1 10, N2-D 10, S-E 1, E-D 1, N1-D 10")
    table = Table(plan, "S", LinkState("S-E"))
    assert (table.cost("D"), table.via("D")) == (11, {"N2"})


def test_rfc5286_figure_7_two_areas() -> None:
    """RFC 5286, Appendix A, Figure 7: by Area 1 the ASBR is 35 from A and 20 from B, by
    Area 2 30 and 25. The figure prints F twice; here the second is F2."""
    area_1 = "C-F 5, F-X 20, C-A 5, N-A 5, N-S 40, B-S 5, S-E 5, E-X 5, X-ASBR 5"
    area_2 = "A-F2 1, F2-G 2, G-B 2, B-H 15, H-ASBR 10"
    costs = [
        [Table(plan_of(links), router).cost("ASBR") for router in "AB"]
        for links in (area_1, area_2)
    ]
    assert costs == [[35, 20], [30, 25]]


def test_rfc6976_figure_1_next_hops_that_cross() -> None:
    """RFC 6976, Figure 1: shutting X-Y, R still sends to X by Y while Y already sends by
    R; for Y likewise S by X, X by S."""
    plan = plan_of("X-Y 1, X-S 1, Y-R 1, S-R 2")
    down = LinkState("X-Y")
    assert (Table(plan, "R").via("X"), Table(plan, "Y", down).via("X")) == ({"Y"}, {"R"})
    assert (Table(plan, "S").via("Y"), Table(plan, "X", down).via("Y")) == ({"X"}, {"S"})


def path(links: str, source: str, target: str) -> list[str]:
    """Return the routers on the one way from ``source`` to ``target``."""
    shares = Table(plan_of(links), source).routes
    used = shares.shares(shares.network.structure.vertex_of[target])
    assert all(share.share == 1.0 for share in used)
    return [source, *(share.head for share in used)]


@pytest.mark.parametrize(
    ("links", "source", "printed"),
    [
        # RFC 8333, Figures 5 and 6: the paths G-D-C-E-F and G-D-C-F-J-K.
        ("A-B 1, B-E 1, E-C 1, E-F 1, D-C 1, G-D 1, A-D 1", "G", "G D C E F"),
        ("A-B 1, B-E 15, E-H 1, H-J 1, A-D 1, G-D 1, D-C 1, C-F 1, F-J 1, J-K 1", "G",
         "G D C F J K"),
        # RFC 8102, Table 1: the primaries of S.
        (RFC8102_FIGURE_1, "S", "S E R3"),
        (RFC8102_FIGURE_1, "S", "S E D1"),
        (RFC8102_FIGURE_1, "S", "S E R3 D2"),
        # Peterson and Davie: B and A by C, then on by C-B and B-A.
        ("D-B 11, D-C 2, C-B 3, C-A 10, B-A 5", "D", "D C B A"),
    ],
)  # fmt: skip
def test_printed_paths(links: str, source: str, printed: str) -> None:
    routers = printed.split()
    assert path(links, source, routers[-1]) == routers


def test_rfc7490_figure_1_reaches_c_both_ways() -> None:
    """RFC 7490, Figure 1, a ring of cost 1: only C has equal-cost paths from S, so only C
    is protectable by a plain alternate."""
    table = Table(plan_of("S-E 1, E-D 1, D-C 1, C-B 1, B-A 1, A-S 1"), "S")
    assert table.via("C") == {"E", "A"}
    assert [table.via(t) for t in "EDAB"] == [{"E"}, {"E"}, {"A"}, {"A"}]


# RFC 8102: the distances of Table 3 and Table 5 (Figure 2), Table 7 and Table 9 (Figure 7).
# Table 5 prints 1 for E to D2 and Table 9 prints 2 for R2 to E2: the figures' costs give 2
# and 3, and no verdict changes.
RFC8102_FIGURE_2_DISTANCES = (
    "N R2 2, N E 1, E R2 2, N R3 2, E R3 1, R2 R3 1, R2 E 2, R2 D1 3, E D1 1, R2 D2 2, E D2 2"
)
RFC8102_FIGURE_7_DISTANCES = (
    "N R2 3, N E1 3, E1 R2 2, N E2 2, E2 R2 3, R2 D1 3, R2 E1 2, E1 D1 1, E2 D1 2, R2 D2 2,"
    "E1 D2 2, R2 E2 3, E2 D2 3"
)


@pytest.mark.parametrize(
    ("links", "printed"),
    [
        (f"{RFC8102_FIGURE_1}, N-E 1", RFC8102_FIGURE_2_DISTANCES),
        (RFC8102_FIGURE_7, RFC8102_FIGURE_7_DISTANCES),
    ],
)
def test_rfc8102_distances(links: str, printed: str) -> None:
    pairs = AllPairs(compile_plan(plan_of(links)))
    vertex = pairs.network.structure.vertex_of
    for text in printed.split(","):
        source, target, distance = text.split()
        assert pairs.distances[vertex[source], vertex[target]] == int(distance), text


def test_rfc8102_figure_7_equal_cost_next_hops() -> None:
    """RFC 8102, Figure 7: S has the next hops E1 and E2 for D1 and D2."""
    table = Table(plan_of(RFC8102_FIGURE_7), "S")
    assert [table.via(target) for target in ("D1", "D2")] == [{"E1", "E2"}] * 2
