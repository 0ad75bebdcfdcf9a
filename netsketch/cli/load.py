"""``netsketch load FILE``: what every link carries of the demands."""

from __future__ import annotations

from argparse import ArgumentParser, Namespace

from netsketch.analysis.load import load_of
from netsketch.cli import plan_options, printing
from netsketch.session.answers import Answers

COLUMNS = ("link", "from", "to", "Mbit/s", "utilisation")


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    plan_options.add_file(parser)
    plan_options.add_trial(parser)
    plan_options.add_form(parser)


def run(options: Namespace) -> None:
    """Print both directions of every link."""
    document = plan_options.opened(options)
    plan = document.plan
    found = load_of(plan, Answers(document).in_trial)
    rows = [row for row in found.rows() if row[0] in plan.links]
    if options.form == "json":
        keys = ("link", "tail", "head", "load_mbps", "utilisation")
        shapes = (dict(zip(keys, row, strict=True)) for row in rows)
        head = {"undelivered_mbps": found.undelivered_mbps}
        printing.write_json(head, "links", shapes)
    else:
        names = {node.id: node.label for node in plan.nodes}
        cells = ((row[0], names[row[1]], names[row[2]], *row[3:]) for row in rows)
        title = f"Loads; {found.undelivered_mbps:g} Mbit/s cannot be delivered"
        printing.write_table(options.form, COLUMNS, cells, title)
    plan_options.tell(options.file, document.notes)
