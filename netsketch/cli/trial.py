"""``netsketch trial FILE --down X …``: the ledger of the changes against the plan."""

from __future__ import annotations

from argparse import ArgumentParser, Namespace
from typing import Any

from netsketch.analysis import LedgerRow
from netsketch.cli import plan_options, printing
from netsketch.reports.ledger import LEDGER_COLUMNS, ledger_cells
from netsketch.routing import never
from netsketch.session.answers import Answers


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    plan_options.add_file(parser)
    plan_options.add_trial(parser)
    plan_options.add_form(parser)


def run(options: Namespace) -> None:
    """Print the ledger."""
    document = plan_options.opened(options)
    ledger = Answers(document).ledger_task()(never)
    if options.form == "json":
        head = {"moved": ledger.moved, "cut_off": ledger.cut_off, "restored": ledger.restored}
        printing.write_json(head, "pairs", (_shape(row) for row in ledger))
    else:
        totals = f"{ledger.moved} moved, {ledger.cut_off} cut off, {ledger.restored} restored"
        cells = (ledger_cells(document.plan, row) for row in ledger)
        printing.write_table(options.form, LEDGER_COLUMNS, cells, totals)
    plan_options.tell(options.file, document.notes)


def _shape(row: LedgerRow) -> dict[str, Any]:
    return {
        "from": row.source,
        "to": row.target,
        "outcome": row.outcome,
        "cost": [row.cost_before, row.cost_after],
        "next_hops": [
            printing.next_hops(row.next_hops_before),
            printing.next_hops(row.next_hops_after),
        ],
    }
