"""What a trial change says on its chip."""

from __future__ import annotations

from netsketch.model import (
    AddedLink,
    Drained,
    LinkCost,
    LinkState,
    NodeState,
    Plan,
    Segment,
    TrialChange,
)


def chip_text(plan: Plan, change: TrialChange) -> str:
    """Return a trial change in a few words: "Quay-1 down", "l4 Quay-1–Gate 10 → 25"."""
    if isinstance(change, AddedLink):
        ends = "–".join(plan.nodes[end].label for end in (change.source, change.target))
        return f"new link {change.link} {ends}"
    if isinstance(change, LinkState):
        return f"{_link(plan, change.link)} {'up' if change.up else 'down'}"
    if isinstance(change, NodeState):
        return f"{plan.nodes[change.node].label} {'up' if change.up else 'down'}"
    if isinstance(change, Drained):
        state = "drained" if change.drained else "in service"
        return f"{plan.nodes[change.node].label} {state}"
    return f"{_link(plan, change.link)} cost {_costs(plan, change)}"


def _link(plan: Plan, key: str) -> str:
    link = plan.links[key]
    ends = "–".join(plan.nodes[end].label for end in link.ends)
    return f"{key} {ends}"


def _costs(plan: Plan, change: LinkCost) -> str:
    link = plan.links[change.link]

    def both(cost: int, back: int) -> str:
        sides = [
            str(value)
            for end, value in zip(link.ends, (cost, back), strict=True)
            if not isinstance(plan.nodes[end], Segment)
        ]
        return sides[0] if len(set(sides)) == 1 else "/".join(sides)

    return f"{both(link.cost, link.cost_back)} → {both(change.cost, change.cost_back)}"
