"""Attributes of foreign graphs: found by name whatever the case, read as what they mean."""

from __future__ import annotations

import json
import math
from collections.abc import Collection
from typing import Any

_TRUE = {"true", "1", "yes"}
_FALSE = {"false", "0", "no"}


class Found:
    """The attributes of one node, edge or graph; remembers which were asked for."""

    def __init__(self, attributes: dict[str, Any]) -> None:
        self._values = {str(k).lower(): v for k, v in attributes.items() if v is not None}
        self._names = {str(k).lower(): str(k) for k in attributes}
        self._used: set[str] = set()

    def get(self, *names: str) -> Any:
        """Return the value under the first of ``names`` that there is, or ``None``."""
        return self.named(*names)[1]

    def named(self, *names: str) -> tuple[str, Any]:
        """Return the first of ``names`` that there is, and its value."""
        self._used.update(names)
        return next(
            ((name, self._values[name]) for name in names if name in self._values), ("", None)
        )

    def rest(self, reserved: Collection[str]) -> tuple[dict[str, Any], list[str]]:
        """Return the plain values nobody asked for, and the names of those that are not
        plain. Names in ``reserved`` mean something else in a native file."""
        kept, left = {}, []
        for lower, value in self._values.items():
            name = self._names[lower]
            if lower in self._used:
                continue
            if name in reserved or not isinstance(value, str | int | float | bool):
                left.append(name)
            else:
                kept[name] = value if isinstance(value, str) else number(value)
        return kept, left


def number(value: Any) -> Any:
    """Return ``value`` as a number, whole where it is; unchanged when it is none."""
    if isinstance(value, str):
        try:
            value = float(value) if len(value) < 50 else value
        except ValueError:
            return value
    if isinstance(value, float) and value.is_integer() and abs(value) < 2**53:
        return int(value)
    return value


def is_number(value: Any) -> bool:
    """Return whether ``value`` is a finite number."""
    if isinstance(value, bool) or not isinstance(value, int | float):
        return False
    return abs(value) < 1e15 and math.isfinite(value)


def truth(value: Any) -> Any:
    """Return ``value`` as true or false; unchanged when it is neither."""
    word = str(value).lower()
    return True if word in _TRUE else False if word in _FALSE else value


def text(value: Any) -> str:
    """Return ``value`` as text; networkx reads the GML texts "()" and "[]" as empty lists."""
    if isinstance(value, list | tuple) and not value:
        return "[]" if isinstance(value, list) else "()"
    return str(value)


def from_json(value: Any, kind: type) -> Any:
    """Return what the JSON text ``value`` holds when that is of ``kind``; a value of
    ``kind`` itself; else ``None``."""
    if isinstance(value, tuple):
        value = list(value)
    if isinstance(value, str):
        try:
            value = json.loads(value)
        except (ValueError, RecursionError):
            return None
    return value if isinstance(value, kind) else None
