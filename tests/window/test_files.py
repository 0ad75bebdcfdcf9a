"""Opening and writing beside other work, and texts that Qt could take for something else."""

from __future__ import annotations

import threading
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication, QMessageBox
from pytestqt.qtbot import QtBot

from netsketch.formats import native
from netsketch.model import Link, Plan, Router, edits
from netsketch.window import questions
from netsketch.window.literal import as_tip, on_button
from netsketch.window.questions import Questions
from netsketch.window.settings import Settings
from tests.demos import demo_path
from tests.window.conftest import Person

pytestmark = pytest.mark.gui


def test_opening_does_not_wait_for_the_routing_core(person: Person, qtbot: QtBot) -> None:
    loaded = threading.Event()
    person.window.relay.submit("core", lambda cancelled: loaded.wait(60), lambda result: None)
    person.window.files.open_path(demo_path("harbour-campus"))
    qtbot.waitUntil(lambda: len(person.plan.nodes) > 20)
    assert not loaded.is_set()
    loaded.set()
    person.settle()


def test_edits_made_while_a_file_is_read_are_asked_about(person: Person) -> None:
    person.window.files.open_path(demo_path("harbour-campus"))
    person.do("tool_router")
    person.click(person.spot(0, 0))
    person.ask.unsaved_answer = questions.GO_BACK
    person.settle()
    assert person.ask.asked == ["Untitled"]
    assert [router.id for router in person.plan.routers()] == ["r1"]


def test_a_copy_in_another_format_leaves_the_plan_unsaved(person: Person, tmp_path: Path) -> None:
    person.do("tool_router")
    person.click(person.spot(0, 0))
    person.ask.path = tmp_path / "copy.graphml"
    person.ask.unsaved_answer = questions.SAVE
    person.do("new")
    person.settle()
    assert "<graphml" in person.ask.path.read_text("utf-8")
    assert "copy.graphml is written" in person.window.notice.label.text()
    assert len(person.plan.nodes) == 1, "the plan itself is not saved, so it is not left"
    assert person.window.isWindowModified()


def test_a_copy_that_cannot_be_written_is_refused(person: Person, tmp_path: Path) -> None:
    person.do("tool_router")
    person.click(person.spot(0, 0))
    person.ask.path = tmp_path / "gone" / "copy.graphml"
    person.do("save_as")
    person.settle()
    assert len(person.ask.said) == 1
    assert "copy.graphml" in person.ask.said[0]
    assert person.window.files_state.text() == ""


def awkward() -> Plan:
    plan = Plan()
    for key, name, x in (("r1", "R&D <b>", 0.0), ("r2", "Q&A [*]", 300.0)):
        plan.apply(edits.add(plan, Router(id=key, name=name, x=x, y=0.0)))
    link = Link(id="l&1", source="r1", target="r2", cost=10, cost_back=10)
    plan.apply(edits.add(plan, link))
    return plan


def test_names_with_ampersands_and_angle_brackets_read_as_written(
    person: Person, tmp_path: Path
) -> None:
    path = tmp_path / "R&D [*].netsketch.json"
    path.write_bytes(native.dumps(awkward()))
    person.open(path)
    person.click(person.at("l&1"))
    person.key(Qt.Key.Key_D)
    window = person.window
    assert window.inspector.link_page.ends[0].text() == "R&&D <b>"
    assert window.actions_by_id["undo"].text() == "Undo: take link l&&1 down"
    assert window._recent.actions()[0].text() == "R&&D [*].netsketch.json"
    assert window.windowTitle().startswith("R&D [*][*].netsketch.json[*]")
    tips = [label.toolTip() for label in window.strip.findChildren(type(window.state))]
    assert as_tip("l&1 R&D <b>–Q&A [*] down") in tips


def test_literal_texts() -> None:
    assert on_button("Save & go") == "Save && go"
    assert (
        as_tip("<img src='x'>\n& more")
        == "<span>&lt;img src=&#x27;x&#x27;&gt;<br>&amp; more</span>"
    )


def test_a_refusal_is_shown_as_it_is_written(person: Person, qtbot: QtBot) -> None:
    shown: list[QMessageBox] = []

    def look() -> bool:
        box = QApplication.activeModalWidget()
        if isinstance(box, QMessageBox):
            shown.append(box)
            box.accept()
        return bool(shown)

    from PySide6.QtCore import QTimer

    timer = QTimer(interval=10)
    timer.timeout.connect(look)
    timer.start()
    Questions(person.window).refuse("<b>plan</b>.gml: line 3")
    timer.stop()
    assert shown[0].text() == "<b>plan</b>.gml: line 3"
    assert shown[0].textFormat() == Qt.TextFormat.PlainText


def test_a_demo_is_opened_as_a_copy(person: Person, tmp_path: Path) -> None:
    before = demo_path("harbour-campus").read_bytes()
    demo = next(a for a in person.window._demos.actions() if a.text() == "Harbour campus")
    demo.trigger()
    person.settle()
    assert len(person.plan.nodes) > 20
    assert Settings().recent == []
    person.do("select_all")
    person.key(Qt.Key.Key_Delete)
    person.ask.path = tmp_path / "mine.netsketch.json"
    person.do("save")
    assert person.ask.path.exists()
    assert person.window.windowTitle().startswith("mine.netsketch.json")
    assert demo_path("harbour-campus").read_bytes() == before
