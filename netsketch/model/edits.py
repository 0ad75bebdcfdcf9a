"""Edits by name: each function reads the plan and returns one Edit; none changes it."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

import msgspec

from netsketch.model.checks import PlanError, check_cost, quoted
from netsketch.model.costs import highest_cost
from netsketch.model.edit import Add, Change, ChangeSettings, ChangeTrial, Edit, Remove, Step
from netsketch.model.items import (
    Demand,
    Item,
    KeptTrial,
    Link,
    Node,
    Router,
    Segment,
    SharedRiskGroup,
    link_of,
)
from netsketch.model.plan import Plan
from netsketch.model.trial import (
    AddedLink,
    Drained,
    LinkCost,
    LinkState,
    NodeState,
    Trial,
    TrialChange,
)

replace = msgspec.structs.replace


def counted(number: int, singular: str) -> str:
    """Return "1 link", "3 links"."""
    return f"{number} {singular}" if number == 1 else f"{number} {singular}s"


def add(plan: Plan, *items: Item, label: str = "") -> Edit:
    """Return the edit that puts ``items`` behind what is there, in this order."""
    ahead: dict[int, int] = {}
    steps: list[Step] = []
    for item in items:
        shelf = plan.shelf_of(item)
        offset = ahead.get(id(shelf), 0)
        steps.append(Add(item, len(shelf) + offset))
        ahead[id(shelf)] = offset + 1
    return Edit(label or f"add {counted(len(items), 'thing')}", tuple(steps))


def add_router(plan: Plan, x: float, y: float, name: str = "", site: str = "") -> Edit:
    """Return the edit that draws a new router."""
    key = plan.unused_id("r")
    router = Router(id=key, name=name or key.upper(), site=site, x=x, y=y)
    return add(plan, router, label=f"draw router {router.label}")


def add_segment(plan: Plan, x: float, y: float, name: str = "") -> Edit:
    """Return the edit that draws a new segment."""
    key = plan.unused_id("s")
    segment = Segment(id=key, name=name or key.upper(), x=x, y=y)
    return add(plan, segment, label=f"draw segment {segment.label}")


def new_link(plan: Plan, source: str, target: str, cost: int = 10, **fields: Any) -> Link:
    """Return a link with an unused id and the costs its ends ask for (0 at a segment)."""
    ends = [plan.nodes[source], plan.nodes[target]]
    out, back = (0 if isinstance(end, Segment) else cost for end in ends)
    return Link(
        id=plan.unused_id("l"), source=source, target=target, cost=out, cost_back=back, **fields
    )


def add_link(plan: Plan, source: str, target: str, cost: int = 10) -> Edit:
    """Return the edit that draws a new link."""
    link = new_link(plan, source, target, cost)
    ends = f"{plan.nodes[source].label} to {plan.nodes[target].label}"
    return add(plan, link, label=f"draw link {ends}")


def remove(plan: Plan, nodes: Iterable[str] = (), links: Iterable[str] = ()) -> Edit:
    """Return the edit that deletes these nodes and links with all that hangs on them:
    the nodes' links and demands, and the trial's changes to any of them."""
    gone_nodes = dict.fromkeys(nodes)
    gone_links = dict.fromkeys(links)
    for node in gone_nodes:
        gone_links.update(dict.fromkeys(link.id for link in plan.links_at(node)))
    demands = [d for d in plan.demands if d.source in gone_nodes or d.target in gone_nodes]
    steps: list[Step] = []
    trial = plan.trial.without_things(gone_nodes, gone_links)
    if trial != plan.trial:
        steps.append(ChangeTrial(plan.trial, trial))
    for kept in plan.trials:
        left = kept.trial.without_things(gone_nodes, gone_links)
        if left != kept.trial:
            steps.append(Change(kept, replace(kept, changes=left.changes)))
    for items in (
        demands,
        [plan.links[key] for key in gone_links],
        [plan.nodes[key] for key in gone_nodes],
    ):
        steps.extend(_removals(plan, items))
    return Edit(f"delete {_described(plan, gone_nodes, gone_links)}", tuple(steps))


def _removals(plan: Plan, items: Iterable[Item]) -> list[Step]:
    """Remove from the back, so that each stored position holds when it is undone."""
    listed = list(items)
    if not listed:
        return []
    shelf = plan.shelf_of(listed[0])
    where = {key: index for index, key in enumerate(shelf.keys())}
    return [
        Remove(item, where[item.key])
        for item in sorted(listed, key=lambda item: where[item.key], reverse=True)
    ]


def _described(plan: Plan, nodes: Iterable[str], links: Iterable[str]) -> str:
    nodes, links = list(nodes), list(links)
    if len(nodes) == 1:
        return plan.nodes[nodes[0]].label
    if nodes:
        kinds = [plan.nodes[key] for key in nodes]
        routers = sum(isinstance(node, Router) for node in kinds)
        parts = [counted(routers, "router")] if routers else []
        if len(kinds) > routers:
            parts.append(counted(len(kinds) - routers, "segment"))
        return " and ".join(parts)
    return f"link {links[0]}" if len(links) == 1 else counted(len(links), "link")


def change(plan: Plan, changed: Iterable[Item], label: str, merge: str = "") -> Edit:
    """Return the edit that puts each item in the place of the one with its key; items
    that are as before are left out."""
    steps: list[Step] = []
    for new in changed:
        old = plan.shelf_of(new).get(new.key)
        if old is None:
            raise PlanError(f"there is no {quoted(str(new.key))} to change")
        if old != new:
            steps.append(Change(old, new))
    return Edit(label, tuple(steps), merge)


def move(plan: Plan, places: Mapping[str, tuple[float, float]], merge: str = "") -> Edit:
    """Return the edit that moves nodes to absolute places."""
    moved: list[Item] = [replace(plan.nodes[key], x=x, y=y) for key, (x, y) in places.items()]
    return change(plan, moved, f"move {_described(plan, places, ())}", merge)


def rename(plan: Plan, node: str, name: str) -> Edit:
    """Return the edit that gives a router or segment another name."""
    old: Node = plan.nodes[node]
    return change(plan, [replace(old, name=name)], f"rename {old.label}")


def set_costs(plan: Plan, link: str, cost: int, cost_back: int) -> Edit:
    """Return the edit that gives a link these costs in the plan."""
    return change(
        plan,
        [replace(plan.links[link], cost=cost, cost_back=cost_back)],
        f"set cost of link {link}",
    )


def set_groups(plan: Plan, link: str, groups: Iterable[str]) -> Edit:
    """Return the edit that makes ``groups`` (ids) the shared-risk groups of a link; groups
    that are not there yet are made with it."""
    wanted = tuple(dict.fromkeys(groups))
    fresh = [SharedRiskGroup(id=key) for key in wanted if key not in plan.groups]
    made = add(plan, *fresh).steps
    changed = change(plan, [replace(plan.links[link], groups=wanted)], "").steps
    return Edit(f"set shared risk of link {link}", (*made, *changed))


def set_settings(plan: Plan, **fields: Any) -> Edit:
    """Return the edit that changes the plan's settings."""
    return Edit(
        "change plan settings", (ChangeSettings(plan.settings, replace(plan.settings, **fields)),)
    )


