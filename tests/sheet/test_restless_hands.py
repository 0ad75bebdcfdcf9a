"""Hands that do anything in any order: nothing breaks, and undo gives everything back."""

from __future__ import annotations

import random

import pytest
from PySide6.QtCore import QPoint, Qt

from netsketch.model import edits
from netsketch.sheet.tools import TOOLS
from tests.sheet.conftest import NO_KEYS, SHIFT, Hands, quay_plan

pytestmark = pytest.mark.gui

KEYS = (
    Qt.Key.Key_Escape,
    Qt.Key.Key_Delete,
    Qt.Key.Key_F2,
    Qt.Key.Key_Left,
    Qt.Key.Key_Down,
    Qt.Key.Key_Plus,
    Qt.Key.Key_Minus,
    Qt.Key.Key_0,
    Qt.Key.Key_Space,
    Qt.Key.Key_A,
)
TEXTS = ("", "Mole", "10/25", "7", "-1", "<b>", "x" * 300)


def somewhere(hands: Hands, chance: random.Random) -> QPoint:
    """Return a pixel: of a node, mostly, or anywhere."""
    keys = hands.plan.nodes.keys()
    if keys and chance.random() < 0.7:
        return hands.at(chance.choice(keys))
    return QPoint(chance.randrange(900), chance.randrange(600))


def do_something(hands: Hands, chance: random.Random) -> None:
    keys = chance.choice((NO_KEYS, NO_KEYS, SHIFT))
    action = chance.randrange(9)
    if hands.sheet._writing.line is not None and action < 6:
        hands.write(chance.choice(TEXTS), chance.choice((Qt.Key.Key_Return, Qt.Key.Key_Escape)))
    elif action == 0:
        hands.sheet.set_tool(chance.choice(TOOLS))
    elif action == 1:
        hands.click(somewhere(hands, chance), keys)
    elif action == 2:
        hands.double_click(somewhere(hands, chance))
    elif action in (3, 4):
        drop = chance.random() < 0.8
        hands.drag(somewhere(hands, chance), somewhere(hands, chance), keys=keys, drop=drop)
    elif action == 5:
        hands.press(chance.choice(KEYS), keys)
    elif action == 6:
        hands.document.undo()
    elif action == 7:
        links = hands.plan.links.keys()
        hands.document.apply(edits.toggle_down(hands.plan, links=links[:1]))
    else:
        hands.sheet.grab()


@pytest.mark.parametrize("seed", range(6))
def test_restless_hands_break_nothing(hands: Hands, seed: int) -> None:
    chance = random.Random(seed)
    for _ in range(120):
        do_something(hands, chance)
        sheet = hands.sheet
        assert set(sheet.selected_nodes) <= set(hands.plan.nodes.keys())
        assert set(sheet.selected_links) <= set(hands.plan.links.keys())
        assert sheet.frame.contents.links.ids == hands.plan.links.keys()
    assert hands.proposed
    while hands.document.undo_label:
        hands.document.undo()
    assert hands.plan == quay_plan()
