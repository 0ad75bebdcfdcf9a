"""What the window offers when it starts, how it looks, and how it goes."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import (
    QAbstractButton,
    QComboBox,
    QLineEdit,
    QPushButton,
    QTableView,
    QWidget,
)
from pytestqt.qtbot import QtBot

from netsketch.window.settings import Settings
from tests.demos import demo_path
from tests.window.conftest import LEFT, Person

pytestmark = pytest.mark.gui

NEEDS_SELECTION = (
    "delete", "rename", "set_cost", "toggle_down", "toggle_drained", "drain_by_cost", "try_cost",
    "try_link",
)  # fmt: skip


def test_nothing_can_be_done_to_nothing(person: Person) -> None:
    actions = person.window.actions_by_id
    assert [key for key in NEEDS_SELECTION if actions[key].isEnabled()] == []
    assert actions["tool_select"].isChecked()
    person.open(demo_path("harbour-campus"))
    person.click(person.at(person.plan.routers()[0].id))
    assert actions["toggle_down"].isEnabled()
    person.do("new")
    assert [key for key in NEEDS_SELECTION if actions[key].isEnabled()] == []


def test_another_document_starts_with_its_own_routes(person: Person) -> None:
    person.open(demo_path("harbour-campus"))
    person.click(person.at(person.plan.routers()[0].id))
    person.key(Qt.Key.Key_D)
    person.key(Qt.Key.Key_E)
    assert person.window.actions_by_id["effect"].isChecked()
    person.open(demo_path("water-utility"))
    person.click(person.at(person.plan.routers()[0].id))
    assert person.window.actions_by_id["outward"].isChecked()
    assert person.window.sheet.drawing.reading.kind == "outward"


def test_the_look_follows_the_system_unless_one_is_chosen(person: Person) -> None:
    styles = QGuiApplication.styleHints()
    person.do("look_dark")
    styles.colorSchemeChanged.emit(Qt.ColorScheme.Light)
    assert person.window.sheet.look.name == "dark"
    Settings().look = "system"
    styles.colorSchemeChanged.emit(Qt.ColorScheme.Unknown)
    assert person.window.sheet.look.name == "light", "a system that does not say is light"


def test_every_control_has_a_name_to_be_read_out(person: Person, qtbot: QtBot) -> None:
    person.open(demo_path("harbour-campus"))
    person.click(person.at(next(iter(person.plan.links)).id))  # its ends are named now
    person.do("ledger")
    controls = person.window.findChildren(QWidget)
    named = (QAbstractButton, QComboBox, QLineEdit, QTableView)
    nameless = [
        control
        for control in controls
        if isinstance(control, named)
        and control.focusPolicy() != Qt.FocusPolicy.NoFocus
        and not control.accessibleName()
        and not (isinstance(control, QAbstractButton) and control.text())
        and not control.objectName().startswith("qt_")
    ]
    assert nameless == []
    assert len([c for c in controls if isinstance(c, named)]) > 30


def test_the_rows_of_a_ledger_stay_readable_while_the_next_is_computed(person: Person) -> None:
    person.open(demo_path("harbour-campus"))
    hub = next(router.id for router in person.plan.routers() if router.name == "Hub-W")
    person.click(person.at(hub))
    person.key(Qt.Key.Key_D)
    person.settle()
    person.do("ledger")
    model = person.window.ledger.model
    rows = model.rowCount()
    tower = next(router.id for router in person.plan.routers() if router.name == "Tower-A")
    person.window.go_to(("router", tower))
    person.key(Qt.Key.Key_Delete)
    assert tower not in person.plan.nodes
    assert person.window.desk.is_computing
    texts = [model.index(row, 8).data() for row in range(rows)]
    assert any("Tower-A over" in text for text in texts)


def test_pairs_of_equal_senders_are_in_order_of_whom_they_reach(person: Person) -> None:
    person.open(demo_path("harbour-campus"))
    person.click(person.at(person.plan.routers()[0].id))
    person.key(Qt.Key.Key_D)
    person.settle()
    model = person.window.ledger.model
    assert model.rowCount() > 5
    pairs = [
        tuple(model.index(row, column).data().casefold() for column in (0, 1))
        for row in range(model.rowCount())
    ]
    assert pairs == sorted(pairs)


def test_an_empty_sheet_offers_ways_to_begin(person: Person, qtbot: QtBot) -> None:
    page = person.window.inspector.plan_page
    demo = next(b for b in page.findChildren(QPushButton) if b.text() == "Harbour campus (demo)")
    qtbot.mouseClick(demo, LEFT)
    person.settle()
    assert len(person.plan.nodes) > 20
    assert not page.ways.isVisible()
    person.do("new")
    assert page.ways.isVisible()
    person.ask.path = demo_path("water-utility")
    on_disk = next(b for b in page.findChildren(QPushButton) if b.text().startswith("A plan"))
    qtbot.mouseClick(on_disk, LEFT)
    person.settle()
    assert len(person.plan.nodes) > 50


def test_a_link_of_another_document_has_its_own_ends(person: Person) -> None:
    usage = person.window.inspector.link_page.usage
    for name in ("harbour-campus", "water-utility"):
        person.open(demo_path(name))
        person.window.go_to(("link", "l6"))
        person.settle()
        ends = [person.plan.nodes[end].label for end in person.plan.links["l6"].ends]
        assert usage.direction.itemText(0) == " to ".join(ends)
        assert usage.direction.itemText(1) == " to ".join(reversed(ends))
