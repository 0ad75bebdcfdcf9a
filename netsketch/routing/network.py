"""A plan and a trial compiled to arrays.

:class:`Structure` holds what only drawing changes (vertices, links, the arcs of both in
CSR order); :class:`Network` adds what a trial changes (costs, states). Networks over the
same structure can be compared arc by arc, and next-hop sets bit by bit.
"""

from __future__ import annotations

import hashlib
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from typing import Final

import numpy as np
import numpy.typing as npt

from netsketch.model import (
    Add,
    AddedLink,
    Change,
    ChangeSettings,
    ChangeTrial,
    Drained,
    Item,
    KeptTrial,
    Link,
    LinkCost,
    LinkState,
    Node,
    Plan,
    Remove,
    Router,
    Segment,
    Step,
    Trial,
    highest_cost,
)
from netsketch.model.items import link_of

Ints = npt.NDArray[np.int32]
Bools = npt.NDArray[np.bool_]
Floats = npt.NDArray[np.float64]
Distances = npt.NDArray[np.integer]

BLOCKED: Final = 2**31 - 1
"""Weight of an arc that carries nothing."""


@dataclass(frozen=True, eq=False)
class Structure:
    """Vertices, links and arcs. Routers are vertices ``0 … routers - 1``, segments follow.

    Link ``k`` has two arcs: ``arcs[k, 0]`` from its source, ``arcs[k, 1]`` from its target.
    Arcs are sorted by tail, then head, so ``indptr[v] : indptr[v + 1]`` leave vertex ``v``
    and parallel arcs stand side by side; ``in_arc[in_ptr[v] : in_ptr[v + 1]]`` enter it.
    ``first_parallel[a]`` is the first arc with the tail and head of ``a``.
    """

    vertex_ids: tuple[str, ...]
    routers: int
    link_ids: tuple[str, ...]
    indptr: Ints
    tail: Ints
    head: Ints
    link: Ints
    arcs: Ints
    in_ptr: Ints
    in_arc: Ints
    first_parallel: Ints

    @classmethod
    def build(
        cls,
        router_ids: Sequence[str],
        segment_ids: Sequence[str],
        link_ids: Sequence[str],
        ends: npt.ArrayLike,
    ) -> Structure:
        """Return the structure of links ``link_ids`` with ``ends`` (L, 2) vertex indexes."""
        vertices, links = len(router_ids) + len(segment_ids), len(link_ids)
        pairs = np.asarray(ends, np.int32).reshape(links, 2)
        tail = np.concatenate([pairs[:, 0], pairs[:, 1]])
        head = np.concatenate([pairs[:, 1], pairs[:, 0]])
        link = np.tile(np.arange(links, dtype=np.int32), 2)
        order = np.lexsort((link, head, tail))
        position = np.empty(2 * links, np.int32)
        position[order] = np.arange(2 * links, dtype=np.int32)
        return cls._from_sorted(
            tuple(router_ids) + tuple(segment_ids),
            len(router_ids),
            tuple(link_ids),
            tail[order],
            head[order],
            link[order],
            np.stack([position[:links], position[links:]], axis=1),
            vertices,
        )

    @classmethod
    def _from_sorted(
        cls,
        vertex_ids: tuple[str, ...],
        routers: int,
        link_ids: tuple[str, ...],
        tail: Ints,
        head: Ints,
        link: Ints,
        arcs: Ints,
        vertices: int,
    ) -> Structure:
        indptr = np.searchsorted(tail, np.arange(vertices + 1)).astype(np.int32)
        in_arc = np.argsort(head, kind="stable").astype(np.int32)
        in_ptr = np.searchsorted(head[in_arc], np.arange(vertices + 1)).astype(np.int32)
        starts = np.ones(len(tail), np.bool_)
        starts[1:] = (tail[1:] != tail[:-1]) | (head[1:] != head[:-1])
        first = np.maximum.accumulate(np.where(starts, np.arange(len(tail)), 0))
        return cls(
            vertex_ids, routers, link_ids, indptr, tail, head, link, arcs, in_ptr, in_arc,
            first.astype(np.int32),
        )  # fmt: skip

    @cached_property
    def vertex_of(self) -> dict[str, int]:
        """Vertex id -> index."""
        return {key: index for index, key in enumerate(self.vertex_ids)}

    @cached_property
    def link_of(self) -> dict[str, int]:
        """Link id -> index."""
        return {key: index for index, key in enumerate(self.link_ids)}

    @property
    def vertices(self) -> int:
        return len(self.vertex_ids)

    def ends(self) -> Ints:
        """Return (L, 2): the vertices at the source and the target of each link."""
        return np.stack([self.tail[self.arcs[:, 0]], self.head[self.arcs[:, 0]]], axis=1)


