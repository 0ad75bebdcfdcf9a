"""``netsketch survey FILE --of KIND``: every failure of a kind, the worst first."""

from __future__ import annotations

import math
from argparse import ArgumentParser, Namespace
from collections.abc import Iterator
from typing import Any, NamedTuple

from netsketch.analysis import Survey, failures_of, survey
from netsketch.analysis.survey import KINDS
from netsketch.analysis.survey_load import SurveyLoads, survey_loads
from netsketch.cli import plan_options, printing
from netsketch.session.answers import Answers

COLUMNS = ("failed", "moved", "cut off", "worst extra cost", "worst utilisation")


class Row(NamedTuple):
    """What one failure does. ``extra_cost`` is ``None`` where no pair moved, ``utilisation``
    where there are no demands or no capacity is known."""

    failed: tuple[str, ...]
    moved: int
    cut_off: int
    extra_cost: int | None
    utilisation: float | None


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    plan_options.add_file(parser)
    parser.add_argument("--of", dest="kind", choices=KINDS, required=True, help="what fails")
    plan_options.add_trial(parser)
    plan_options.add_form(parser)


def run(options: Namespace) -> None:
    """Print the failures, each alone on top of the changes asked for."""
    document = plan_options.opened(options)
    network = Answers(document).in_trial
    failures = failures_of(document.plan, options.kind)
    demands = list(document.plan.demands)
    loads = survey_loads(network, failures, demands) if demands else None
    rows = _rows(survey(network, options.kind, failures), loads)
    if options.form == "json":
        shapes = (_shape(row) for row in rows)
        printing.write_json({"of": options.kind}, "failures", shapes)
    else:
        cells = ((", ".join(r.failed), *r[1:]) for r in rows)
        title = f"Failures of {options.kind}, the worst first"
        printing.write_table(options.form, COLUMNS, cells, title)
    plan_options.tell(options.file, document.notes)


def _rows(found: Survey, loads: SurveyLoads | None) -> Iterator[Row]:
    for index in found.ranked():
        extra = int(found.extra[index])
        used = math.nan if loads is None else float(loads.worst_utilisation[index])
        yield Row(
            found.failures[index].ids,
            int(found.moved[index]),
            int(found.cut_off[index]),
            None if extra < 0 else extra,
            None if math.isnan(used) else round(used, 9),
        )


def _shape(row: Row) -> dict[str, Any]:
    return {
        "failed": row.failed,
        "moved": row.moved,
        "cut_off": row.cut_off,
        "worst_extra_cost": row.extra_cost,
        "worst_utilisation": row.utilisation,
    }
