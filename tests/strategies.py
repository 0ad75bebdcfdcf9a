"""Hypothesis strategies: random plans that hold everything a plan can, and random edits.

Plans are small on purpose: few costs, so that equal-cost paths are common, and many
parallel links, segments, downed and drained things. Every strategy draws valid values.
"""

from __future__ import annotations

import string
from collections.abc import Callable

from hypothesis import strategies as st

from netsketch.model import (
    COST_RANGES,
    Add,
    AddedLink,
    Change,
    Demand,
    Drained,
    Edit,
    Item,
    KeptTrial,
    Link,
    LinkCost,
    LinkState,
    Node,
    NodeState,
    Plan,
    Router,
    Segment,
    Settings,
    SharedRiskGroup,
    TrialChange,
    edits,
)
from netsketch.model.edits import replace
from netsketch.model.trial import subject

LETTERS = string.ascii_letters + string.digits + " -_.:/"
ODD_LETTERS = LETTERS + "\"'\\&<>[](){}#,;\n\täßéλ東🛰"

odd_ids = st.text(ODD_LETTERS, min_size=1, max_size=6)
names = st.one_of(st.just(""), st.text(LETTERS, max_size=10), st.text(ODD_LETTERS, max_size=10))
coordinates = st.one_of(
    st.integers(-5000, 5000),
    st.floats(-1e6, 1e6, allow_nan=False, allow_subnormal=False),
)
capacities = st.one_of(st.none(), st.sampled_from([100, 1000, 10_000, 2.5]), st.integers(1, 10**9))
delays = st.one_of(st.none(), st.sampled_from([0, 0.1, 1, 2.5, 40]))
plain_values = st.one_of(st.booleans(), st.integers(-(10**6), 10**6), names)
extras = st.one_of(
    st.just({}),
    st.dictionaries(
        st.sampled_from(["owner", "x-note", "label", "pos", "weight", "Kind"]),
        st.one_of(plain_values, st.lists(plain_values, max_size=2)),
        max_size=2,
    ),
)


def costs(style: str) -> st.SearchStrategy[int]:
    """Return mostly small costs, some anywhere in the style's range."""
    low, high = COST_RANGES[style]
    return st.one_of(st.integers(low, 6), st.integers(low, high))


@st.composite
def routers(draw: st.DrawFn, key: str) -> Router:
    """Return a router with this id."""
    found = Router(id=key, up=draw(_mostly(True)), drained=draw(_mostly(False)))
    if draw(_mostly(True)):
        return found
    x, y = draw(_places())
    return replace(found, name=draw(names), site=draw(names), x=x, y=y, extra=draw(extras))


@st.composite
def segments(draw: st.DrawFn, key: str) -> Segment:
    """Return a segment with this id."""
    x, y = draw(_places())
    return Segment(id=key, name=draw(names), x=x, y=y, up=draw(_mostly(True)), extra=draw(extras))


def _places() -> st.SearchStrategy[tuple[float | None, float | None]]:
    return st.one_of(st.just((None, None)), st.tuples(coordinates, coordinates))


def _keys(prefix: str, most: int, least: int = 0) -> st.SearchStrategy[list[str]]:
    """Return ids of a kind: usually as the program gives them, sometimes any texts."""
    usual = st.integers(least, most).map(lambda n: [f"{prefix}{i}" for i in range(1, n + 1)])
    odd = st.lists(odd_ids, unique=True, min_size=least, max_size=most)
    return st.one_of(usual, usual, usual, odd)


def _mostly(usual: bool) -> st.SearchStrategy[bool]:
    return st.sampled_from([usual] * 5 + [not usual])


@st.composite
def links(draw: st.DrawFn, key: str, nodes: list[Node], groups: list[str], style: str) -> Link:
    """Return a link with this id between two of ``nodes``, at most one a segment."""
    first = draw(st.sampled_from([node for node in nodes if isinstance(node, Router)]))
    second = draw(st.sampled_from([node for node in nodes if node is not first]))
    source, target = (first, second) if draw(st.booleans()) else (second, first)
    cost = draw(costs(style))
    back = draw(costs(style)) if draw(_mostly(False)) else cost
    found = Link(
        id=key,
        source=source.id,
        target=target.id,
        cost=0 if isinstance(source, Segment) else cost,
        cost_back=0 if isinstance(target, Segment) else back,
        up=draw(_mostly(True)),
        groups=tuple(draw(_some_of(groups))),
    )
    if draw(_mostly(True)):
        return found
    return replace(found, capacity_mbps=draw(capacities), delay_ms=draw(delays), extra=draw(extras))


