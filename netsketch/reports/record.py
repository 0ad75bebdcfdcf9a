"""The record: what a trial changes, gathered as plain data for a change ticket.

:mod:`record_html` and :mod:`record_markdown` write it out. Pictures come from whoever can
draw them.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

from netsketch.analysis import Ledger, LedgerRow
from netsketch.model import Plan
from netsketch.reports.ledger import LEDGER_COLUMNS, ledger_cells
from netsketch.reports.record_figures import percent, rate
from netsketch.reports.record_numbers import (
    Loads,
    RouterHit,
    SinglePoint,
    loads,
    routers_hit,
    single_points,
    worst_first,
)
from netsketch.reports.record_words import Names, Step, shown, steps, way_back
from netsketch.reports.tables import csv_text
from netsketch.reports.words import outcome_text
from netsketch.routing import Network, never

DEFAULT_ROWS = 200
CSV_ROWS_AT_ONCE = 5_000


@dataclass(frozen=True, slots=True)
class Origin:
    """Where a record comes from. ``checksum`` is the SHA-256 of the plan's file in
    hexadecimal, empty where there is none; ``as_filed`` tells whether the plan is the one in
    that file. ``written`` is the date and time as the record shows it."""

    file: str
    checksum: str
    as_filed: bool
    version: str
    written: str


@dataclass(frozen=True, slots=True)
class Pair:
    """A row of the ledger in words. ``extra`` is the cost after less the cost before."""

    source: str
    target: str
    outcome: str
    cost_before: int | None
    cost_after: int | None
    extra: int | None
    next_hops_before: str
    next_hops_after: str


@dataclass(frozen=True, slots=True)
class Picture:
    """A drawing as SVG, made by the program itself. ``name`` ends the name of its file
    where a record cannot hold it."""

    name: str
    caption: str
    svg: str


@dataclass(frozen=True, slots=True)
class Record:
    """Everything a record says. Counts are of ordered pairs of routers.

    ``pairs`` are the first rows of the ledger, worst first; ``ledger_file`` names the CSV
    with all of them, empty where ``pairs`` holds them all.
    """

    title: str
    origin: Origin
    summary: tuple[str, ...]
    steps: tuple[Step, ...]
    way_back: tuple[Step, ...]
    moved: int
    cut_off: int
    restored: int
    routers: int
    routers_hit: tuple[RouterHit, ...]
    single_points: tuple[SinglePoint, ...]
    loads: Loads | None
    pairs: tuple[Pair, ...]
    ledger_file: str
    pictures: tuple[Picture, ...] = ()

    @property
    def pairs_changed(self) -> int:
        """How many rows the whole ledger has."""
        return self.moved + self.cut_off + self.restored


def gather(
    plan: Plan,
    networks: tuple[Network, Network],
    ledger: Ledger,
    origin: Origin,
    *,
    rows: int = DEFAULT_ROWS,
    ledger_file: str = "",
    cancelled: Callable[[], bool] = never,
) -> Record:
    """Return the record of the trial of ``plan``, without pictures.

    ``networks`` are the plan and the plan with its trial, ``ledger`` compares them.
    ``ledger_file`` is what the CSV will be called if the ledger has more than ``rows`` rows.
    Raises :class:`~netsketch.routing.Cancelled`.
    """
    names = Names(plan)
    first = worst_first(ledger)[:rows]
    pairs = tuple(_pair(names, ledger.row(int(index))) for index in first)
    points = single_points(plan, *networks, names, cancelled)
    carried = loads(plan, *networks, names)
    return Record(
        title=shown(plan.settings.name) or shown(origin.file) or "Untitled plan",
        origin=origin,
        summary=tuple(_summary(ledger, names, points, carried)),
        steps=steps(plan, names),
        way_back=way_back(plan, names),
        moved=ledger.moved,
        cut_off=ledger.cut_off,
        restored=ledger.restored,
        routers=len(ledger.routers),
        routers_hit=routers_hit(ledger, names),
        single_points=points,
        loads=carried,
        pairs=pairs,
        ledger_file=ledger_file if len(pairs) < len(ledger) else "",
    )


def ledger_csv(plan: Plan, ledger: Ledger) -> Iterator[bytes]:
    """Yield the whole ledger as CSV, in its own order, a part at a time: for a spreadsheet,
    with the mark that says UTF-8."""
    yield b"\xef\xbb\xbf" + csv_text(LEDGER_COLUMNS, ()).encode()
    for first in range(0, len(ledger), CSV_ROWS_AT_ONCE):
        part = range(first, min(first + CSV_ROWS_AT_ONCE, len(ledger)))
        lines = csv_text((), (ledger_cells(plan, ledger.row(index)) for index in part))
        yield lines.removeprefix("\r\n").encode()


def _pair(names: Names, row: LedgerRow) -> Pair:
    before, after = row.cost_before, row.cost_after
    return Pair(
        names.node(row.source),
        names.node(row.target),
        outcome_text(row.outcome),
        before,
        after,
        None if before is None or after is None else after - before,
        names.next_hops(row.next_hops_before),
        names.next_hops(row.next_hops_after),
    )


def _summary(
    ledger: Ledger, names: Names, points: tuple[SinglePoint, ...], carried: Loads | None
) -> Iterator[str]:
    if not len(ledger):
        yield "No route of any router changes."
    elif ledger.cut_off:
        yield f"{pairs_text(ledger.cut_off)} lose every path."
    else:
        yield "No pair of routers is cut off."
    if ledger.moved:
        yield f"{pairs_text(ledger.moved)} change their path or its cost{_worst(ledger, names)}."
    if ledger.restored:
        yield f"{pairs_text(ledger.restored)} that have no path get one."
    fresh = sum(point.is_new for point in points)
    if fresh:
        word = "failure" if fresh == 1 else "failures"
        yield f"With the change in place, {fresh:,} more {word} would cut routers off."
    if carried is not None:
        yield from _carried(carried)


def pairs_text(count: int) -> str:
    """Return "1 pair of routers", "2,400 pairs of routers"."""
    return f"{count:,} {'pair' if count == 1 else 'pairs'} of routers"


def _worst(ledger: Ledger, names: Names) -> str:
    """Return the largest extra cost of a moved pair in words."""
    row = ledger.row(int(worst_first(ledger)[ledger.cut_off]))
    before, after = row.cost_before, row.cost_after
    if before is None or after is None or after <= before:
        return ", none at a higher cost"
    ends = f"{names.node(row.source)} to {names.node(row.target)}"
    return f", at most {after - before:,} more in cost ({ends}: {before:,} → {after:,})"


def _carried(loads: Loads) -> Iterator[str]:
    lost, before = loads.undelivered_after, loads.undelivered_before
    if lost > before:
        yield f"{rate(lost)} Mbit/s of demand find no way (now {rate(before)})."
    fullest = loads.links[0] if loads.links else None
    if fullest is not None and fullest.used_after:
        where = f"{fullest.name} towards {fullest.head}"
        was = "" if fullest.used_before is None else f" (now {percent(fullest.used_before)})"
        yield f"The fullest link is {where}, at {percent(fullest.used_after)}{was}."
