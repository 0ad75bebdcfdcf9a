"""``netsketch cover FILE``: what loop-free alternates protect, router by router."""

from __future__ import annotations

from argparse import ArgumentParser, Namespace
from typing import Any

from netsketch.analysis.cover import NOTHING, Coverage, coverage_of, covers
from netsketch.cli import plan_options, printing
from netsketch.routing import AllPairs
from netsketch.session.answers import Answers

COLUMNS = ("router", "routes", "link protected", "node protected", "with remote alternates")


def add_options(parser: ArgumentParser) -> None:
    """Add what the command takes."""
    plan_options.add_file(parser)
    plan_options.add_trial(parser)
    plan_options.add_form(parser)


def run(options: Namespace) -> None:
    """Print the coverage of every router and of the whole plan (RFC 5286, RFC 7490)."""
    document = plan_options.opened(options)
    pairs = AllPairs(Answers(document).in_trial)
    ids = pairs.network.structure.vertex_ids
    by_router = dict.fromkeys(ids[: pairs.network.structure.routers], NOTHING)
    for cover in covers(pairs):
        key = ids[cover.source]
        by_router[key] = by_router[key].plus(coverage_of(pairs, cover))
    total = NOTHING
    for each in by_router.values():
        total = total.plus(each)
    if options.form == "json":
        shapes = ({"router": key, **_shape(each)} for key, each in by_router.items())
        printing.write_json(_shape(total), "routers", shapes)
    else:
        names = {node.id: node.label for node in document.plan.nodes}
        cells = ((names[key], each.uses, *_shares(each)) for key, each in by_router.items())
        title = "Routes protected by loop-free alternates, in per cent; all: " + " / ".join(
            "–" if share is None else f"{share:g}" for share in _shares(total)
        )
        printing.write_table(options.form, COLUMNS, cells, title)
    plan_options.tell(options.file, document.notes)


def _shape(found: Coverage) -> dict[str, Any]:
    return {
        "routes": found.uses,
        "link_protected": found.link,
        "node_routes": found.node_matters,
        "node_protected": found.node,
        "link_protected_with_remote": found.remote,
    }


def _shares(found: Coverage) -> tuple[float | None, ...]:
    shares = found.link_share, found.node_share, found.remote_share
    return tuple(None if share is None else round(100 * share, 1) for share in shares)
