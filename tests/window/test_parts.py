"""Trial strip, ledger, inspector, files and menus, by mouse and keys."""

from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QGuiApplication, QKeySequence
from PySide6.QtWidgets import QToolButton, QWidget
from pytestqt.qtbot import QtBot

from netsketch.model import NodeState
from netsketch.window import actions
from netsketch.window.demos import demo_files
from netsketch.window.settings import Settings
from tests.demos import demo_path
from tests.window.conftest import LEFT, Person

pytestmark = pytest.mark.gui


def named(parent: QWidget, start: str) -> list[QToolButton]:
    buttons = parent.findChildren(QToolButton)
    return [b for b in buttons if b.accessibleName().startswith(start) and b.isVisible()]


@pytest.fixture
def harbour(person: Person) -> Person:
    person.open(demo_path("harbour-campus"))
    return person


def find(person: Person, name: str) -> str:
    return next(node.id for node in person.plan.nodes if node.name == name)


def test_each_chip_takes_its_change_out(harbour: Person, qtbot: QtBot) -> None:
    for name in ("Hub-W", "Hub-E"):
        harbour.click(harbour.at(find(harbour, name)))
        harbour.key(Qt.Key.Key_D)
    harbour.settle()
    chips = named(harbour.window.strip, "Take out: Hub-W down")
    assert len(chips) == 1
    qtbot.mouseClick(chips[0], LEFT)
    assert harbour.plan.trial.changes == (NodeState(find(harbour, "Hub-E"), False),)
    harbour.do("undo")
    assert len(harbour.plan.trial.changes) == 2


def test_strip_buttons(harbour: Person, qtbot: QtBot) -> None:
    strip = harbour.window.strip
    assert not strip.adopt_button.isEnabled()
    harbour.click(harbour.at(find(harbour, "Hub-W")))
    harbour.key(Qt.Key.Key_D)
    qtbot.mouseClick(strip.discard_button, LEFT)
    assert not harbour.plan.trial
    harbour.do("undo")
    qtbot.mouseClick(strip.adopt_button, LEFT)
    assert not harbour.plan.nodes[find(harbour, "Hub-W")].up


def test_the_ledger_lists_what_moves(harbour: Person, qtbot: QtBot) -> None:
    harbour.click(harbour.at(find(harbour, "Lock-1")))
    harbour.key(Qt.Key.Key_D)
    harbour.settle()
    harbour.key(Qt.Key.Key_L)
    panel = harbour.window.ledger
    assert panel.isVisible()
    ledger = harbour.window.desk.ledger
    assert ledger is not None
    assert panel.model.rowCount() == len(ledger)
    assert ledger.cut_off > 0, "the sea lock is the demo's single point of failure"
    panel.outcome.setCurrentIndex(2)
    assert panel.model.rowCount() == ledger.cut_off
    qtbot.keyClicks(panel.filter, "Light-1")
    shown = panel.model.rowCount()
    assert 0 < shown < ledger.cut_off
    for row in range(shown):
        names = {panel.model.index(row, column).data() for column in (0, 1)}
        assert "Light-1" in names
    panel.table.sortByColumn(0, Qt.SortOrder.DescendingOrder)
    first = [panel.model.index(row, 0).data().casefold() for row in range(shown)]
    assert first == sorted(first, reverse=True)


def test_a_ledger_row_asks_for_the_pair(harbour: Person, qtbot: QtBot) -> None:
    harbour.click(harbour.at(find(harbour, "Hub-W")))
    harbour.key(Qt.Key.Key_D)
    harbour.settle()
    harbour.key(Qt.Key.Key_L)
    panel = harbour.window.ledger
    target = panel.table.visualRect(panel.model.index(0, 0)).center()
    qtbot.mouseClick(panel.table.viewport(), LEFT, pos=target)
    assert harbour.window.desk.pair == panel.model.pair(0)
    assert harbour.window.sheet.drawing.reading.focus == panel.model.pair(0)


def test_the_ledger_is_copied_and_saved_as_csv(
    harbour: Person, qtbot: QtBot, tmp_path: Path
) -> None:
    harbour.click(harbour.at(find(harbour, "Hub-W")))
    harbour.key(Qt.Key.Key_D)
    harbour.settle()
    panel = harbour.window.ledger
    rows = panel.model.rowCount()
    panel.copy.click()
    qtbot.waitUntil(lambda: QGuiApplication.clipboard().text().startswith("From,To,Outcome"))
    assert len(QGuiApplication.clipboard().text().splitlines()) == rows + 1
    harbour.ask.path = tmp_path / "ledger.csv"
    panel.export.click()
    qtbot.waitUntil(harbour.ask.path.exists)
    assert harbour.ask.path.read_text("utf-8-sig").splitlines() == (
        QGuiApplication.clipboard().text().splitlines()
    )


