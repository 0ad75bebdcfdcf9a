"""The plan: the network as drawn, kept whole by checking every edit."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any, Generic, TypeVar

import msgspec

from netsketch.model.checks import (
    PlanError,
    check_demand,
    check_link,
    check_node,
    check_settings,
    quoted,
)
from netsketch.model.edit import (
    Add,
    Change,
    ChangeSettings,
    ChangeTrial,
    Edit,
    Remove,
    Step,
    inverse_step,
)
from netsketch.model.items import (
    Demand,
    Item,
    KeptTrial,
    Link,
    Node,
    Router,
    Segment,
    Settings,
    SharedRiskGroup,
    link_of,
)
from netsketch.model.trial import AddedLink, Drained, LinkCost, LinkState, Trial

T = TypeVar("T", bound=Item)


class Shelf(Generic[T]):
    """Items of one kind in file order, found by key in constant time.

    Putting in and taking out at a position is O(n) in the list; values are shared
    between copies because they are frozen.
    """

    def __init__(self, items: dict[Any, T] | None = None, order: list[Any] | None = None) -> None:
        self._items: dict[Any, T] = dict(items or {})
        self._order: list[Any] = list(self._items) if order is None else list(order)

    def __len__(self) -> int:
        return len(self._order)

    def __iter__(self) -> Iterator[T]:
        return (self._items[key] for key in self._order)

    def __contains__(self, key: object) -> bool:
        return key in self._items

    def __getitem__(self, key: Any) -> T:
        return self._items[key]

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Shelf) and list(self) == list(other)

    __hash__ = None  # type: ignore[assignment]

    def get(self, key: Any) -> T | None:
        """Return the item with this key, or ``None``."""
        return self._items.get(key)

    def keys(self) -> list[Any]:
        """Return the keys in order."""
        return list(self._order)

    def position(self, key: Any) -> int:
        """Return where the item with this key stands."""
        if self._order and self._order[-1] == key:
            return len(self._order) - 1
        return self._order.index(key)

    def copy(self) -> Shelf[T]:
        """Return an independent shelf with the same items."""
        return Shelf(self._items, self._order)

    def _put(self, item: T, index: int) -> None:
        self._items[item.key] = item
        self._order.insert(index, item.key)

    def _take(self, key: Any, index: int) -> None:
        del self._items[key]
        del self._order[index]

    def _swap(self, item: T) -> None:
        self._items[item.key] = item


class ChangeSet(msgspec.Struct, frozen=True):
    """What one edit did, in order, and the revision the plan has reached by it."""

    revision: int
    steps: tuple[Step, ...]


_KIND_NAMES: dict[type, str] = {
    Router: "router",
    Segment: "segment",
    Link: "link",
    SharedRiskGroup: "shared-risk group",
    Demand: "demand",
    KeptTrial: "trial",
}


class Plan:
    """Routers, segments, links, shared-risk groups and demands, and the trial over them.

    :meth:`apply` is the only way it changes. ``revision`` grows with every edit and is
    never used twice. Equality compares what would be saved, order included.
    """

    def __init__(self, settings: Settings | None = None) -> None:
        self.settings = settings or Settings()
        check_settings(self.settings)
        self.nodes: Shelf[Node] = Shelf()
        self.links: Shelf[Link] = Shelf()
        self.groups: Shelf[SharedRiskGroup] = Shelf()
        self.demands: Shelf[Demand] = Shelf()
        self.trials: Shelf[KeptTrial] = Shelf()
        self.trial = Trial()
        self.revision = 0
        self._at: dict[str, dict[str, None]] = {}
        self._demands_at: dict[str, int] = {}
        self._in_group: dict[str, int] = {}

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Plan) and self._saved() == other._saved()

    __hash__ = None  # type: ignore[assignment]

    def _saved(self) -> tuple[object, ...]:
        shelves = self.nodes, self.links, self.groups, self.demands, self.trials
        return self.settings, *shelves, self.trial

    def routers(self) -> list[Router]:
        """Return the routers in order."""
        return [node for node in self.nodes if isinstance(node, Router)]

    def segments(self) -> list[Segment]:
        """Return the segments in order."""
        return [node for node in self.nodes if isinstance(node, Segment)]

    def links_at(self, node: str) -> list[Link]:
        """Return the links with an end at ``node``, in the order they were joined to it."""
        return [self.links[key] for key in self._at[node]]

    def links_in_group(self, group: str) -> list[Link]:
        """Return the links that share this risk."""
        return [link for link in self.links if group in link.groups]

    def unused_id(self, prefix: str, taken: set[str] | None = None) -> str:
        """Return the first of ``prefix1``, ``prefix2``, … that names nothing yet, neither
        in the plan nor in ``taken``."""
        number = len(self.links if prefix == "l" else self.nodes) + 1
        shelves: dict[str, Shelf[Any]] = {"l": self.links, "g": self.groups}
        shelf = shelves.get(prefix, self.nodes)
        taken = (taken or set()) | {added.link for added in self.added_links()}
        while f"{prefix}{number}" in shelf or f"{prefix}{number}" in taken:
            number += 1
        return f"{prefix}{number}"

    def snapshot(self) -> Plan:
        """Return a copy that later edits do not touch, with the same revision. O(items)."""
        copy = Plan(self.settings)
        copy.nodes, copy.links = self.nodes.copy(), self.links.copy()
        copy.groups, copy.demands = self.groups.copy(), self.demands.copy()
        copy.trials = self.trials.copy()
        copy.trial, copy.revision = self.trial, self.revision
        copy._at = {node: dict(links) for node, links in self._at.items()}
        copy._demands_at, copy._in_group = dict(self._demands_at), dict(self._in_group)
        return copy

    def apply(self, edit: Edit) -> Edit:
        """Apply every step of ``edit`` in order and return the inverse.

        Raises :class:`PlanError` when a step does not fit; the plan is then as before.
        """
        done: list[Step] = []
        try:
            for step in edit.steps:
                self._do(step)
                done.append(step)
        except PlanError:
            for step in reversed(done):
                self._do(inverse_step(step))
            raise
        self.revision += 1
        return edit.inverse()

    # -- single steps ---------------------------------------------------------------

    def _do(self, step: Step) -> None:
        if isinstance(step, Add):
            self._add(step.item, step.index)
        elif isinstance(step, Remove):
            self._remove(step.item, step.index)
        elif isinstance(step, Change):
            self._change(step.old, step.new)
        elif isinstance(step, ChangeSettings):
            self._change_settings(step.old, step.new)
        else:
            self._change_trial(step)

    def shelf_of(self, item: Item) -> Shelf[Any]:
        """Return the shelf on which items of this kind stand."""
        if isinstance(item, Link):
            return self.links
        if isinstance(item, SharedRiskGroup):
            return self.groups
        if isinstance(item, KeptTrial):
            return self.trials
        return self.demands if isinstance(item, Demand) else self.nodes

    def _name(self, item: Item) -> str:
        if isinstance(item, Demand):
            return f"demand from {quoted(item.source)} to {quoted(item.target)}"
        return f"{_KIND_NAMES[type(item)]} {quoted(item.key)}"

    def _check(self, item: Item) -> None:
        if isinstance(item, Link):
            ends = self.nodes.get(item.source), self.nodes.get(item.target)
            check_link(item, *ends, self.settings.cost_style)
            for group in item.groups:
                if group not in self.groups:
                    raise PlanError(
                        f"link {quoted(item.id)}: there is no shared-risk group {quoted(group)}"
                    )
            if len(set(item.groups)) != len(item.groups):
                raise PlanError(f"link {quoted(item.id)} names a shared-risk group twice")
        elif isinstance(item, Demand):
            check_demand(item, self.nodes.get(item.source), self.nodes.get(item.target))
        elif isinstance(item, SharedRiskGroup):
            if not item.id:
                raise PlanError("a shared-risk group has an empty id")
        elif isinstance(item, KeptTrial):
            if not item.name:
                raise PlanError("a trial that is kept needs a name")
            self._check_trial(item.trial, self.settings.cost_style)
        else:
            check_node(item)

    def _add(self, item: Item, index: int) -> None:
        shelf = self.shelf_of(item)
        if item.key in shelf:
            raise PlanError(f"{self._name(item)} is there already")
        if not 0 <= index <= len(shelf):
            raise PlanError(f"{self._name(item)}: no position {index}")
        self._check(item)
        if isinstance(item, Link) and item.id in {added.link for added in self.added_links()}:
            raise PlanError(f"{self._name(item)} is added by a trial; adopt or drop that first")
        shelf._put(item, index)
        self._count(item, 1)

    def _remove(self, item: Item, index: int) -> None:
        shelf = self.shelf_of(item)
        if shelf.get(item.key) != item:
            raise PlanError(f"{self._name(item)} is not as this edit expects")
        if not 0 <= index < len(shelf) or shelf.position(item.key) != index:
            raise PlanError(f"{self._name(item)} does not stand at position {index}")
        self._check_unused(item)
        shelf._take(item.key, index)
        self._count(item, -1)

    def _check_unused(self, item: Item) -> None:
        name = self._name(item)
        if isinstance(item, Router | Segment):
            if self._at[item.id]:
                raise PlanError(f"{name} still has links")
            if self._demands_at.get(item.id):
                raise PlanError(f"{name} still has demands")
            self._check_untried(name, nodes=[item.id])
        elif isinstance(item, Link):
            self._check_untried(name, links=[item.id])
        elif isinstance(item, SharedRiskGroup) and self._in_group.get(item.id):
            raise PlanError(f"{name} still has links")

    def _check_untried(self, name: str, **things: list[str]) -> None:
        if self.trial.without_things(**things) != self.trial:
            raise PlanError(f"{name} is changed by the trial")
        for kept in self.trials:
            if kept.trial.without_things(**things) != kept.trial:
                raise PlanError(f"{name} is changed by the trial {quoted(kept.name)}")

    def _count(self, item: Item, by: int) -> None:
        """Keep the indexes of who refers to whom."""
        if isinstance(item, Link):
            for end in item.ends:
                if by > 0:
                    self._at[end][item.id] = None
                else:
                    del self._at[end][item.id]
            for group in item.groups:
                self._in_group[group] = self._in_group.get(group, 0) + by
        elif isinstance(item, Demand):
            for end in item.key:
                self._demands_at[end] = self._demands_at.get(end, 0) + by
        elif isinstance(item, Router | Segment):
            if by > 0:
                self._at[item.id] = {}
            else:
                del self._at[item.id]

    def _change(self, old: Item, new: Item) -> None:
        shelf = self.shelf_of(old)
        if type(old) is not type(new) or old.key != new.key:
            raise PlanError(f"{self._name(old)} cannot become {self._name(new)}")
        if shelf.get(old.key) != old:
            raise PlanError(f"{self._name(old)} is not as this edit expects")
        if isinstance(old, Link) and isinstance(new, Link) and old.ends != new.ends:
            raise PlanError(f"{self._name(old)}: a link keeps its ends; draw a new one")
        self._check(new)
        shelf._swap(new)
        if isinstance(old, Link) and isinstance(new, Link) and old.groups != new.groups:
            for groups, by in ((old.groups, -1), (new.groups, 1)):
                for group in groups:
                    self._in_group[group] = self._in_group.get(group, 0) + by

    def _change_settings(self, old: Settings, new: Settings) -> None:
        if self.settings != old:
            raise PlanError("the plan's settings are not as this edit expects")
        check_settings(new)
        if new.cost_style != old.cost_style:
            for link in self.links:
                ends = self.nodes.get(link.source), self.nodes.get(link.target)
                check_link(link, *ends, new.cost_style)
            for trial in (self.trial, *(kept.trial for kept in self.trials)):
                self._check_trial(trial, new.cost_style)
        self.settings = new

    def _change_trial(self, step: ChangeTrial) -> None:
        if self.trial != step.old:
            raise PlanError("the trial is not as this edit expects")
        self._check_trial(step.new, self.settings.cost_style)
        self.trial = step.new

    def added_links(self) -> list[AddedLink]:
        """Return the links that only trials have, the trial's before those of kept ones,
        each id once."""
        trials = self.trial, *(kept.trial for kept in self.trials)
        found: dict[str, AddedLink] = {}
        for trial in trials:
            for added in trial.added():
                found.setdefault(added.link, added)
        return list(found.values())

    def _check_added(self, added: AddedLink, style: str) -> None:
        name = f"trial: link {quoted(added.link)}"
        if added.link in self.links:
            raise PlanError(f"{name} is there already")
        for other in self.added_links():
            ends = (other.source, other.target)
            if other.link == added.link and ends != (added.source, added.target):
                raise PlanError(f"{name} is added between other ends by another trial")
        link = link_of(added)
        check_link(link, self.nodes.get(link.source), self.nodes.get(link.target), style)

    def _check_trial(self, trial: Trial, style: str) -> None:
        for change in trial.changes:
            if isinstance(change, AddedLink):
                self._check_added(change, style)
            elif isinstance(change, LinkState | LinkCost):
                link = self.links.get(change.link)
                if link is None:
                    raise PlanError(f"trial: there is no link {quoted(change.link)}")
                if isinstance(change, LinkCost):
                    changed = msgspec.structs.replace(
                        link, cost=change.cost, cost_back=change.cost_back
                    )
                    ends = self.nodes.get(link.source), self.nodes.get(link.target)
                    check_link(changed, *ends, style)
            elif change.node not in self.nodes:
                raise PlanError(f"trial: there is no router or segment {quoted(change.node)}")
            elif isinstance(change, Drained) and not isinstance(self.nodes[change.node], Router):
                raise PlanError(f"trial: {quoted(change.node)} is a segment; only routers drain")
