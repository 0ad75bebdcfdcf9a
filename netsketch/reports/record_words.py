"""What a record says of things and changes: names on one line, steps as instructions."""

from __future__ import annotations

import unicodedata
from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass

from netsketch.model import (
    AddedLink,
    Drained,
    LinkCost,
    LinkState,
    NodeState,
    Plan,
    Router,
    TrialChange,
)
from netsketch.routing import NextHop

LONGEST = 60
"""Characters of a name that a record shows."""

MOST_HOPS = 4
"""Next hops of a route that a record names; the others are counted."""

_JOINERS = "\u200c\u200d\ufe0f"  # inside words and emoji; other invisible characters go
_ISOLATE, _POP = "\u2068", "\u2069"
_RIGHT_TO_LEFT = frozenset({"R", "AL"})


def shown(text: str) -> str:
    """Return a name as a record shows it: on one line, without control or direction
    characters, cut to :data:`LONGEST`. One written from right to left is isolated (Unicode
    Annex 9), so that the words around it keep their order."""
    clean = "".join(c if c.isprintable() or c in _JOINERS else " " for c in text[: 4 * LONGEST])
    line = " ".join(clean.split())
    if len(line) > LONGEST or len(text) > 4 * LONGEST:
        line = line[:LONGEST].rstrip() + "…"
    turned = any(unicodedata.bidirectional(c) in _RIGHT_TO_LEFT for c in line)
    return f"{_ISOLATE}{line}{_POP}" if turned else line


class Names:
    """The names of a plan's things in a record, and of the links its trial adds: a label that
    two share gets the id too."""

    def __init__(self, plan: Plan) -> None:
        self._plan = plan
        labels = {node.id: shown(node.label) for node in plan.nodes}
        shared = Counter(labels.values())
        self._nodes = {
            key: label if shared[label] == 1 else f"{label} ({shown(key)})"
            for key, label in labels.items()
        }
        self._ends = {link.id: link.ends for link in plan.links}
        self._ends.update({new.link: (new.source, new.target) for new in plan.trial.added()})

    def node(self, key: str) -> str:
        """Return "Quay-1", or "Quay-1 (r1)" where another has that name."""
        return self._nodes[key]

    def link(self, key: str) -> str:
        """Return "l4 (Quay-1 – Gate)"."""
        ends = " – ".join(self.node(end) for end in self._ends[key])
        return f"{shown(key)} ({ends})"

    def group(self, key: str) -> str:
        """Return "north duct", the name of a shared-risk group."""
        return shown(self._plan.groups[key].label)

    def next_hops(self, hops: Iterable[NextHop]) -> str:
        """Return "Quay-1 over l4 · Quay-2 over l7"."""
        listed = [
            f"{'attached' if hop.router is None else self.node(hop.router)} over {shown(hop.link)}"
            for hop in hops
        ]
        more = len(listed) - MOST_HOPS
        return " · ".join([*listed[:MOST_HOPS], *([f"and {more} more"] if more > 0 else [])])


@dataclass(frozen=True, slots=True)
class Step:
    """One thing to do, and the value it takes away and sets."""

    action: str
    was: str
    becomes: str


def steps(plan: Plan, names: Names) -> tuple[Step, ...]:
    """Return the changes of the trial in their order."""
    return tuple(_step(plan, names, change, forward=True) for change in plan.trial)


def way_back(plan: Plan, names: Names) -> tuple[Step, ...]:
    """Return what undoes :func:`steps`, the last one first."""
    changes = reversed(plan.trial.changes)
    return tuple(_step(plan, names, change, forward=False) for change in changes)


def _step(plan: Plan, names: Names, change: TrialChange, *, forward: bool) -> Step:
    if isinstance(change, AddedLink):
        return _link_step(names, change, forward)
    if isinstance(change, LinkCost):
        return _cost_step(plan, names, change, forward)
    if isinstance(change, LinkState):
        states = "up" if plan.links[change.link].up else "down", "up" if change.up else "down"
        what = f"link {names.link(change.link)}"
    elif isinstance(change, NodeState):
        node = plan.nodes[change.node]
        states = "up" if node.up else "down", "up" if change.up else "down"
        kind = "router" if isinstance(node, Router) else "segment"
        what = f"{kind} {names.node(change.node)}"
    else:
        states = _drained_states(plan, change)
        what = f"router {names.node(change.node)}"
    was, becomes = states if forward else states[::-1]
    return Step(_ACTIONS[becomes].format(what=what), was, becomes)


_ACTIONS = {
    "up": "Bring {what} up",
    "down": "Take {what} down",
    "drained": "Drain {what}",
    "in service": "Return {what} to service",
}


def _link_step(names: Names, change: AddedLink, forward: bool) -> Step:
    ends = names.node(change.source), names.node(change.target)
    costs = f"cost {change.cost} from {ends[0]}, {change.cost_back} from {ends[1]}"
    what = f"link {shown(change.link)} from {ends[0]} to {ends[1]}"
    if forward:
        return Step(f"Bring new {what} into service", "not there", costs)
    return Step(f"Take {what} out again", costs, "not there")


def _drained_states(plan: Plan, change: Drained) -> tuple[str, str]:
    node = plan.nodes[change.node]
    was = isinstance(node, Router) and node.drained
    return ("drained" if was else "in service"), ("drained" if change.drained else "in service")


def _cost_step(plan: Plan, names: Names, change: LinkCost, forward: bool) -> Step:
    link = plan.links[change.link]
    pairs = zip((link.cost, link.cost_back), (change.cost, change.cost_back), strict=True)
    sides = [
        (names.node(end), *(pair if forward else pair[::-1]))
        for end, pair in zip(link.ends, pairs, strict=True)
        if isinstance(plan.nodes[end], Router)
    ]
    word = "Set" if forward else "Set back"
    action = f"{word} the cost of link {names.link(change.link)}"
    (_, was, becomes), *others = sides
    if all((old, new) == (was, becomes) for _, old, new in others):
        return Step(action, str(was), str(becomes))
    changed = [side for side in sides if side[1] != side[2]] or sides
    return Step(
        action,
        ", ".join(f"{old} leaving {end}" for end, old, _ in changed),
        ", ".join(f"{new} leaving {end}" for end, _, new in changed),
    )
