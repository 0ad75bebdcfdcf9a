"""Tables as aligned text for a terminal."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable, Iterator, Sequence

NONE = "–"
"""What stands where there is no value."""

Cell = str | int | float | None


def text_table(header: Sequence[str], rows: Iterable[Sequence[Cell]]) -> Iterator[str]:
    """Yield the lines of a table: columns two blanks apart, numbers to the right.

    What does not print (control characters in a name) becomes a blank.
    """
    listed = list(rows)
    cells = [list(header), *([_text(cell) for cell in row] for row in listed)]
    numeric = [
        bool(listed) and all(isinstance(row[k], int | float | None) for row in listed)
        for k in range(len(header))
    ]
    widths = [max(_width(row[k]) for row in cells) for k in range(len(header))]
    for row in cells:
        parts = [
            _padded(text, width, right)
            for text, width, right in zip(row, widths, numeric, strict=True)
        ]
        yield "  ".join(parts).rstrip()


def number(value: float) -> str:
    """Return a number as short as six significant decimals let it be: "0.15", "12"."""
    return f"{value:.6f}".rstrip("0").rstrip(".")


def _text(cell: Cell) -> str:
    if cell is None:
        return NONE
    if isinstance(cell, float):
        return number(cell)
    return "".join(c if c.isprintable() else " " for c in str(cell))


def _width(text: str) -> int:
    """Return how many columns of a terminal ``text`` takes (Unicode Annex 11)."""
    return sum(
        0 if unicodedata.combining(c) else 2 if unicodedata.east_asian_width(c) in "WF" else 1
        for c in text
    )


def _padded(text: str, width: int, right: bool) -> str:
    gap = " " * (width - _width(text))
    return gap + text if right else text + gap