def test_the_forwarding_table_filters_sorts_lights_and_copies(
    harbour: Person, qtbot: QtBot
) -> None:
    harbour.click(harbour.at(find(harbour, "Gate-N")))
    page = harbour.window.inspector.router_page
    everything = page.table_model.rowCount()
    qtbot.keyClicks(page.filter, "quay")
    assert 0 < page.table_model.rowCount() < everything
    page.table.sortByColumn(4, Qt.SortOrder.DescendingOrder)
    costs = [int(row[4]) for row in harbour.table().values()]
    assert costs == sorted(costs, reverse=True)
    spot = page.table.visualRect(page.table_model.index(0, 0)).center()
    qtbot.mouseClick(page.table.viewport(), LEFT, pos=spot)
    target = page.table_model.line(0).row.to
    answers = harbour.window.desk.answers
    assert answers is not None
    used = {share.link for share in answers.path(find(harbour, "Gate-N"), target).links}
    assert set(harbour.window.sheet._lit) == used
    qtbot.keyClick(page.table, Qt.Key.Key_C, Qt.KeyboardModifier.ControlModifier)
    lines = QGuiApplication.clipboard().text().splitlines()
    assert lines[0].startswith("id,destination,first hops,next hops,cost")
    assert len(lines) == page.table_model.rowCount() + 1
    qtbot.keyClick(page.table, Qt.Key.Key_Escape)
    assert not harbour.window.sheet._lit


def test_the_link_page_tries_and_changes_costs(harbour: Person, qtbot: QtBot) -> None:
    link = next(iter(harbour.plan.links)).id
    harbour.click(harbour.at(link))
    page = harbour.window.inspector.link_page
    assert harbour.window.inspector.currentWidget() is page
    assert page._link == link
    page.costs[0].setText("=cmd()")
    qtbot.mouseClick(page.try_button, LEFT)
    assert "is not a whole number" in harbour.window.statusBar().currentMessage()
    assert not harbour.plan.trial
    before = harbour.plan.links[link]
    page.costs[0].setText("77")
    qtbot.mouseClick(page.try_button, LEFT)
    assert harbour.plan.links[link] == before
    assert harbour.plan.trial.changes[0].cost == 77
    page.costs[0].setText("78")
    qtbot.mouseClick(page.set_button, LEFT)
    assert harbour.plan.links[link].cost == 78


def test_names_and_figures_are_edited_in_the_inspector(harbour: Person, qtbot: QtBot) -> None:
    router = find(harbour, "Gate-N")
    harbour.click(harbour.at(router))
    page = harbour.window.inspector.router_page
    page.name.setFocus()
    page.name.selectAll()
    qtbot.keyClicks(page.name, "Gate-North")
    qtbot.keyClick(page.name, Qt.Key.Key_Return)
    assert harbour.plan.nodes[router].name == "Gate-North"
    link = harbour.plan.links_at(router)[0].id
    harbour.click(harbour.at(link))
    figures = harbour.window.inspector.link_page
    figures.delay.setText("oops")
    figures.delay.editingFinished.emit()
    assert "is not a number" in harbour.window.statusBar().currentMessage()
    figures.delay.setText("2.5")
    figures.delay.editingFinished.emit()
    assert harbour.plan.links[link].delay_ms == 2.5
    figures.groups.setText("duct-7, duct-8")
    figures.groups.editingFinished.emit()
    assert harbour.plan.links[link].groups == ("duct-7", "duct-8")
    harbour.do("undo")
    assert "duct-7" not in harbour.plan.groups


def test_a_bad_file_is_refused_and_the_plan_stays(harbour: Person, tmp_path: Path) -> None:
    bad = tmp_path / "bad.netsketch.json"
    bad.write_text('{"format": "netsketch", "version": 1, "nodes": [{"id": 5}]}')
    document = harbour.window.desk.document
    harbour.open(bad)
    assert len(harbour.ask.said) == 1
    assert "bad.netsketch.json" in harbour.ask.said[0]
    assert harbour.window.desk.document is document


def test_recent_files(harbour: Person, tmp_path: Path) -> None:
    recent = harbour.window._recent
    assert [action.text() for action in recent.actions()] == ["harbour-campus.netsketch.json"]
    harbour.do("new")
    recent.actions()[0].trigger()
    harbour.settle()
    assert len(harbour.plan.nodes) > 20
    gone = tmp_path / "gone.netsketch.json"
    Settings().add_recent(gone)
    harbour.open(gone)
    assert gone not in Settings().recent


@pytest.mark.parametrize("name", ["harbour-campus", "water-utility", "backbone-1000"])
def test_demos_open_and_answer(person: Person, name: str) -> None:
    assert demo_path(name) in [path for _, path in demo_files()]
    person.open(demo_path(name))
    router = person.plan.routers()[0].id
    person.window.go_to(("router", router))
    assert len(person.table()) > 20
    assert person.window.windowTitle().startswith(f"{name}.netsketch.json")


def test_every_action_says_what_it_does_and_no_two_share_a_key(person: Person) -> None:
    assert set(person.window.actions_by_id) == {entry.id for entry in actions.ENTRIES}
    keys: list[str] = []
    for entry in actions.ENTRIES:
        action = person.window.actions_by_id[entry.id]
        assert action.text()
        assert action.statusTip()
        assert action.toolTip()
        assert entry.menu in actions.MENUS
        if entry.key:
            sequence = QKeySequence(entry.key)
            assert not sequence.isEmpty()
            keys.append(sequence.toString())
    assert len(keys) == len(set(keys))


