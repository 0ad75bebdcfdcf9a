"""A foreign graph -> a plan: which attribute is taken for what, and what a note must say."""

from __future__ import annotations

from collections import Counter, defaultdict
from typing import Any, Final

from netsketch.formats import limits, objects, positions
from netsketch.formats.attributes import Found, from_json, is_number, number, text, truth
from netsketch.formats.drawing import Drawing, DrawnEdge
from netsketch.formats.errors import Loaded
from netsketch.formats.records import EDGE_KEYS, ROUTER_KEYS, SETTINGS_KEYS
from netsketch.model import COST_RANGES, Settings, quoted

COST_NAMES: Final = ("cost", "metric", "weight")
CAPACITY_NAMES: Final = ("capacity_mbps", "capacity", "bandwidth", "linkspeedraw")
DELAY_NAMES: Final = ("delay_ms", "delay", "latency")
BITS_NAMES: Final = ("linkspeedraw",)
"""Names under which published topologies give capacities in bit/s, not Mbit/s."""

PLACES: Final = objects.Places(
    node=lambda index, raw: f"node {quoted(raw['id'])}",
    link=lambda index, raw: f"link from {quoted(raw['source'])} to {quoted(raw['target'])}",
)


def to_loaded(drawing: Drawing, file: str, format_name: str) -> Loaded:
    """Return the plan that ``drawing`` describes, with notes on what was assumed.

    Raises :class:`FormatError` naming the node or link that a plan cannot hold.
    """
    limits.check_count(len(drawing.nodes), limits.NODES, "nodes", file)
    limits.check_count(len(drawing.edges), limits.LINKS, "edges", file)
    reading = _Import(drawing)
    raw = reading.object()
    plan, notes = objects.to_plan(raw, file, PLACES)
    limits.check_values(raw["graph"], "graph", file)
    for index, node in enumerate(raw["nodes"]):
        limits.check_values(node, PLACES.node(index, node), file)
    for index, edge in enumerate(raw["edges"]):
        limits.check_values(edge, PLACES.link(index, edge), file)
    return Loaded(plan, (*reading.notes(), *notes), format_name)