def _some_of(groups: list[str]) -> st.SearchStrategy[list[str]]:
    if not groups:
        return st.just([])
    return st.one_of(st.just([]), st.lists(st.sampled_from(groups), unique=True, max_size=2))


@st.composite
def plans(
    draw: st.DrawFn,
    *,
    max_nodes: int = 8,
    max_links: int = 16,
    with_trial: bool = True,
    style: str | None = None,
) -> Plan:
    """Return a plan: routers, segments, parallel links, unequal costs, groups, demands,
    things down or drained and, ``with_trial``, a trial over it."""
    settings = Settings(
        name=draw(names),
        cost_style=style or draw(st.sampled_from(list(COST_RANGES))),
        reference_mbps=draw(st.sampled_from([100_000, 100, 2.5])),
        extra=draw(extras),
        top_extra=draw(extras),
    )
    plan = Plan(settings)
    node_ids = draw(_keys("r", max_nodes))
    nodes: list[Node] = []
    for position, key in enumerate(node_ids):
        segment = position > 1 and draw(_mostly(False))
        nodes.append(draw(segments(key) if segment else routers(key)))
    groups = draw(_keys("g", 3))
    _put(plan, nodes)
    _put(plan, [SharedRiskGroup(id=key, name=draw(names), extra=draw(extras)) for key in groups])
    if len(nodes) > 1:
        link_ids = draw(_keys("l", max_links, min(len(nodes) - 1, max_links)))
        _put(plan, [draw(links(key, nodes, groups, settings.cost_style)) for key in link_ids])
        _put(plan, draw(_demands(plan)))
    if with_trial:
        for name in draw(st.lists(st.sampled_from(["A", "B"]), unique=True)) if nodes else []:
            kept = draw(st.lists(trial_changes(plan), max_size=2, unique_by=subject))
            plan.apply(edits.add(plan, KeptTrial(name=name, changes=tuple(kept))))
        changes = draw(st.lists(trial_changes(plan), max_size=3)) if nodes else []
        plan.apply(edits.try_changes(plan, changes, "try"))
    return plan


def _put(plan: Plan, items: list[Item] | list[Node] | list[Link] | list[SharedRiskGroup]) -> None:
    plan.apply(Edit("draw", tuple(Add(item, index) for index, item in enumerate(items))))


@st.composite
def _demands(draw: st.DrawFn, plan: Plan) -> list[Item]:
    ids = [router.id for router in plan.routers()]
    pairs = st.tuples(st.sampled_from(ids), st.sampled_from(ids)).filter(lambda p: p[0] != p[1])
    return [
        Demand(source=a, target=b, mbps=draw(st.sampled_from([0, 1, 2.5, 400])), extra=draw(extras))
        for a, b in draw(st.lists(pairs, unique=True, max_size=4))
    ]


def trial_changes(plan: Plan) -> st.SearchStrategy[TrialChange]:
    """Return changes that a trial over ``plan`` (not empty) can hold."""
    node = st.sampled_from(plan.nodes.keys())
    choices: list[st.SearchStrategy[TrialChange]] = [st.builds(NodeState, node, st.booleans())]
    if len(plan.nodes) > 1 and plan.routers():
        choices.append(_added_links(plan))
    if routers_there := [router.id for router in plan.routers()]:
        choices.append(st.builds(Drained, st.sampled_from(routers_there), st.booleans()))
    if len(plan.links):
        link = st.sampled_from(plan.links.keys())
        choices.append(st.builds(LinkState, link, st.booleans()))
        choices.append(link.flatmap(lambda key: _cost_change(plan, key)))
    return st.one_of(choices)


@st.composite
def _added_links(draw: st.DrawFn, plan: Plan) -> AddedLink:
    key = draw(st.sampled_from(["new 1", "new 2"]))
    before = next((added for added in plan.added_links() if added.link == key), None)
    if before is not None:  # ids of added links are one link's, whichever trial adds it
        return before
    if key in plan.links:
        return AddedLink(plan.unused_id("l"), *_some_ends(draw, plan))
    return AddedLink(key, *_some_ends(draw, plan))


def _some_ends(draw: st.DrawFn, plan: Plan) -> tuple[str, str, int, int]:
    link = draw(links("new", list(plan.nodes), [], plan.settings.cost_style))
    return link.source, link.target, link.cost, link.cost_back


def _cost_change(plan: Plan, key: str) -> st.SearchStrategy[TrialChange]:
    link, style = plan.links[key], plan.settings.cost_style
    ends = [
        st.just(0) if isinstance(plan.nodes[end], Segment) else costs(style) for end in link.ends
    ]
    return st.builds(LinkCost, st.just(key), *ends)


# -- edits ------------------------------------------------------------------------------


