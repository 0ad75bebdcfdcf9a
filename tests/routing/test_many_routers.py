"""Plans of several hundred routers, where the work is cut into slices and spread over
threads: changes, edits and wider distances, against scipy."""

from __future__ import annotations

import random

import numpy as np
import pytest
from scipy.sparse import csr_array
from scipy.sparse.csgraph import dijkstra

from netsketch.model import (
    Drained,
    Edit,
    Link,
    LinkCost,
    LinkState,
    NodeState,
    Plan,
    Router,
    Trial,
    edits,
)
from netsketch.routing import BLOCKED, AllPairs, Cancelled, Network, compile_plan
from tests.benchmarks.backbone import backbone
from tests.published import plan_of

ROUTERS = 600


def by_scipy(network: Network) -> np.ndarray:
    """Return the distances of a network of routers, none of them drained."""
    s = network.structure
    best: dict[tuple[int, int], int] = {}
    use = network.weight < BLOCKED
    for *ends, weight in zip(
        s.tail[use].tolist(), s.head[use].tolist(), network.weight[use].tolist(), strict=True
    ):
        best[tuple(ends)] = min(weight, best.get(tuple(ends), weight))
    ends, weights = np.array(list(best)).T, np.array(list(best.values()), np.float64)
    return np.asarray(dijkstra(csr_array((weights, ends), shape=(s.vertices, s.vertices))))


def assert_exact(pairs: AllPairs) -> None:
    found = np.where(pairs.distances == pairs.unreached, np.inf, pairs.distances)
    assert (found == by_scipy(pairs.network)).all()


def follow(plan: Plan, pairs: AllPairs, edit: Edit) -> Edit:
    """Apply ``edit``, bring ``pairs`` along and return the inverse."""
    inverse = plan.apply(edit)
    pairs.move_to(pairs.network.after(plan, edit.steps))
    return inverse


def some_changes(rng: random.Random, plan: Plan, count: int) -> Trial:
    """Return links and routers down, and costs up and down."""
    trial = Trial()
    for link in rng.sample(list(plan.links), count):
        change = rng.randrange(3)
        if change == 0:
            trial = trial.with_change(LinkState(link.id))
        elif change == 1:
            trial = trial.with_change(LinkCost(link.id, rng.randint(1, 300), link.cost_back))
        else:
            trial = trial.with_change(LinkCost(link.id, max(1, link.cost // 3), 40_000))
    return trial.with_change(NodeState(rng.choice(plan.routers()).id))


@pytest.fixture(scope="module")
def plan() -> Plan:
    return backbone(ROUTERS)


def test_batches_of_changes(plan: Plan) -> None:
    rng = random.Random(11)
    network = compile_plan(plan)
    pairs = AllPairs(network)
    assert_exact(pairs)
    for count in (1, 2, 5, 40, 1, 300):
        before = pairs.distances.copy()
        update = pairs.move_to(network.laid_over(some_changes(rng, plan, count)))
        assert_exact(pairs)
        assert update.changed_pairs == int((pairs.distances != before).sum())
    pairs.move_to(network)
    assert_exact(pairs)


def test_drained_routers_equal_from_scratch(plan: Plan) -> None:
    network = compile_plan(plan)
    pairs = AllPairs(network)
    routers = random.Random(12).sample([router.id for router in plan.routers()], 6)
    for router in routers:
        pairs.move_to(network.laid_over(Trial((Drained(router),))))
        assert (pairs.distances == AllPairs(pairs.network).distances).all()
    pairs.move_to(network.laid_over(Trial(tuple(map(Drained, routers)))))
    assert (pairs.distances == AllPairs(pairs.network).distances).all()


def test_deleting_and_drawing_all_over(plan: Plan) -> None:
    plan = plan.snapshot()
    rng = random.Random(13)
    pairs = AllPairs(compile_plan(plan))
    for _ in range(3):
        gone = rng.sample(plan.nodes.keys(), 15)
        left = [router.id for router in plan.routers() if router.id not in gone]
        new = [Router(id=f"n{rng.random()}") for _ in range(10)]
        drawn = [
            Link(id=f"{router.id}-{i}", source=router.id, target=end, cost=rng.randint(1, 90),
                 cost_back=rng.randint(1, 90))
            for router in new
            for i, end in enumerate(rng.sample(left, 3))
        ]  # fmt: skip
        follow(plan, pairs, edits.remove(plan, gone))
        follow(plan, pairs, edits.add(plan, *new))
        follow(plan, pairs, edits.add(plan, *drawn))
        assert pairs.network.structure.vertex_ids == compile_plan(plan).structure.vertex_ids
        assert_exact(pairs)


def test_distances_widen_and_narrow_with_the_plan() -> None:
    """A path through 129 routers at wide IS-IS costs (RFC 5305: up to 16,777,214) may need
    more than 31 bits, through 128 it cannot; answers stay exact across the border."""
    high = 16_777_214
    plan = plan_of(
        ",".join(f"r{i}-r{i + 1} {high - i}/{high}" for i in range(127)), "", "isis-wide"
    )
    pairs = AllPairs(compile_plan(plan))
    assert pairs.distances.dtype == np.int32
    assert_exact(pairs)
    back = [follow(plan, pairs, edits.add(plan, Router(id="far")))]
    assert pairs.distances.dtype == np.int64
    back.append(follow(plan, pairs, edits.add_link(plan, "r127", "far", high)))
    assert_exact(pairs)
    vertex = pairs.network.structure.vertex_of
    assert pairs.distances[vertex["far"], vertex["r0"]] == 128 * high
    for inverse in reversed(back):
        follow(plan, pairs, inverse)
        assert_exact(pairs)
    assert pairs.distances.dtype == np.int32


def test_all_pairs_can_be_cancelled(plan: Plan) -> None:
    with pytest.raises(Cancelled):
        AllPairs(compile_plan(plan), lambda: True)
