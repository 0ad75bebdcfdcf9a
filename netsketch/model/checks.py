"""Validation: every refusal names the thing and the reason, in the user's words."""

from __future__ import annotations

import math

from netsketch.model.costs import COST_RANGES
from netsketch.model.items import Demand, Link, Node, Segment, Settings


class PlanError(ValueError):
    """Something a plan cannot hold. The message names the thing and why."""


def quoted(text: str, limit: int = 60) -> str:
    """Return ``text`` in quotation marks on one line, cut to ``limit`` characters."""
    flat = text if text.isprintable() else "".join(c if c.isprintable() else " " for c in text)
    return f"“{flat if len(flat) <= limit else flat[: limit - 1] + '…'}”"


def check_cost(cost: object, link_id: str, style: str) -> None:
    """Raise :class:`PlanError` unless ``cost`` is a whole number in the style's range."""
    low, high = COST_RANGES[style]
    if isinstance(cost, bool) or not isinstance(cost, int):
        raise PlanError(
            f"link {quoted(link_id)}: cost {quoted(str(cost))} is not a whole number; "
            f"costs are {low} to {high} ({style})"
        )
    if not low <= cost <= high:
        text = str(cost) if abs(cost) < 10**20 else "with over 20 digits"
        raise PlanError(f"link {quoted(link_id)}: cost {text} is outside {low} to {high} ({style})")


def check_number(
    value: object, what: str, *, above_zero: bool = False, signed: bool = False
) -> None:
    """Raise :class:`PlanError` unless ``value`` is a finite number (``signed``: may be
    negative; ``above_zero``: must be greater than 0)."""
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise PlanError(f"{what} is not a number: {quoted(str(value))}")
    if (isinstance(value, int) and abs(value) > 10**15) or not math.isfinite(value):
        raise PlanError(f"{what} is not a number that can be used")
    if abs(value) > 1e15:
        raise PlanError(f"{what} is too large: {value:g}")
    if signed:
        return
    if value < 0 or (above_zero and value == 0):
        raise PlanError(f"{what} must be {'above 0' if above_zero else '0 or more'}, not {value:g}")


def check_settings(settings: Settings) -> None:
    """Raise :class:`PlanError` unless the style is known and the reference above 0."""
    if settings.cost_style not in COST_RANGES:
        raise PlanError(
            f"cost style {quoted(settings.cost_style)} is not one of {', '.join(COST_RANGES)}"
        )
    check_number(settings.reference_mbps, "reference capacity", above_zero=True)


def check_node(node: Node) -> None:
    """Raise :class:`PlanError` unless the node has an id and usable coordinates."""
    kind = "segment" if isinstance(node, Segment) else "router"
    if not node.id:
        raise PlanError(f"a {kind} has an empty id")
    if (node.x is None) != (node.y is None):
        raise PlanError(f"{kind} {quoted(node.id)}: x and y go together")
    for axis, value in (("x", node.x), ("y", node.y)):
        if value is not None:
            check_number(value, f"{kind} {quoted(node.id)}: {axis}", signed=True)


def check_link(link: Link, source: Node | None, target: Node | None, style: str) -> None:
    """Raise :class:`PlanError` unless the link joins two nodes as a link may, with costs
    of the plan's style and usable numbers."""
    name = f"link {quoted(link.id)}"
    if not link.id:
        raise PlanError("a link has an empty id")
    for end, node in ((link.source, source), (link.target, target)):
        if node is None:
            raise PlanError(f"{name}: there is no router or segment {quoted(end)}")
    if link.source == link.target:
        raise PlanError(f"{name} joins {quoted(link.source)} to itself")
    if isinstance(source, Segment) and isinstance(target, Segment):
        raise PlanError(f"{name} joins two segments; put a router between them")
    for node, cost in ((source, link.cost), (target, link.cost_back)):
        if not isinstance(node, Segment):
            check_cost(cost, link.id, style)
        elif cost != 0:
            raise PlanError(f"{name}: leaving segment {quoted(node.id)} costs 0, not {cost}")
    if link.capacity_mbps is not None:
        check_number(link.capacity_mbps, f"{name}: capacity", above_zero=True)
    if link.delay_ms is not None:
        check_number(link.delay_ms, f"{name}: delay")


def check_demand(demand: Demand, source: Node | None, target: Node | None) -> None:
    """Raise :class:`PlanError` unless both ends are routers and the volume is usable."""
    name = f"demand from {quoted(demand.source)} to {quoted(demand.target)}"
    for end, node in ((demand.source, source), (demand.target, target)):
        if node is None or isinstance(node, Segment):
            raise PlanError(f"{name}: there is no router {quoted(end)}")
    if demand.source == demand.target:
        raise PlanError(f"{name}: a demand joins two different routers")
    check_number(demand.mbps, f"{name}: volume")
