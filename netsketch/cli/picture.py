"""``netsketch picture FILE -o OUT``: the plan as PNG, SVG or PDF; the one command that
loads Qt, which needs no screen for it."""

from __future__ import annotations

from argparse import ArgumentParser, Namespace
from pathlib import Path

from netsketch import screen
from netsketch.cli import naming, path, plan_options
from netsketch.cli.refusal import InputError
from netsketch.readings.reading import Reading
from netsketch.session.answers import Answers
from netsketch.session.document import Document


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    plan_options.add_file(parser)
    parser.add_argument(
        "-o", dest="out", metavar="OUT", required=True, help="the picture: .png, .svg or .pdf"
    )
    path.add_ends(parser, required=False)
    parser.add_argument("--dark", action="store_true", help="chalk on graphite")
    plan_options.add_trial(parser)


def run(options: Namespace) -> None:
    """Write the picture: bare, of a router's routes (``--from``), or of a path (both)."""
    document = plan_options.opened(options)
    reading = _reading(document, options)
    missing = screen.missing_library()
    if missing:
        raise InputError("a picture cannot be drawn", missing)
    from netsketch.sheet.look import DARK, LIGHT
    from netsketch.sheet.picture import write_picture

    look = DARK if options.dark else LIGHT
    write_picture(document.plan, reading, Path(options.out), look)
    plan_options.tell(options.file, document.notes)


def _reading(document: Document, options: Namespace) -> Reading | None:
    if options.source is None and options.target is None:
        return None
    if options.source is None:
        raise InputError(options.file, "--to", "a path needs --from as well")
    answers = Answers(document)
    if options.target is None:
        source = naming.router(document.plan, options.source, (options.file, "--from"))
        return answers.outward(source).reading
    return answers.path(*path.ends(options, document.plan)).reading
