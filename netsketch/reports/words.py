"""Answers in words: the same in the window, the commands and records."""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING

from netsketch.model import Plan

if TYPE_CHECKING:
    from netsketch.routing import NextHop


def next_hops_text(plan: Plan, hops: Iterable[NextHop]) -> str:
    """Return next hops as "Quay-1 over l4 · Quay-2 over l7"; "attached over l2" for the
    segment at the end of the link itself."""
    parts = []
    for hop in hops:
        where = "attached" if hop.router is None else plan.nodes[hop.router].label
        parts.append(f"{where} over {hop.link}")
    return " · ".join(parts)


def delay_text(delay: tuple[float, float] | None) -> str:
    """Return a delay in ms as "4.5" or "4.5–6"; empty where it is not known."""
    if delay is None:
        return ""
    least, most = (f"{value:.6g}" for value in delay)
    return least if least == most else f"{least}–{most}"


OUTCOME_SIGNS = {"moved": "↷", "cut off": "✕", "restored": "✓"}
"""A sign for each outcome, so that a word is not all there is to tell them apart."""


def outcome_text(outcome: str | None) -> str:
    """Return an outcome with its sign; empty for none."""
    return f"{OUTCOME_SIGNS[outcome]} {outcome}" if outcome else ""
