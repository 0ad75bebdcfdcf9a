"""A plan as one plain object in node-link layout, and back: what every format builds on."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any, Final

import msgspec

from netsketch.formats import limits, records
from netsketch.formats.errors import FormatError
from netsketch.formats.records import (
    DemandRecord,
    EdgeRecord,
    GroupRecord,
    KeptTrialRecord,
    Place,
    with_extra,
)
from netsketch.model import (
    Add,
    ChangeTrial,
    Demand,
    Edit,
    Item,
    KeptTrial,
    Link,
    Node,
    Plan,
    PlanError,
    Router,
    Segment,
    Settings,
    SharedRiskGroup,
    Trial,
    TrialChange,
    quoted,
)
from netsketch.model.trial import subject

GRAPH_KEYS: Final = (*records.SETTINGS_KEYS, "groups", "demands", "trial", "trials")


class Places(msgspec.Struct, frozen=True):
    """How places are named: by position in a native file, by ends in an import."""

    node: Place = lambda index, raw: f"nodes[{index}]"
    link: Place = lambda index, raw: f"edges[{index}]"
    group: Place = lambda index, raw: f"groups[{index}]"
    demand: Place = lambda index, raw: f"demands[{index}]"
    trial: Place = lambda index, raw: f"trial[{index}]"


NATIVE_PLACES: Final = Places()


# -- to a plan --------------------------------------------------------------------------


def to_plan(
    raw: dict[str, Any], file: str, places: Places = NATIVE_PLACES
) -> tuple[Plan, list[str]]:
    """Return the plan that ``raw`` describes, and notes on what was assumed.

    ``raw`` holds "graph", "nodes", "edges"; other keys beside them are kept. Raises
    :class:`FormatError` naming the first thing that a plan cannot hold, and its place.
    """
    graph = _section(raw, "graph", dict, file)
    lists = {
        "nodes": _section(raw, "nodes", list, file),
        "edges": _section(raw, "edges", list, file),
        "groups": _section(graph, "groups", list, file),
        "demands": _section(graph, "demands", list, file),
        "trial": _section(graph, "trial", list, file),
    }
    limits.check_count(len(lists["nodes"]), limits.NODES, "nodes", file)
    limits.check_count(len(lists["edges"]), limits.LINKS, "links", file)
    settings = _settings(raw, graph, file)
    nodes = _nodes(lists["nodes"], file, places)
    links, notes = _links(lists["edges"], nodes, file, places)
    groups = _groups(lists["groups"], file, places)
    demands = _demands(lists["demands"], file, places)
    notes += _notes_on_segments(nodes)
    filled = _Filling(settings, file)
    for items, place, found in (
        (nodes, places.node, lists["nodes"]),
        (groups, places.group, lists["groups"]),
        (links, places.link, lists["edges"]),
        (demands, places.demand, lists["demands"]),
    ):
        filled.put(items, place, found)
    filled.lay_trial(_trial(lists["trial"], file, places))
    kept = _section(graph, "trials", list, file)
    filled.put(_kept_trials(kept, file), _kept_place, kept)
    return filled.plan, notes + _notes_on_trial(filled.plan.trial, lists["trial"])


class _Filling:
    """A plan being filled, all items of a kind with one edit; when that is refused, one by
    one in a second plan to find which item it was."""

    def __init__(self, settings: Settings, file: str) -> None:
        self.file = file
        try:
            self.plan = Plan(settings)
        except PlanError as error:
            raise FormatError(file, "graph", str(error)) from error

    def put(self, items: Sequence[Item], place: Place, raw: list[Any]) -> None:
        """Add ``items`` in order; ``raw`` holds the objects they came from."""
        try:
            self.plan.apply(Edit("load", tuple(Add(item, i) for i, item in enumerate(items))))
        except PlanError:
            for index, item in enumerate(items):
                try:
                    self.plan.apply(Edit("load", (Add(item, index),)))
                except PlanError as error:
                    raise FormatError(self.file, place(index, raw[index]), str(error)) from error
            raise

    def lay_trial(self, trial: Trial) -> None:
        """Lay ``trial`` over the plan."""
        if not trial:
            return
        try:
            self.plan.apply(Edit("load", (ChangeTrial(Trial(), trial),)))
        except PlanError as error:
            raise FormatError(self.file, "trial", str(error)) from error


def _section(raw: dict[str, Any], key: str, kind: type, file: str) -> Any:
    """Return what stands under ``key``; an empty one when nothing does."""
    found = raw.get(key, kind())
    if not isinstance(found, kind):
        wanted = "a list" if kind is list else "an object in braces"
        raise FormatError(file, key, f"must be {wanted}")
    return found


def _settings(raw: dict[str, Any], graph: dict[str, Any], file: str) -> Settings:
    known: dict[str, Any] = {key: graph[key] for key in records.SETTINGS_KEYS if key in graph}
    known["extra"] = {key: value for key, value in graph.items() if key not in GRAPH_KEYS}
    known["top_extra"] = {
        key: value for key, value in raw.items() if key not in ("graph", "nodes", "edges")
    }
    return records.convert([known], list[Settings], "graph", file, lambda i, r: "graph")[0]


def _nodes(raw: list[Any], file: str, places: Places) -> list[Node]:
    found = [records.set_node_aside(node) for node in raw]
    return records.convert(found, list[Router | Segment], "nodes", file, places.node)


def _links(
    raw: list[Any], nodes: Iterable[Node], file: str, places: Places
) -> tuple[list[Link], list[str]]:
    found = [records.set_aside(edge, records.EDGE_KEYS) for edge in raw]
    edges = records.convert(found, list[EdgeRecord], "edges", file, places.link)
    segments = {node.id for node in nodes if isinstance(node, Segment)}
    ignored: list[str] = []
    links = [_link(edge, segments, ignored) for edge in edges]
    if not ignored:
        return links, []
    return links, [f"leaving a segment costs 0: another cost was not used at {listed(ignored)}"]


def _link(edge: EdgeRecord, segments: set[str], ignored: list[str]) -> Link:
    """Return the link; at a segment's end the cost is 0 whatever the file says."""
    cost, back = edge.cost, edge.cost_back
    if edge.source in segments:
        unused, cost, back = (None, 0, cost) if back is msgspec.UNSET else (cost, 0, back)
    elif edge.target in segments:
        unused, back = (None if back is msgspec.UNSET else back), 0
    else:
        unused, back = None, (cost if back is msgspec.UNSET else back)
    if unused is not None and unused != 0:
        ignored.append(f"link {quoted(edge.key)}")
    return Link(
        id=edge.key,
        source=edge.source,
        target=edge.target,
        cost=cost,
        cost_back=back,
        capacity_mbps=edge.capacity_mbps,
        delay_ms=edge.delay_ms,
        up=edge.up,
        groups=edge.groups,
        extra=edge.extra,
    )


