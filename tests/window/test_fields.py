"""What is being written in a line is not lost, and its keys do not get in the way."""

from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QLineEdit, QToolBar, QWidget
from pytestqt.qtbot import QtBot

from netsketch.formats import native
from netsketch.window import questions
from tests.demos import demo_path
from tests.window.conftest import LEFT, Person

pytestmark = pytest.mark.gui

CONTROL = Qt.KeyboardModifier.ControlModifier


@pytest.fixture
def writing(person: Person, qtbot: QtBot) -> Person:
    """The harbour campus with a new name typed for its first router, and not left yet."""
    person.open(demo_path("harbour-campus"))
    router = person.plan.routers()[0].id
    person.click(person.at(router))
    name = person.window.inspector.router_page.name
    name.setFocus()
    name.selectAll()
    qtbot.keyClicks(name, "North gate")
    assert person.plan.nodes[router].name != "North gate"
    return person


def test_saving_takes_what_is_being_written(writing: Person, qtbot: QtBot, tmp_path: Path) -> None:
    writing.ask.path = tmp_path / "plan.netsketch.json"
    both = CONTROL | Qt.KeyboardModifier.ShiftModifier
    qtbot.keyClick(writing.window.inspector.router_page.name, Qt.Key.Key_S, both)
    saved = native.loads(writing.ask.path.read_bytes(), "plan").plan
    assert saved.routers()[0].name == "North gate"
    assert writing.window.inspector.router_page.name.hasFocus()


def test_closing_asks_about_what_is_being_written(writing: Person) -> None:
    writing.ask.unsaved_answer = questions.GO_BACK
    assert not writing.window.close()
    assert writing.plan.routers()[0].name == "North gate"


def test_a_tool_keeps_what_is_being_written(writing: Person, qtbot: QtBot) -> None:
    bar = writing.window.findChild(QToolBar, "Tools")
    button = bar.widgetForAction(writing.window.actions_by_id["toggle_drained"])
    assert isinstance(button, QWidget)
    qtbot.mouseClick(button, LEFT)
    assert writing.plan.trial
    assert writing.plan.routers()[0].name == "North gate"


def test_a_name_written_on_the_sheet_is_saved(person: Person, qtbot: QtBot, tmp_path: Path) -> None:
    person.open(demo_path("harbour-campus"))
    person.click(person.at(person.plan.routers()[0].id))
    person.key(Qt.Key.Key_F2)
    line = person.window.sheet.findChild(QLineEdit)
    qtbot.keyClicks(line, "South gate")
    person.ask.path = tmp_path / "plan.netsketch.json"
    person.do("save_as")
    saved = native.loads(person.ask.path.read_bytes(), "plan").plan
    assert saved.routers()[0].name == "South gate"
    assert person.window.sheet.hasFocus()


def test_undo_in_a_line_is_its_own_and_then_the_plans(writing: Person, qtbot: QtBot) -> None:
    name = writing.window.inspector.router_page.name
    qtbot.keyClick(name, Qt.Key.Key_Return)
    assert writing.plan.routers()[0].name == "North gate"
    qtbot.keyClicks(name, "!")
    qtbot.keyClick(name, Qt.Key.Key_Z, CONTROL)
    assert name.text() == "North gate"
    assert writing.plan.routers()[0].name == "North gate"
    qtbot.keyClick(name, Qt.Key.Key_Z, CONTROL)
    assert writing.plan.routers()[0].name == "Tower-A"
