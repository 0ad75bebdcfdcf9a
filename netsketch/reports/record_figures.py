"""Figures of a record as text."""

from __future__ import annotations

from netsketch.reports.text import NONE, number

MOST = 12
"""Rows of the tables that show only the worst."""


def count(value: int) -> str:
    """Return "1,234"."""
    return f"{value:,}"


def cost(value: int | None) -> str:
    """Return a cost, or a dash where there is no path."""
    return NONE if value is None else f"{value:,}"


def signed(value: int | None) -> str:
    """Return "+12", "0" or "−3"; a dash where there is nothing to compare."""
    return NONE if value is None else f"{value:+,}".replace("-", "−") if value else "0"


def rate(mbps: float) -> str:
    """Return Mbit/s to a hundredth: "1,234.5"."""
    return f"{mbps:,.2f}".rstrip("0").rstrip(".")


def percent(part: float | None) -> str:
    """Return "87.5 %" with a blank that does not break; a dash where the capacity is not known."""
    return NONE if part is None else f"{number(round(part * 100, 1))}\u00a0%"


def more(rows: tuple[object, ...], most: int, what: str) -> str:
    """Return how many rows a table leaves out, as the sentence before its note; ``what``
    names one of them."""
    left = len(rows) - most
    if left <= 0:
        return ""
    return (
        f"1 more {what} is not listed. " if left == 1 else f"{left:,} more {what}s are not listed. "
    )
