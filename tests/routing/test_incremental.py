"""Random plans through random changes: the incremental state equals one from scratch and
networkx after each."""

from __future__ import annotations

from itertools import pairwise

import networkx as nx
import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from hypothesis.stateful import RuleBasedStateMachine, initialize, invariant, rule
from scipy.sparse import coo_array
from scipy.sparse.csgraph import dijkstra

from netsketch.formats import native
from netsketch.model import Edit, Link, LinkState, Plan, Router, Trial, edits
from netsketch.routing import BLOCKED, AllPairs, Network, Routes, Structure, compile_plan
from tests import reference, strategies
from tests.examples import examples
from tests.published import plan_of


def arrays_of(network: Network) -> dict[str, list[object]]:
    """Return everything a network says, for comparison."""
    s = network.structure
    return {
        "vertices": list(s.vertex_ids),
        "links": list(s.link_ids),
        **{
            name: getattr(s, name).tolist()
            for name in ("indptr", "tail", "head", "link", "in_arc", "first_parallel")
        },
        **{
            name: getattr(network, name).tolist()
            for name in ("cost", "link_up", "vertex_up", "drained", "weight", "transit")
        },
        "known": np.nan_to_num(network.delay, nan=-1).tolist(),
        "capacity": np.nan_to_num(network.capacity, nan=-1).tolist(),
    }


def scipy_row(network: Network, source: int) -> list[float]:
    """Return the distances from ``source`` by scipy. Sparse graphs drop zero-cost arcs, so
    every arc out of a segment gets 1/(2V) instead, which rounding down takes out again."""
    s = network.structure
    weight = np.where(s.tail == source, network.weight, network.transit).astype(np.float64)
    weight[s.tail >= s.routers] += 0.5 / s.vertices
    use = weight < BLOCKED
    best: dict[tuple[int, int], float] = {}
    for tail, head, w in zip(s.tail[use], s.head[use], weight[use], strict=True):
        best[tail, head] = min(w, best.get((tail, head), np.inf))
    ends = np.array(list(best) or np.empty((0, 2)), np.int64).reshape(-1, 2).T
    graph = coo_array((list(best.values()), ends), shape=(s.vertices, s.vertices))
    return np.floor(dijkstra(graph.tocsr(), indices=source)).tolist()


class RandomChanges(RuleBasedStateMachine):
    """Edits, trials, undo: whatever happens, the answers are those from scratch."""

    def __init__(self) -> None:
        super().__init__()
        self.plan = Plan()
        self.undo: list[Edit] = []

    @initialize(plan=strategies.plans())
    def start(self, plan: Plan) -> None:
        self.plan = plan
        self.start_bytes = native.dumps(plan)
        self.network = compile_plan(plan)
        self.pairs = AllPairs(self.network)
        self.tried = self.pairs.copy()
        self.tried.move_to(self.network.laid_over(plan.trial))

    def apply(self, edit: Edit) -> Edit:
        inverse = self.plan.apply(edit)
        self.network = self.network.after(self.plan, edit.steps)
        return inverse

    def catch_up(self) -> None:
        self.pairs.move_to(self.network)
        self.tried.move_to(self.network.laid_over(self.plan.trial))

    @rule(data=st.data(), count=st.integers(1, 4))
    def change(self, data: st.DataObject, count: int) -> None:
        """A batch: several edits before the distances follow, all at once."""
        for _ in range(count):
            self.undo.append(self.apply(data.draw(strategies.edits_on(self.plan))))
        self.catch_up()

    @rule()
    def take_back(self) -> None:
        if self.undo:
            self.apply(self.undo.pop())
            self.catch_up()

    @invariant()
    def answers_are_those_from_scratch(self) -> None:
        fresh = compile_plan(self.plan)
        assert arrays_of(self.network) == arrays_of(fresh)
        assert (self.pairs.distances == AllPairs(fresh).distances).all()
        in_trial = compile_plan(self.plan, self.plan.trial)
        assert (self.tried.distances == AllPairs(in_trial).distances).all()
        tried = reference.with_trial(self.plan, self.plan.trial)
        self.equals_networkx(in_trial, tried)

    def equals_networkx(self, network: Network, plan: Plan) -> None:
        s = network.structure
        graph = reference.graph_of(plan)
        for source in range(s.routers):
            routes = Routes(network, source, self.tried.distances[source])
            found = [np.inf if (c := routes.cost(v)) is None else c for v in range(s.vertices)]
            assert found == scipy_row(network, source)
            assert routes.order[0] == source
        if s.routers:  # one source a step, in turn, for the sets of next hops
            source = len(self.undo) % s.routers
            drained = {r.id for r in plan.routers() if r.drained}
            seen = reference._seen_from(graph, drained, s.vertex_ids[source])
            rails = {segment.id for segment in plan.segments()}
            answer = reference.answer(seen, rails, s.vertex_ids[source])
            routes = Routes(network, source)
            for target, hops in answer.next_hops.items():
                assert set(routes.next_hops(s.vertex_of[target])) == hops

    def teardown(self) -> None:
        while self.undo:
            self.apply(self.undo.pop())
        if hasattr(self, "start_bytes"):
            assert native.dumps(self.plan) == self.start_bytes