@dataclass(frozen=True, eq=False)
class Network:
    """A structure with the state of every part.

    ``cost[a]`` is what leaving ``tail[a]`` costs; ``delay`` and ``capacity`` are per link,
    NaN where not known. ``highest`` is the largest cost any link may get (the cost
    style's). ``weight`` and ``transit`` are what the kernels read.
    """

    structure: Structure
    cost: Ints
    link_up: Bools
    vertex_up: Bools
    drained: Bools
    delay: Floats
    capacity: Floats
    highest: int
    weight: Ints = field(init=False)
    transit: Ints = field(init=False)

    def __post_init__(self) -> None:
        """Derive ``weight`` (:data:`BLOCKED` unless the link and both its ends are up) and
        ``transit`` (also blocked where the tail is drained: for every source but it). What
        is attached to a drained router alone stays reachable through it (RFC 3277)."""
        s = self.structure
        usable = self.link_up[s.link] & self.vertex_up[s.tail] & self.vertex_up[s.head]
        weight = np.where(usable, self.cost, BLOCKED)
        object.__setattr__(self, "weight", weight)
        transit = weight
        if self.drained.any():
            closed = self.drained[s.tail] & (self.only_router[s.head] != s.tail)
            transit = np.where(closed, BLOCKED, weight)
        object.__setattr__(self, "transit", transit)

    @cached_property
    def only_router(self) -> Ints:
        """For each vertex (V,): of a segment on which just one router is left, a stub
        network, that router; of everything else -1."""
        s = self.structure
        first, last = np.full(s.vertices, s.vertices, np.int32), np.full(s.vertices, -1, np.int32)
        inside = (s.tail >= s.routers) & (self.weight != BLOCKED)
        np.minimum.at(first, s.tail[inside], s.head[inside])
        np.maximum.at(last, s.tail[inside], s.head[inside])
        return np.where(first == last, first, -1)

    def closed_towards(self, target: int) -> Bools:
        """Return which vertices (V,) nobody else's traffic to ``target`` passes: drained
        routers, but for the one that ``target`` is attached to alone."""
        if not self.drained.any() or self.only_router[target] < 0:
            return self.drained
        closed = self.drained.copy()
        closed[self.only_router[target]] = False
        return closed

    @cached_property
    def fingerprint(self) -> str:
        """Return what tells apart networks that route differently: equal for equal ones."""
        s, digest = self.structure, hashlib.sha256()
        for part in (repr((s.vertex_ids, s.routers, s.link_ids)).encode(), s.ends().tobytes()):
            digest.update(part)
        for array in (self.weight, self.transit, self.delay, self.capacity):
            digest.update(array.tobytes())
        return digest.hexdigest()

    @property
    def distance_type(self) -> type[np.int32] | type[np.int64]:
        """int32 where no path can be too long for it, else int64: always exact, and the
        same for every trial."""
        bound = self.highest * max(self.structure.vertices, 1)
        return np.int32 if bound < BLOCKED else np.int64

    def laid_over(self, trial: Trial) -> Network:
        """Return this network with ``trial`` over it. O(arcs), no Python loop over them."""
        if not trial:
            return self
        s = self.structure
        cost, link_up = self.cost.copy(), self.link_up.copy()
        vertex_up, drained = self.vertex_up.copy(), self.drained.copy()
        delay, capacity = self.delay, self.capacity
        if trial.added():
            delay, capacity = delay.copy(), capacity.copy()
        for change in trial:
            if isinstance(change, AddedLink):
                k = s.link_of[change.link]
                cost[s.arcs[k]] = change.cost, change.cost_back
                link_up[k] = True
                delay[k], capacity[k] = _known(change.delay_ms), _known(change.capacity_mbps)
            elif isinstance(change, LinkState):
                link_up[s.link_of[change.link]] = change.up
            elif isinstance(change, LinkCost):
                cost[s.arcs[s.link_of[change.link]]] = change.cost, change.cost_back
            elif isinstance(change, Drained):
                drained[s.vertex_of[change.node]] = change.drained
            else:
                vertex_up[s.vertex_of[change.node]] = change.up
        return replace(
            self, cost=cost, link_up=link_up, vertex_up=vertex_up, drained=drained, delay=delay,
            capacity=capacity,
        )  # fmt: skip

    def without_arc(self, arc: int) -> Network:
        """Return this network with one direction of one link carrying nothing."""
        found = replace(self)
        for name in ("weight", "transit"):
            weight = getattr(self, name).copy()
            weight[arc] = BLOCKED
            object.__setattr__(found, name, weight)
        return found

    def after(self, plan: Plan, steps: Iterable[Step]) -> Network:
        """Return the network of ``plan`` once ``steps`` have been applied to it.

        Equal to ``compile_plan(plan)``; the same object where nothing that routes or
        figures depend on has changed (a move, a name), and sharing the structure unless
        something that carries traffic was added or removed.
        """
        items: list[Item] = []
        for step in steps:
            if isinstance(step, Add | Remove):
                if isinstance(step.item, Router | Segment | Link):
                    return compile_plan(plan)
                if isinstance(step.item, KeptTrial) and step.item.trial.added():
                    return compile_plan(plan)
            elif isinstance(step, ChangeTrial):
                if step.old.added() or step.new.added():
                    return compile_plan(plan)
            elif isinstance(step, Change):
                if isinstance(step.new, KeptTrial) and step.new.trial.added():
                    return compile_plan(plan)
                if _carries(step.old) != _carries(step.new):
                    items.append(step.new)
            elif isinstance(step, ChangeSettings) and step.old.cost_style != step.new.cost_style:
                return compile_plan(plan)
        return self._changed(items) if items else self

    def _changed(self, items: Iterable[Item]) -> Network:
        s = self.structure
        cost, link_up = self.cost.copy(), self.link_up.copy()
        vertex_up, drained = self.vertex_up.copy(), self.drained.copy()
        delay, capacity = self.delay.copy(), self.capacity.copy()
        for item in items:
            if isinstance(item, Link):
                k = s.link_of[item.id]
                cost[s.arcs[k]] = item.cost, item.cost_back
                link_up[k] = item.up
                delay[k], capacity[k] = _known(item.delay_ms), _known(item.capacity_mbps)
            elif isinstance(item, Router | Segment):
                v = s.vertex_of[item.id]
                vertex_up[v] = item.up
                drained[v] = isinstance(item, Router) and item.drained
        return Network(s, cost, link_up, vertex_up, drained, delay, capacity, self.highest)


