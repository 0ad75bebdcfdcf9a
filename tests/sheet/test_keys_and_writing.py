"""What a person does with keys: nudge, walk, delete, write names and costs."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QLineEdit

from netsketch.model import edits
from tests.sheet.conftest import SHIFT, Hands

pytestmark = pytest.mark.gui

CTRL = Qt.KeyboardModifier.ControlModifier


def costs(hands: Hands, key: str) -> tuple[int, int]:
    link = hands.plan.links[key]
    return link.cost, link.cost_back


def test_nudges_merge_into_one_undo(hands: Hands) -> None:
    hands.click(hands.at("r2"))
    for _ in range(3):
        hands.press(Qt.Key.Key_Right)
    hands.press(Qt.Key.Key_Down, SHIFT)
    moved = hands.plan.nodes["r2"]
    assert (moved.x, moved.y) == (303, 10)
    hands.document.undo()
    back = hands.plan.nodes["r2"]
    assert (back.x, back.y) == (300, 0)


def test_arrows_pan_when_nothing_is_selected(hands: Hands) -> None:
    start = hands.at("r1")
    hands.press(Qt.Key.Key_Right)
    assert hands.at("r1").x() < start.x()
    assert hands.proposed == []


def test_ctrl_arrows_walk_from_plate_to_plate(hands: Hands) -> None:
    hands.press(Qt.Key.Key_Right, CTRL)
    assert hands.sheet.selected_nodes == ["r1"]
    hands.press(Qt.Key.Key_Right, CTRL)
    assert hands.asked[-1] == ("router", "r2")
    hands.press(Qt.Key.Key_Down, CTRL)
    assert hands.sheet.selected_nodes == ["r3"]


def test_delete_takes_out_what_is_selected_with_its_links(hands: Hands) -> None:
    hands.click(hands.at("r1"))
    hands.press(Qt.Key.Key_Delete)
    assert "r1" not in hands.plan.nodes
    assert hands.plan.links.keys() == ["l3"]
    assert hands.sheet.selected_nodes == []
    hands.document.undo()
    assert hands.plan.links.keys() == ["l1", "l2", "l3"]


def test_f2_renames_in_place(hands: Hands) -> None:
    hands.click(hands.at("r2"))
    hands.press(Qt.Key.Key_F2)
    hands.write("Gantry")
    assert hands.plan.nodes["r2"].name == "Gantry"
    assert "Gantry" in hands.sheet.frame.contents.nodes.names
    assert hands.sheet.hasFocus()


def test_escape_and_an_unchanged_name_propose_nothing(hands: Hands) -> None:
    hands.double_click(hands.at("r2"))
    hands.write("Other", end=Qt.Key.Key_Escape)
    hands.sheet.begin_rename("r2")
    hands.write("Crane")
    assert hands.proposed == []


@pytest.mark.parametrize(
    ("key", "typed", "expected"),
    [
        ("l1", "40", (40, 40)),
        ("l1", " 40 / 65535 ", (40, 65535)),
        ("l2", "7", (7, 7)),
        ("l3", "9", (9, 0)),
    ],
)
def test_a_double_click_writes_costs(
    hands: Hands, key: str, typed: str, expected: tuple[int, int]
) -> None:
    hands.double_click(hands.at(key))
    hands.write(typed)
    assert costs(hands, key) == expected
    assert len(hands.proposed) == 1


def test_a_line_shows_both_costs_where_they_differ(hands: Hands) -> None:
    hands.sheet.begin_cost_edit("l2")
    assert hands.sheet._writing.line is not None
    assert hands.sheet._writing.line.text() == "10/25"
    assert "1 to 65535" in hands.hints[-1]
    assert "from Quay / from Shed" in hands.hints[-1]


@pytest.mark.parametrize(
    "typed", ["0", "-3", "65536", "1.5", "ten", "", "1/2/3", "9" * 5000, "1_0", "10/x"]
)
def test_bad_costs_stay_open_and_say_why(hands: Hands, typed: str) -> None:
    hands.sheet.begin_cost_edit("l1")
    hands.write(typed)
    assert hands.sheet._writing.line is not None
    assert "l1" in hands.hints[-1]
    assert len(hands.hints[-1]) < 200
    assert hands.proposed == []
    hands.press(Qt.Key.Key_Escape)


def test_a_link_to_a_segment_has_one_cost(hands: Hands) -> None:
    hands.sheet.begin_cost_edit("l3")
    hands.write("5/6")
    assert hands.proposed == []
    assert "one cost" in hands.hints[-1]


def test_a_cost_the_trial_holds_is_changed_in_the_trial(hands: Hands) -> None:
    hands.document.apply(edits.try_costs(hands.plan, "l1", 30, 30))
    hands.sheet.begin_cost_edit("l1")
    hands.write("31")
    assert costs(hands, "l1") == (10, 10)
    assert edits.costs_in_trial(hands.plan, "l1") == (31, 31)


def test_leaving_a_line_keeps_what_was_typed(hands: Hands) -> None:
    hands.sheet.begin_rename("r1")
    assert hands.sheet._writing.line is not None
    hands.bot.keyClicks(hands.sheet._writing.line, "Pier")
    hands.sheet.setFocus()
    hands.bot.waitUntil(lambda: hands.plan.nodes["r1"].name == "Pier")


def test_keys_zoom_and_fit(hands: Hands) -> None:
    scale = hands.sheet.view.scale
    hands.press(Qt.Key.Key_Plus)
    assert hands.sheet.view.scale == pytest.approx(scale * 1.2)
    hands.press(Qt.Key.Key_0)
    assert hands.sheet.view.scale == pytest.approx(scale)


def test_the_keyboard_focus_shows_when_tab_brings_it(hands: Hands) -> None:
    hands.sheet.clearFocus()
    before = hands.sheet.grab().toImage()
    hands.sheet.setFocus(Qt.FocusReason.TabFocusReason)
    assert hands.sheet.grab().toImage() != before
    hands.sheet.clearFocus()
    assert hands.sheet.grab().toImage() == before


def test_writing_hands_the_focus_back_but_takes_it_from_nobody(hands: Hands) -> None:
    field = QLineEdit(hands.sheet)
    field.show()
    before = hands.sheet.grab().toImage()
    hands.sheet.begin_rename("r1")
    hands.write("Quay")
    assert hands.sheet.hasFocus()
    assert hands.sheet.grab().toImage() == before
    hands.sheet.begin_rename("r1")
    field.setFocus()
    assert hands.sheet._writing.line is None
    assert field.hasFocus()
