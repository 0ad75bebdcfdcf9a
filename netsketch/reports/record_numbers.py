"""The numbers of a record: the ledger in the order of harm, who is hit, which failures
have become single points of failure, how loads change."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from netsketch.analysis import Failure, Ledger, failures_of, survey
from netsketch.analysis.load import load_of
from netsketch.model import Plan
from netsketch.reports.record_words import Names
from netsketch.routing import Network, derive

SURVEYED = ("links", "routers", "groups")
"""Kinds of failure whose effect is compared with and without the trial."""

_HARM = np.zeros(3, np.int8)
_HARM[[derive.CUT_OFF, derive.MOVED, derive.RESTORED]] = 0, 1, 2


def worst_first(ledger: Ledger) -> npt.NDArray[np.intp]:
    """Return the rows' indexes: cut off, then moved by extra cost, then restored; ties in
    the order of the ledger."""
    moved = ledger.outcomes == derive.MOVED
    extra = np.where(moved, ledger.after - ledger.before, 0)
    return np.lexsort((-extra, _HARM[ledger.outcomes]))


@dataclass(frozen=True, slots=True)
class RouterHit:
    """What the trial does to the routes of one router. ``extra`` is the worst extra cost of
    a moved route, ``None`` where none moved."""

    id: str
    name: str
    cut_off: int
    moved: int
    restored: int
    extra: int | None


def routers_hit(ledger: Ledger, names: Names) -> tuple[RouterHit, ...]:
    """Return every router with a changed route: most cut off first, then most moved."""
    counts = {
        code: np.bincount(ledger.sources[ledger.outcomes == code], minlength=len(ledger.routers))
        for code in (derive.CUT_OFF, derive.MOVED, derive.RESTORED)
    }
    extra = np.full(len(ledger.routers), np.iinfo(np.int64).min)
    moved = ledger.outcomes == derive.MOVED
    np.maximum.at(extra, ledger.sources[moved], (ledger.after - ledger.before)[moved])
    cut_off, moves, restored = (counts[c] for c in (derive.CUT_OFF, derive.MOVED, derive.RESTORED))
    order = np.lexsort((-restored, -extra, -moves, -cut_off))
    return tuple(
        RouterHit(
            ledger.routers[r],
            names.node(ledger.routers[r]),
            int(cut_off[r]),
            int(moves[r]),
            int(restored[r]),
            int(extra[r]) if moves[r] else None,
        )
        for r in order
        if cut_off[r] or moves[r] or restored[r]
    )


def most_changed(hits: tuple[RouterHit, ...]) -> str | None:
    """Return the id of the router with the most changed routes, to draw before and after."""
    most = max(hits, key=lambda hit: hit.cut_off + hit.moved + hit.restored, default=None)
    return None if most is None else most.id


@dataclass(frozen=True, slots=True)
class SinglePoint:
    """A failure that cuts off more pairs of routers in the trial than in the plan."""

    kind: str
    id: str
    name: str
    cut_off_before: int
    cut_off_after: int

    @property
    def is_new(self) -> bool:
        """Whether the failure cut nothing off in the plan."""
        return self.cut_off_before == 0


def single_points(
    plan: Plan, before: Network, after: Network, names: Names, cancelled: Callable[[], bool]
) -> tuple[SinglePoint, ...]:
    """Return the failures of a link, a router or a shared-risk group that cut off more
    pairs in the trial than in the plan: those that cut none off before first, then the
    worst. Raises :class:`~netsketch.routing.Cancelled`."""
    named = {"links": names.link, "routers": names.node, "groups": names.group}
    found = []
    for kind in SURVEYED:
        failed = failures_of(plan, kind)
        if kind == "links":
            failed += [Failure((new.link,), links=(new.link,)) for new in plan.trial.added()]
        was = survey(before, kind, failed, cancelled=cancelled).cut_off
        now = survey(after, kind, failed, cancelled=cancelled).cut_off
        found += [
            SinglePoint(
                _SINGULAR[kind],
                failed[f].ids[0],
                named[kind](failed[f].ids[0]),
                int(was[f]),
                int(now[f]),
            )
            for f in np.flatnonzero(now > was)
        ]
    return tuple(sorted(found, key=lambda p: (not p.is_new, p.cut_off_before - p.cut_off_after)))


_SINGULAR = {"links": "link", "routers": "router", "groups": "shared-risk group"}


@dataclass(frozen=True, slots=True)
class LinkLoad:
    """The load of a link in one direction, in Mbit/s and as a part of its capacity
    (``None`` where that is not known)."""

    link: str
    name: str
    tail: str
    head: str
    mbps_before: float
    mbps_after: float
    used_before: float | None
    used_after: float | None


@dataclass(frozen=True, slots=True)
class Loads:
    """The loads of all links that carry a demand before or after, the fullest after first,
    and the demands that find no way, in Mbit/s."""

    links: tuple[LinkLoad, ...]
    undelivered_before: float
    undelivered_after: float


def loads(plan: Plan, before: Network, after: Network, names: Names) -> Loads | None:
    """Return the loads of the plan's demands; ``None`` where it has none."""
    if not len(plan.demands):
        return None
    was, now = load_of(plan, before), load_of(plan, after)
    links = [
        LinkLoad(link, names.link(link), names.node(tail), names.node(head), old, new, used, uses)
        for (link, tail, head, old, used), (*_, new, uses) in zip(
            was.rows(), now.rows(), strict=True
        )
        if old or new
    ]
    links.sort(key=lambda row: (-(row.used_after or 0.0), -row.mbps_after))
    return Loads(tuple(links), was.undelivered_mbps, now.undelivered_mbps)
