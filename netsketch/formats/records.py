"""The shape of a plan as plain objects (JSON), and the checked values they become."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Any, Final, TypeVar

import msgspec

from netsketch.formats.errors import FormatError
from netsketch.model import (
    Demand,
    KeptTrial,
    Link,
    Router,
    Segment,
    Settings,
    SharedRiskGroup,
    TrialChange,
    quoted,
)

T = TypeVar("T")
Place = Callable[[int, Any], str]
"""Position in the list and the object there -> the words that name the place."""

ROUTER_KEYS: Final = ("id", "kind", "name", "site", "x", "y", "up", "drained")
SEGMENT_KEYS: Final = ("id", "kind", "name", "site", "x", "y", "up")
EDGE_KEYS: Final = (
    "source", "target", "key", "cost", "cost_back", "capacity_mbps", "delay_ms", "up", "groups",
)  # fmt: skip
GROUP_KEYS: Final = ("id", "name")
DEMAND_KEYS: Final = ("from", "to", "mbps")
KEPT_TRIAL_KEYS: Final = ("name", "changes")
SETTINGS_KEYS: Final = ("name", "cost_style", "reference_mbps")


class EdgeRecord(msgspec.Struct):
    """A link as it is stored. Costs stay as found: the model refuses them by link and range."""

    source: str
    target: str
    key: str
    cost: Any
    cost_back: Any = msgspec.UNSET
    capacity_mbps: int | float | None = None
    delay_ms: int | float | None = None
    up: bool = True
    groups: tuple[str, ...] = ()
    extra: dict[str, Any] = {}


class DemandRecord(msgspec.Struct, rename={"source": "from", "target": "to"}):
    """A demand as it is stored."""

    source: str
    target: str
    mbps: int | float
    extra: dict[str, Any] = {}

    def value(self) -> Demand:
        """Return the model's value."""
        return Demand(source=self.source, target=self.target, mbps=self.mbps, extra=self.extra)


class GroupRecord(msgspec.Struct):
    """A shared-risk group as it is stored."""

    id: str
    name: str = ""
    extra: dict[str, Any] = {}

    def value(self) -> SharedRiskGroup:
        """Return the model's value."""
        return SharedRiskGroup(id=self.id, name=self.name, extra=self.extra)


class KeptTrialRecord(msgspec.Struct):
    """A trial put by under a name, as it is stored."""

    name: str
    changes: tuple[TrialChange, ...] = ()
    extra: dict[str, Any] = {}

    def value(self) -> KeptTrial:
        """Return the model's value."""
        return KeptTrial(name=self.name, changes=self.changes, extra=self.extra)


def set_aside(raw: Any, known: tuple[str, ...]) -> Any:
    """Return ``raw`` with the keys that are not ``known`` put together under "extra"."""
    if not isinstance(raw, dict) or raw.keys() <= set(known):
        return raw
    kept = {key: value for key, value in raw.items() if key in known}
    kept["extra"] = {key: value for key, value in raw.items() if key not in known}
    return kept


def set_node_aside(raw: Any) -> Any:
    """Return a node object with its unknown keys put together under "extra"."""
    segment = isinstance(raw, dict) and raw.get("kind") == "segment"
    return set_aside(raw, SEGMENT_KEYS if segment else ROUTER_KEYS)


def convert(raw: Any, kind: type[T], section: str, file: str, place: Place) -> T:
    """Return ``raw`` as ``kind``, a list of records.

    Raises :class:`FormatError` naming the place of the first value of a wrong type.
    """
    try:
        return msgspec.convert(raw, kind)
    except msgspec.ValidationError as error:
        found = _AT.fullmatch(str(error))
        if found is None:
            raise FormatError(file, section, _in_words(str(error))) from error
        what, index, path = found["what"], int(found["index"]), found["path"].lstrip(".")
        reason = ": ".join(part for part in (path, _in_words(what)) if part)
        raise FormatError(file, place(index, raw[index]) + called(raw[index]), reason) from error


