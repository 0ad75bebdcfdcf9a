"""Writing the record of a document to a file, with what belongs beside it."""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from datetime import datetime
from pathlib import Path

from netsketch import __version__, formats
from netsketch.formats import FormatError
from netsketch.formats.atomic import write_bytes, write_parts
from netsketch.model import Plan, edits
from netsketch.readings import outward as outward_reading
from netsketch.readings.reading import Reading
from netsketch.reports.record import DEFAULT_ROWS, Origin, Picture, Record, gather, ledger_csv
from netsketch.reports.record_html import html
from netsketch.reports.record_markdown import markdown, picture_file
from netsketch.reports.record_numbers import most_changed
from netsketch.reports.record_words import shown
from netsketch.routing import never
from netsketch.session.answers import Answers
from netsketch.session.document import Document

SUFFIXES = (".html", ".pdf", ".md")
"""Forms a record can take."""

WRONG_SUFFIX = f"a record is one of {', '.join(SUFFIXES)}"

Drawer = Callable[[Plan, Reading | None], str]
"""Draws a plan with a reading as SVG."""

Printer = Callable[[Record], bytes]
"""Lays a record out as PDF."""


@dataclass(frozen=True)
class Wishes:
    """What a person asks of a record. ``router`` (an id) is the one drawn before and after;
    ``None``: the one with the most changed routes. ``file`` is the plan's file, ``None``
    where it has none."""

    out: Path
    file: Path | None
    rows: int = DEFAULT_ROWS
    router: str | None = None


def write(
    document: Document,
    wishes: Wishes,
    draw: Drawer | None,
    print_pages: Printer | None,
    *,
    now: datetime | None = None,
    cancelled: Callable[[], bool] = never,
) -> list[Path]:
    """Write the record of the document's trial and return the files written: the record,
    then what it names beside it (the ledger as CSV where it is long, the pictures of a
    Markdown record).

    ``draw`` makes the pictures, ``None`` leaves them out; ``print_pages`` is needed for PDF.
    Raises :class:`~netsketch.formats.FormatError` (among others for a suffix that is none of
    :data:`SUFFIXES`) and :class:`~netsketch.routing.Cancelled`.
    """
    if wishes.out.suffix.lower() not in SUFFIXES:
        raise FormatError(str(wishes.out), "", WRONG_SUFFIX)
    if not wishes.out.parent.is_dir():  # said before the work, not after it
        raise FormatError(str(wishes.out), "", "cannot be written: there is no such folder")
    answers = Answers(document)
    ledger = answers.ledger_task()(cancelled)
    record = gather(
        document.plan,
        (answers.network, answers.in_trial),
        ledger,
        origin(document.plan, wishes.file, now or datetime.now().astimezone()),
        rows=wishes.rows,
        ledger_file=f"{wishes.out.stem}-ledger.csv",
        cancelled=cancelled,
    )
    if draw is not None:
        router = wishes.router or most_changed(record.routers_hit)
        record = replace(record, pictures=_pictures(document.plan, answers, router, draw))
    beside = []
    if record.ledger_file:
        beside.append(wishes.out.with_name(record.ledger_file))
        write_parts(beside[0], ledger_csv(document.plan, ledger))
    if wishes.out.suffix.lower() == ".md":
        beside += _write_pictures(record, wishes.out)
    write_bytes(wishes.out, _rendered(record, wishes.out, print_pages))
    return [wishes.out, *beside]


def _write_pictures(record: Record, out: Path) -> Iterator[Path]:
    for picture in record.pictures:
        path = out.with_name(picture_file(out.stem, picture.name))
        write_bytes(path, picture.svg.encode())
        yield path


def _rendered(record: Record, out: Path, print_pages: Printer | None) -> bytes:
    suffix = out.suffix.lower()
    if suffix == ".html":
        return html(record).encode()
    if suffix == ".md":
        return markdown(record, out.stem).encode()
    if print_pages is None:
        raise ValueError("a PDF needs something that lays out pages")
    return print_pages(record)


def origin(plan: Plan, file: Path | None, now: datetime) -> Origin:
    """Return where a record of ``plan`` comes from, reading ``file`` again: the checksum
    is of what is on the disk now. Raises :class:`~netsketch.formats.FormatError`."""
    written = now.strftime("%Y-%m-%d %H:%M %Z").strip()
    if file is None:
        return Origin("", "", True, __version__, written)
    filed = formats.read(file).plan
    as_filed = _routed(filed) == _routed(plan)
    checksum = hashlib.sha256(file.read_bytes()).hexdigest()
    return Origin(file.name, checksum, as_filed, __version__, written)


def _routed(plan: Plan) -> tuple[object, ...]:
    """Return what a record depends on: neither places on the sheet nor trials."""
    nodes = [edits.replace(node, x=None, y=None) for node in plan.nodes]
    return plan.settings, nodes, plan.links, plan.groups, plan.demands


def _without_trial(plan: Plan) -> Plan:
    bare = plan.snapshot()
    bare.apply(edits.discard(bare))
    return bare


def _pictures(
    plan: Plan, answers: Answers, router: str | None, draw: Drawer
) -> tuple[Picture, ...]:
    before: Reading | None = None
    after: Reading | None = None
    seen = "The network"
    if router is not None:
        label = plan.nodes[router].label
        before = outward_reading.outward(answers.routes(router, planned=True), label)
        after = answers.effect(router)
        seen = f"The routes of {shown(label)}"
    return (
        Picture("before", f"{seen} as planned", draw(_without_trial(plan), before)),
        Picture("after", f"{seen} with the change in place", draw(plan, after)),
    )
