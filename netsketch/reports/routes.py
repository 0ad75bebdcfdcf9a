"""The forwarding table of one router as columns."""

from __future__ import annotations

from netsketch.analysis import RouteRow
from netsketch.model import Plan
from netsketch.reports.text import Cell
from netsketch.reports.words import next_hops_text

ROUTE_COLUMNS = (
    "to", "name", "kind", "cost", "hops", "least delay ms", "most delay ms", "next hops",
)  # fmt: skip


def route_cells(plan: Plan, row: RouteRow) -> tuple[Cell, ...]:
    """Return one route in the order of :data:`ROUTE_COLUMNS`."""
    least, most = row.delay_ms or (None, None)
    return (
        row.to,
        plan.nodes[row.to].label,
        row.kind,
        row.cost,
        row.hops,
        rounded(least),
        rounded(most),
        next_hops_text(plan, row.next_hops),
    )


def rounded(delay_ms: float | None) -> float | None:
    """Return a delay to the nanosecond: sums of decimals carry binary dust below that."""
    return None if delay_ms is None else round(delay_ms, 6)
