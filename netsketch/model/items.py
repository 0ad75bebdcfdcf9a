"""What can be drawn: frozen values with no behaviour beyond naming themselves.

Every item has a ``key`` (unique among its kind) and ``extra``: the keys a file held
that netsketch does not know, kept so that a save gives them back.
"""

from __future__ import annotations

from typing import Any

import msgspec

from netsketch.model.costs import DEFAULT_STYLE
from netsketch.model.trial import AddedLink, Trial, TrialChange

Coordinate = int | float | None


class Router(msgspec.Struct, frozen=True, kw_only=True, tag="router", tag_field="kind"):
    """A router. ``drained``: reachable, never transit (ISO 10589 overload, RFC 3277)."""

    id: str
    name: str = ""
    site: str = ""
    x: Coordinate = None
    y: Coordinate = None
    up: bool = True
    drained: bool = False
    extra: dict[str, Any] = {}

    @property
    def key(self) -> str:
        return self.id

    @property
    def label(self) -> str:
        """The name a person reads: the router's name, or its id when it has none."""
        return self.name or self.id


class Segment(msgspec.Struct, frozen=True, kw_only=True, tag="segment", tag_field="kind"):
    """A multi-access network (RFC 2328, 1.2): leaving it costs nothing."""

    id: str
    name: str = ""
    site: str = ""
    x: Coordinate = None
    y: Coordinate = None
    up: bool = True
    extra: dict[str, Any] = {}

    @property
    def key(self) -> str:
        return self.id

    @property
    def label(self) -> str:
        """The name a person reads: the segment's name, or its id when it has none."""
        return self.name or self.id


Node = Router | Segment


class Link(msgspec.Struct, frozen=True, kw_only=True, tag="link", tag_field="kind"):
    """A link between two routers, or a router and a segment.

    ``cost`` is paid leaving ``source``, ``cost_back`` leaving ``target``; the end at a
    segment costs 0. ``capacity_mbps`` and ``delay_ms`` are ``None`` where not known.
    """

    id: str
    source: str
    target: str
    cost: int
    cost_back: int
    capacity_mbps: int | float | None = None
    delay_ms: int | float | None = None
    up: bool = True
    groups: tuple[str, ...] = ()
    extra: dict[str, Any] = {}

    @property
    def key(self) -> str:
        return self.id

    @property
    def ends(self) -> tuple[str, str]:
        return self.source, self.target

    def other_end(self, node: str) -> str:
        """Return the end that is not ``node``."""
        return self.target if node == self.source else self.source

    def cost_from(self, node: str) -> int:
        """Return the cost of leaving ``node`` over this link."""
        return self.cost if node == self.source else self.cost_back


class SharedRiskGroup(msgspec.Struct, frozen=True, kw_only=True, tag="group", tag_field="kind"):
    """Links that fail together (RFC 4202, 2.3): one duct, one mast, one power feed."""

    id: str
    name: str = ""
    extra: dict[str, Any] = {}

    @property
    def key(self) -> str:
        return self.id

    @property
    def label(self) -> str:
        return self.name or self.id


class Demand(msgspec.Struct, frozen=True, kw_only=True, tag="demand", tag_field="kind"):
    """Traffic offered from one router to another, in Mbit/s. One per ordered pair."""

    source: str
    target: str
    mbps: int | float
    extra: dict[str, Any] = {}

    @property
    def key(self) -> tuple[str, str]:
        return self.source, self.target


class KeptTrial(msgspec.Struct, frozen=True, kw_only=True, tag="kept trial", tag_field="kind"):
    """A trial put by under a name, in the plan's file."""

    name: str
    changes: tuple[TrialChange, ...] = ()
    extra: dict[str, Any] = {}

    @property
    def key(self) -> str:
        return self.name

    @property
    def trial(self) -> Trial:
        """The trial itself."""
        return Trial(self.changes)


def link_of(added: AddedLink) -> Link:
    """Return the link that a trial adds."""
    return Link(
        id=added.link,
        source=added.source,
        target=added.target,
        cost=added.cost,
        cost_back=added.cost_back,
        capacity_mbps=added.capacity_mbps,
        delay_ms=added.delay_ms,
    )


Item = Router | Segment | Link | SharedRiskGroup | Demand | KeptTrial


class Settings(msgspec.Struct, frozen=True, kw_only=True):
    """What holds for the whole plan. ``extra`` keeps unknown keys of the file's
    ``graph`` object, ``top_extra`` those beside it."""

    name: str = ""
    cost_style: str = DEFAULT_STYLE
    reference_mbps: int | float = 100_000
    extra: dict[str, Any] = {}
    top_extra: dict[str, Any] = {}
