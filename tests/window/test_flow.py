"""What a person does from an empty sheet to a saved plan, by mouse and keys."""

from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from netsketch.formats import native
from netsketch.model import LinkState
from netsketch.window import questions
from tests.window.conftest import Person

pytestmark = pytest.mark.gui


def draw_triangle(person: Person) -> None:
    """Draw three routers and three links with the mouse."""
    person.do("tool_router")
    for x, y in ((-200, 0), (200, 0), (0, 200)):
        person.click(person.spot(x, y))
    assert [router.id for router in person.plan.routers()] == ["r1", "r2", "r3"]
    person.do("tool_link")
    for tail, head in (("r1", "r2"), ("r2", "r3"), ("r3", "r1")):
        person.drag(person.at(tail), person.at(head))
    assert [link.ends for link in person.plan.links] == [("r1", "r2"), ("r2", "r3"), ("r3", "r1")]
    person.do("tool_select")
    person.settle()


def test_draw_read_fail_undo_save_reopen(person: Person, qtbot: QtBot, tmp_path: Path) -> None:
    draw_triangle(person)
    person.click(person.at("r1"))
    assert person.table()["R2"][3:6] == ["R2 over l1", "10", "1"]
    assert person.window.sheet.drawing.reading.kind == "outward"

    person.click(person.at("l1"))
    person.key(Qt.Key.Key_D)
    assert person.plan.trial.changes == (LinkState("l1", False),)
    person.click(person.at("r1"))
    person.settle()
    row = person.table()["R2"]
    assert row[1].endswith("moved")
    assert row[3:6] == ["R3 over l3", "20", "2"]
    assert not person.window.inspector.router_page.table.isColumnHidden(1)
    assert person.window.strip.totals.text() == "2 moved, 0 cut off of all pairs"

    person.key(Qt.Key.Key_Z, Qt.KeyboardModifier.ControlModifier)
    person.settle()
    assert not person.plan.trial
    assert person.table()["R2"][3] == "R2 over l1"

    person.ask.path = tmp_path / "triangle.netsketch.json"
    person.key(Qt.Key.Key_S, Qt.KeyboardModifier.ControlModifier)
    assert person.ask.path.exists()
    assert not person.window.isWindowModified()
    saved = native.dumps(person.plan)
    person.do("new")
    assert not len(person.plan.nodes)
    assert person.ask.asked == [], "a saved plan is left without a question"
    person.do("open")
    person.settle()
    assert native.dumps(person.plan) == saved
    person.click(person.at("r3"))
    assert person.table()["R1"][3] == "R1 over l3"


def test_undo_and_redo_of_everything_drawn(person: Person) -> None:
    draw_triangle(person)
    end = native.dumps(person.plan)
    for _ in range(6):
        person.key(Qt.Key.Key_Z, Qt.KeyboardModifier.ControlModifier)
    assert not len(person.plan.nodes)
    assert not person.window.actions_by_id["undo"].isEnabled()
    both = Qt.KeyboardModifier.ControlModifier | Qt.KeyboardModifier.ShiftModifier
    for _ in range(6):
        person.key(Qt.Key.Key_Z, both)
    assert native.dumps(person.plan) == end


def test_undo_says_what_it_takes_back(person: Person) -> None:
    draw_triangle(person)
    person.do("select_all")
    person.key(Qt.Key.Key_D)
    assert "Undo: take 3 routers down" in person.window.actions_by_id["undo"].text()


def test_effect_shows_the_trial_for_the_focus_router(person: Person) -> None:
    draw_triangle(person)
    person.click(person.at("l1"))
    person.key(Qt.Key.Key_D)
    person.click(person.at("r1"))
    person.key(Qt.Key.Key_E)
    reading = person.window.sheet.drawing.reading
    assert reading.kind == "effect"
    assert reading.plates["r2"].moved
    assert person.window.actions_by_id["effect"].isChecked()
    person.key(Qt.Key.Key_O)
    assert person.window.sheet.drawing.reading.kind == "outward"


def test_unsaved_edits_are_asked_about(person: Person, tmp_path: Path) -> None:
    draw_triangle(person)
    person.ask.unsaved_answer = questions.GO_BACK
    person.do("new")
    assert len(person.plan.nodes) == 3
    assert not person.window.close()
    person.ask.unsaved_answer = questions.SAVE
    person.ask.path = None
    person.do("new")
    assert len(person.plan.nodes) == 3, "no file was chosen, so nothing was left"
    person.ask.path = tmp_path / "kept.netsketch.json"
    person.do("new")
    assert not len(person.plan.nodes)
    assert person.ask.path.exists()


def test_adopt_and_discard_can_be_undone(person: Person) -> None:
    draw_triangle(person)
    person.click(person.at("l2"))
    person.key(Qt.Key.Key_D)
    person.do("adopt")
    assert not person.plan.links["l2"].up
    assert not person.plan.trial
    person.do("undo")
    assert person.plan.links["l2"].up
    assert person.plan.trial
    person.do("discard")
    assert not person.plan.trial
    person.do("undo")
    assert person.plan.trial.changes == (LinkState("l2", False),)


def test_a_tried_cost(person: Person) -> None:
    draw_triangle(person)
    person.click(person.at("l1"))
    person.ask.line = "70000"
    person.key(Qt.Key.Key_T)
    assert "outside 1 to 65535" in person.window.statusBar().currentMessage()
    assert not person.plan.trial
    person.ask.line = "25/30"
    person.key(Qt.Key.Key_T)
    change = person.plan.trial.changes[0]
    assert (change.cost, change.cost_back) == (25, 30)
    assert person.plan.links["l1"].cost == 10


def test_drain_keeps_transit_away(person: Person) -> None:
    draw_triangle(person)
    person.click(person.at("l1"))
    person.key(Qt.Key.Key_D)
    person.click(person.at("r3"))
    person.key(Qt.Key.Key_R)
    person.click(person.at("r1"))
    person.settle()
    assert person.table()["R2"][3:5] == ["cut off", "–"]
    assert person.window.strip.totals.text() == "0 moved, 2 cut off of all pairs"
