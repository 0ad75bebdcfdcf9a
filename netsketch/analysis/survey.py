"""The survey: what every failure of a kind does to all pairs of routers."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Sequence
from concurrent.futures import FIRST_COMPLETED, Future, wait
from dataclasses import dataclass
from itertools import combinations, islice

import numpy as np
import numpy.typing as npt

from netsketch.model import Plan
from netsketch.routing import Cancelled, Network, failures, never
from netsketch.routing.allpairs import THREADS, threads, unreached

Totals = npt.NDArray[np.int64]

KINDS = ("links", "routers", "groups", "link-pairs")
"""What a survey can be of."""

SOURCES_AT_ONCE = 8
FAILURES_AT_ONCE = 20_000


@dataclass(frozen=True, slots=True)
class Failure:
    """Things that fail together: ``ids`` name it, ``links`` and ``nodes`` go down."""

    ids: tuple[str, ...]
    links: tuple[str, ...] = ()
    nodes: tuple[str, ...] = ()


@dataclass(frozen=True)
class Survey:
    """Totals of each failure, in the order of ``failures``, as columns (F,).

    ``moved`` and ``cut_off`` count ordered pairs of routers as the ledger of that failure
    would; ``extra`` is the worst extra cost of a moved pair, -1 where none moved;
    ``changed`` counts pairs (router, vertex) whose distance changes.
    """

    of: str
    failures: tuple[Failure, ...]
    moved: npt.NDArray[np.int64]
    cut_off: npt.NDArray[np.int64]
    extra: npt.NDArray[np.int64]
    changed: npt.NDArray[np.int64]

    def ranked(self) -> npt.NDArray[np.intp]:
        """Return the failures' indexes, worst first: by cut off, moved, extra cost."""
        return np.lexsort((-self.extra, -self.moved, -self.cut_off))


def failures_of(plan: Plan, kind: str) -> list[Failure]:
    """Return every failure of a kind (one of :data:`KINDS`) in a plan: each link, router
    or shared-risk group, or each pair of links. Raises ``ValueError`` for another kind."""
    links = [link.id for link in plan.links]
    if kind == "links":
        return [Failure((key,), links=(key,)) for key in links]
    if kind == "routers":
        return [Failure((router.id,), nodes=(router.id,)) for router in plan.routers()]
    if kind == "groups":
        members: dict[str, list[str]] = {group.id: [] for group in plan.groups}
        for link in plan.links:
            for group in link.groups:
                members[group].append(link.id)
        return [Failure((key,), links=tuple(inside)) for key, inside in members.items()]
    if kind == "link-pairs":
        return [Failure(pair, links=pair) for pair in combinations(links, 2)]
    raise ValueError(f"a survey is of {', '.join(KINDS)}, not of {kind!r}")


@dataclass(frozen=True)
class _Lists:
    """Failures as CSR lists of arcs and vertices."""

    arc_ptr: npt.NDArray[np.int64]
    arcs: npt.NDArray[np.int32]
    vertex_ptr: npt.NDArray[np.int64]
    vertices: npt.NDArray[np.int32]

    @classmethod
    def build(cls, network: Network, failed: Sequence[Failure]) -> _Lists:
        s = network.structure
        arcs: list[npt.NDArray[np.int32]] = []
        vertices: list[int] = []
        arc_ptr, vertex_ptr = [0], [0]
        total = 0
        for failure in failed:
            mine = [s.arcs[s.link_of[key]] for key in failure.links]
            for key in failure.nodes:
                v = s.vertex_of[key]
                vertices.append(v)
                mine += [np.arange(s.indptr[v], s.indptr[v + 1], dtype=np.int32)]
                mine += [s.in_arc[s.in_ptr[v] : s.in_ptr[v + 1]]]
            # An arc must not be taken away twice (two failed ends, a link named twice).
            once = np.unique(np.concatenate(mine)) if len(mine) > 1 else _only(mine)
            arcs.append(once)
            total += len(once)
            arc_ptr.append(total)
            vertex_ptr.append(len(vertices))
        flat = np.concatenate(arcs) if arcs else np.empty(0, np.int32)
        return cls(
            np.array(arc_ptr), flat.astype(np.int32), np.array(vertex_ptr),
            np.array(vertices, np.int32),
        )  # fmt: skip

    def part(self, first: int, last: int) -> _Lists:
        arcs, vertices = self.arc_ptr[first : last + 1], self.vertex_ptr[first : last + 1]
        return _Lists(
            arcs - arcs[0], self.arcs[arcs[0] : arcs[-1]],
            vertices - vertices[0], self.vertices[vertices[0] : vertices[-1]],
        )  # fmt: skip


