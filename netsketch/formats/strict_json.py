"""JSON as RFC 8259 has it: UTF-8, no key twice in one object, nothing behind the end.

The standard parser would keep the last of two equal keys and say nothing.
"""

from __future__ import annotations

import json
from typing import Any

from netsketch.formats.errors import FormatError
from netsketch.model import quoted


class _RepeatedKeyError(ValueError):
    """A key stands twice in one object."""


def decode_text(data: bytes, file: str) -> str:
    """Return the text of a UTF-8 file, without a byte order mark.

    Raises :class:`FormatError` naming the encoding or the place of the first bad byte.
    """
    if data.startswith((b"\xff\xfe", b"\xfe\xff")):
        raise FormatError(file, "", "encoded as UTF-16; save it as UTF-8")
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        raise FormatError(file, f"line {line}", "not UTF-8 text") from error


def parse(data: bytes, file: str) -> Any:
    """Return the value that ``data`` holds; numbers written NaN or Infinity come through
    as floats for the caller to refuse by name.

    Raises :class:`FormatError` naming line and column.
    """
    text = decode_text(data, file)
    if not text.strip():
        raise FormatError(file, "", "empty")
    try:
        return json.loads(text, object_pairs_hook=_object)
    except json.JSONDecodeError as error:
        if not text[error.pos :].strip():
            raise FormatError(file, f"line {error.lineno}", "ends too early") from error
        place = f"line {error.lineno}, column {error.colno}"
        raise FormatError(file, place, f"not JSON: {error.msg}") from error
    except _RepeatedKeyError as error:
        raise FormatError(file, "", str(error)) from error
    except RecursionError as error:
        raise FormatError(file, "", "nested too deeply") from error
    except ValueError as error:  # int() refuses to read thousands of digits
        raise FormatError(file, "", "a number with too many digits") from error


def _object(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    found = dict(pairs)
    if len(found) != len(pairs):
        seen: set[str] = set()
        for key, _ in pairs:
            if key in seen:
                where = found.get("key", found.get("id"))
                inside = f" in {quoted(str(where))}" if where is not None else ""
                raise _RepeatedKeyError(f"the key {quoted(key)} stands twice{inside}")
            seen.add(key)
    return found