TestRandomChanges = RandomChanges.TestCase
TestRandomChanges.settings = settings(
    examples(40), stateful_step_count=32, suppress_health_check=list(HealthCheck)
)


def random_network(rng: np.random.Generator, structure: Structure, like: Network | None) -> Network:
    """Return a network in few costs with many ties; about half is as ``like``."""
    s = structure
    cost = np.where(s.tail < s.routers, rng.integers(1, 4, len(s.tail)), 0).astype(np.int32)
    link_up = rng.random(len(s.link_ids)) < 0.8
    vertex_up, drained = rng.random(s.vertices) < 0.95, rng.random(s.vertices) < 0.1
    drained[s.routers :] = False
    if like is not None:
        part = rng.random()
        cost = np.where(rng.random(len(cost)) < part, like.cost, cost)
        link_up = np.where(rng.random(len(link_up)) < part, like.link_up, link_up)
        vertex_up = np.where(rng.random(s.vertices) < part, like.vertex_up, vertex_up)
        drained = np.where(rng.random(s.vertices) < part, like.drained, drained)
    unknown = np.full(len(link_up), np.nan)
    return Network(s, cost, link_up, vertex_up, drained, unknown, unknown, 65535)


def random_structure(rng: np.random.Generator) -> Structure:
    """Return up to 7 routers and 2 segments with parallel links."""
    routers, segments = int(rng.integers(3, 8)), int(rng.integers(0, 3))
    ends = rng.integers(0, routers + segments, (int(rng.integers(4, 20)), 2))
    ends = ends[(ends[:, 0] != ends[:, 1]) & (ends < routers).any(axis=1)]
    names = [f"v{i}" for i in range(routers + segments)]
    links = [f"l{i}" for i in range(len(ends))]
    return Structure.build(names[:routers], names[routers:], links, ends)


def test_from_any_network_to_any_other() -> None:
    """Whole batches at once: any number of arcs dearer, cheaper, gone and new together."""
    rng = np.random.default_rng(7)
    for _ in range(600):
        structure = random_structure(rng)
        pairs = AllPairs(random_network(rng, structure, None))
        for _ in range(5):
            before = pairs.distances.copy()
            update = pairs.move_to(random_network(rng, structure, pairs.network))
            assert (pairs.distances == AllPairs(pairs.network).distances).all()
            assert update.changed_pairs == int((pairs.distances != before).sum())


@examples(80)
@given(before=strategies.plans(), after=strategies.plans())
def test_from_any_plan_to_any_other(before: Plan, after: Plan) -> None:
    """Ids that name something else afterwards: links with other ends, a router that was a
    segment."""
    pairs = AllPairs(compile_plan(before))
    pairs.move_to(compile_plan(after))
    assert (pairs.distances == AllPairs(compile_plan(after)).distances).all()


