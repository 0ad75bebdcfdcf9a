"""The trial: provisional changes laid over the plan, never a copied plan.

A trial change names one aspect of one thing and its value in the trial, so it stays
valid while the plan below it is edited. Adopting turns it into an ordinary Edit
(:func:`netsketch.model.edits.adopt`).
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator

import msgspec


class LinkState(msgspec.Struct, frozen=True, tag="link state", tag_field="change"):
    """The link is up or down in the trial."""

    link: str
    up: bool = False


class NodeState(msgspec.Struct, frozen=True, tag="node state", tag_field="change"):
    """The router or segment is up or down in the trial."""

    node: str
    up: bool = False


class Drained(msgspec.Struct, frozen=True, tag="drained", tag_field="change"):
    """The router is drained, or in service again, in the trial."""

    node: str
    drained: bool = True


class LinkCost(msgspec.Struct, frozen=True, tag="link cost", tag_field="change"):
    """The link has these costs in the trial (leaving source, leaving target)."""

    link: str
    cost: int
    cost_back: int


class AddedLink(msgspec.Struct, frozen=True, tag="added link", tag_field="change"):
    """A link that only the trial has, up, with everything a link needs."""

    link: str
    source: str
    target: str
    cost: int
    cost_back: int
    capacity_mbps: int | float | None = None
    delay_ms: int | float | None = None


TrialChange = LinkState | NodeState | Drained | LinkCost | AddedLink


def subject(change: TrialChange) -> tuple[str, str]:
    """Return what is changed: one trial holds at most one change for each subject."""
    if isinstance(change, LinkState | LinkCost | AddedLink):
        return type(change).__name__, change.link
    return type(change).__name__, change.node


class Trial(msgspec.Struct, frozen=True):
    """An ordered set of changes, one per subject. Falsy when empty."""

    changes: tuple[TrialChange, ...] = ()

    def __bool__(self) -> bool:
        return bool(self.changes)

    def __iter__(self) -> Iterator[TrialChange]:
        return iter(self.changes)

    def find(self, change_type: type, key: str) -> TrialChange | None:
        """Return the change of this type for the link or node ``key``, if there is one."""
        wanted = (change_type.__name__, key)
        return next((c for c in self.changes if subject(c) == wanted), None)

    def with_change(self, change: TrialChange) -> Trial:
        """Return a trial with ``change`` in it, in the place of an earlier one for the
        same subject."""
        wanted = subject(change)
        kept = [change if subject(c) == wanted else c for c in self.changes]
        return Trial(tuple(kept) if change in kept else (*kept, change))

    def without(self, *gone: TrialChange) -> Trial:
        """Return a trial without these changes."""
        return Trial(tuple(c for c in self.changes if c not in gone))

    def without_things(self, nodes: Iterable[str] = (), links: Iterable[str] = ()) -> Trial:
        """Return a trial without any change to these nodes and links."""
        gone_nodes, gone_links = set(nodes), set(links)

        def stays(change: TrialChange) -> bool:
            if isinstance(change, AddedLink):
                ends = {change.source, change.target}
                return change.link not in gone_links and not ends & gone_nodes
            if isinstance(change, LinkState | LinkCost):
                return change.link not in gone_links
            return change.node not in gone_nodes

        return Trial(tuple(change for change in self.changes if stays(change)))

    def added(self) -> list[AddedLink]:
        """Return the links that only this trial has."""
        return [change for change in self.changes if isinstance(change, AddedLink)]
