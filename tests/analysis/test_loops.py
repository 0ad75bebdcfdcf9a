"""Reconvergence loops against the examples of the RFCs and by definition."""

from __future__ import annotations

from itertools import pairwise

import networkx as nx
import pytest
from hypothesis import given

from netsketch.analysis.loops import loops
from netsketch.model import LinkCost, LinkState, Plan, Trial
from netsketch.routing import compile_plan
from tests import open_data, reference, strategies
from tests.analysis.test_cover import FIGURE_6571_1, MESH, SQUARE, TRIANGLE
from tests.examples import examples
from tests.published import plan_of


def found(links: str, down: str) -> dict[str, list[set[str]]]:
    """Return destination -> sets of routers that can circle when ``down`` goes down."""
    network = compile_plan(plan_of(links))
    after = network.laid_over(Trial((LinkState(down),)))
    by_target: dict[str, list[set[str]]] = {}
    for loop in loops(network, after):
        by_target.setdefault(loop.target, []).append(set(loop.members))
    return by_target


def test_rfc6976_figure_1() -> None:
    """Shutting X-Y: R and Y can loop for X, X and S for Y; exactly these."""
    assert found("X-Y 1, X-S 1, Y-R 1, S-R 2", "X-Y") == {"X": [{"R", "Y"}], "Y": [{"S", "X"}]}


@pytest.mark.parametrize(
    ("links", "down", "target", "members"),
    [
        # RFC 5286, Figure 5: S and N2 for D once S-E has failed.
        ("N2-S 1, S-N1 10, N2-D 10, S-E 1, E-D 1, N1-D 10", "S-E", "D", {"S", "N2"}),
        # RFC 6571, Figure 1: A-B fails, A and S for B.
        (FIGURE_6571_1, "B-A", "B", {"A", "S"}),
        # RFC 8333, Figures 1, 2 and 5.
        ("D-C 1, S-D 1, S-B 1, B-C 5", "S-D", "D", {"S", "B"}),
        ("D-A 1, A-B 1, B-C 5, C-E 1, A-E 10, E-S 1", "B-C", "D", {"C", "E"}),
        ("A-B 1, B-E 1, E-C 1, E-F 1, D-C 1, G-D 1, A-D 1", "E-C", "F", {"C", "D"}),
    ],
)
def test_loops_that_the_documents_name(
    links: str, down: str, target: str, members: set[str]
) -> None:
    assert any(members <= each for each in found(links, down)[target])


def test_rfc8333_figure_6() -> None:
    """C-F fails: loops C-D and D-A for K; recomputed, A-B is possible too, one set."""
    links = "A-B 1, B-E 15, E-H 1, H-J 1, A-D 1, G-D 1, D-C 1, C-F 1, F-J 1, J-K 1"
    assert {"A", "B", "C", "D"} <= found(links, "C-F")["K"][0]


@pytest.mark.parametrize(
    ("links", "down", "costs"),
    [
        # Sequences of costs without a loop at any step (derived, sources.md 8.4).
        ("X-Y 1, X-S 1, Y-R 1, S-R 2", "X-Y", [1, 3]),
        ("D-C 1, S-D 1, S-B 1, B-C 5", "S-D", [1, 4, 6]),
        ("D-A 1, A-B 1, B-C 5, C-E 1, A-E 10, E-S 1", "B-C", [5, 9, 11]),
        ("A-B 1, B-E 1, E-C 1, E-F 1, D-C 1, G-D 1, A-D 1", "E-C", [1, 3]),
        ("S-E 1, E-D 1, D-C 1, C-B 1, B-A 1, A-S 1", "S-E", [1, 2, 4]),
        (FIGURE_6571_1, "B-A", [7, 14, 18, 24, 38]),
    ],
)
def test_cost_by_cost_nothing_loops(links: str, down: str, costs: list[int]) -> None:
    network = compile_plan(plan_of(links))
    steps = [Trial((LinkCost(down, cost, cost),)) for cost in costs] + [Trial((LinkState(down),))]
    states = [network.laid_over(step) for step in steps]
    for before, after in pairwise(states):
        assert list(loops(before, after)) == []
    assert list(loops(states[0], states[-1])) != [], "in one step it loops"


def test_rfc6571_motifs() -> None:
    """Section 3.8: no loops in triangle and mesh when a downlink fails; in the square C1
    and C2 can loop for A1 when C1-A1 fails."""
    assert found(TRIANGLE, "C1-E1") == {}
    assert found(MESH, "C1-A1") == {}
    assert any({"C1", "C2"} <= each for each in found(SQUARE, "C1-A1")["A1"])


def by_definition(plan: Plan, trial: Trial) -> dict[str, set[frozenset[str]]]:
    old, new = reference.answers(plan), reference.answers(reference.with_trial(plan, trial))
    sets = {}
    for router in plan.routers():
        graph = nx.DiGraph()
        for answers in (old, new):
            for source, answer in answers.items():
                for _, hop in answer.next_hops.get(router.id, set()):
                    if hop is not None:
                        graph.add_edge(source, hop)
        cycles = {frozenset(c) for c in nx.strongly_connected_components(graph) if len(c) > 1}
        if cycles:
            sets[router.id] = cycles
    return sets


def assert_as_defined(plan: Plan, trial: Trial) -> None:
    network = compile_plan(plan)
    sets: dict[str, set[frozenset[str]]] = {}
    for loop in loops(network, network.laid_over(trial)):
        sets.setdefault(loop.target, set()).add(frozenset(loop.members))
    assert sets == by_definition(plan, trial)


@examples(200)
@given(plan=strategies.plans(max_nodes=6, max_links=9, with_trial=False))
def test_loops_on_random_plans(plan: Plan) -> None:
    for link in plan.links.keys()[:3]:
        assert_as_defined(plan, Trial((LinkState(link),)))


def test_loops_on_open_data() -> None:
    plan = open_data.plan_of("sndlib/abilene", "unequal")
    for link in plan.links.keys():  # noqa: SIM118 - a shelf iterates items
        assert_as_defined(plan, Trial((LinkState(link),)))
