"""Ledgers and surveys beyond one slice of work: several hundred routers, closed forms."""

from __future__ import annotations

import numpy as np
import pytest

from netsketch.analysis import compare, compare_networks, failures_of, survey
from netsketch.model import LinkState, NodeState, Plan, Router, Trial, edits
from netsketch.routing import AllPairs, Cancelled, Network, Routes, compile_plan
from tests.benchmarks.backbone import backbone
from tests.published import plan_of


def ring(routers: int) -> Plan:
    links = [f"r{i}-r{(i + 1) % routers} 1" for i in range(routers)]
    return plan_of(", ".join(links))


def test_every_pair_of_links_of_a_tree() -> None:
    """A hub with 140 routers on one link and 31 chains of two: 202 links, 20,301 pairs of
    them, more than one slice. Parts of a, b and the rest are cut off from each other."""
    near = [f"hub-a{i} 1" for i in range(171)]
    far = [f"a{i}-b{i} 1" for i in range(31)]
    plan = plan_of(", ".join(near + far))
    below = {link.id: 2 if f"b{link.target[1:]}" in plan.nodes else 1 for link in plan.links}
    below |= {link.split()[0]: 1 for link in far}
    failures = failures_of(plan, "link-pairs")
    assert len(failures) == 20_301
    found = survey(compile_plan(plan), "link-pairs", failures)
    routers = len(plan.nodes)
    for failure, cut_off in zip(failures, found.cut_off.tolist(), strict=True):
        first, second = failure.links
        a, b = below[first], below[second]
        if plan.links[first].target == plan.links[second].source:
            a -= b
        assert cut_off == routers**2 - a**2 - b**2 - (routers - a - b) ** 2
    assert not found.moved.any()


def test_one_link_of_a_ring() -> None:
    """With one of n links down (n odd, costs 1) a pair that crossed it at distance d goes
    the other way at n - d; d of the n - 1 pairs at each distance d did, in each
    direction, and the worst gains n - 2."""
    routers = 101
    found = survey(compile_plan(ring(routers)), "links", failures_of(ring(routers), "links"))
    crossed = 2 * sum(range(1, routers // 2 + 1))
    assert (found.moved == crossed).all()
    assert (found.cut_off == 0).all()
    assert (found.extra == routers - 2).all()


def outcomes_by_definition(old: Network, new: Network) -> dict[tuple[int, int], str]:
    """Return what changes, from distances and sets of next hops source by source."""
    found = {}
    failed = set(np.flatnonzero(old.vertex_up & ~new.vertex_up).tolist())
    for source in set(range(old.structure.routers)) - failed:
        before, after = Routes(old, source), Routes(new, source)
        differ = (before.row != after.row) | (before.masks != after.masks).any(axis=1)
        for target in np.flatnonzero(differ[: old.structure.routers]).tolist():
            if target in failed or target == source:
                continue
            was, now = before.cost(target), after.cost(target)
            word = "cut off" if now is None else "restored" if was is None else "moved"
            found[source, target] = word
    return found


def test_ledger_of_600_routers() -> None:
    """More sources than one slice (512) takes."""
    plan = backbone(600)
    links = plan.links.keys()
    down = Trial((LinkState(links[3]), LinkState(links[700]), NodeState("r2"), NodeState("r590")))
    mended = Trial((LinkState(links[3]),))
    network = compile_plan(plan)
    for old, new in (
        (network, network.laid_over(down)),
        (network.laid_over(down), network.laid_over(mended)),
    ):
        before = AllPairs(old)
        after = before.copy()
        after.move_to(new)
        ledger = compare(before, after)
        expected = outcomes_by_definition(old, new)
        ends = zip(ledger.sources.tolist(), ledger.targets.tolist(), strict=True)
        words = {0: "moved", 1: "cut off", 2: "restored"}
        assert dict(zip(ends, map(words.get, ledger.outcomes.tolist()), strict=True)) == expected
        assert len(ledger) == len(expected) > 1000
        slow = compare_networks(old, new)
        for column in ("sources", "targets", "outcomes", "before", "after"):
            assert (getattr(slow, column) == getattr(ledger, column)).all()
        for column in ("delay_before", "delay_after"):
            assert np.array_equal(getattr(slow, column), getattr(ledger, column), equal_nan=True)
        for i in range(0, len(ledger), 997):
            row = ledger.row(i)
            assert row.outcome == expected[int(ledger.sources[i]), int(ledger.targets[i])]
            costs = (-1 if c is None else c for c in (row.cost_before, row.cost_after))
            assert tuple(costs) == (ledger.before[i], ledger.after[i])


def test_ledger_is_cancelled() -> None:
    network = compile_plan(ring(70))
    after = network.laid_over(Trial((LinkState("r0-r1"),)))
    with pytest.raises(Cancelled):
        compare_networks(network, after, lambda: True)


def test_networks_of_different_structures_are_not_compared() -> None:
    plan = ring(4)
    old = compile_plan(plan)
    plan.apply(edits.add(plan, Router(id="more")))
    with pytest.raises(ValueError, match="different structures"):
        compare_networks(old, compile_plan(plan))
