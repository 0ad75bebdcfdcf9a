"""Everything can be reached: chips by keys, long texts and tools in small windows."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt, QTimer
from PySide6.QtWidgets import (
    QApplication,
    QDialog,
    QPushButton,
    QTextBrowser,
    QToolBar,
    QToolButton,
)
from pytestqt.qtbot import QtBot

from netsketch.window import actions
from netsketch.window.questions import Questions
from netsketch.window.theme import apply_look, look_named
from tests.demos import demo_path
from tests.window.conftest import Person

pytestmark = pytest.mark.gui


@pytest.fixture
def tried(person: Person) -> Person:
    """Three links are down in the trial."""
    person.open(demo_path("harbour-campus"))
    for key in ("l1", "l2", "l3"):
        person.window.go_to(("link", key))
        person.key(Qt.Key.Key_D)
    person.settle()
    return person


def removers(person: Person) -> list[QToolButton]:
    found = person.window.strip.findChildren(QToolButton)
    return [b for b in found if b.accessibleName().startswith("Take out") and b.isVisible()]


def focused() -> str:
    widget = QApplication.focusWidget()
    return widget.accessibleName() if widget is not None else ""


def press_space(qtbot: QtBot) -> None:
    widget = QApplication.focusWidget()
    assert isinstance(widget, QToolButton)
    qtbot.keyClick(widget, Qt.Key.Key_Space)


def test_chips_are_taken_out_one_after_another_by_keys(tried: Person, qtbot: QtBot) -> None:
    chips = removers(tried)
    names = [chip.accessibleName() for chip in chips]
    chips[1].setFocus(Qt.FocusReason.TabFocusReason)
    press_space(qtbot)
    assert focused() == names[2], "the chip that took its place"
    press_space(qtbot)
    assert focused() == names[0], "the last one left"
    press_space(qtbot)
    assert not tried.plan.trial
    assert removers(tried) == []


def test_an_edit_elsewhere_leaves_the_keys_where_they_are(tried: Person, qtbot: QtBot) -> None:
    tried.window.sheet.setFocus()
    tried.do("undo")
    qtbot.waitUntil(lambda: len(removers(tried)) == 2)
    assert focused() == "Sheet"


def test_long_texts_fit_the_screen_and_scroll(person: Person, qtbot: QtBot) -> None:
    seen: list[tuple[int, int, str, bool]] = []

    def look() -> None:
        box = QApplication.activeModalWidget()
        assert isinstance(box, QDialog)
        text = box.findChild(QTextBrowser)
        button = box.findChild(QPushButton)
        assert text is not None
        assert button is not None
        reached = box.rect().contains(button.geometry().center())
        bar = text.verticalScrollBar().maximum()
        seen.append((box.frameGeometry().height(), bar, text.toPlainText(), reached))
        qtbot.keyClick(text, Qt.Key.Key_Escape)

    QTimer.singleShot(0, look)
    Questions(person.window).read("Keys", actions.keys_text())
    height, scrolls, words, reached = seen[0]
    screen = person.window.screen().availableSize()
    assert height <= screen.height()
    assert scrolls > 0
    assert "Ctrl+Shift+Z" in words
    assert "leave off" in words
    assert reached


@pytest.mark.parametrize("name", ["light", "dark"])
def test_tools_that_have_no_room_are_behind_a_button_that_can_be_seen(
    person: Person, name: str
) -> None:
    person.do(f"look_{name}")
    person.window.resize(900, 600)
    bar = person.window.findChild(QToolBar, "Tools")
    assert bar is not None
    more = bar.findChild(QToolButton, "qt_toolbar_ext_button")
    assert more is not None
    assert more.isVisible()
    assert more.accessibleName()
    assert more.toolTip()
    picture = more.grab().toImage()
    ground = person.window.sheet.look.paper
    shades = {
        picture.pixelColor(x, y).lightness()
        for x in range(picture.width())
        for y in range(picture.height())
    }
    assert max(shades) - min(shades) > 60, f"nothing to see on {ground}"
    apply_look(look_named("light"))
