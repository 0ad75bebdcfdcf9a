"""The native file: UTF-8 JSON in node-link layout, one object a line.

``networkx.node_link_graph(json.load(f), edges="edges")`` opens it.
"""

from __future__ import annotations

import json
from collections.abc import Iterator
from typing import Any, Final

from netsketch.formats import limits, objects, strict_json
from netsketch.formats.errors import FormatError, Loaded
from netsketch.model import Plan, quoted

NAME: Final = "netsketch"
VERSION: Final = 1
HEAD: Final[dict[str, Any]] = {
    "format": NAME,
    "version": VERSION,
    "directed": False,
    "multigraph": True,
}
LISTS: Final = ("groups", "demands", "trial", "trials")

_text = json.JSONEncoder(ensure_ascii=False, allow_nan=False).encode


def is_native(raw: Any) -> bool:
    """Return whether a parsed file says that it is one of ours."""
    return isinstance(raw, dict) and raw.get("format") == NAME


def loads(data: bytes, name: str) -> Loaded:
    """Return the plan in ``data``; ``name`` is the file's name for messages.

    Raises :class:`FormatError` naming the place of the first thing that is wrong.
    """
    limits.check_size(len(data), name)
    return from_parsed(strict_json.parse(data, name), data, name)


def from_parsed(raw: Any, data: bytes, name: str) -> Loaded:
    """Return the plan of a file that is parsed already; ``data`` are its bytes."""
    if not isinstance(raw, dict):
        raise FormatError(name, "", "not a netsketch file: its outermost value is no object")
    _check_head(raw, name)
    body = {key: value for key, value in raw.items() if key not in HEAD}
    try:
        plan, notes = objects.to_plan(body, name)
        _check_values(raw, plan, data, name)
    except RecursionError as error:
        raise FormatError(name, "", "nested too deeply") from error
    return Loaded(plan, tuple(notes), NAME, data)


def _check_head(raw: dict[str, Any], name: str) -> None:
    if not is_native(raw):
        raise FormatError(name, "format", f"not a netsketch file: it has no {quoted(NAME)} here")
    version = raw.get("version")
    if isinstance(version, bool) or not isinstance(version, int) or version < 1:
        raise FormatError(name, "version", "must be a whole number, 1 or more")
    if version > VERSION:
        found = str(version) if version < 10**6 else "far ahead"
        reason = f"written by a newer netsketch (file version {found}); this one reads {VERSION}"
        raise FormatError(name, "version", reason)
    for key in ("directed", "multigraph"):
        if raw.get(key, HEAD[key]) is not HEAD[key]:
            raise FormatError(name, key, f"must be {_text(HEAD[key])} in a netsketch file")
    for key in ("nodes", "edges"):
        if key not in raw:
            raise FormatError(name, "", f"there is no {quoted(key)}: not a whole netsketch file")


def _check_values(raw: dict[str, Any], plan: Plan, data: bytes, name: str) -> None:
    """Check what the plan takes without a look: texts, and the keys it only keeps."""
    if not limits.has_only_short_plain_texts(data):
        for key, value in raw.items():
            for place, item in _with_places(key, value):
                limits.check_values(item, place, name)
    for key in LISTS:
        limits.check_values(raw.get("graph", {}).get(key, []), f"graph: {key}", name)
    limits.check_values(plan.settings.extra, "graph", name)
    limits.check_values(plan.settings.top_extra, "", name)
    for section, shelf in (("nodes", plan.nodes), ("edges", plan.links)):
        for index, item in enumerate(shelf):
            if item.extra:
                limits.check_values(item.extra, f"{section}[{index}]", name)


def _with_places(key: str, value: Any) -> Iterator[tuple[str, Any]]:
    if not isinstance(value, list):
        yield key, value
        return
    for index, item in enumerate(value):
        yield f"{key}[{index}]", item


def dumps(plan: Plan) -> bytes:
    """Return the bytes of the native file for ``plan``: the same for equal plans."""
    found = objects.from_plan(plan)
    graph, nodes, edges = (found.pop(key) for key in ("graph", "nodes", "edges"))
    lists = {key: graph.pop(key) for key in LISTS if key in graph}
    parts = [f'{{{_members(HEAD)},\n "graph": {{{_members(graph)}']
    parts += [f",\n  {_text(key)}: {_lines(items, 3)}" for key, items in lists.items()]
    parts.append(f'}},\n "nodes": {_lines(nodes, 2)},\n "edges": {_lines(edges, 2)}')
    parts += [f",\n {_text(key)}: {_text(value)}" for key, value in found.items()]
    return "".join([*parts, "}\n"]).encode()


def _members(found: dict[str, Any]) -> str:
    return _text(found)[1:-1]


def _lines(items: list[dict[str, Any]], indent: int) -> str:
    """Return a list with one object a line."""
    if not items:
        return "[]"
    margin = "\n" + " " * indent
    return f"[{margin}" + f",{margin}".join(map(_text, items)) + margin[:-1] + "]"
