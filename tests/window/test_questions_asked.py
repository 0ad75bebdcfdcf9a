"""Paths, ways in and who uses a link, asked by mouse and keys."""

from __future__ import annotations

import pytest
from PySide6.QtCore import QPoint, Qt
from pytestqt.qtbot import QtBot

from netsketch.analysis.tipping import tipping
from netsketch.model import LinkCost
from netsketch.routing import AllPairs, compile_plan
from tests.demos import demo_path
from tests.window.conftest import LEFT, Person

pytestmark = pytest.mark.gui

SHIFT = Qt.KeyboardModifier.ShiftModifier


@pytest.fixture
def harbour(person: Person) -> Person:
    person.open(demo_path("harbour-campus"))
    return person


def find(person: Person, name: str) -> str:
    return next(node.id for node in person.plan.nodes if node.name == name)


def cells(table) -> list[list[str]]:  # type: ignore[no-untyped-def]
    columns = range(table.columnCount())
    return [[table.item(row, c).text() for c in columns] for row in range(table.rowCount())]


def test_click_and_shift_click_show_the_path_and_the_way_back(harbour: Person) -> None:
    source, target = find(harbour, "Hub-W"), find(harbour, "Quay-3")
    harbour.click(harbour.at(source))
    harbour.click(harbour.at(target), SHIFT)
    page = harbour.window.inspector.path_page
    assert harbour.window.inspector.currentWidget() is page
    assert page.title.text() == "Hub-W to Quay-3"
    answers = harbour.window.desk.answers
    assert answers is not None
    expected = answers.pair(source, target)
    assert expected.parts_at is not None, "the demo's ways out and back differ"
    rows = cells(page.out)
    assert [row[0] for row in rows] == [harbour.plan.nodes[h.tail].label for h in expected.out.hops]
    assert [row[3] for row in rows] == [str(hop.cost_so_far) for hop in expected.out.hops]
    assert page.back.isVisible()
    assert "parts at" in page.back_title.text()
    assert len(cells(page.down)) == len(expected.if_down)
    roles = {
        travel.role
        for mark in harbour.window.sheet.drawing.reading.links.values()
        for travel in mark.travels
    }
    assert roles == {"path", "way back"}
    harbour.click(harbour.at(find(harbour, "Gate-N")))
    assert harbour.window.inspector.currentWidget() is harbour.window.inspector.router_page


def test_a_pair_by_name(harbour: Person, qtbot: QtBot) -> None:
    harbour.click(harbour.at(find(harbour, "Gate-N")))
    line = harbour.window.inspector.router_page.path_to
    line.setText("nobody")
    qtbot.keyClick(line, Qt.Key.Key_Return)
    assert harbour.window.statusBar().currentMessage() == "No such name"
    line.setText("light")
    qtbot.keyClick(line, Qt.Key.Key_Return)
    assert harbour.window.desk.pair == (find(harbour, "Gate-N"), find(harbour, "Light-1"))


def test_a_pair_in_a_trial_shows_old_and_new_from_the_ledger(harbour: Person, qtbot: QtBot) -> None:
    harbour.click(harbour.at(find(harbour, "Hub-W")))
    harbour.key(Qt.Key.Key_D)
    harbour.settle()
    harbour.key(Qt.Key.Key_L)
    panel = harbour.window.ledger
    panel.outcome.setCurrentIndex(1)
    spot = panel.table.visualRect(panel.model.index(0, 0)).center()
    qtbot.mouseClick(panel.table.viewport(), LEFT, pos=spot)
    roles = {
        travel.role
        for mark in harbour.window.sheet.drawing.reading.links.values()
        for travel in mark.travels
    }
    assert {"before", "after"} <= roles


def test_inward_shows_how_everyone_reaches_a_router(harbour: Person) -> None:
    target = find(harbour, "Gate-N")
    harbour.click(harbour.at(target))
    harbour.key(Qt.Key.Key_I)
    reading = harbour.window.sheet.drawing.reading
    assert reading.kind == "inward"
    answers = harbour.window.desk.answers
    assert answers is not None
    rows = harbour.table()
    assert len(rows) == len(harbour.plan.routers()) - 1
    for name, row in rows.items():
        way = answers.path(find(harbour, name), target)
        assert row[4] == str(way.cost)
    harbour.key(Qt.Key.Key_O)
    assert harbour.window.sheet.drawing.reading.kind == "outward"


def test_the_link_page_shows_who_uses_it_and_tries_a_picked_cost(
    harbour: Person, qtbot: QtBot
) -> None:
    link = harbour.plan.links_at(find(harbour, "Lock-1"))[0]
    harbour.click(harbour.at(link.id))
    harbour.settle()
    usage = harbour.window.inspector.link_page.usage
    expected = tipping(AllPairs(compile_plan(harbour.plan)), link.id)
    assert usage.count.text().startswith(f"{expected.using(link.cost):,} pairs at cost {link.cost}")
    assert usage.pairs.count() == expected.using(link.cost)
    plot = usage.plot
    steps = expected.steps(65535)
    assert plot.pairs_at(1) == expected.using(1)
    pick = plot.cost_at(plot.x_of(steps[0][0]) + 12)
    spot = QPoint(round(plot.x_of(steps[0][0]) + 12), plot.height() // 2)
    qtbot.mouseClick(plot, LEFT, pos=spot)
    change = harbour.plan.trial.find(LinkCost, link.id)
    assert change == LinkCost(link.id, pick, link.cost_back)
    usage.direction.setCurrentIndex(1)
    harbour.settle()
    back = tipping(AllPairs(compile_plan(harbour.plan, harbour.plan.trial)), link.id, back=True)
    assert usage.count.text().startswith(f"{back.using(link.cost_back):,} pairs")


def test_keys_step_through_the_tipping_costs(harbour: Person, qtbot: QtBot) -> None:
    link = harbour.plan.links_at(find(harbour, "Lock-1"))[0]
    harbour.click(harbour.at(link.id))
    harbour.settle()
    plot = harbour.window.inspector.link_page.usage.plot
    expected = tipping(AllPairs(compile_plan(harbour.plan)), link.id).steps(65535)
    following = min(cost + 1 for cost, _, _ in expected if cost + 1 > link.cost)
    qtbot.keyClick(plot, Qt.Key.Key_Right)
    qtbot.keyClick(plot, Qt.Key.Key_Return)
    assert harbour.plan.trial.find(LinkCost, link.id) == LinkCost(
        link.id, following, link.cost_back
    )


def test_a_pair_of_the_link_is_shown_by_a_click(harbour: Person, qtbot: QtBot) -> None:
    link = harbour.plan.links_at(find(harbour, "Lock-1"))[0]
    harbour.click(harbour.at(link.id))
    harbour.settle()
    pairs = harbour.window.inspector.link_page.usage.pairs
    spot = pairs.visualItemRect(pairs.item(0)).center()
    qtbot.mouseClick(pairs.viewport(), LEFT, pos=spot)
    pair = pairs.item(0).data(Qt.ItemDataRole.UserRole)
    assert harbour.window.desk.pair == tuple(pair)
