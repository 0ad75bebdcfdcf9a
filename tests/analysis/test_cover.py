"""Covers against the figures of RFC 5286, RFC 7490 and RFC 6571, and by definition."""

from __future__ import annotations

import networkx as nx
import pytest
from hypothesis import given

from netsketch.analysis.cover import (
    NOTHING,
    Alternate,
    alternates,
    coverage_of,
    covers,
    remote,
)
from netsketch.model import Plan, Segment
from netsketch.routing import AllPairs, NextHop, compile_plan
from tests import open_data, reference, strategies
from tests.examples import examples
from tests.published import RFC8102_FIGURE_1, plan_of


class Asked:
    """Alternates by router names."""

    def __init__(self, links: str, segments: str = "") -> None:
        self.pairs = AllPairs(compile_plan(plan_of(links, segments)))
        self.vertex = self.pairs.network.structure.vertex_of

    def of(self, source: str, target: str) -> dict[str, dict[str, Alternate]]:
        """Primary router -> alternate router -> alternate."""
        found = alternates(self.pairs, self.vertex[source], self.vertex[target])
        return {
            str(primary.router): {str(a.next_hop.router): a for a in listed}
            for primary, listed in found.items()
        }

    def names(self, vertices: frozenset[int]) -> set[str]:
        ids = self.pairs.network.structure.vertex_ids
        return {ids[v] for v in vertices}


def test_rfc5286_figure_1() -> None:
    """S's primary is E; N1 is an alternate at N1-D 3, none at 30."""
    found = Asked("S-E 5, E-D 4, S-N1 8, N1-D 3").of("S", "D")
    assert set(found) == {"E"}
    assert set(found["E"]) == {"N1"}
    assert Asked("S-E 5, E-D 4, S-N1 8, N1-D 30").of("S", "D")["E"] == {}


def test_rfc5286_figure_2() -> None:
    """N is loop-free and downstream for S, not node-protecting; S is loop-free for N but
    not downstream."""
    asked = Asked("S-N 5, S-E 5, N-E 4, E-D 10")
    for_s = asked.of("S", "D")["E"]["N"]
    assert (for_s.protects_link, for_s.protects_node, for_s.downstream) == (True, False, True)
    for_n = asked.of("N", "D")["E"]["S"]
    assert (for_n.protects_link, for_n.downstream) == (True, False)


def test_rfc5286_figure_3_the_alternate_must_leave_by_the_point_to_point_link() -> None:
    """S's primary to D crosses the LAN to E; N protects link and node, by S-N."""
    asked = Asked("S-PN 5, N-PN 5, E-PN 5, S-N 15, N-D 8, E-D 5", "PN")
    listed = alternates(asked.pairs, asked.vertex["S"], asked.vertex["D"])
    by_hop = {a.next_hop: a for a in listed[NextHop("S-PN", "E")]}
    direct = by_hop[NextHop("S-N", "N")]
    assert (direct.protects_link, direct.protects_node) == (True, True)
    assert not by_hop[NextHop("S-PN", "N")].protects_link
    assert listed[NextHop("S-PN", "E")][0] == direct


def test_rfc5286_figure_4() -> None:
    """Three primaries; what protects what, as section 3 prints it."""
    asked = Asked(
        "N-S 20, S-E3 3, S-L2 5, E1-L2 5, E2-L2 5, E3-E2 2, N-A 20, E1-A 10, E2-B 10, A-D 2,B-D 2",
        "L2",
    )
    found = asked.of("S", "D")
    protection = {
        primary: {name: (a.protects_link, a.protects_node) for name, a in listed.items()}
        for primary, listed in found.items()
    }
    both, node, link = (True, True), (False, True), (True, False)
    assert protection["E1"] == {"E3": both, "E2": node, "N": both}
    assert protection["E2"] == {"E1": node, "E3": link, "N": both}
    assert {k: protection["E3"][k] for k in ("E1", "E2")} == {"E1": both, "E2": both}


