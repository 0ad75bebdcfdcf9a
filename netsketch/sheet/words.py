"""What a plate, a rail or a link says of itself when the pointer rests on it."""

from __future__ import annotations

import html

from netsketch.model import Link, Plan, Segment, edits
from netsketch.sheet.lettering import flat


def node_words(plan: Plan, key: str) -> str:
    """Return a node's name, site and state as rich text."""
    node = plan.nodes[key]
    states = [] if edits.is_up(plan, node=key) else ["down"]
    if edits.is_drained(plan, key):
        states.append("drained")
    kind = "LAN segment" if isinstance(node, Segment) else "router"
    return _lines(node.label, ", ".join([kind, *filter(None, [node.site]), *states]))


def link_words(plan: Plan, key: str) -> str:
    """Return a link's ends, costs, capacity and state as rich text."""
    link = plan.links[key]
    costs = edits.costs_in_trial(plan, key)
    lines = [
        f"cost {cost} from {plan.nodes[end].label}"
        for end, cost in zip(link.ends, costs, strict=True)
        if not isinstance(plan.nodes[end], Segment)
    ]
    lines.extend(_figures(link))
    if not edits.is_up(plan, link=key):
        lines.append("down")
    ends = " – ".join(plan.nodes[end].label for end in link.ends)
    return _lines(f"{link.id}: {ends}", *lines)


def _figures(link: Link) -> list[str]:
    found = []
    if link.capacity_mbps is not None:
        found.append(f"{link.capacity_mbps:,g} Mbit/s")
    if link.delay_ms is not None:
        found.append(f"{link.delay_ms:g} ms")
    return found


def _lines(head: str, *rest: str) -> str:
    """Names may hold anything: nothing of them is taken for markup."""
    return "<br>".join([f"<b>{_safe(head)}</b>", *map(_safe, rest)])


def _safe(text: str) -> str:
    return html.escape(flat(text))
