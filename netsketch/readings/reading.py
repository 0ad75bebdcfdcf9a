"""A Reading: what the sheet shows about the focus, as plain data without colours.

Links and plates that a reading does not name fade. Whether something is down, drained or
changed by the trial is not said here: it is drawn from the plan itself.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

TravelRole = Literal["tree", "path", "way back", "before", "after"]
PlateRole = Literal["focus", "target", "reached", "cut off", ""]
ReadingKind = Literal["outward", "inward", "path", "effect", "load"]


def letter(index: int) -> str:
    """Return the letter of first hop ``index``: A to Z, then AA, AB, …

    >>> letter(0), letter(25), letter(26), letter(702)
    ('A', 'Z', 'AA', 'AAA')
    """
    text = ""
    index += 1
    while index > 0:
        index, place = divmod(index - 1, 26)
        text = chr(ord("A") + place) + text
    return text


@dataclass(frozen=True, slots=True)
class Travel:
    """Traffic over a link in one direction.

    ``direction`` is +1 from the link's source to its target, -1 the other way.
    ``letters`` index :attr:`Reading.first_hops` and may be empty. ``share`` is the part
    of the flow, 0 to 1; in a load reading the utilisation, which may exceed 1.
    """

    direction: int
    role: TravelRole
    letters: tuple[int, ...] = ()
    share: float = 1.0


@dataclass(frozen=True, slots=True)
class LinkMark:
    """What a reading shows on a link. An empty ``text`` leaves the costs in the tag."""

    travels: tuple[Travel, ...] = ()
    text: str = ""


@dataclass(frozen=True, slots=True)
class PlateMark:
    """What a reading shows on a plate or rail. ``letters`` index the first hops used to
    reach it; ``cost`` is ``None`` where there is none to show."""

    role: PlateRole = ""
    letters: tuple[int, ...] = ()
    cost: int | None = None
    moved: bool = False


@dataclass(frozen=True, slots=True)
class FirstHop:
    """A first hop: its letter, its colour (0 to 6), and the (link, router) it names."""

    letter: str
    colour: int
    link: str
    router: str


@dataclass(frozen=True, slots=True)
class Reading:
    """The answer about ``focus`` for every link and plate it says something about."""

    kind: ReadingKind
    focus: tuple[str, ...]
    title: str
    links: Mapping[str, LinkMark] = field(default_factory=dict)
    plates: Mapping[str, PlateMark] = field(default_factory=dict)
    first_hops: tuple[FirstHop, ...] = ()