def test_keys_and_cautions_can_be_read(person: Person) -> None:
    person.do("keys")
    person.do("cautions")
    assert "Ctrl+S" in person.ask.said[0]
    assert "change procedure" in person.ask.said[1]


def test_looks_switch_and_are_remembered(person: Person) -> None:
    person.do("look_dark")
    assert person.window.sheet.look.name == "dark"
    assert Settings().look == "dark"
    person.do("look_light")
    assert person.window.sheet.look.name == "light"


def test_several_things_have_a_page(harbour: Person) -> None:
    for name in ("Hub-W", "Hub-E", "Gate-N"):
        harbour.click(harbour.at(find(harbour, name)), Qt.KeyboardModifier.ShiftModifier)
    page = harbour.window.inspector.several_page
    assert harbour.window.inspector.currentWidget() is page
    assert page.counts.text() == "3 routers selected"


def test_the_picture_of_the_sheet(harbour: Person, tmp_path: Path) -> None:
    harbour.click(harbour.at(find(harbour, "Gate-N")))
    harbour.ask.path = tmp_path / "sheet.svg"
    harbour.do("save_picture")
    harbour.settle()
    assert "Gate-N" in harbour.ask.path.read_text()


def test_trials_are_kept_laid_compared_and_forgotten(harbour: Person, qtbot: QtBot) -> None:
    harbour.click(harbour.at(find(harbour, "Hub-W")))
    harbour.key(Qt.Key.Key_D)
    harbour.ask.line = "west first"
    harbour.key(Qt.Key.Key_K)
    assert harbour.plan.trials.keys() == ["west first"]
    harbour.do("discard")
    harbour.click(harbour.at(find(harbour, "Hub-E")))
    harbour.key(Qt.Key.Key_D)
    harbour.settle()
    panel = harbour.window.ledger
    against_plan = harbour.window.desk.ledger
    harbour.key(Qt.Key.Key_L)
    assert panel.against.count() == 2
    panel.against.setCurrentIndex(1)
    panel.against.activated.emit(1)
    harbour.settle()
    against_kept = harbour.window.desk.ledger
    assert against_kept is not None
    assert against_kept.restored > 0, "Hub-W is down in the kept trial and up in this one"
    panel.against.setCurrentIndex(0)
    panel.against.activated.emit(0)
    harbour.settle()
    assert list(harbour.window.desk.ledger or ()) == list(against_plan or ())
    lay, forget = harbour.window._kept.actions()[0].menu().actions()
    lay.trigger()
    assert harbour.plan.trial.changes == (NodeState(find(harbour, "Hub-W"), False),)
    lay, forget = harbour.window._kept.actions()[0].menu().actions()
    forget.trigger()
    assert not len(harbour.plan.trials)
    harbour.do("undo")
    assert harbour.plan.trials.keys() == ["west first"]


def test_the_ledger_filters_by_extra_cost_and_delay(harbour: Person, qtbot: QtBot) -> None:
    harbour.click(harbour.at(find(harbour, "Hub-W")))
    harbour.key(Qt.Key.Key_D)
    harbour.settle()
    harbour.key(Qt.Key.Key_L)
    panel, ledger = harbour.window.ledger, harbour.window.desk.ledger
    assert ledger is not None
    qtbot.keyClicks(panel.least_cost, "20")
    extra = (ledger.after - ledger.before)[(ledger.after >= 0) & (ledger.before >= 0)]
    assert panel.model.rowCount() == int((extra >= 20).sum()) > 0
    panel.least_cost.clear()
    qtbot.keyClicks(panel.least_delay, "0.1")
    delay = ledger.delay_after - ledger.delay_before
    assert panel.model.rowCount() == int((delay >= 0.1).sum()) > 0


def test_a_link_tried_between_two_routers(harbour: Person, qtbot: QtBot) -> None:
    ends = find(harbour, "Rail-1"), find(harbour, "Quay-1")
    harbour.click(harbour.at(ends[0]))
    harbour.click(harbour.at(ends[1]), Qt.KeyboardModifier.ShiftModifier)
    harbour.ask.line = "none"
    harbour.do("try_link")
    assert "is not a whole number" in harbour.window.statusBar().currentMessage()
    harbour.ask.line = "5"
    harbour.do("try_link")
    harbour.settle()
    added = harbour.plan.trial.added()[0]
    assert (added.source, added.target, added.cost) == (*ends, 5)
    assert added.link not in harbour.plan.links
    assert harbour.window.sheet.middle_of(added.link) is not None, "it is drawn"
    assert harbour.window.desk.ledger is not None
    assert harbour.window.desk.ledger.moved > 0
    harbour.click(harbour.at(added.link))
    assert harbour.window.sheet.selected_links == [], "it is the trial's, not the plan's, to edit"
    assert len(named(harbour.window.strip, "Take out: new link")) == 1
    harbour.do("adopt")
    assert harbour.plan.links[added.link].ends == ends
