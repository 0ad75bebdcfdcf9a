"""Foreign node-link JSON, as networkx and others write it."""

from __future__ import annotations

from typing import Any, Final

from netsketch.formats import imports, limits
from netsketch.formats.drawing import Attributes, Drawing, DrawnEdge
from netsketch.formats.errors import FormatError, Loaded
from netsketch.model import quoted

NAME: Final = "node-link JSON"


def from_parsed(raw: Any, file: str) -> Loaded:
    """Return the plan drawn from a parsed node-link file: "nodes" with "id", and "edges"
    or "links" with "source" and "target".

    Raises :class:`FormatError` naming the place of the first thing that is wrong.
    """
    if not isinstance(raw, dict) or "nodes" not in raw:
        raise FormatError(file, "", "neither a netsketch file nor node-link JSON")
    name = "edges" if "edges" in raw else "links"
    nodes, edges = _list(raw, "nodes", file), _list(raw, name, file)
    limits.check_count(len(nodes), limits.NODES, "nodes", file)
    limits.check_count(len(edges), limits.LINKS, "edges", file)
    graph = raw.get("graph", {})
    if not isinstance(graph, dict):
        raise FormatError(file, "graph", "must be an object in braces")
    drawing = Drawing(
        graph=graph,
        nodes=[_node(node, f"nodes[{index}]", file) for index, node in enumerate(nodes)],
        edges=[_edge(edge, f"{name}[{index}]", file) for index, edge in enumerate(edges)],
        directed=raw.get("directed", False) is True,
    )
    return imports.to_loaded(drawing, file, NAME)


def _list(raw: dict[str, Any], key: str, file: str) -> list[Any]:
    found = raw.get(key)
    if not isinstance(found, list):
        raise FormatError(file, key, "must be a list" if key in raw else "there is no such list")
    return found


def _node(raw: Any, place: str, file: str) -> tuple[str, Attributes]:
    attributes = _members(raw, place, file)
    return _id(attributes, "id", place, file), _without(attributes, "id")


def _edge(raw: Any, place: str, file: str) -> DrawnEdge:
    attributes = _members(raw, place, file)
    key = attributes.get("key")
    return DrawnEdge(
        _id(attributes, "source", place, file),
        _id(attributes, "target", place, file),
        key if isinstance(key, str) else None,
        _without(attributes, "source", "target", "key"),
    )


def _members(raw: Any, place: str, file: str) -> Attributes:
    if not isinstance(raw, dict):
        raise FormatError(file, place, "must be an object in braces")
    return raw


def _without(attributes: Attributes, *names: str) -> Attributes:
    return {key: value for key, value in attributes.items() if key not in names}


def _id(attributes: Attributes, name: str, place: str, file: str) -> str:
    """Return a node's name; numbers become text."""
    found = attributes.get(name)
    if isinstance(found, bool) or not isinstance(found, str | int | float):
        reason = "must be text or a number" if name in attributes else "is missing"
        raise FormatError(file, place, f"{quoted(name)} {reason}")
    return str(found)