def set_demands(plan: Plan, demands: Iterable[Demand]) -> Edit:
    """Return the edit that puts these demands in the place of all there are."""
    steps = _removals(plan, plan.demands)
    steps.extend(Add(demand, index) for index, demand in enumerate(demands))
    return Edit("set demands", tuple(steps))


# -- the trial ------------------------------------------------------------------------


def try_changes(plan: Plan, changes: Iterable[TrialChange], label: str) -> Edit:
    """Return the edit that lays ``changes`` over the plan, each in the place of an
    earlier one for the same thing; a change to what the plan has anyway is taken out."""
    trial = plan.trial
    for wanted in changes:
        trial = trial.with_change(wanted)
        if _is_as_planned(plan, wanted):
            trial = trial.without(wanted)
    steps: tuple[Step, ...] = () if trial == plan.trial else (ChangeTrial(plan.trial, trial),)
    return Edit(label, steps)


def _is_as_planned(plan: Plan, change: TrialChange) -> bool:
    if isinstance(change, AddedLink):
        return False
    if isinstance(change, LinkState):
        link = plan.links.get(change.link)
        return link is not None and link.up == change.up
    if isinstance(change, LinkCost):
        link = plan.links.get(change.link)
        return link is not None and (link.cost, link.cost_back) == (change.cost, change.cost_back)
    node = plan.nodes.get(change.node)
    if isinstance(change, NodeState):
        return node is not None and node.up == change.up
    return isinstance(node, Router) and node.drained == change.drained


