"""Questions asked of routing; results are plain records and arrays."""

from netsketch.analysis.ledger import OUTCOMES, Ledger, LedgerRow, compare, compare_networks
from netsketch.analysis.survey import Failure, Survey, failures_of, survey
from netsketch.analysis.table import RouteRow, changed_destinations, forwarding_table

__all__ = [
    "OUTCOMES",
    "Failure",
    "Ledger",
    "LedgerRow",
    "RouteRow",
    "Survey",
    "changed_destinations",
    "compare",
    "compare_networks",
    "failures_of",
    "forwarding_table",
    "survey",
]
