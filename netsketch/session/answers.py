"""Answers about a document: the same functions for the window, the commands and records.

Single routers are answered at once, from one distance row each. The state over all pairs
belongs to whoever runs the ledger task (one background thread, or a command).
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np

from netsketch.analysis import (
    Ledger,
    RouteRow,
    changed_destinations,
    forwarding_table,
    pair,
)
from netsketch.analysis.inward import demand_on_arcs, inward_table
from netsketch.analysis.tipping import Tipping
from netsketch.model import ChangeSet, ChangeTrial, LinkState, Plan, Router, Segment, Trial, edits
from netsketch.readings import inward as inward_reading
from netsketch.readings import outward as outward_reading
from netsketch.readings import path as path_reading
from netsketch.readings.reading import Reading
from netsketch.routing import Network, Routes, ShareOfLink, Sink, compile_plan, never
from netsketch.session import pairs
from netsketch.session.document import Document
from netsketch.session.pairs import PairStates


@dataclass(frozen=True)
class Outward:
    """The routes of one router in the trial, and the destinations that differ from the
    plan (id -> "moved", "cut off", "restored")."""

    reading: Reading
    rows: list[RouteRow]
    changed: dict[str, str]


@dataclass(frozen=True)
class Inward:
    """How everyone reaches a router or segment in the trial: a row for each router, and
    for each link on a way (link, tail, head) how many routers and Mbit/s it carries."""

    reading: Reading
    rows: list[RouteRow]
    links: list[tuple[str, str, str, int, float]]


@dataclass(frozen=True)
class Path:
    """The way from one router to a router or segment; ``cost`` is ``None`` when cut off.

    ``links`` in order of travel; ``path_count`` tells parallel links apart.
    """

    reading: Reading
    source: str
    target: str
    cost: int | None
    links: list[ShareOfLink]
    path_count: int


@dataclass(frozen=True)
class Way:
    """One direction of a pair: its hops, cost, least and most delay, number of paths."""

    source: str
    target: str
    hops: list[pair.Hop]
    cost: int | None
    delay_ms: tuple[float, float] | None
    path_count: int


@dataclass(frozen=True)
class Pair:
    """Everything about the way between two routers: there, back (``None`` where the target
    is a segment), where they part, the best other way, and what if a link of it fails."""

    out: Way
    back: Way | None
    parts_at: str | None
    other_way: pair.OtherWay | None
    if_down: list[pair.IfDown]


class Answers:
    """Answers about the plan of ``document`` with its trial, current after every edit."""

    def __init__(self, document: Document) -> None:
        self._document = document
        self._network: Network | None = None
        self._in_trial: Network | None = None
        self._routes: dict[tuple[int, str], Routes] = {}
        self._pairs = PairStates()
        self.ready = False
        self.close = document.subscribe(self._follow)

    def prepare(self) -> None:
        """Load the compiled loops, compiling them on the very first use; call it in a
        background thread."""
        plan = _small_plan()
        bits_32, bits_64 = 1, 2**40  # highest costs that ask for distances of this width
        needed = bits_32 if self.network.distance_type is np.int32 else bits_64
        for highest in (needed, bits_64 if needed == bits_32 else bits_32):
            network = replace(compile_plan(plan), highest=highest)
            trial = network.laid_over(Trial((LinkState("l1"),)))
            ledger = PairStates().ledger(network, trial, never)
            before, after = Routes(network, 0), Routes(trial, 0)
            outward_reading.effect(before, after, changed_destinations(before, after), "")
            forwarding_table(after)
            after.shares(2)
            self.ready = len(ledger) > 0

    def _follow(self, changes: ChangeSet) -> None:
        before = self._network
        if before is not None:
            self._network = before.after(self._document.plan, changes.steps)
        tried = any(isinstance(step, ChangeTrial) for step in changes.steps)
        if tried or self._network is not before:
            self._in_trial = None
            self._routes.clear()

    @property
    def network(self) -> Network:
        """The plan as arrays."""
        if self._network is None:
            self._network = compile_plan(self._document.plan)
        return self._network

    @property
    def in_trial(self) -> Network:
        """The plan with the trial over it as arrays, on the structure of :attr:`network`."""
        if self._in_trial is None:
            self._in_trial = self.network.laid_over(self._document.plan.trial)
        return self._in_trial

    def routes(self, router: str, *, planned: bool = False) -> Routes:
        """Return the routes of a router (an id) in the trial, or as planned."""
        network = self.network if planned else self.in_trial
        key = (id(network), router)
        if key not in self._routes:
            self._routes[key] = Routes(network, network.structure.vertex_of[router])
        return self._routes[key]

    def _label(self, node: str) -> str:
        return self._document.plan.nodes[node].label

    def changed(self, router: str) -> dict[str, str]:
        """Return the destinations whose route from ``router`` the trial changes."""
        if self.in_trial is self.network:
            return {}
        return changed_destinations(self.routes(router, planned=True), self.routes(router))

    def outward(self, router: str) -> Outward:
        """Return the source tree and the forwarding table of a router in the trial."""
        routes = self.routes(router)
        reading = outward_reading.outward(routes, self._label(router))
        return Outward(reading, forwarding_table(routes), self.changed(router))

    def effect(self, router: str) -> Reading:
        """Return what the trial changes for a router."""
        before, after = self.routes(router, planned=True), self.routes(router)
        return outward_reading.effect(before, after, self.changed(router), self._label(router))

    def path(self, source: str, target: str) -> Path:
        """Return the way from a router to a router or segment in the trial. The reading
        shows the way back too, where the target is a router."""
        out = self.routes(source)
        vertex = out.network.structure.vertex_of[target]
        is_router = isinstance(self._document.plan.nodes[target], Router)
        back = self.routes(target) if is_router else None
        labels = self._label(source), self._label(target)
        return Path(
            path_reading.path(out, back, vertex, labels),
            source,
            target,
            out.cost(vertex),
            out.shares(vertex),
            out.path_count(vertex),
        )

    def changed_path(self, source: str, target: str) -> Reading:
        """Return the reading of a pair's way in the plan and in the trial, old and new."""
        before, after = self.routes(source, planned=True), self.routes(source)
        vertex = after.network.structure.vertex_of[target]
        labels = self._label(source), self._label(target)
        return path_reading.before_and_after(before, after, vertex, labels)

    def pair(self, source: str, target: str) -> Pair:
        """Return everything about the way from a router to a router or segment."""
        out = self.routes(source)
        vertex = out.network.structure.vertex_of[target]
        is_router = isinstance(self._document.plan.nodes[target], Router)
        back = self.routes(target) if is_router else None
        return Pair(
            self._way(out, vertex),
            self._way(back, out.source) if back else None,
            pair.parting(out, back, vertex) if back else None,
            pair.other_way(out, vertex),
            pair.if_down(out, vertex),
        )

    def _way(self, routes: Routes, vertex: int) -> Way:
        ids = routes.network.structure.vertex_ids
        return Way(
            ids[routes.source],
            ids[vertex],
            pair.hops(routes, vertex),
            routes.cost(vertex),
            routes.delay_ms(vertex),
            routes.path_count(vertex),
        )

    def inward(self, node: str) -> Inward:
        """Return how everyone reaches a router or segment in the trial."""
        network = self.in_trial
        s = network.structure
        sink = Sink(network, s.vertex_of[node])
        counts = sink.sources_on_arcs()
        mbps = demand_on_arcs(sink, self._document.plan.demands)
        links = [
            (
                s.link_ids[s.link[a]], s.vertex_ids[s.tail[a]], s.vertex_ids[s.head[a]],
                int(counts[a]), float(mbps[a]),
            )
            for a in sink.arcs
        ]  # fmt: skip
        reading = inward_reading.inward(sink, counts, mbps, self._label(node))
        return Inward(reading, inward_table(sink), sorted(links, key=lambda row: -row[3]))

    def tipping_task(self, link: str) -> Callable[[Callable[[], bool]], tuple[Tipping, Tipping]]:
        """Return the work that computes the tipping costs of a link in the trial, out and
        back: for the thread of the ledger."""
        network, states = self.in_trial, self._pairs
        return lambda cancelled: states.tipping(network, link, cancelled)

    @property
    def keeps_all_pairs(self) -> bool:
        """Whether the plan is small enough to keep all pairs current; above that every
        answer still comes, the ledger more slowly."""
        return self.network.structure.routers <= pairs.MOST_KEPT

    def against(self, kept: str) -> Network:
        """Return what the trial is compared with: the plan, or with a kept trial over it."""
        if not kept:
            return self.network
        return self.network.laid_over(self._document.plan.trials[kept].trial)

    def ledger_task(self, kept: str = "") -> Callable[[Callable[[], bool]], Ledger]:
        """Return the work that computes the ledger of the trial as it stands now against
        the plan, or against a ``kept`` trial: for one background thread at a time, with a
        function that tells whether to stop."""
        before, after, states = self.against(kept), self.in_trial, self._pairs
        return lambda cancelled: states.ledger(before, after, cancelled)


def _small_plan() -> Plan:
    """Three routers and a segment: enough for every compiled loop to have something to do."""
    plan = Plan()
    plan.apply(edits.add(plan, *(Router(id=key) for key in "abc"), Segment(id="s")))
    for source, target in (("a", "b"), ("b", "c"), ("b", "s"), ("s", "c")):
        plan.apply(edits.add_link(plan, source, target))
    return plan
