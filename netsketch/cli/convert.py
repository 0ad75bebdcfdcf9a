"""``netsketch convert IN OUT``: the plan in another file format."""

from __future__ import annotations

from argparse import ArgumentParser, Namespace
from pathlib import Path

from netsketch import formats
from netsketch.cli import plan_options
from netsketch.session.document import Document


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    parser.add_argument("file", metavar="IN", help="the plan to read")
    suffixes = dict.fromkeys(s for f in formats.names() if f.can_write for s in f.suffixes)
    parser.add_argument("out", metavar="OUT", help=f"the file to write: {', '.join(suffixes)}")
    plan_options.add_trial(parser, stored=False)


def run(options: Namespace) -> None:
    """Write the plan, its stored trial and the changes asked for laid over that."""
    loaded = formats.read(Path(options.file))
    document = Document(loaded.plan)
    plan_options.lay_changes(document, options)
    notes = formats.write(document.plan, Path(options.out), loaded.original)
    plan_options.tell(options.file, loaded.notes)
    plan_options.tell(options.out, notes)
