"""A plan read into rows: all of it, or only what an edit touched."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence, Set
from functools import partial
from itertools import repeat
from typing import Any

import numpy as np

from netsketch.model import (
    AddedLink,
    Drained,
    Link,
    LinkCost,
    LinkState,
    Node,
    NodeState,
    Plan,
    Segment,
    TrialChange,
)
from netsketch.model.items import link_of
from netsketch.model.trial import subject
from netsketch.sheet.contents import Contents, Floats, Links, Nodes, Rows, nothing
from netsketch.sheet.lettering import Lettering

WIDEST_NAME = 190.0
PLATE_HEIGHT, PLATE_HEIGHT_WITH_SITE = 30.0, 44.0
_CAPACITY_WIDTHS = ((100.0, 1.0), (1_000.0, 1.4), (10_000.0, 2.1), (100_000.0, 3.0))
_NODE_STATE, _DRAINED = NodeState.__name__, Drained.__name__
_LINK_STATE, _LINK_COST = LinkState.__name__, LinkCost.__name__
_ADDED_LINK = AddedLink.__name__

Tried = Mapping[tuple[str, str], TrialChange]
"""The changes of a trial by their subjects."""


def contents_of(plan: Plan, lettering: Lettering, unit: float) -> Contents:
    """Return the rows for ``plan``. O(nodes + links)."""
    return brought_up(nothing(unit), plan, lettering, frozenset())[0]


def brought_up(
    before: Contents, plan: Plan, lettering: Lettering, touched: Set[str]
) -> tuple[Contents, Rows]:
    """Return the rows for ``plan``, of which ``before`` shows an earlier state, and for
    each link the row it had there, -1 where it was read in again.

    ``touched``: the ids of all nodes and links that changed since, in the plan or in the
    trial. Everything else that was there is taken over as it was.
    """
    tried = {subject(change): change for change in plan.trial}
    nodes = _nodes_of(before, plan, tried, lettering, touched)
    added = {change.link: link_of(change) for change in plan.trial.added()}
    keys = [*plan.links.keys(), *added]
    source = _sources(before.links, keys, touched)
    fresh = [keys[row] for row in np.flatnonzero(source < 0).tolist()]
    items = [added.get(key) or plan.links[key] for key in fresh]
    links = _links_of(before, keys, source, items, tried, nodes)
    return Contents(nodes, links, before.unit), source


def _sources(before: Nodes | Links, keys: list[str], touched: Set[str]) -> Rows:
    """Return for each of ``keys`` the row to take over, -1 where it is to be read in."""
    row = before.row
    if keys == before.ids:
        source = np.arange(len(keys))
        source[[row[key] for key in touched if key in row]] = -1
        return source
    return np.array([-1 if k in touched else row.get(k, -1) for k in keys], dtype=np.intp)


def _merged(source: Rows, before: Any, values: Sequence[Any]) -> Any:
    """Return a column (array or list): rows of ``before`` taken over as ``source`` says,
    and ``values`` where it is -1."""
    if isinstance(before, list):
        fresh = iter(values)
        return [before[row] if row >= 0 else next(fresh) for row in source.tolist()]
    column = np.empty((len(source), *before.shape[1:]), before.dtype)
    kept = source >= 0
    column[kept] = before[source[kept]]
    column[~kept] = np.array(values, before.dtype).reshape(-1, *before.shape[1:])
    return column


def _columns(rows: Iterator[tuple[Any, ...]]) -> Iterator[Sequence[Any]]:
    """Return columns for rows, or empty ones without end for no rows."""
    listed = list(rows)
    return zip(*listed, strict=True) if listed else repeat(())


def _numbered(before: Nodes | Links, keys: list[str]) -> dict[str, int]:
    return before.row if keys == before.ids else {key: row for row, key in enumerate(keys)}


# -- nodes ------------------------------------------------------------------------------


def _nodes_of(
    before: Contents, plan: Plan, tried: Tried, lettering: Lettering, touched: Set[str]
) -> Nodes:
    old, keys = before.nodes, plan.nodes.keys()
    if keys != old.ids:  # a node without a place stands by its row
        touched = touched | {node.id for node in plan.nodes if node.x is None or node.y is None}
    source = _sources(old, keys, touched)
    fresh = np.flatnonzero(source < 0).tolist()
    rows = (_node_row(plan.nodes[keys[row]], row, before.unit, tried, lettering) for row in fresh)
    columns = (old.names, old.sites, old.x, old.y, old.sizes)
    states = (old.segment, old.down, old.drained, old.tried)
    merged = map(partial(_merged, source), (*columns, *states), _columns(rows))
    return Nodes(keys, _numbered(old, keys), *merged)


def _node_row(
    item: Node, row: int, unit: float, tried: Tried, lettering: Lettering
) -> tuple[Any, ...]:
    """Return what :class:`Nodes` holds of one node, in its order, from ``names`` on."""
    name, name_width = lettering.name.fitted(item.label, WIDEST_NAME)
    site, site_width = lettering.site.fitted(item.site, WIDEST_NAME)
    x, y = _place(item.x, item.y, row, unit)
    size = (
        max(name_width, site_width, 28.0) + 24.0,
        PLATE_HEIGHT_WITH_SITE if site else PLATE_HEIGHT,
    )
    state, drain = tried.get((_NODE_STATE, item.id)), tried.get((_DRAINED, item.id))
    up = state.up if isinstance(state, NodeState) else item.up
    drained = drain.drained if isinstance(drain, Drained) else getattr(item, "drained", False)
    changed = state is not None or drain is not None
    return name, site, x, y, size, isinstance(item, Segment), not up, drained, changed


def _place(x: float | None, y: float | None, row: int, unit: float) -> tuple[float, float]:
    """A node without a place stands on a grid until it is given one."""
    if x is None or y is None:
        return 180.0 * (row % 12), 120.0 * (row // 12)
    return x * unit, y * unit


# -- links ------------------------------------------------------------------------------


def _links_of(
    before: Contents, keys: list[str], source: Rows, fresh: list[Link], tried: Tried, nodes: Nodes
) -> Links:
    """Return the links ``keys``: taken over by ``source``, the others from ``fresh``."""
    old = before.links
    columns = (old.width, old.down, old.tried, old.costs, old.planned, old.added)
    rows = (_link_row(item, tried) for item in fresh)
    merged = map(partial(_merged, source), columns, _columns(rows))
    now = _rows_now(before.nodes, nodes)
    tail = _merged(source, now[old.tail], [nodes.row[item.source] for item in fresh])
    head = _merged(source, now[old.head], [nodes.row[item.target] for item in fresh])
    return Links(keys, _numbered(old, keys), tail, head, _lanes(tail, head), *merged)


def _rows_now(before: Nodes, nodes: Nodes) -> Rows:
    """Return the present row of each node there was, -1 for those that are gone."""
    if nodes.row is before.row:
        return np.arange(len(before.ids))
    return np.array([nodes.row.get(key, -1) for key in before.ids], dtype=np.intp)


def _link_row(item: Link, tried: Tried) -> tuple[Any, ...]:
    """Return what :class:`Links` holds of one link, in its order, from ``width`` on."""
    state, change = tried.get((_LINK_STATE, item.id)), tried.get((_LINK_COST, item.id))
    up = state.up if isinstance(state, LinkState) else item.up
    planned = item.cost, item.cost_back
    costs = (change.cost, change.cost_back) if isinstance(change, LinkCost) else planned
    added = (_ADDED_LINK, item.id) in tried
    changed = added or state is not None or change is not None
    return _width(item.capacity_mbps), not up, changed, costs, planned, added


def _width(capacity: float | None) -> float:
    if capacity is None:
        return 1.4
    return next((width for limit, width in _CAPACITY_WIDTHS if capacity <= limit), 3.8)


def _lanes(tail: Rows, head: Rows) -> Floats:
    """Give parallel links places … -1, 0, 1 … (… -0.5, 0.5 … for an even number), on the
    same side whichever end is the tail."""
    pairs = np.minimum(tail, head) * (tail.max(initial=0) + head.max(initial=0) + 1)
    pairs += np.maximum(tail, head)
    order = np.argsort(pairs, kind="stable")
    _, beside, count = np.unique(pairs, return_inverse=True, return_counts=True)
    start = np.cumsum(count) - count
    place = np.empty(len(pairs))
    place[order] = np.arange(len(pairs)) - np.repeat(start, count)
    return np.where(tail < head, 1.0, -1.0) * (place - (count[beside] - 1) / 2)
