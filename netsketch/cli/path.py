"""``netsketch path FILE --from R --to R``: the paths of a pair, and the way back."""

from __future__ import annotations

from argparse import ArgumentParser, Namespace
from typing import Any

from netsketch.cli import naming, plan_options, printing
from netsketch.cli.refusal import InputError
from netsketch.model import Plan, quoted
from netsketch.reports.text import Cell
from netsketch.session.answers import Answers, Path

COLUMNS = ("way", "link", "tail", "head", "share")


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    plan_options.add_file(parser)
    add_ends(parser, required=True)
    plan_options.add_trial(parser)
    plan_options.add_form(parser)


def add_ends(parser: ArgumentParser, *, required: bool) -> None:
    """Add ``--from`` and ``--to``."""
    for option, dest, what in (("--from", "source", "start"), ("--to", "target", "end")):
        parser.add_argument(
            option,
            dest=dest,
            metavar="R",
            required=required,
            help=f"the router where the path {what}s: an id or a unique name",
        )


def ends(options: Namespace, plan: Plan) -> tuple[str, str]:
    """Return the ids of the two routers. Raises :class:`InputError`."""
    source = naming.router(plan, options.source, (options.file, "--from"))
    target = naming.router(plan, options.target, (options.file, "--to"))
    if source == target:
        raise InputError(options.file, "--to", f"router {quoted(target)} is where it starts")
    return source, target


def run(options: Namespace) -> None:
    """Print the way out and the way back."""
    document = plan_options.opened(options)
    source, target = ends(options, document.plan)
    answers = Answers(document)
    out, back = answers.path(source, target), answers.path(target, source)
    if options.form == "json":
        printing.write_object({**_shape(out), "way_back": _shape(back)})
    else:
        names = [naming.named(document.plan, key) for key in (source, target)]
        rows = [*_cells("out", out), *_cells("back", back)]
        title = "\n".join([_summary("Out", names, out), _summary("Back", names[::-1], back)])
        printing.write_table(options.form, COLUMNS, rows, title)
    plan_options.tell(options.file, document.notes)


def _shape(path: Path) -> dict[str, Any]:
    return {
        "from": path.source,
        "to": path.target,
        "cost": path.cost,
        "links": [link._asdict() for link in path.links],
        "path_count": path.path_count,
    }


def _cells(way: str, path: Path) -> list[tuple[Cell, ...]]:
    return [(way, link.link, link.tail, link.head, link.share) for link in path.links]


def _summary(way: str, names: list[str], path: Path) -> str:
    if path.cost is None:
        return f"{way}: {names[0]} to {names[1]}: cut off"
    paths = "1 path" if path.path_count == 1 else f"{path.path_count:,} equal-cost paths"
    return f"{way}: {names[0]} to {names[1]}: cost {path.cost}, {paths}"