def test_rfc5286_figure_5_and_6() -> None:
    """Figure 5: N1 is an alternate, N2 is not. Figure 6, p as a router: A protects the
    node, C only the link."""
    figure_5 = Asked("N2-S 1, S-N1 10, N2-D 10, S-E 1, E-D 1, N1-D 10").of("S", "D")
    assert set(figure_5["E"]) == {"N1"}
    figure_6 = Asked("S-C 5, S-E 5, S-A 8, A-B 5, B-F 5, C-E 5, E-p 5, F-p 7").of("S", "p")["E"]
    assert figure_6["A"].protects_node
    assert (figure_6["C"].protects_link, figure_6["C"].protects_node) == (True, False)


RING = "S-E 1, E-D 1, D-C 1, C-B 1, B-A 1, A-S 1"


def test_rfc7490_figure_1() -> None:
    """The ring: extended P {A, B, C}, Q {C, D}, PQ {C}; with B-C at 4 there is no repair."""
    asked = Asked(RING)
    found = remote(asked.pairs, asked.vertex["S"], NextHop("S-E", "E"))
    assert asked.names(found.extended_p) == {"A", "B", "C"}
    assert asked.names(found.q) == {"C", "D"}
    assert asked.names(found.pq) == {"C"}
    dear = Asked(RING.replace("C-B 1", "C-B 4"))
    found = remote(dear.pairs, dear.vertex["S"], NextHop("S-E", "E"))
    assert dear.names(found.extended_p) == {"A", "B"}
    assert found.pq == frozenset()


def test_rfc7490_figure_3() -> None:
    """PE1 has no alternate for PE1-P1; P2 is the repair for it, P1 for PE2-P2."""
    asked = Asked("P1-P2 100, P1-PE1 1000, P2-PE2 1000, PE1-PE2 5")
    assert asked.of("PE1", "P1")["P1"] == {}
    for end, link, far, repair in (
        ("PE1", "P1-PE1", "P1", "P2"),
        ("PE2", "P2-PE2", "P2", "P1"),
    ):
        found = remote(asked.pairs, asked.vertex[end], NextHop(link, far))
        assert asked.names(found.pq) == {repair}


def test_rfc8102_figure_1_remote_node() -> None:
    """Figure 1 of RFC 8102 (all costs 1): PQ of S-E is {R2} only."""
    asked = Asked(RFC8102_FIGURE_1)
    found = remote(asked.pairs, asked.vertex["S"], NextHop("S-E", "E"))
    assert asked.names(found.pq) == {"R2"}
    assert asked.names(found.q) == {"D1", "D2", "R2", "R3"}


FIGURE_6571_1 = "D-G 10, D-H 10, G-B 1, H-C 1, H-F 10, C-E 6, C-S 10, B-A 7, E-S 6, F-S 5, A-S 7"


def test_rfc6571_figure_1() -> None:
    """Alternates of S for D by A, E and F; A and F protect the node, E does not. For C
    itself E and F are alternates, A is not."""
    asked = Asked(FIGURE_6571_1)
    found = asked.of("S", "D")["C"]
    assert {name: a.protects_node for name, a in found.items()} == {
        "A": True, "E": False, "F": True,
    }  # fmt: skip
    assert set(asked.of("S", "C")["C"]) == {"E", "F"}


def motif(links: str, d: int = 10, u: int = 11, c: int = 5, a: int = 8) -> str:
    """Return links "C1>A1" (down at d, up at u), "C1=C2" (c) and "A1=A2" (a)."""
    found = []
    for text in links.split():
        if ">" in text:
            found.append(f"{text.replace('>', '-')} {d}/{u}")
        else:
            found.append(f"{text.replace('=', '-')} {c if text.startswith('C') else a}")
    return ", ".join(found)


TRIANGLE = motif("C1=C2 C1>E1 C2>E1 C1>E2 C2>E2")
MESH = motif("C1=C2 C1>A1 C1>A2 C2>A1 C2>A2 A1=A2 A1>E1 A2>E1 A1>E2 A2>E2")
SQUARE = motif("C1=C2 C1>A1 C2>A2 C1>A3 C2>A4 A1=A2 A3=A4 A1>E1 A2>E1 A1>E2 A2>E2 A3>E3 A4>E3")


def uncovered(links: str) -> set[tuple[str, str]]:
    """Return (router, destination) without a link-protecting alternate, C1-C2 aside."""
    asked = Asked(links)
    ids = asked.pairs.network.structure.vertex_ids
    found = set()
    for cover in covers(asked.pairs):
        if cover.primary.link != "C1-C2":
            missing = cover.uses & ~cover.link
            found |= {(ids[cover.source], ids[v]) for v in missing.nonzero()[0]}
    return found


