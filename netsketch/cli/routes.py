"""``netsketch routes FILE --from R``: the forwarding table of one router."""

from __future__ import annotations

from argparse import ArgumentParser, Namespace
from typing import Any

from netsketch.analysis import RouteRow
from netsketch.cli import naming, plan_options, printing
from netsketch.reports.routes import ROUTE_COLUMNS, rounded, route_cells
from netsketch.session.answers import Answers


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    plan_options.add_file(parser)
    parser.add_argument(
        "--from", dest="source", metavar="R", required=True, help="a router's id or unique name"
    )
    plan_options.add_trial(parser)
    plan_options.add_form(parser)


def run(options: Namespace) -> None:
    """Print the table."""
    document = plan_options.opened(options)
    plan = document.plan
    source = naming.router(plan, options.source, (options.file, "--from"))
    rows = Answers(document).outward(source).rows
    if options.form == "json":
        printing.write_json({"from": source}, "routes", (_shape(row) for row in rows))
    else:
        title = f"Routes from {naming.named(plan, source)}"
        cells = (route_cells(plan, row) for row in rows)
        printing.write_table(options.form, ROUTE_COLUMNS, cells, title)
    plan_options.tell(options.file, document.notes)


def _shape(row: RouteRow) -> dict[str, Any]:
    delays = row.delay_ms
    return {
        "to": row.to,
        "kind": row.kind,
        "cost": row.cost,
        "hops": row.hops,
        "delay_ms": None if delays is None else [rounded(delay) for delay in delays],
        "next_hops": printing.next_hops(row.next_hops),
    }