def _carries(item: Item) -> tuple[object, ...]:
    """Return what the arrays hold of an item."""
    if isinstance(item, Link):
        return item.cost, item.cost_back, item.up, item.delay_ms, item.capacity_mbps
    if isinstance(item, Router):
        return item.up, item.drained
    return (item.up,) if isinstance(item, Segment) else ()


def _known(value: float | None) -> float:
    return np.nan if value is None else float(value)


def compile_plan(plan: Plan, trial: Trial | None = None) -> Network:
    """Return the arrays of ``plan`` with ``trial`` laid over it (default: without any).
    O(items). Links that only trials have are in the structure too, and down."""
    routers, segments = plan.routers(), plan.segments()
    nodes: list[Node] = [*routers, *segments]
    vertex_of = {node.id: index for index, node in enumerate(nodes)}
    drawn = len(plan.links)
    added = {each.link: each for each in (*(trial.added() if trial else ()), *plan.added_links())}
    links = [*plan.links, *map(link_of, added.values())]
    structure = Structure.build(
        [node.id for node in routers],
        [node.id for node in segments],
        [link.id for link in links],
        [(vertex_of[link.source], vertex_of[link.target]) for link in links],
    )
    cost = np.zeros(2 * len(links), np.int32)
    cost[structure.arcs[:, 0]] = [link.cost for link in links]
    cost[structure.arcs[:, 1]] = [link.cost_back for link in links]
    network = Network(
        structure,
        cost,
        np.array([link.up for link in links], np.bool_) & (np.arange(len(links)) < drawn),
        np.array([node.up for node in nodes], np.bool_),
        np.array([isinstance(node, Router) and node.drained for node in nodes], np.bool_),
        np.array([_known(link.delay_ms) for link in links], np.float64),
        np.array([_known(link.capacity_mbps) for link in links], np.float64),
        highest_cost(plan.settings.cost_style),
    )
    return network.laid_over(trial) if trial else network
