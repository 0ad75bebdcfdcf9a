"""The one way a file is refused, and what a file that was read gives."""

from __future__ import annotations

import msgspec

from netsketch.model import Plan


def one_line(text: str) -> str:
    """Return ``text`` with everything that would break a line of output made a blank."""
    return "".join(c if c.isprintable() else " " for c in text).strip()


def shortened(text: str, limit: int = 120) -> str:
    """Return the first words of what another parser complains about."""
    return text if len(text) <= limit else text[: limit - 1] + "…"


class FormatError(ValueError):
    """A file that cannot be read or written. ``str()`` is one line:
    ``<file>: <place>: <reason>``, without the place where the whole file is meant."""

    def __init__(self, file: str, place: str, reason: str) -> None:
        super().__init__(one_line(": ".join(part for part in (file, place, reason) if part)))
        self.file = file
        self.place = place
        self.reason = reason


class Loaded(msgspec.Struct, frozen=True):
    """What reading a file gave.

    ``notes`` say what was assumed or left out; ``format`` names the format; ``original``
    holds the bytes of a native file, so that saving an unchanged plan gives them back.
    """

    plan: Plan
    notes: tuple[str, ...]
    format: str
    original: bytes | None = None
