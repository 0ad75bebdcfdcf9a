"""How an answer is printed: JSON a row a line, CSV, or aligned text."""

from __future__ import annotations

import json
import sys
from collections.abc import Iterable, Sequence
from typing import Any

from netsketch.reports.tables import csv_text
from netsketch.reports.text import Cell, text_table
from netsketch.routing import NextHop


def write_json(head: dict[str, Any], name: str, rows: Iterable[Any]) -> None:
    """Print one JSON object: the keys of ``head``, then ``name`` with a row a line, made
    as they are printed so that a long ledger needs no memory."""
    out = sys.stdout
    out.write("{")
    out.writelines(f"{json.dumps(key)}: {json.dumps(value)}, " for key, value in head.items())
    out.write(f"{json.dumps(name)}: [")
    separator = "\n "
    for row in rows:
        out.write(f"{separator}{json.dumps(row)}")
        separator = ",\n "
    out.write("]}\n")


def write_object(answer: dict[str, Any]) -> None:
    """Print one JSON object."""
    print(json.dumps(answer, indent=1))


def write_table(
    form: str, header: Sequence[str], rows: Iterable[Sequence[Cell]], title: str
) -> None:
    """Print a table as "csv", or as "text" under a title."""
    if form == "csv":
        # Standard output makes the line ends of the system.
        sys.stdout.write(csv_text(header, rows).replace("\r\n", "\n"))
        return
    print(title)
    listed = list(rows)
    if listed:
        print()
        sys.stdout.writelines(f"{line}\n" for line in text_table(header, listed))


def next_hops(found: Iterable[NextHop]) -> list[dict[str, str | None]]:
    """Return next hops as every JSON answer gives them."""
    return [{"link": hop.link, "router": hop.router} for hop in found]
