"""Races of the routing core on seeded plans: all pairs, one source, toggles, surveys."""

from __future__ import annotations

import random
import time
from collections.abc import Callable

import networkx as nx
import numpy as np

from netsketch.analysis import Failure, failures_of, survey
from netsketch.model import Link, LinkState, Plan, Router, Trial, edits
from netsketch.routing import AllPairs, Network, Routes, compile_plan
from tests.benchmarks.backbone import backbone
from tests.benchmarks.peers import Peers
from tests.benchmarks.race import OURS, Race


def small_plan(routers: int = 100, seed: int = 5) -> Plan:
    """Return a seeded random geometric plan of so many routers and 1.9 links for each."""
    rng = random.Random(seed)
    graph = nx.random_geometric_graph(routers, 0.35, seed=seed)
    place = nx.get_node_attributes(graph, "pos")

    def length(a: int, b: int) -> float:
        (ax, ay), (bx, by) = place[a], place[b]
        return ((ax - bx) ** 2 + (ay - by) ** 2) ** 0.5

    chosen = sorted(graph.edges, key=lambda edge: length(*edge))[: int(1.9 * routers)]
    plan = Plan()
    plan.apply(edits.add(plan, *(Router(id=f"r{i}") for i in range(routers))))
    plan.apply(
        edits.add(
            plan,
            *(
                Link(
                    id=f"l{k}", source=f"r{a}", target=f"r{b}", cost=(cost := rng.randint(1, 60)),
                    cost_back=cost,
                )
                for k, (a, b) in enumerate(chosen)
            ),
        )
    )  # fmt: skip
    return plan


class Course:
    """The races over one plan."""

    def __init__(self, plan: Plan, short: bool) -> None:
        self.plan = plan
        self.network = compile_plan(plan)
        self.peers = Peers(self.network)
        self.peers.check()
        self.size = f"{self.network.structure.routers:,} routers"
        self.short = short
        rng = random.Random(1)
        self.sources = rng.sample(range(self.network.structure.routers), 20)
        self.sample = rng.sample(plan.links.keys(), 8 if short else 20)

    def races(self) -> list[Race]:
        """Return the races in the order of the table."""
        return [
            self.all_pairs(),
            self.one_source(),
            self.first_reading(),
            self.toggle(),
            self.survey("links", failures_of(self.plan, "links"), self.sample),
        ]

    def all_pairs(self) -> Race:
        def ours() -> int:
            AllPairs(self.network)
            return 1

        return Race(f"all pairs from scratch, {self.size}", "", {OURS: ours, **self.from_scratch()})

    def from_scratch(self) -> dict[str, Callable[[], int]]:
        """Return the peers' ways to all pairs, which is also how they follow a change."""
        ways = {
            "scipy": self.peers.scipy_all,
            "rustworkx": self.peers.rustworkx_all,
            "igraph": self.peers.igraph_all,
            "networkx": self.networkx_all,
        }
        if self.network.structure.routers > 2000:
            del ways["rustworkx"], ways["igraph"]  # tens of seconds and gigabytes of objects
        return ways

    def networkx_all(self) -> int:
        """A few sources stand for all: networkx takes each on its own."""
        some = self.sources[: 4 if self.short else 10]
        for source in some:
            self.peers.networkx_from(source)
        return len(some) / self.network.structure.routers  # type: ignore[return-value]

    def one_source(self) -> Race:
        def over(way: Callable[[int], object]) -> Callable[[], int]:
            def run() -> int:
                for source in self.sources:
                    way(source)
                return len(self.sources)

            return run

        ways = {
            OURS: over(lambda source: Routes(self.network, source)),
            "scipy": over(self.peers.scipy_from),
            "rustworkx": over(self.peers.rustworkx_from),
            "igraph": over(self.peers.igraph_from),
            "networkx": over(self.peers.networkx_from),
        }
        return Race(f"distances from one source, {self.size}", "", ways)

    def first_reading(self) -> Race:
        """What a click asks for: every next hop, tree link, hop count and delay."""

        def ours() -> int:
            for source in self.sources:
                routes = Routes(self.network, source)
                routes.arc_masks, routes.hops(0)
            return len(self.sources)

        return Race(f"all that a click asks of one router, {self.size}", "", {OURS: ours})

    def toggle(self) -> Race:
        pairs = AllPairs(self.network)
        links = self.plan.links.keys()
        if self.short or self.network.structure.routers > 2000:
            links = random.Random(2).sample(links, min(200, len(links)))

        def ours() -> int:
            for link in links:
                pairs.move_to(self.network.laid_over(Trial((LinkState(link),))))
                pairs.move_to(self.network)
            return 2 * len(links)

        ways = {OURS: ours, **self.from_scratch()}
        return Race(f"one link toggled, all pairs current, {self.size}", "each", ways)

    def survey(self, kind: str, failures: list[Failure], sample: list[str]) -> Race:
        chosen = [Failure((link,), links=(link,)) for link in sample]
        if kind == "link-pairs":
            chosen = random.Random(3).sample(failures, len(sample))
        affected = [(self.arcs(failure), self.affected(failure)) for failure in chosen]

        def ours() -> int:
            survey(self.network, kind, failures)
            return len(failures)

        ways = {
            OURS: ours,
            "scipy": self.peers.scipy_all,
            "networkx": self.networkx_all,
            "rustworkx, affected sources only": lambda: self.peers.rustworkx_affected(affected),
        }
        named = "every link" if kind == "links" else "every pair of links"
        return Race(f"survey of {named}, {self.size}", "a failure", ways)

    def arcs(self, failure: Failure) -> list[tuple[int, int]]:
        s = self.network.structure
        arcs = np.concatenate([s.arcs[s.link_of[link]] for link in failure.links])
        ends = {(int(s.tail[a]), int(s.head[a])) for a in arcs}
        return [pair for pair in ends if self.peers.rustworkx.has_edge(*pair)]

    def affected(self, failure: Failure) -> np.ndarray:
        """Return the sources whose tree uses a link of the failure, worked out beforehand
        and not timed."""
        s, d = self.network.structure, AllPairs(self.network).distances.astype(np.int64)
        used = np.zeros(s.routers, np.bool_)
        for link in failure.links:
            for a in s.arcs[s.link_of[link]]:
                used |= d[:, s.tail[a]] + self.network.weight[a] == d[:, s.head[a]]
        return np.flatnonzero(used)


def per_changed_pair(network: Network, links: list[str]) -> list[tuple[int, float]]:
    """Return (changed pairs, seconds) of taking each link down with all pairs current."""
    pairs, found = AllPairs(network), []
    for link in links:
        down = network.laid_over(Trial((LinkState(link),)))
        start = time.perf_counter()
        update = pairs.move_to(down)
        found.append((update.changed_pairs, time.perf_counter() - start))
        pairs.move_to(network)
    return found


def course(routers: int, short: bool) -> Course:
    """Return the course over the seeded plan of this size."""
    return Course(backbone(routers) if routers >= 200 else small_plan(routers), short)
