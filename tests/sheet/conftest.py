"""A sheet with a document, and hands: presses, drags and keys as a person makes them."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Any

import pytest
from PySide6.QtCore import QEvent, QPoint, QPointF, Qt
from PySide6.QtGui import QMouseEvent
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from netsketch.model import Edit, Link, Plan, Router, Segment, edits
from netsketch.session.document import Document
from netsketch.sheet import Sheet

LEFT = Qt.MouseButton.LeftButton
NO_KEYS = Qt.KeyboardModifier.NoModifier
SHIFT = Qt.KeyboardModifier.ShiftModifier


def quay_plan() -> Plan:
    """Return three routers, a segment and their links: a small invented quay."""
    plan = Plan()
    plan.apply(
        edits.add(
            plan,
            Router(id="r1", name="Quay", site="North", x=0, y=0),
            Router(id="r2", name="Crane", x=300, y=0),
            Router(id="r3", name="Shed", x=150, y=260),
            Segment(id="s1", name="Yard", x=500, y=160),
        )
    )
    plan.apply(
        edits.add(
            plan,
            Link(id="l1", source="r1", target="r2", cost=10, cost_back=10),
            Link(id="l2", source="r1", target="r3", cost=10, cost_back=25),
            Link(id="l3", source="r2", target="s1", cost=5, cost_back=0),
        )
    )
    return plan


def near(one: QPoint, other: QPoint) -> bool:
    """Return whether two pixels are the same but for rounding places to whole units."""
    return (one - other).manhattanLength() <= 4


@dataclass
class Hands:
    """Works a sheet with mouse and keys, and keeps what it says."""

    sheet: Sheet
    document: Document
    bot: QtBot
    proposed: list[Edit] = field(default_factory=list)
    asked: list[object] = field(default_factory=list)
    hints: list[str] = field(default_factory=list)
    menus: list[Any] = field(default_factory=list)

    @property
    def plan(self) -> Plan:
        return self.document.plan

    def at(self, key: str) -> QPoint:
        """Return the pixel in the middle of a node or link."""
        middle = self.sheet.middle_of(key)
        assert middle is not None
        return self.sheet.view.to_window(middle).toPoint()

    def paper(self, x: float, y: float) -> QPoint:
        """Return the pixel over a place on the sheet."""
        return self.sheet.view.to_window(QPointF(x, y)).toPoint()

    def click(self, at: QPoint, keys: Qt.KeyboardModifier = NO_KEYS) -> None:
        self.bot.mouseClick(self.sheet, LEFT, keys, at)

    def double_click(self, at: QPoint) -> None:
        self.click(at)
        self.bot.mouseDClick(self.sheet, LEFT, NO_KEYS, at)
        self.bot.mouseRelease(self.sheet, LEFT, NO_KEYS, at)

    def drag(
        self,
        start: QPoint,
        end: QPoint,
        button: Qt.MouseButton = LEFT,
        keys: Qt.KeyboardModifier = NO_KEYS,
        drop: bool = True,
    ) -> None:
        self.bot.mousePress(self.sheet, button, keys, start)
        for part in (0.3, 0.7, 1.0):
            self.move(start + (end - start) * part, button)
        if drop:
            self.bot.mouseRelease(self.sheet, button, keys, end)

    def move(self, at: QPoint, button: Qt.MouseButton = Qt.MouseButton.NoButton) -> None:
        """Move the pointer with ``button`` held (QTest moves it without)."""
        event = QMouseEvent(
            QEvent.Type.MouseMove,
            QPointF(at),
            QPointF(self.sheet.mapToGlobal(at)),
            Qt.MouseButton.NoButton,
            button,
            NO_KEYS,
        )
        QApplication.sendEvent(self.sheet, event)

    def press(self, key: Qt.Key, keys: Qt.KeyboardModifier = NO_KEYS) -> None:
        self.bot.keyClick(self.sheet, key, keys)

    def write(self, text: str, end: Qt.Key = Qt.Key.Key_Return) -> None:
        """Type into the open line and end with a key."""
        line = self.sheet._writing.line
        assert line is not None
        line.selectAll()
        self.bot.keyClick(line, Qt.Key.Key_Delete)
        self.bot.keyClicks(line, text)
        self.bot.keyClick(line, end)


@pytest.fixture
def take(qtbot: QtBot) -> Callable[[Plan], Hands]:
    """Return what opens a plan on a sheet whose edits are applied to a document."""

    def open_plan(plan: Plan) -> Hands:
        sheet, document = Sheet(), Document(plan)
        qtbot.addWidget(sheet)
        hands = Hands(sheet, document, qtbot)
        sheet.edited.connect(hands.proposed.append)
        sheet.edited.connect(document.apply)
        sheet.focus_asked.connect(hands.asked.append)
        sheet.hint.connect(hands.hints.append)
        sheet.menu_asked.connect(lambda focus, at: hands.menus.append((focus, at)))
        sheet.resize(900, 600)
        sheet.set_document(document)
        sheet.show()
        qtbot.waitExposed(sheet)
        sheet.setFocus()
        return hands

    return open_plan


@pytest.fixture
def hands(take: Callable[[Plan], Hands]) -> Hands:
    """Return a sheet with the quay plan."""
    return take(quay_plan())


@pytest.fixture
def empty(take: Callable[[Plan], Hands]) -> Hands:
    """Return an empty sheet."""
    return take(Plan())
