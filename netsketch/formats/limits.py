"""How much one file may hold: far above any real network, low enough to refuse at once
what would only exhaust the memory."""

from __future__ import annotations

import math
from typing import Any, Final

from netsketch.formats.errors import FormatError
from netsketch.model import quoted

FILE_BYTES: Final = 64 * 1024 * 1024
NESTING: Final = 64
NODES: Final = 200_000
LINKS: Final = 1_000_000
TEXT_CHARACTERS: Final = 100_000
NUMBER_DIGITS: Final = 300
"""Whole numbers beyond this have no use in a plan and are slow to read and print."""


def check_count(number: int, most: int, what: str, file: str) -> None:
    """Raise :class:`FormatError` when there are more than ``most`` of ``what``."""
    if number > most:
        raise FormatError(file, "", f"{number:,} {what}; the most is {most:,}")


def check_size(size: int, file: str) -> None:
    """Raise :class:`FormatError` when the file is larger than :data:`FILE_BYTES`."""
    if size > FILE_BYTES:
        raise FormatError(file, "", f"larger than {FILE_BYTES // 1024**2} MB, the most there is")


def has_only_short_plain_texts(data: bytes) -> bool:
    """Return whether a glance at a JSON file shows that every text in it is within the
    limit and of whole characters; ``False`` means that they must be looked at."""
    return b"\\" not in data and max(map(len, data.split(b'"'))) <= TEXT_CHARACTERS


def check_values(value: Any, place: str, file: str) -> None:
    """Raise :class:`FormatError` unless every value inside ``value`` can be kept and
    written again: texts within the limit and of whole characters, numbers finite,
    nesting within the limit."""
    waiting = [(value, 0)]
    while waiting:
        found, depth = waiting.pop()
        kind = type(found)
        if kind is str:
            _check_text(found, place, file)
        elif kind is dict or kind is list or kind is tuple:
            if depth >= NESTING:
                raise FormatError(file, place, f"nested more than {NESTING} deep")
            inside = found.values() if kind is dict else found
            waiting.extend((item, depth + 1) for item in inside)
            if kind is dict:
                waiting.extend((key, depth + 1) for key in found)
        elif kind is float and not math.isfinite(found):
            raise FormatError(file, place, f"{found} is not a number that can be used")
        elif kind is int and abs(found) >= 10**NUMBER_DIGITS:
            raise FormatError(file, place, f"a number with over {NUMBER_DIGITS} digits")


def _check_text(text: str, place: str, file: str) -> None:
    if len(text) > TEXT_CHARACTERS:
        reason = f"a text of {len(text):,} characters; the most is {TEXT_CHARACTERS:,}"
        raise FormatError(file, place, f"{reason}: {quoted(text, 30)}")
    if not text.isascii():
        try:
            text.encode()
        except UnicodeEncodeError as error:
            raise FormatError(file, place, "a text holds half a character (surrogate)") from error
