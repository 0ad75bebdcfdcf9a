"""A record as Markdown (CommonMark with tables): names are escaped so that none becomes
markup, a link or a cell."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Sequence
from urllib.parse import quote

from netsketch.reports import cautions
from netsketch.reports.record import Record
from netsketch.reports.record_figures import MOST, cost, count, more, percent, rate, signed
from netsketch.reports.record_words import Step, shown

_MARKUP = re.compile(r"[\\`*_{}\[\]<>#|~!&$@^=\"]|:(?=//)|(?<=www)\.", re.IGNORECASE)


def escaped(text: str) -> str:
    """Return ``text`` on one line with everything that Markdown would read as markup or turn
    into a link behind a backslash (CommonMark 0.31, 2.4; GitHub Flavored Markdown, 6.9)."""
    return _MARKUP.sub(r"\\\g<0>", " ".join(text.split()))


def picture_file(stem: str, name: str) -> str:
    """Return the name of the file in which a picture stands beside the record ``stem``."""
    return f"{stem}-{name}.svg"


def markdown(record: Record, stem: str) -> str:
    """Return the record; its pictures are files beside it, see :func:`picture_file`."""
    parts = (
        _head(record), _steps(record), _hit(record), _single_points(record), _loads(record),
        _way_back(record), _pictures(record, stem), _ledger(record), _assumptions(), _signatures(),
    )  # fmt: skip
    return "\n\n".join(part for lines in parts for part in lines) + "\n"


def _table(header: Sequence[str], rows: Iterable[Sequence[str]], numbers: str = "") -> str:
    """Return a table; ``numbers`` holds an "r" for every column that is set to the right."""
    marks = ["--:" if mark == "r" else "---" for mark in numbers.ljust(len(header))]
    lines = [header, marks, *rows]
    return "\n".join(f"| {' | '.join(line)} |" for line in lines)


def _head(record: Record) -> Iterator[str]:
    o = record.origin
    yield f"# Change record: {escaped(record.title)}"
    file = escaped(shown(o.file)) or "not saved to a file"
    changed = "" if o.as_filed else " **The plan recorded here was edited since that file.**"
    lines = [f"Plan file: {file}.{changed}"]
    if o.checksum:
        lines.append(f"SHA-256: `{o.checksum}`")
    lines.append(f"Written: {escaped(o.written)}, netsketch {escaped(o.version)}")
    yield "\n".join(f"- {line}" for line in lines)
    fresh = sum(point.is_new for point in record.single_points)
    yield _table(
        ("Steps", "✕ pairs cut off", "↷ pairs moved", "✓ pairs restored", "routers concerned",
         "new single points of failure"),
        [(
            count(len(record.steps)), f"**{count(record.cut_off)}**", count(record.moved),
            count(record.restored), f"{count(len(record.routers_hit))} of {count(record.routers)}",
            f"**{count(fresh)}**",
        )],
    )  # fmt: skip
    for line in record.summary:
        yield escaped(line)


def _step_table(steps: Iterable[Step]) -> str:
    rows = [
        (str(n), f"**{escaped(step.action)}**", escaped(step.was), escaped(step.becomes), "")
        for n, step in enumerate(steps, start=1)
    ]
    return _table(("No.", "Do", "Is", "Becomes", "Done at"), rows, "r")


def _steps(record: Record) -> Iterator[str]:
    yield "## What changes, in this order"
    yield _step_table(record.steps)


def _hit(record: Record) -> Iterator[str]:
    yield "## What breaks"
    if not record.routers_hit:
        yield "Nothing: every router keeps every route."
        return
    yield "### Routers whose routes change"
    rows = [
        (escaped(hit.name), count(hit.cut_off), count(hit.moved), count(hit.restored),
         signed(hit.extra))
        for hit in record.routers_hit[:MOST]
    ]  # fmt: skip
    yield _table(("Router", "Loses", "Moves", "Regains", "Worst extra cost"), rows, " rrrr")
    yield (
        f"{more(record.routers_hit, MOST, 'router')}Counted in destinations: other routers that "
        "this router can no longer reach, reaches another way or at another cost, or reaches "
        "again. Pairs that begin or end at a router taken down are not counted."
    )


def _single_points(record: Record) -> Iterator[str]:
    yield "### Single points of failure"
    if not record.single_points:
        yield (
            "No link, router or shared-risk group cuts off more pairs of routers, failing "
            "alone, than it does now."
        )
        return
    rows = [
        (
            f"{'**New:**' if point.is_new else 'Worse:'} {point.kind} {escaped(point.name)}",
            count(point.cut_off_before),
            count(point.cut_off_after),
        )
        for point in record.single_points[:MOST]
    ]
    yield _table(("If this fails too", "Pairs cut off now", "After the change"), rows, " rr")
    left = more(record.single_points, MOST, "failure")
    yield f"{left}Every link, router and shared-risk group, each failing alone."


def _loads(record: Record) -> Iterator[str]:
    if record.loads is None:
        return
    yield "### Link loads"
    rows = [
        (escaped(row.name), escaped(row.head), rate(row.mbps_before), rate(row.mbps_after),
         percent(row.used_before), percent(row.used_after))
        for row in record.loads.links[:MOST]
    ]  # fmt: skip
    header = ("Link", "Towards", "Mbit/s now", "After", "Used now", "After")
    yield _table(header, rows, "  rrrr")
    yield (
        f"{more(record.loads.links, MOST, 'load')}Demands that find no way: "
        f"{rate(record.loads.undelivered_before)} Mbit/s now, "
        f"{rate(record.loads.undelivered_after)} Mbit/s after the change."
    )


def _way_back(record: Record) -> Iterator[str]:
    yield "## The way back"
    yield "These steps, in this order, return the network to the plan."
    yield _step_table(record.way_back)


def _pictures(record: Record, stem: str) -> Iterator[str]:
    if record.pictures:
        yield "## Before and after"
    for picture in record.pictures:
        yield f"![{escaped(picture.caption)}]({quote(picture_file(stem, picture.name))})"
        yield escaped(picture.caption)


def _ledger(record: Record) -> Iterator[str]:
    yield "## Ledger"
    if not record.pairs_changed:
        yield "The ledger is empty: no pair of routers changes its cost or its next hops."
        return
    if record.ledger_file:
        yield (
            f"The first {count(len(record.pairs))} of {count(record.pairs_changed)} pairs, worst "
            f"first. All of them are in **{escaped(record.ledger_file)}**, to be kept beside "
            "this record."
        )
    else:
        yield f"All {count(record.pairs_changed)} pairs that change, worst first."
    rows = [
        (
            escaped(pair.source), escaped(pair.target), pair.outcome, cost(pair.cost_before),
            cost(pair.cost_after), signed(pair.extra), escaped(pair.next_hops_before) or "–",
            escaped(pair.next_hops_after) or "–",
        )
        for pair in record.pairs
    ]  # fmt: skip
    header = (
        "From", "To", "Outcome", "Cost now", "After", "Extra", "Next hops now", "Next hops after",
    )  # fmt: skip
    if rows:
        yield _table(header, rows, "   rrr")


def _assumptions() -> Iterator[str]:
    yield "## Assumptions and cautions"
    for title, lines in (
        ("What netsketch computes", cautions.COMPUTES),
        ("What it does not", cautions.DOES_NOT),
        ("Cautions", cautions.CAUTIONS),
    ):
        yield f"### {title}"
        yield "\n".join(f"- {line}" for line in lines)


def _signatures() -> Iterator[str]:
    yield "## Signatures"
    who = ("Prepared by", "Checked by", "Approved by")
    yield _table(("", "Name", "Date", "Signature"), [(name, "", "", "") for name in who])
