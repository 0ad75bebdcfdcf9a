"""Tables as text: CSV that a spreadsheet opens without running anything."""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Iterable, Sequence

_NUMBER = re.compile(r"[+-]?\d[\d,. ]*(e[+-]?\d+)?\Z", re.IGNORECASE)
_FORMULA = ("=", "+", "-", "@", "\t", "\r", "\n")


def safe_cell(value: object) -> object:
    """Return a cell that a spreadsheet takes as text: one that would start a formula gets
    an apostrophe before it; numbers stay numbers. ``None`` is an empty cell."""
    if value is None:
        return ""
    if isinstance(value, str) and value.startswith(_FORMULA) and not _NUMBER.match(value):
        return "'" + value
    return value


def csv_text(header: Sequence[str], rows: Iterable[Sequence[object]]) -> str:
    """Return a table as CSV (RFC 4180: CRLF, quotes doubled), every cell made safe."""
    text = io.StringIO()
    writer = csv.writer(text)
    writer.writerow([safe_cell(cell) for cell in header])
    writer.writerows([safe_cell(cell) for cell in row] for row in rows)
    return text.getvalue()