def called(raw: Any) -> str:
    """Return the id of an object in brackets, as far as it has one."""
    found = (raw.get("key") or raw.get("id")) if isinstance(raw, dict) else None
    what = "link " if isinstance(raw, dict) and "key" in raw else ""
    return f" ({what}{quoted(found)})" if isinstance(found, str) else ""


_AT: Final = re.compile(r"(?P<what>.*) - at `\$\[(?P<index>\d+)\](?P<path>.*)`", re.DOTALL)
_WORDS: Final = {
    "str": "text",
    "int": "a whole number",
    "float": "a number",
    "int | float": "a number",
    "int | float | null": "a number",
    "bool": "true or false",
    "array": "a list",
    "object": "an object in braces",
    "null": "null",
}


def _in_words(message: str) -> str:
    """Put the validator's words for types into ours."""
    if wanted := re.fullmatch(r"Expected `(.*?)`, got `(.*?)`", message):
        need, got = (_WORDS.get(word, word) for word in wanted.groups())
        return f"must be {need}, not {got}"
    if missing := re.fullmatch(r"Object missing required field `(.*?)`", message):
        return f"has no {quoted(missing[1])}"
    if invalid := re.fullmatch(r"Invalid value '(.*)'", message, re.DOTALL):
        return f"{quoted(invalid[1])} is not a value it can have"
    return message


# -- from values to plain objects -------------------------------------------------------


def settings_object(settings: Settings) -> dict[str, Any]:
    """Return what holds for the whole plan, without groups, demands and trial."""
    named = {"name": settings.name} if settings.name else {}
    return {
        **named,
        "cost_style": settings.cost_style,
        "reference_mbps": settings.reference_mbps,
    }


def node_object(node: Router | Segment) -> dict[str, Any]:
    """Return a router or segment, without what is as usual and without its extra keys."""
    found: dict[str, Any] = {
        "id": node.id,
        "kind": "router" if isinstance(node, Router) else "segment",
    }
    if node.name:
        found["name"] = node.name
    if node.site:
        found["site"] = node.site
    if node.x is not None:
        found["x"], found["y"] = node.x, node.y
    if not node.up:
        found["up"] = False
    if isinstance(node, Router) and node.drained:
        found["drained"] = True
    return found


def edge_object(link: Link) -> dict[str, Any]:
    """Return a link, without what is as usual and without its extra keys."""
    found: dict[str, Any] = {
        "source": link.source,
        "target": link.target,
        "key": link.id,
        "cost": link.cost,
    }
    if link.cost_back != link.cost:
        found["cost_back"] = link.cost_back
    if link.capacity_mbps is not None:
        found["capacity_mbps"] = link.capacity_mbps
    if link.delay_ms is not None:
        found["delay_ms"] = link.delay_ms
    if not link.up:
        found["up"] = False
    if link.groups:
        found["groups"] = list(link.groups)
    return found


def group_object(group: SharedRiskGroup) -> dict[str, Any]:
    """Return a shared-risk group."""
    named = {"name": group.name} if group.name else {}
    return with_extra({"id": group.id, **named}, group.extra)


def demand_object(demand: Demand) -> dict[str, Any]:
    """Return a demand."""
    found = {"from": demand.source, "to": demand.target, "mbps": demand.mbps}
    return with_extra(found, demand.extra)


def kept_trial_object(kept: KeptTrial) -> dict[str, Any]:
    """Return a trial put by under a name."""
    return {"name": kept.name, "changes": [msgspec.to_builtins(c) for c in kept.changes]}


def with_extra(found: dict[str, Any], extra: dict[str, Any]) -> dict[str, Any]:
    """Return ``found`` with the keys a file held besides; none takes a known key's place."""
    return {**found, **{k: v for k, v in extra.items() if k not in found}} if extra else found
