"""The survey by mouse and keys: run, rank, look, try, cancel, stale."""

from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import QPoint, Qt
from pytestqt.qtbot import QtBot

from netsketch.analysis.survey import failures_of, survey
from netsketch.model import NodeState
from netsketch.routing import compile_plan
from tests.demos import demo_path
from tests.window.conftest import LEFT, Person

pytestmark = pytest.mark.gui


def find(person: Person, name: str) -> str:
    return next(node.id for node in person.plan.nodes if node.name == name)


def run(person: Person, qtbot: QtBot, kind: int) -> None:
    panel = person.window.survey
    panel.kind.setCurrentIndex(kind)
    qtbot.mouseClick(panel.start, LEFT)
    qtbot.waitUntil(lambda: not person.window.surveys.is_running, timeout=60_000)


@pytest.fixture
def harbour(person: Person) -> Person:
    person.open(demo_path("harbour-campus"))
    person.key(Qt.Key.Key_W)
    return person


def test_the_worst_router_comes_first_and_can_be_tried(harbour: Person, qtbot: QtBot) -> None:
    run(harbour, qtbot, 1)
    panel = harbour.window.survey
    expected = survey(compile_plan(harbour.plan), "routers", failures_of(harbour.plan, "routers"))
    worst = expected.failures[expected.ranked()[0]]
    assert panel.model.cells(0)[0] == harbour.plan.nodes[worst.ids[0]].label
    assert "cut pairs off" in panel.state.text()
    spot = panel.table.visualRect(panel.model.index(0, 0)).center()
    qtbot.mouseClick(panel.table.viewport(), LEFT, pos=spot)
    qtbot.waitUntil(lambda: harbour.window.surveys.ledger is not None, timeout=20_000)
    qtbot.waitUntil(lambda: harbour.window.ledger.model.rowCount() > 0, timeout=20_000)
    ledger = harbour.window.surveys.ledger
    assert ledger is not None
    assert (ledger.cut_off, ledger.moved) == panel.model.totals(0)
    reading = harbour.window.sheet.drawing.reading
    assert reading.kind == "effect"
    assert reading.plates[worst.ids[0]].role == "cut off"
    qtbot.mouseClick(panel.try_it, LEFT)
    assert harbour.plan.trial.changes == (NodeState(worst.ids[0], False),)
    assert panel.state.text().startswith("Stale")
    harbour.do("undo")
    assert not panel.state.text().startswith("Stale"), "the plan is as it was surveyed"


def test_sorting_the_plot_and_csv(harbour: Person, qtbot: QtBot, tmp_path: Path) -> None:
    run(harbour, qtbot, 0)
    panel = harbour.window.survey
    panel.table.sortByColumn(2, Qt.SortOrder.DescendingOrder)
    moved = [panel.model.totals(row)[1] for row in range(panel.model.rowCount())]
    assert moved == sorted(moved, reverse=True)
    qtbot.mouseClick(panel.plot, LEFT, pos=QPoint(round(panel.plot.x_of(3)), 20))
    assert panel.table.currentIndex().row() == 3
    harbour.ask.path = tmp_path / "survey.csv"
    qtbot.mouseClick(panel.save, LEFT)
    lines = harbour.ask.path.read_text("utf-8-sig").splitlines()
    assert len(lines) == len(harbour.plan.links) + 1
    assert lines[0].startswith("Failed,Cut off,Moved")


def test_pairs_of_links_with_demands_show_progress_and_can_be_cancelled(
    person: Person, qtbot: QtBot
) -> None:
    person.open(demo_path("water-utility"))
    person.key(Qt.Key.Key_W)
    panel, surveys = person.window.survey, person.window.surveys
    panel.kind.setCurrentIndex(3)
    with qtbot.waitSignal(surveys.progressed, timeout=60_000):
        qtbot.mouseClick(panel.start, LEFT)
    assert panel.progress.isVisible()
    qtbot.mouseClick(panel.cancel, LEFT)
    assert not surveys.is_running
    assert surveys.done is None
    qtbot.waitUntil(lambda: surveys._jobs.is_idle, timeout=2_000)


def test_shared_risk_groups_with_loads(person: Person, qtbot: QtBot) -> None:
    person.open(demo_path("water-utility"))
    person.key(Qt.Key.Key_W)
    run(person, qtbot, 2)
    panel = person.window.survey
    assert panel.model.rowCount() == len(person.plan.groups)
    assert all(panel.model.cells(row)[5] for row in range(panel.model.rowCount()))


def test_nothing_to_survey_says_so(person: Person, qtbot: QtBot) -> None:
    person.key(Qt.Key.Key_W)
    qtbot.mouseClick(person.window.survey.start, LEFT)
    assert "no links" in person.window.statusBar().currentMessage()
