"""Writing the change record from the window: asked for here, made in the background."""

from __future__ import annotations

import os
import subprocess
import sys
from collections.abc import Callable
from functools import partial
from pathlib import Path
from tempfile import TemporaryFile
from typing import TYPE_CHECKING, Any

import msgspec

from netsketch.formats import FormatError
from netsketch.model import Plan
from netsketch.readings.reading import Reading
from netsketch.session.document import Document

if TYPE_CHECKING:
    from netsketch.reports.record import Record
    from netsketch.window.main_window import MainWindow

NOTHING_TRIED = (
    "Nothing is tried, so there is no change to record.\n\n"
    "Select a link or a router and press D to take it down, R to drain it, or T to try another "
    "cost. Then write the record."
)

LOOK_UP_SECONDS = 0.1
"""How often the wait for the pages is interrupted to see whether they are still wanted."""


def write_record(window: MainWindow) -> None:
    """Ask for a file and write the record of the trial to it; the window stays awake."""
    document = window.desk.document
    if not document.plan.trial:
        window.ask.tell("No record", NOTHING_TRIED)
        return
    folder = document.path.parent if document.path else Path.home()
    stem = document.title.removesuffix(".netsketch.json")
    out = window.ask.file_for_record(folder / f"{stem}-record.html")
    if out is None:
        return
    window.state.setText(f"Writing {out.name}")
    copy = Document(document.plan.snapshot())
    task = partial(_write, copy, out, document.path)
    window.relay.submit("record", task, partial(_written, window, out))


def _write(
    document: Document, out: Path, file: Path | None, cancelled: Callable[[], bool]
) -> list[Path]:
    from netsketch.session import record  # loads the routing core and the templates

    wishes = record.Wishes(out, file)
    print_pages = partial(printed_apart, cancelled=cancelled)
    return record.write(document, wishes, _draw, print_pages, cancelled=cancelled)


def _draw(plan: Plan, reading: Reading | None) -> str:
    from netsketch.sheet.picture import picture_bytes

    return picture_bytes(plan, reading, ".svg").decode()


def printed_apart(record: Record, cancelled: Callable[[], bool]) -> bytes:
    """Return the record as PDF, laid out in a process of its own: see
    :mod:`netsketch.sheet.print`. Raises :class:`~netsketch.routing.Cancelled`, and
    ``OSError`` when that process fails."""
    command = [sys.executable, "-m", "netsketch.sheet.print"]
    paths = os.pathsep.join(path for path in sys.path if path)
    with TemporaryFile() as told:
        told.write(msgspec.json.encode(record))
        told.seek(0)
        child = subprocess.Popen(
            command,
            stdin=told,
            stdout=subprocess.PIPE,
            stderr=subprocess.PIPE,
            env={**os.environ, "PYTHONPATH": paths},
            creationflags=getattr(subprocess, "CREATE_NO_WINDOW", 0),
        )
    with child:
        pages, complaint = _outcome(child, cancelled)
    if child.returncode:
        last = complaint.decode(errors="replace").strip().rpartition("\n")[2]
        raise OSError(f"the pages could not be laid out: {last}")
    return pages


def _outcome(child: subprocess.Popen[bytes], cancelled: Callable[[], bool]) -> tuple[bytes, bytes]:
    """Wait for the process; return what it wrote to standard output and standard error."""
    from netsketch.routing import Cancelled

    while True:
        try:
            return child.communicate(timeout=LOOK_UP_SECONDS)
        except subprocess.TimeoutExpired:
            if cancelled():
                child.kill()
                raise Cancelled from None


def _written(window: MainWindow, out: Path, result: Any) -> None:
    window.state.setText("")
    if isinstance(result, FormatError | OSError):
        window.ask.refuse(f"{result}\n\nThe record was not written.")
    elif isinstance(result, Exception):
        raise result
    else:
        first, *beside = (path.name for path in result)
        also = f", with {' and '.join(beside)} beside it" if beside else ""
        window.hint(f"The record is written: {first}{also}")
