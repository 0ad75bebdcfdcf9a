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
    compare,
    compare_networks,
    forwarding_table,
)
from netsketch.model import ChangeSet, ChangeTrial, LinkState, Plan, Router, Segment, Trial, edits
from netsketch.readings import outward as outward_reading
from netsketch.readings import path as path_reading
from netsketch.readings.reading import Reading
from netsketch.routing import AllPairs, Network, Routes, ShareOfLink, compile_plan, never
from netsketch.session.document import Document

MOST_KEPT = 5_000
"""Routers up to which all pairs are kept: 100 MB for the plan and as much for the trial
with distances of 32 bits, twice that with 64."""


@dataclass(frozen=True)
class Outward:
    """The routes of one router in the trial, and the destinations that differ from the
    plan (id -> "moved", "cut off", "restored")."""

    reading: Reading
    rows: list[RouteRow]
    changed: dict[str, str]


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

    @property
    def keeps_all_pairs(self) -> bool:
        """Whether the plan is small enough to keep all pairs current; above that every
        answer still comes, the ledger more slowly."""
        return self.network.structure.routers <= MOST_KEPT

    def ledger_task(self) -> Callable[[Callable[[], bool]], Ledger]:
        """Return the work that computes the ledger of the trial as it stands now: for one
        background thread at a time, with a function that tells whether to stop."""
        before, after, pairs = self.network, self.in_trial, self._pairs
        return lambda cancelled: pairs.ledger(before, after, cancelled)


class PairStates:
    """The distances between all pairs in the plan and in the trial, each moved on by what
    changed since they were last asked for. Above :data:`MOST_KEPT` routers nothing is kept
    and every ledger is computed anew, a few sources at a time."""

    def __init__(self) -> None:
        self._planned: AllPairs | None = None
        self._tried: AllPairs | None = None

    def ledger(self, before: Network, after: Network, cancelled: Callable[[], bool]) -> Ledger:
        """Return the ledger of ``after`` against ``before``. Raises ``Cancelled``."""
        if before.structure.routers > MOST_KEPT:
            self._planned = self._tried = None
            return compare_networks(before, after, cancelled)
        if self._planned is None or self._tried is None:
            self._planned = AllPairs(before, cancelled)
            self._tried = self._planned.copy()
        self._planned.move_to(before)
        self._tried.move_to(after)
        return compare(self._planned, self._tried, cancelled)


def _small_plan() -> Plan:
    """Three routers and a segment: enough for every compiled loop to have something to do."""
    plan = Plan()
    plan.apply(edits.add(plan, *(Router(id=key) for key in "abc"), Segment(id="s")))
    for source, target in (("a", "b"), ("b", "c"), ("b", "s"), ("s", "c")):
        plan.apply(edits.add_link(plan, source, target))
    return plan
