"""The routes of one router: costs, next hops, hops, delays and paths, all derived from
its distance row."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from netsketch.routing import derive
from netsketch.routing.allpairs import distances_from, unreached
from netsketch.routing.flow import Sink
from netsketch.routing.network import Distances, Ints, Network

Words = npt.NDArray[np.uint64]


class NextHop(NamedTuple):
    """Where a router sends traffic: over ``link`` to ``router``; ``None`` when the
    destination is the segment at the end of the link itself."""

    link: str
    router: str | None


class ShareOfLink(NamedTuple):
    """The part of a pair's traffic that a link carries from ``tail`` to ``head``."""

    link: str
    tail: str
    head: str
    share: float


@dataclass(frozen=True)
class _Tree:
    """Tight arcs by tail (CSR) and the reached vertices in an order all of them follow."""

    ptr: Ints
    arcs: Ints
    order: Ints


@dataclass(frozen=True)
class _AlongPaths:
    hops: Ints
    least: npt.NDArray[np.float64]
    most: npt.NDArray[np.float64]
    paths: npt.NDArray[np.int64]


class Routes:
    """What router ``source`` (a vertex index) has in its forwarding table.

    ``row`` is its distance to every vertex; given, it is trusted (a row of
    :class:`~netsketch.routing.allpairs.AllPairs`), else computed.
    """

    def __init__(self, network: Network, source: int, row: Distances | None = None) -> None:
        self.network = network
        self.source = source
        self.row = distances_from(network, source) if row is None else row
        self.unreached = unreached(self.row.dtype.type)
        self._sets: dict[bytes, tuple[NextHop, ...]] = {}

    @cached_property
    def _tree(self) -> _Tree:
        s = self.network.structure
        tree = _Tree(
            np.empty(s.vertices + 1, np.int32),
            np.empty(len(s.head), np.int32),
            np.empty(s.vertices, np.int32),
        )
        reached = derive.tight_arcs(
            s.indptr, s.head, self.network.weight, self.network.transit, self.source, self.row,
            self.unreached, tree.ptr, tree.arcs, tree.order,
        )  # fmt: skip
        return replace(tree, arcs=tree.arcs[: tree.ptr[-1]], order=tree.order[:reached])

    @property
    def order(self) -> Ints:
        """The reached vertices, the source first, every tight arc going forward."""
        return self._tree.order

    @cached_property
    def tight(self) -> npt.NDArray[np.bool_]:
        """Which arcs (A,) lie on a shortest path: the source tree."""
        tight = np.zeros(len(self.network.structure.head), np.bool_)
        tight[self._tree.arcs] = True
        return tight

    @cached_property
    def _starts(self) -> npt.NDArray[np.int64]:
        s = self.network.structure
        starts: npt.NDArray[np.int64] = derive.block_starts(
            s.indptr, s.head, s.routers, self.source
        )
        return starts

    @cached_property
    def masks(self) -> Words:
        """The set of next hops to each vertex (V, W): bit sets, laid out as
        :mod:`netsketch.routing.derive` says."""
        s, tree = self.network.structure, self._tree
        masks: Words = derive.next_hop_masks(
            s.indptr, s.head, s.first_parallel, s.routers, self.source, tree.ptr, tree.arcs,
            tree.order, len(tree.order), self._starts,
        )  # fmt: skip
        return masks

    @cached_property
    def arc_masks(self) -> Words:
        """The next hops whose traffic each arc carries (A, W); all 0 off the source tree."""
        s, tree = self.network.structure, self._tree
        masks: Words = derive.arc_masks(
            s.indptr, s.head, s.first_parallel, s.routers, self.source, tree.ptr, tree.arcs,
            self._starts, self.masks,
        )  # fmt: skip
        return masks

    @cached_property
    def _along(self) -> _AlongPaths:
        s, tree, n = self.network.structure, self._tree, self.network.structure.vertices
        found = _AlongPaths(np.empty(n, np.int32), np.empty(n), np.empty(n), np.empty(n, np.int64))
        derive.along_paths(
            s.head, s.link, s.routers, self.network.delay, self.source, tree.ptr, tree.arcs,
            tree.order, len(tree.order), found.hops, found.least, found.most, found.paths,
        )  # fmt: skip
        return found

    def cost(self, vertex: int) -> int | None:
        """Return the cost of the way to ``vertex``; ``None`` when it is cut off."""
        distance = int(self.row[vertex])
        return None if distance == self.unreached else distance

    def hops(self, vertex: int) -> int | None:
        """Return the least number of hops over the equal-cost paths; a segment crossed is
        one hop. ``None`` when ``vertex`` is cut off."""
        hops = int(self._along.hops[vertex])
        return None if hops < 0 else hops

    def delay_ms(self, vertex: int) -> tuple[float, float] | None:
        """Return the least and most delay over the equal-cost paths, in ms; ``None`` when
        ``vertex`` is cut off or the delay of a link on the way is not known."""
        least, most = float(self._along.least[vertex]), float(self._along.most[vertex])
        return None if np.isnan(least) else (least, most)

    def path_count(self, vertex: int) -> int:
        """Return the number of equal-cost paths, parallel links told apart;
        :data:`~netsketch.routing.derive.MANY` stands for that many or more."""
        return int(self._along.paths[vertex])

    def next_hops(self, vertex: int) -> tuple[NextHop, ...]:
        """Return every equal-cost next hop to ``vertex``, none for the source itself."""
        return self.decode(self.masks[vertex])

    def decode(self, mask: Words) -> tuple[NextHop, ...]:
        """Return the next hops whose bits are set in ``mask`` (W,), in bit order."""
        key = mask.tobytes()
        if key not in self._sets:
            bits = np.flatnonzero(np.unpackbits(mask.view(np.uint8), bitorder="little"))
            self._sets[key] = tuple(self.next_hop_at(int(bit)) for bit in bits)
        return self._sets[key]

    def next_hop_at(self, bit: int) -> NextHop:
        """Return the next hop that ``bit`` stands for."""
        s = self.network.structure
        place = int(np.searchsorted(self._starts, bit, side="right")) - 1
        arc = int(s.indptr[self.source]) + place
        link, head = s.link_ids[s.link[arc]], int(s.head[arc])
        beyond = bit - int(self._starts[place])
        if beyond:
            return NextHop(link, s.vertex_ids[s.head[s.indptr[head] + beyond - 1]])
        return NextHop(link, s.vertex_ids[head] if head < s.routers else None)

    def shares(self, target: int) -> list[ShareOfLink]:
        """Return the links traffic to ``target`` uses and the part of it on each, in
        order of travel.

        The split is that of :mod:`netsketch.routing.flow`.
        """
        if self.cost(target) is None:
            return []
        s = self.network.structure
        amount = np.zeros(s.vertices)
        amount[self.source] = 1.0
        flow = Sink(self.network, target).pour(amount)
        place = np.empty(s.vertices, np.int64)
        place[self.order] = np.arange(len(self.order))
        used = np.flatnonzero(flow)
        return [
            ShareOfLink(
                s.link_ids[s.link[a]],
                s.vertex_ids[s.tail[a]],
                s.vertex_ids[s.head[a]],
                float(flow[a]),
            )
            for a in used[np.argsort(place[s.tail[used]], kind="stable")]
        ]
