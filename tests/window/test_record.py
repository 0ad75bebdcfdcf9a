"""The record from the File menu, made while the window stays awake."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from PySide6.QtCore import Qt

from netsketch.cli.main import main
from netsketch.model import NodeState, edits
from netsketch.routing import Cancelled
from netsketch.session import record
from netsketch.session.document import Document
from netsketch.window.record import printed_apart
from tests.demos import demo_path
from tests.window.conftest import Person

pytestmark = pytest.mark.gui

CAMPUS = demo_path("harbour-campus")
WRITTEN = re.compile(r"\d{4}-\d\d-\d\d \d\d.{0,2}:\d\d")


def test_an_empty_trial_says_what_to_do(person: Person) -> None:
    person.do("write_record")
    assert "press D" in person.ask.said[-1]  # type: ignore[attr-defined]
    assert person.window.state.text() == ""


def test_the_record_is_the_commands(person: Person, tmp_path: Path) -> None:
    """The same text, but for the time."""
    person.open(CAMPUS)
    person.window.sheet.select(["r2"], [])
    person.do("toggle_down")
    person.settle()
    mine, other = tmp_path / "r.md", tmp_path / "other" / "r.md"
    other.parent.mkdir()
    person.ask.path = mine
    person.key(Qt.Key.Key_R, Qt.KeyboardModifier.ControlModifier)
    assert person.window.state.text() == "Writing r.md"
    person.settle()
    assert person.window.state.text() == ""
    said = person.window.statusBar().currentMessage()
    assert said == (
        "The record is written: r.md, with r-ledger.csv and r-before.svg and r-after.svg beside it"
    )
    assert main(["record", str(CAMPUS), "--down", "r2", "-o", str(other)]) == 0
    texts = [WRITTEN.sub("", path.read_text(encoding="utf-8")) for path in (mine, other)]
    assert texts[0] == texts[1]


def test_edits_since_the_file_are_told(person: Person, tmp_path: Path) -> None:
    person.open(CAMPUS)
    person.window.sheet.select(["r2"], [])
    person.do("toggle_down")
    person.ask.path = tmp_path / "r.html"
    person.do("write_record")
    person.settle()
    assert "differs from that file" not in person.ask.path.read_text(encoding="utf-8")
    person.window.sheet.select(["r3"], [])
    person.do("delete")
    person.do("write_record")
    person.settle()
    assert "differs from that file" in person.ask.path.read_text(encoding="utf-8")


def test_a_pdf_is_laid_out_in_another_process(person: Person, tmp_path: Path) -> None:
    person.open(CAMPUS)
    person.window.sheet.select(["r2"], [])
    person.do("toggle_down")
    person.ask.path = tmp_path / "r.pdf"
    person.do("write_record")
    person.settle()
    assert person.ask.path.read_bytes().startswith(b"%PDF")


def test_a_file_that_cannot_be_written_is_refused(person: Person, tmp_path: Path) -> None:
    person.open(CAMPUS)
    person.window.sheet.select(["r2"], [])
    person.do("toggle_down")
    person.ask.path = tmp_path / "none" / "r.html"
    person.do("write_record")
    person.settle()
    assert "The record was not written" in person.ask.said[-1]  # type: ignore[attr-defined]
    assert str(person.ask.path) in person.ask.said[-1]  # type: ignore[attr-defined]


def test_pages_no_longer_wanted_are_given_up(tmp_path: Path) -> None:
    document = Document.open(CAMPUS)
    kept: list[record.Record] = []

    def note(what: record.Record) -> bytes:
        kept.append(what)
        return b""

    document.apply(edits.try_changes(document.plan, [NodeState("r2")], "try"))
    record.write(document, record.Wishes(tmp_path / "r.pdf", CAMPUS), None, note)
    with pytest.raises(Cancelled):
        printed_apart(kept[0], lambda: True)
