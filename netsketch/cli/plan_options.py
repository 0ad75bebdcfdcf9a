"""The options every command shares: the file, and what is tried on it."""

from __future__ import annotations

import re
import sys
from argparse import ArgumentParser, ArgumentTypeError, Namespace
from pathlib import Path
from typing import Any, NamedTuple

from netsketch import formats
from netsketch.cli import naming
from netsketch.cli.refusal import InputError
from netsketch.formats.errors import one_line
from netsketch.model import Drained, Edit, Plan, PlanError, Segment, edits, quoted
from netsketch.session.document import Document

FORMS = ("text", "csv", "json")
LONGEST_NUMBER = 4000  # Python refuses to convert over 4,300 digits


class CostOption(NamedTuple):
    """What ``--cost`` was given: a link's id, its cost, and the cost of the way back."""

    link: str
    out: str
    back: str | None


def cost_option(text: str) -> CostOption:
    """Return the parts of "LINK=COST" or "LINK=OUT/BACK"."""
    link, equals, costs = text.rpartition("=")
    if not (link and equals and costs):
        raise ArgumentTypeError(f"write LINK=COST or LINK=OUT/BACK, not {text!r}")
    out, slash, back = costs.partition("/")
    return CostOption(link, out.strip(), back.strip() if slash else None)


def add_file(parser: ArgumentParser) -> None:
    """Add the FILE argument."""
    formats_read = dict.fromkeys(s for f in formats.names() if f.can_read for s in f.suffixes)
    parser.add_argument("file", metavar="FILE", help=f"the plan: {', '.join(formats_read)}")


def add_trial(parser: ArgumentParser, *, stored: bool = True) -> None:
    """Add ``--down``, ``--drain``, ``--cost`` and, with ``stored``, ``--trial``."""
    group = parser.add_argument_group("changes laid over the plan (each may be repeated)")
    group.add_argument(
        "--down",
        metavar="X",
        action="append",
        default=[],
        help="take down a link, router, segment or shared-risk group (an id, or the unique "
        "name of a router or segment; link:ID, node:ID, group:ID where an id is not unique)",
    )
    group.add_argument("--drain", metavar="R", action="append", default=[], help="drain a router")
    group.add_argument(
        "--cost",
        metavar="LINK=N",
        action="append",
        default=[],
        type=cost_option,
        help="give a link another cost, from both of its ends (leaving a segment stays 0); "
        "LINK=OUT/BACK gives the cost from the link's first end and the cost of the way back",
    )
    if stored:
        group.add_argument(
            "--trial", action="store_true", help="start from the trial stored in FILE"
        )


def add_form(parser: ArgumentParser) -> None:
    """Add ``--as``."""
    parser.add_argument("--as", dest="form", choices=FORMS, default="text", help="default: text")


def opened(options: Namespace) -> Document:
    """Return the document in FILE with the changes asked for as its trial.

    A trial stored in the file is left out unless ``--trial`` is given. Raises
    :class:`~netsketch.formats.FormatError` and :class:`InputError`.
    """
    loaded = formats.read(Path(options.file))
    document = Document(loaded.plan)
    document.notes = loaded.notes
    if document.plan.trial and not options.trial:
        document.apply(edits.discard(document.plan))
        document.notes += ("the trial stored in the file is left out; --trial lays it",)
    lay_changes(document, options)
    return document


def lay_changes(document: Document, options: Namespace) -> None:
    """Lay what ``--down``, ``--drain`` and ``--cost`` ask for over the document's trial.

    Raises :class:`InputError`.
    """
    plan, file = document.plan, options.file
    for word in options.down:
        changes = naming.taken_down(plan, word, (file, "--down"))
        document.apply(edits.try_changes(plan, changes, f"take {word} down"))
    for word in options.drain:
        change = Drained(naming.router(plan, word, (file, "--drain")))
        document.apply(edits.try_changes(plan, [change], f"drain {word}"))
    for option in options.cost:
        try:
            document.apply(_cost_edit(plan, option))
        except PlanError as error:
            raise InputError(file, "--cost", str(error)) from error


def _cost_edit(plan: Plan, option: CostOption) -> Edit:
    link = plan.links.get(option.link)
    if link is None:
        raise PlanError(f"there is no link {quoted(option.link)}")
    out = back = _number(option.out)
    if option.back is not None:
        back = _number(option.back)
    else:  # one cost both ways, but leaving a segment costs nothing
        out = 0 if isinstance(plan.nodes[link.source], Segment) else out
        back = 0 if isinstance(plan.nodes[link.target], Segment) else back
    return edits.try_costs(plan, link.id, out, back)


def _number(text: str) -> Any:
    """Return the whole number in ``text``, or the text for the model to refuse by name."""
    whole = re.fullmatch(r"[+-]?[0-9]+", text) and len(text) <= LONGEST_NUMBER
    return int(text) if whole else text


def tell(file: str, notes: tuple[str, ...] | list[str]) -> None:
    """Print notes about a file where they do not mix with the answer."""
    for note in notes:
        print(one_line(f"{file}: note: {note}"), file=sys.stderr)