def _groups(raw: list[Any], file: str, places: Places) -> list[SharedRiskGroup]:
    found = [records.set_aside(group, records.GROUP_KEYS) for group in raw]
    groups = records.convert(found, list[GroupRecord], "groups", file, places.group)
    return [group.value() for group in groups]


def _demands(raw: list[Any], file: str, places: Places) -> list[Demand]:
    found = [records.set_aside(demand, records.DEMAND_KEYS) for demand in raw]
    demands = records.convert(found, list[DemandRecord], "demands", file, places.demand)
    return [demand.value() for demand in demands]


def _trial(raw: list[Any], file: str, places: Places) -> Trial:
    changes = records.convert(raw, list[TrialChange], "trial", file, places.trial)
    seen: set[tuple[str, str]] = set()
    for index, change in enumerate(changes):
        if subject(change) in seen:
            name = quoted(subject(change)[1])
            raise FormatError(file, f"trial[{index}]", f"{name} is changed twice in this way")
        seen.add(subject(change))
    return Trial(tuple(changes))


def _kept_trials(raw: list[Any], file: str) -> list[KeptTrial]:
    found = [records.set_aside(trial, records.KEPT_TRIAL_KEYS) for trial in raw]
    kept = records.convert(found, list[KeptTrialRecord], "trials", file, _kept_place)
    return [trial.value() for trial in kept]


def _kept_place(index: int, raw: Any) -> str:
    return f"trials[{index}]"


def _notes_on_segments(nodes: Iterable[Node]) -> list[str]:
    drained = [
        f"segment {quoted(node.id)}"
        for node in nodes
        if isinstance(node, Segment) and node.extra.get("drained")
    ]
    return [f"only routers drain: no effect at {listed(drained)}"] if drained else []


def _notes_on_trial(trial: Trial, raw: list[Any]) -> list[str]:
    known = [msgspec.to_builtins(change) for change in trial]
    left = {key for change, found in zip(known, raw, strict=True) for key in found.keys() - change}
    return [f"left out of the trial: {listed(sorted(map(quoted, left)))}"] if left else []


def listed(names: Sequence[str], most: int = 3) -> str:
    """Return the first ``most`` names and how many more there are."""
    more = f" and {len(names) - most} more" if len(names) > most else ""
    return ", ".join(names[:most]) + more


# -- from a plan ------------------------------------------------------------------------


def from_plan(plan: Plan) -> dict[str, Any]:
    """Return ``plan`` as one plain object that :func:`to_plan` turns back into an equal one."""
    graph = records.settings_object(plan.settings)
    graph["groups"] = [records.group_object(group) for group in plan.groups]
    graph["demands"] = [records.demand_object(demand) for demand in plan.demands]
    if plan.trial:
        graph["trial"] = [msgspec.to_builtins(change) for change in plan.trial]
    if len(plan.trials):
        graph["trials"] = [
            with_extra(records.kept_trial_object(kept), kept.extra) for kept in plan.trials
        ]
    found = {
        "graph": with_extra(graph, plan.settings.extra),
        "nodes": [with_extra(records.node_object(node), node.extra) for node in plan.nodes],
        "edges": [with_extra(records.edge_object(link), link.extra) for link in plan.links],
    }
    return with_extra(found, plan.settings.top_extra)