class _Import:
    """One drawing being read: builds the plain object and gathers what to say."""

    def __init__(self, drawing: Drawing) -> None:
        self.drawing = drawing
        self.costs: Counter[str] = Counter()
        self.assumed: dict[str, None] = {}
        self.left_out: dict[str, None] = {}
        self.one_way: list[str] = []
        self.places = ""
        self.style = Settings().cost_style
        self.reference: float = Settings().reference_mbps
        self.segments: set[str] = set()

    def object(self) -> dict[str, Any]:
        """Return the drawing as the plain object of a native file."""
        graph, beside = self._graph(Found(self.drawing.graph))
        nodes = self._nodes()
        edges = self._edges()
        if "groups" not in graph:
            used = dict.fromkeys(name for edge in edges for name in edge.get("groups", ()))
            graph["groups"] = [{"id": name} for name in used]
        return {"graph": graph, "nodes": nodes, "edges": edges, **beside}

    def notes(self) -> list[str]:
        """Return what was assumed and left out, in a line each."""
        found = [self._note_on_costs(), *self.assumed]
        if self.places:
            found.append(f"places come from {self.places}")
        if self.one_way:
            ends = objects.listed(self.one_way)
            found.append(f"edges without an opposite were left out: {ends}")
        if self.left_out:
            names = objects.listed([quoted(name) for name in self.left_out], 6)
            found.append(f"attributes left out: {names}")
        return [note for note in found if note]

    def _note_on_costs(self) -> str:
        if not self.costs:
            return ""
        counted = len(self.costs) > 1
        parts = [f"{name} ({number})" if counted else name for name, number in self.costs.items()]
        return f"costs come from {', '.join(parts)}"

    # -- the graph itself -----------------------------------------------------------

    def _graph(self, found: Found) -> tuple[dict[str, Any], dict[str, Any]]:
        graph: dict[str, Any] = {}
        if (name := found.get("name", "label")) is not None:
            graph["name"] = text(name)
        if (style := found.get("cost_style")) is not None:
            graph["cost_style"] = style
            self.style = style if style in COST_RANGES else self.style
        if (reference := number(found.get("reference_mbps"))) is not None:
            graph["reference_mbps"] = reference
            self.reference = reference if is_number(reference) else self.reference
        for key in ("groups", "demands", "trial", "trials"):
            value = found.get(key)
            if (listed := from_json(value, list)) is not None:
                graph[key] = listed
            elif value is not None:
                self.left_out[key] = None
        beside = from_json(found.get("top_extra"), dict) or {}
        graph.update(self._extra(found, set(SETTINGS_KEYS)))
        return graph, beside

    def _extra(self, found: Found, reserved: set[str]) -> dict[str, Any]:
        """Return the keys to keep for a save although they mean nothing here."""
        own = from_json(found.get("extra"), dict) or {}
        kept, left = found.rest(reserved)
        self.left_out.update(dict.fromkeys(left))
        return {**kept, **own}

    # -- nodes ----------------------------------------------------------------------

    def _nodes(self) -> list[dict[str, Any]]:
        found = [Found(attributes) for _, attributes in self.drawing.nodes]
        points, self.places = positions.place(found)
        nodes = []
        for (key, _), node, point in zip(self.drawing.nodes, found, points, strict=True):
            raw = self._node(key, node)
            if point is not None:
                raw["x"], raw["y"] = point
            nodes.append(raw)
        return nodes

    def _node(self, key: str, found: Found) -> dict[str, Any]:
        kind = "segment" if found.get("kind") == "segment" else "router"
        if found.get("kind") not in (None, kind):
            self.left_out["kind"] = None
        raw: dict[str, Any] = {"id": key, "kind": kind}
        name, label = found.get("name"), found.get("label")
        if name is not None:
            raw["name"] = text(name)
        elif label is not None and text(label) != key:
            raw["name"] = positions.name_of(label)
        if (site := found.get("site")) is not None:
            raw["site"] = text(site)
        for flag in ("up", "drained") if kind == "router" else ("up",):
            if (value := found.get(flag)) is not None:
                raw[flag] = truth(value)
        if kind == "segment":
            self.segments.add(key)
        return {**self._extra(found, set(ROUTER_KEYS)), **raw}

    # -- edges ----------------------------------------------------------------------

    def _edges(self) -> list[dict[str, Any]]:
        pairs = (
            self._opposites() if self.drawing.directed else [(e, None) for e in self.drawing.edges]
        )
        ids = _link_ids([edge.key for edge, _ in pairs])
        return [self._edge(key, *pair) for key, pair in zip(ids, pairs, strict=True)]

    def _opposites(self) -> list[tuple[DrawnEdge, DrawnEdge | None]]:
        """Pair each edge with one the other way, parallel ones in order."""
        waiting: dict[tuple[str, str], list[DrawnEdge]] = defaultdict(list)
        pairs: dict[int, tuple[DrawnEdge, DrawnEdge | None]] = {}
        position = {id(edge): index for index, edge in enumerate(self.drawing.edges)}
        for edge in self.drawing.edges:
            opposite = waiting[edge.target, edge.source]
            if edge.source == edge.target:
                pairs[position[id(edge)]] = edge, None  # the plan refuses it by name
            elif opposite:
                first = opposite.pop(0)
                pairs[position[id(first)]] = first, edge
            else:
                waiting[edge.source, edge.target].append(edge)
        for edges in waiting.values():
            self.one_way += [f"{quoted(e.source)} to {quoted(e.target)}" for e in edges]
        return [pairs[index] for index in sorted(pairs)]

    def _edge(self, key: str, edge: DrawnEdge, opposite: DrawnEdge | None) -> dict[str, Any]:
        found = Found(edge.attributes)
        back = Found(opposite.attributes) if opposite else None
        raw: dict[str, Any] = {"source": edge.source, "target": edge.target, "key": key}
        self._set_capacity_and_delay(raw, found, back)
        raw["cost"] = self._cost(found, raw) if edge.source not in self.segments or not back else 0
        if back is not None:
            raw["cost_back"] = self._cost(back, raw) if edge.target not in self.segments else 0
        elif (cost_back := found.get("cost_back")) is not None:
            raw["cost_back"] = number(cost_back)
        ups = [truth(f.get("up")) for f in (found, back) if f and f.get("up") is not None]
        if ups:
            raw["up"] = next((up for up in ups if up is not True), True)
        if (groups := from_json(found.get("groups"), list)) is not None:
            raw["groups"] = groups
        return {**self._extra(found, {*EDGE_KEYS, "id"}), **raw}

    def _set_capacity_and_delay(
        self, raw: dict[str, Any], found: Found, back: Found | None
    ) -> None:
        for key, names, unit in (
            ("capacity_mbps", CAPACITY_NAMES, "Mbit/s"),
            ("delay_ms", DELAY_NAMES, "ms"),
        ):
            name, value = found.named(*names)
            if back is not None:
                other_name, other = back.named(*names)
                if value is None:
                    name, value = other_name, other
                elif other is not None and number(other) != number(value):
                    self.assumed[
                        f"where {quoted(name)} differs by direction, the first was taken"
                    ] = None
            value = number(value)
            if name in ("", key):  # our own name: kept as it is, the plan refuses what is wrong
                raw.update({key: value} if name else {})
            elif is_number(value) and value > 0:
                raw[key] = number(value / 1e6) if name in BITS_NAMES else value
                unit = "bit/s" if name in BITS_NAMES else unit
                self.assumed[f"{quoted(name)} is taken to be in {unit}"] = None
            else:
                self.left_out[name] = None

    def _cost(self, found: Found, raw: dict[str, Any]) -> Any:
        name, value = found.named(*COST_NAMES)
        capacity: Any = raw.get("capacity_mbps")
        if name:
            self.costs[quoted(name)] += 1
            return number(value)
        if is_number(capacity) and capacity > 0:
            per = f"the reference capacity ({self.reference:g} Mbit/s) over the link's capacity"
            self.costs[per] += 1
            low, high = COST_RANGES[self.style]
            return min(max(int(self.reference / capacity), low), high)
        self.costs["1 where nothing else was given"] += 1
        return 1


def _link_ids(keys: list[str | None]) -> list[str]:
    """Return the keys where they are unique, and unused ids "l1", "l2", … elsewhere."""
    counts = Counter(key for key in keys if key)
    taken = {key for key, number in counts.items() if number == 1}
    ids = []
    for position, key in enumerate(keys, 1):
        if not key or key not in taken:
            while f"l{position}" in taken:
                position += len(keys)
            key = f"l{position}"
        ids.append(key)
    return ids
