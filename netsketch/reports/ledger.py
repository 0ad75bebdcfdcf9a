"""The ledger as columns."""

from __future__ import annotations

from netsketch.analysis import LedgerRow
from netsketch.model import Plan
from netsketch.reports.text import Cell
from netsketch.reports.words import next_hops_text

LEDGER_COLUMNS = (
    "from", "to", "from name", "to name", "outcome", "cost before", "cost after",
    "next hops before", "next hops after",
)  # fmt: skip


def ledger_cells(plan: Plan, row: LedgerRow) -> tuple[Cell, ...]:
    """Return one pair in the order of :data:`LEDGER_COLUMNS`."""
    return (
        row.source,
        row.target,
        plan.nodes[row.source].label,
        plan.nodes[row.target].label,
        row.outcome,
        row.cost_before,
        row.cost_after,
        next_hops_text(plan, row.next_hops_before),
        next_hops_text(plan, row.next_hops_after),
    )