def _only(arrays: Sequence[npt.NDArray[np.int32]]) -> npt.NDArray[np.int32]:
    return arrays[0] if arrays else np.empty(0, np.int32)


def survey(
    network: Network,
    of: str,
    failed: Iterable[Failure],
    progress: Callable[[float], None] = lambda _: None,
    cancelled: Callable[[], bool] = never,
) -> Survey:
    """Return what each failure does to all pairs, alone, on ``network``.

    Nothing is kept but totals: each thread holds a few rows. ``progress`` is called with
    the part done (0 to 1) from the calling thread. Raises
    :class:`~netsketch.routing.Cancelled` soon after ``cancelled`` answers true.
    """
    listed = tuple(failed)
    lists = _Lists.build(network, listed)
    totals = np.zeros((len(listed), 4), np.int64)
    totals[:, failures.EXTRA] = -1
    parts = [
        (slice(first, min(first + FAILURES_AT_ONCE, len(listed))))
        for first in range(0, len(listed), FAILURES_AT_ONCE)
    ]
    slices = [
        (part, first)
        for part in parts
        for first in range(0, network.structure.routers, SOURCES_AT_ONCE)
    ]
    results = _in_threads(network, lists, slices, cancelled)
    for done, (part, added) in enumerate(results, start=1):
        _add(totals[part], added)
        progress(done / len(slices))
    moved, cut_off, extra, changed = (totals[:, k].copy() for k in range(4))
    return Survey(of, listed, moved, cut_off, extra, changed)


def _in_threads(
    network: Network,
    lists: _Lists,
    slices: Sequence[tuple[slice, int]],
    cancelled: Callable[[], bool],
) -> Iterator[tuple[slice, Totals]]:
    """Yield the totals of each slice as it is done; few are in flight at any time."""
    stop = np.zeros(1, np.int8)
    todo = iter(slices)
    running: dict[Future[Totals], slice] = {}
    while True:
        for part, first in islice(todo, 2 * THREADS - len(running)):
            shard = lists.part(part.start, part.stop)
            running[threads().submit(_totals, network, shard, first, stop)] = part
        if not running:
            return
        finished, _ = wait(running, timeout=0.02, return_when=FIRST_COMPLETED)
        if cancelled():
            stop[0] = 1
            wait(running)
            raise Cancelled
        for work in finished:
            yield running.pop(work), work.result()


def _totals(network: Network, lists: _Lists, first: int, stop: npt.NDArray[np.int8]) -> Totals:
    """Return what the failures of ``lists`` do to a few sources from ``first`` on (F, 4)."""
    s = network.structure
    sources = np.arange(first, min(first + SOURCES_AT_ONCE, s.routers), dtype=np.int32)
    rows = np.empty((len(sources), s.vertices), network.distance_type)
    totals = np.zeros((len(lists.arc_ptr) - 1, 4), np.int64)
    totals[:, failures.EXTRA] = -1
    failures.survey_sources(
        s.indptr, s.head, s.tail, s.in_ptr, s.in_arc, s.first_parallel, s.routers,
        network.weight, network.transit, unreached(rows.dtype.type), sources, rows,
        lists.arc_ptr, lists.arcs, lists.vertex_ptr, lists.vertices, stop, totals,
    )  # fmt: skip
    return totals


def _add(totals: Totals, added: Totals) -> None:
    extra = np.maximum(totals[:, failures.EXTRA], added[:, failures.EXTRA])
    totals += added
    totals[:, failures.EXTRA] = extra