def is_up(plan: Plan, *, link: str | None = None, node: str | None = None) -> bool:
    """Return whether the link or node is up in the trial over the plan (its own state:
    a link between two downed routers is still up)."""
    if link is not None:
        state = plan.trial.find(LinkState, link)
        return state.up if isinstance(state, LinkState) else plan.links[link].up
    assert node is not None
    state = plan.trial.find(NodeState, node)
    return state.up if isinstance(state, NodeState) else plan.nodes[node].up


def is_drained(plan: Plan, node: str) -> bool:
    """Return whether the router is drained in the trial over the plan."""
    state = plan.trial.find(Drained, node)
    if isinstance(state, Drained):
        return state.drained
    found = plan.nodes[node]
    return isinstance(found, Router) and found.drained


def costs_in_trial(plan: Plan, link: str) -> tuple[int, int]:
    """Return the link's costs (leaving source, leaving target) in the trial."""
    state = plan.trial.find(LinkCost, link)
    if isinstance(state, LinkCost):
        return state.cost, state.cost_back
    return plan.links[link].cost, plan.links[link].cost_back


def toggle_down(plan: Plan, nodes: Iterable[str] = (), links: Iterable[str] = ()) -> Edit:
    """Return the edit that takes these down in the trial; when all are down already,
    the edit that brings them up."""
    nodes, links = list(nodes), list(links)
    up = not any([is_up(plan, node=n) for n in nodes] + [is_up(plan, link=key) for key in links])
    changes: list[TrialChange] = [NodeState(key, up) for key in nodes]
    changes.extend(LinkState(key, up) for key in links)
    what = _described(plan, nodes, links)
    return try_changes(plan, changes, f"bring {what} up" if up else f"take {what} down")


def toggle_drained(plan: Plan, nodes: Iterable[str]) -> Edit:
    """Return the edit that drains these routers in the trial, or puts them all back into
    service when all are drained."""
    nodes = [key for key in nodes if isinstance(plan.nodes[key], Router)]
    drained = not all(is_drained(plan, key) for key in nodes)
    what = _described(plan, nodes, ())
    label = f"drain {what}" if drained else f"return {what} to service"
    return try_changes(plan, [Drained(key, drained) for key in nodes], label)


def drain_by_cost(plan: Plan, node: str) -> Edit:
    """Return the edit that sets every cost of leaving a router to the style's maximum in
    the trial, so that it carries transit traffic only as a last resort (RFC 6987)."""
    high = highest_cost(plan.settings.cost_style)
    changes: list[TrialChange] = []
    for link in plan.links_at(node):
        cost, back = costs_in_trial(plan, link.id)
        changes.append(
            LinkCost(link.id, high, back) if link.source == node else LinkCost(link.id, cost, high)
        )
    return try_changes(plan, changes, f"drain {plan.nodes[node].label} by cost")