def test_a_link_redrawn_between_other_ends_under_its_id() -> None:
    plan = plan_of("a-b 1, b-c 1, c-d 1, d-a 9")
    pairs = AllPairs(compile_plan(plan))
    plan.apply(edits.remove(plan, (), ["a-b"]))
    plan.apply(edits.add(plan, Link(id="a-b", source="a", target="d", cost=2, cost_back=2)))
    pairs.move_to(compile_plan(plan))
    vertex = pairs.network.structure.vertex_of
    assert [pairs.distances[vertex["a"], vertex[t]] for t in "bcd"] == [4, 3, 2]


@pytest.mark.parametrize("kinds", [("", "hub"), ("hub", "")])
def test_a_router_redrawn_as_a_segment_under_its_id(kinds: tuple[str, str]) -> None:
    """Leaving a router costs, leaving a segment does not."""
    first, second = (compile_plan(plan_of("a-hub 3, b-hub 4, c-hub 5", kind)) for kind in kinds)
    pairs = AllPairs(first)
    pairs.move_to(second)
    vertex = second.structure.vertex_of
    across = 3 if kinds[1] else 7
    assert pairs.distances[vertex["a"], vertex["b"]] == across
    assert (pairs.distances == AllPairs(second).distances).all()


def test_a_parallel_link_goes_with_the_way_to_its_tail() -> None:
    """One of two parallel links and the best way to their tail go down at once: the other
    one does not keep the head where it was."""
    plan = plan_of("s-u 1, s-x 5, x-u 5, u-v 1")
    plan.apply(edits.add_link(plan, "u", "v", 1))
    pairs = AllPairs(compile_plan(plan))
    pairs.move_to(pairs.network.laid_over(Trial((LinkState("s-u"), LinkState("u-v")))))
    vertex = pairs.network.structure.vertex_of
    assert [pairs.distances[vertex["s"], vertex[t]] for t in "uxv"] == [10, 5, 11]


def test_long_costs_need_64_bits() -> None:
    """Distances beyond 2**31 stay exact (wide IS-IS costs, RFC 5305)."""
    high = 16_777_214
    names = [f"r{i}" for i in range(200)]
    text = ",".join(f"{a}-{b} {high}" for a, b in pairwise(names))
    network = compile_plan(plan_of(text, style="isis-wide"))
    assert network.distance_type is np.int64
    vertex = network.structure.vertex_of
    assert Routes(network, vertex["r0"]).cost(vertex["r199"]) == 199 * high
    pairs = AllPairs(network)
    pairs.move_to(network.laid_over(Trial()))
    assert pairs.distances[vertex["r199"], vertex["r0"]] == 199 * high


def test_changed_pairs_are_counted() -> None:
    """A chain of four routers: losing the middle link changes the 8 pairs across it."""
    pairs = AllPairs(compile_plan(plan_of("a-b 1, b-c 1, c-d 1")))
    update = pairs.move_to(pairs.network.laid_over(Trial((LinkState("b-c"),))))
    assert (update.changed_pairs, update.changed_arcs) == (8, 2)
    again = pairs.move_to(pairs.network)
    assert (again.changed_pairs, again.changed_arcs) == (0, 0)


def test_graph_of_reference_has_both_directions() -> None:
    graph = reference.graph_of(plan_of("a-b 1/2"))
    assert isinstance(graph, nx.MultiDiGraph)
    assert {(u, v): d for u, v, d in graph.edges(data="cost")} == {("a", "b"): 1, ("b", "a"): 2}


def test_all_pairs_of_5000_routers_fit_in_250_mb() -> None:
    """Distances of 32 bits hold every OSPF plan of this size: 100 MB; wide IS-IS costs
    need 64 bits: 200 MB."""
    ids = [f"r{i}" for i in range(5000)]
    plan = Plan()
    plan.apply(edits.add(plan, *(Router(id=key) for key in ids)))
    bytes_each = np.dtype(compile_plan(plan).distance_type).itemsize
    assert bytes_each * 5000 * 5000 == 100_000_000
    plan.apply(edits.set_settings(plan, cost_style="isis-wide"))
    bytes_each = np.dtype(compile_plan(plan).distance_type).itemsize
    assert bytes_each * 5000 * 5000 <= 250_000_000
