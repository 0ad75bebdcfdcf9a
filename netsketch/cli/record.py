"""``netsketch record FILE … -o OUT``: the change record of what is tried, to attach to a
change ticket. Pictures and PDF load Qt, which needs no screen for them."""

from __future__ import annotations

import sys
from argparse import ArgumentParser, ArgumentTypeError, Namespace
from pathlib import Path

from netsketch import screen
from netsketch.cli import naming, plan_options
from netsketch.cli.refusal import InputError
from netsketch.formats.errors import one_line
from netsketch.model import Plan
from netsketch.readings.reading import Reading
from netsketch.reports.record import DEFAULT_ROWS, Record
from netsketch.session import record


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    plan_options.add_file(parser)
    forms = ", ".join(record.SUFFIXES)
    parser.add_argument(
        "-o", dest="out", metavar="OUT", required=True, help=f"the record: one of {forms}"
    )
    parser.add_argument(
        "--rows",
        metavar="N",
        type=_rows,
        default=DEFAULT_ROWS,
        help=f"rows of the ledger in the record (default {DEFAULT_ROWS}); a longer ledger goes "
        "whole into NAME-ledger.csv beside it",
    )
    parser.add_argument(
        "--from",
        dest="source",
        metavar="R",
        help="the router whose routes are drawn before and after (default: the one with the most "
        "changed routes)",
    )
    parser.add_argument("--no-pictures", action="store_true", help="leave the pictures out")
    plan_options.add_trial(parser)


def _rows(text: str) -> int:
    if not text.isascii() or not text.isdigit() or len(text) > 9:
        raise ArgumentTypeError(f"write a whole number from 0, not {text!r}")
    return int(text)


def run(options: Namespace) -> None:
    """Write the record, and print the files written."""
    out, file = Path(options.out), Path(options.file)
    _refuse_suffix(out)
    document = plan_options.opened(options)
    if not document.plan.trial:
        raise InputError(
            options.file,
            "",
            "there is no change to record: give --down, --drain, --cost or --trial",
        )
    router = None
    if options.source is not None:
        router = naming.router(document.plan, options.source, (options.file, "--from"))
    needs_qt = not options.no_pictures or out.suffix.lower() == ".pdf"
    missing = screen.missing_library() if needs_qt else None
    if missing:
        raise InputError(options.out, f"{missing}; Markdown and HTML can do with --no-pictures")
    wishes = record.Wishes(out, file, options.rows, router)
    draw = None if options.no_pictures else _draw
    for path in record.write(document, wishes, draw, _print):
        print(one_line(str(path)))
    sys.stdout.flush()
    plan_options.tell(options.file, document.notes)


def _refuse_suffix(out: Path) -> None:
    if out.suffix.lower() not in record.SUFFIXES:
        raise InputError(str(out), record.WRONG_SUFFIX)


def _draw(plan: Plan, reading: Reading | None) -> str:
    from netsketch.sheet.picture import picture_bytes

    return picture_bytes(plan, reading, ".svg").decode()


def _print(what: Record) -> bytes:
    from netsketch.sheet.print import pdf

    return pdf(what)
