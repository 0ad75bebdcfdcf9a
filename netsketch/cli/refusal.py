"""How a command refuses what it was given."""

from __future__ import annotations

from netsketch.formats.errors import one_line


class InputError(Exception):
    """Input that a command cannot use. ``str()`` is one line that names the file, the
    place (an option, where it came from one) and the reason."""

    def __init__(self, *parts: str) -> None:
        super().__init__(one_line(": ".join(part for part in parts if part)))