def try_costs(plan: Plan, link: str, cost: int, cost_back: int) -> Edit:
    """Return the edit that gives a link these costs in the trial.

    Raises :class:`PlanError` when a cost is outside the plan's range.
    """
    ends = plan.nodes[plan.links[link].source], plan.nodes[plan.links[link].target]
    for end, value in zip(ends, (cost, cost_back), strict=True):
        if not isinstance(end, Segment):
            check_cost(value, link, plan.settings.cost_style)
    return try_changes(plan, [LinkCost(link, cost, cost_back)], f"try cost of link {link}")


def try_link(plan: Plan, source: str, target: str, cost: int = 10) -> Edit:
    """Return the edit that adds a link in the trial only."""
    link = new_link(plan, source, target, cost)
    added = AddedLink(link.id, source, target, link.cost, link.cost_back)
    ends = f"{plan.nodes[source].label} to {plan.nodes[target].label}"
    return try_changes(plan, [added], f"try a link {ends}")


def drop_changes(plan: Plan, changes: Iterable[TrialChange]) -> Edit:
    """Return the edit that takes these changes out of the trial."""
    return Edit("drop a trial change", (ChangeTrial(plan.trial, plan.trial.without(*changes)),))


def keep_trial(plan: Plan, name: str) -> Edit:
    """Return the edit that puts the trial by under a name, in the place of another with
    that name; the trial stays laid over the plan."""
    kept = KeptTrial(name=name, changes=plan.trial.changes)
    if name in plan.trials:
        return change(plan, [kept], f"keep the trial as {name}")
    return add(plan, kept, label=f"keep the trial as {name}")


def lay_kept(plan: Plan, name: str) -> Edit:
    """Return the edit that makes a kept trial the trial."""
    trial = plan.trials[name].trial
    steps = (ChangeTrial(plan.trial, trial),) if trial != plan.trial else ()
    return Edit(f"lay the trial {name} over the plan", steps)


def forget_trial(plan: Plan, name: str) -> Edit:
    """Return the edit that drops a kept trial."""
    return Edit(f"forget the trial {name}", tuple(_removals(plan, [plan.trials[name]])))


def trial_items(plan: Plan, trial: Trial) -> list[Item]:
    """Return every node and link that ``trial`` changes, with the trial's values, and the
    links it adds."""
    changed: dict[tuple[str, str], Item] = {}
    for wanted in trial:
        if isinstance(wanted, AddedLink):
            changed["link", wanted.link] = link_of(wanted)
        elif isinstance(wanted, LinkState | LinkCost):
            place = ("link", wanted.link)
            link = changed.get(place, plan.links[wanted.link])
            values = (
                {"up": wanted.up}
                if isinstance(wanted, LinkState)
                else {"cost": wanted.cost, "cost_back": wanted.cost_back}
            )
            changed[place] = replace(link, **values)
        else:
            place = ("node", wanted.node)
            node = changed.get(place, plan.nodes[wanted.node])
            values = (
                {"up": wanted.up} if isinstance(wanted, NodeState) else {"drained": wanted.drained}
            )
            changed[place] = replace(node, **values)
    return list(changed.values())


def adopt(plan: Plan) -> Edit:
    """Return the edit that makes the trial the plan."""
    added = {each.link for each in plan.trial.added()}
    items = trial_items(plan, plan.trial)
    steps: list[Step] = [ChangeTrial(plan.trial, Trial())]
    for kept in plan.trials:  # what becomes the plan's is no longer for them to add
        left = tuple(c for c in kept.changes if not (isinstance(c, AddedLink) and c.link in added))
        if left != kept.changes:
            steps.append(Change(kept, replace(kept, changes=left)))
    steps += change(plan, [i for i in items if i.key not in added or isinstance(i, Node)], "").steps
    steps += add(plan, *(i for i in items if isinstance(i, Link) and i.id in added)).steps
    return Edit("adopt the trial", tuple(steps))


def discard(plan: Plan) -> Edit:
    """Return the edit that drops the trial."""
    return Edit("discard the trial", (ChangeTrial(plan.trial, Trial()),))