def test_rfc6571_motifs_link_protection() -> None:
    """Section 3.8, with d = 10, u = 11, c = 5, a = 8: full for triangle and mesh; the
    square misses C1 to A1, and by symmetry C1 to A3, C2 to A2 and C2 to A4."""
    assert uncovered(TRIANGLE) == set()
    assert uncovered(MESH) == set()
    assert uncovered(SQUARE) == {("C1", "A1"), ("C1", "A3"), ("C2", "A2"), ("C2", "A4")}


# -- by definition ----------------------------------------------------------------------


def far(plan: Plan) -> dict[str, dict[str, float]]:
    """Return distances between all vertices, segments as sources included."""
    drained = {router.id for router in plan.routers() if router.drained}
    graph = reference.graph_of(plan)
    return {
        node.id: nx.single_source_dijkstra_path_length(
            reference._seen_from(graph, drained, node.id), node.id, weight="cost"
        )
        for node in plan.nodes
    }


def by_definition(
    plan: Plan, source: str, target: str
) -> dict[tuple[str, str | None], dict[tuple[str, str | None], tuple[bool, bool, bool]]]:
    """Return primary -> alternate -> (link, node, downstream), inequality by inequality."""
    d, inf = far(plan), float("inf")

    def D(a: str, b: str) -> float:  # noqa: N802 - the RFC's name
        return d[a].get(b, inf)

    answers = reference.answers(plan)[source]
    graph = reference.graph_of(plan)
    high = 65535
    hops = {}
    for _, head, link in graph.out_edges(source, keys=True):
        if isinstance(plan.nodes[head], Segment):
            for beyond in set(graph[head]) - {source}:
                hops[link, beyond] = head
        else:
            hops[link, head] = None
    found = {}
    for primary in answers.next_hops.get(target, set()):
        if primary not in hops:
            continue
        end, across = primary[1], hops[primary]
        listed = {}
        for other, over in hops.items():
            near = other[1]
            ends = plan.links[other[0]]
            if other == primary or high in (ends.cost, ends.cost_back):
                continue
            if getattr(plan.nodes[near], "drained", False) and target != near:
                continue
            if not D(near, target) < D(near, source) + D(source, target):
                continue
            link = other[0] != primary[0]
            if across is not None:
                link = link and over != across
                link = link and D(near, target) < D(near, across) + D(across, target)
            node = near != end and target != end and D(near, target) < D(near, end) + D(end, target)
            listed[other] = (link, node, D(near, target) < D(source, target))
        found[primary] = listed
    return found


def assert_as_defined(plan: Plan) -> None:
    pairs = AllPairs(compile_plan(plan))
    s = pairs.network.structure
    for v in range(s.routers):
        for t in range(s.routers):
            if v != t:
                found = {
                    tuple(primary): {
                        tuple(a.next_hop): (a.protects_link, a.protects_node, a.downstream)
                        for a in listed
                    }
                    for primary, listed in alternates(pairs, v, t).items()
                }
                assert found == by_definition(plan, s.vertex_ids[v], s.vertex_ids[t])


@examples(200)
@given(plan=strategies.plans(style="ospf", max_nodes=5, max_links=9, with_trial=False))
def test_alternates_are_what_the_inequalities_say(plan: Plan) -> None:
    assert_as_defined(plan)


@pytest.mark.parametrize("key", ["sndlib/abilene", "sndlib/polska", "sndlib/nobel-us"])
def test_alternates_on_open_data(key: str) -> None:
    assert_as_defined(open_data.plan_of(key, "unequal"))


def test_coverage_counts_and_what_remote_alternates_add() -> None:
    """RFC 7490, section 2, on its ring: S has 6 primaries with destinations (C both ways);
    C is covered by the other way round, the rest only remotely."""
    pairs = AllPairs(compile_plan(plan_of(RING)))
    total = NOTHING
    for cover in covers(pairs):
        total = total.plus(coverage_of(pairs, cover))
    assert (total.uses, total.link) == (36, 12)
    assert total.remote == 36
    assert total.link_share == pytest.approx(1 / 3)
