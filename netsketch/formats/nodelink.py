"""Foreign node-link JSON, as networkx and others write it."""

from __future__ import annotations

from typing import Any, Final

from netsketch.formats.errors import FormatError, Loaded

NAME: Final = "node-link JSON"


def from_parsed(raw: Any, file: str) -> Loaded:
    """Return the plan drawn from a parsed node-link file."""
    raise FormatError(file, "", "not a netsketch file")