@st.composite
def edits_on(draw: st.DrawFn, plan: Plan) -> Edit:
    """Return an edit that ``plan`` accepts as it is now; it may have no steps."""
    makers = [_draw_router, _draw_segment, _change_settings, _set_demands]
    if len(plan.nodes):
        makers += [_delete, _move, _rename, _try, _try]
    if len(plan.routers()) > 1:
        makers.append(_draw_link)
    if len(plan.links):
        makers += [_set_costs, _set_costs, _regroup, _switch_link]
    if plan.trial:
        makers += [edits_adopt, edits_discard, _keep_trial]
    if len(plan.trials):
        makers += [_lay_kept, _forget_trial]
    return draw(st.sampled_from(makers))(draw, plan)


Maker = Callable[[st.DrawFn, Plan], Edit]


def _draw_router(draw: st.DrawFn, plan: Plan) -> Edit:
    return edits.add_router(plan, draw(coordinates), draw(coordinates), draw(names))


def _draw_segment(draw: st.DrawFn, plan: Plan) -> Edit:
    return edits.add_segment(plan, draw(coordinates), draw(coordinates), draw(names))


def _draw_link(draw: st.DrawFn, plan: Plan) -> Edit:
    key = plan.unused_id("l")
    groups = plan.groups.keys()
    return edits.add(plan, draw(links(key, list(plan.nodes), groups, plan.settings.cost_style)))


def _change_settings(draw: st.DrawFn, plan: Plan) -> Edit:
    return edits.set_settings(plan, name=draw(names), reference_mbps=draw(st.integers(1, 10**6)))


def _set_demands(draw: st.DrawFn, plan: Plan) -> Edit:
    if len(plan.routers()) < 2:
        return edits.set_demands(plan, [])
    wanted = [item for item in draw(_demands(plan)) if isinstance(item, Demand)]
    return edits.set_demands(plan, wanted)


def _delete(draw: st.DrawFn, plan: Plan) -> Edit:
    nodes = draw(st.lists(st.sampled_from(plan.nodes.keys()), unique=True, max_size=2))
    keys = plan.links.keys()
    links_there = draw(st.lists(st.sampled_from(keys), unique=True, max_size=2)) if keys else []
    return edits.remove(plan, nodes, links_there)


def _move(draw: st.DrawFn, plan: Plan) -> Edit:
    places = st.tuples(coordinates, coordinates)
    keys = st.sampled_from(plan.nodes.keys())
    return edits.move(plan, draw(st.dictionaries(keys, places, min_size=1, max_size=3)))


def _rename(draw: st.DrawFn, plan: Plan) -> Edit:
    return edits.rename(plan, draw(st.sampled_from(plan.nodes.keys())), draw(names))


def _try(draw: st.DrawFn, plan: Plan) -> Edit:
    return edits.try_changes(plan, draw(st.lists(trial_changes(plan), max_size=3)), "try")


def _set_costs(draw: st.DrawFn, plan: Plan) -> Edit:
    change = draw(st.sampled_from(plan.links.keys()).flatmap(lambda key: _cost_change(plan, key)))
    assert isinstance(change, LinkCost)
    return edits.set_costs(plan, change.link, change.cost, change.cost_back)


def _regroup(draw: st.DrawFn, plan: Plan) -> Edit:
    old = plan.links[draw(st.sampled_from(plan.links.keys()))]
    keys = plan.groups.keys()
    chosen = draw(st.lists(st.sampled_from(keys), unique=True)) if keys else []
    return edits.change(plan, [replace(old, groups=tuple(chosen))], "change groups")


def _switch_link(draw: st.DrawFn, plan: Plan) -> Edit:
    old = plan.links[draw(st.sampled_from(plan.links.keys()))]
    return Edit("switch a link", (Change(old, replace(old, up=not old.up)),))


def _keep_trial(draw: st.DrawFn, plan: Plan) -> Edit:
    return edits.keep_trial(plan, draw(st.sampled_from(["A", "B", "odd “name”"])))


def _lay_kept(draw: st.DrawFn, plan: Plan) -> Edit:
    return edits.lay_kept(plan, draw(st.sampled_from(plan.trials.keys())))


def _forget_trial(draw: st.DrawFn, plan: Plan) -> Edit:
    return edits.forget_trial(plan, draw(st.sampled_from(plan.trials.keys())))


def edits_adopt(draw: st.DrawFn, plan: Plan) -> Edit:
    """Return the edit that adopts the trial."""
    return edits.adopt(plan)


def edits_discard(draw: st.DrawFn, plan: Plan) -> Edit:
    """Return the edit that discards the trial."""
    return edits.discard(plan)
