"""Questions asked of routing; results are plain records and arrays."""

from netsketch.analysis.ledger import OUTCOMES, Ledger, LedgerRow, compare
from netsketch.analysis.table import RouteRow, changed_destinations, forwarding_table

__all__ = [
    "OUTCOMES",
    "Ledger",
    "LedgerRow",
    "RouteRow",
    "changed_destinations",
    "compare",
    "forwarding_table",
]
