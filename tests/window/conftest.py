"""A window with the routing core loaded, driven by mouse and keys, answering questions."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from pytestqt.qtbot import QtBot

from netsketch.window import questions
from netsketch.window.main_window import MainWindow

LEFT = Qt.MouseButton.LeftButton


class Answering:
    """Stands in for the dialogs: gives the answers it was told to, notes what was said."""

    def __init__(self) -> None:
        self.unsaved_answer = questions.THROW_AWAY
        self.path: Path | None = None
        self.line: str | None = None
        self.asked: list[str] = []
        self.said: list[str] = []

    def unsaved(self, title: str) -> str:
        self.asked.append(title)
        return self.unsaved_answer

    def file_to_open(self, folder: Path) -> Path | None:
        return self.path

    def file_to_save(self, suggested: Path) -> Path | None:
        return self.path

    file_for_picture = file_for_record = file_for_table = file_to_save

    def text(self, title: str, label: str, value: str) -> str | None:
        return self.line

    def tell(self, title: str, text: str) -> None:
        self.said.append(text)

    read = tell

    def refuse(self, text: str) -> None:
        self.said.append(text)


class Person:
    """Works the window as a person does."""

    def __init__(self, window: MainWindow, answers: Answering, qtbot: QtBot) -> None:
        self.window, self.ask, self._qtbot = window, answers, qtbot

    @property
    def plan(self):  # type: ignore[no-untyped-def]
        return self.window.desk.document.plan

    def settle(self) -> None:
        """Wait until no background work is wanted."""
        self._qtbot.waitUntil(lambda: not self.window.relay._wanted, timeout=60_000)

    def at(self, key: str) -> QPoint:
        """Where a node or a link is in the sheet widget."""
        middle = self.window.sheet.middle_of(key)
        assert middle is not None
        return self.window.sheet.view.transform().map(middle).toPoint()

    def spot(self, x: float, y: float) -> QPoint:
        """Where a place on the sheet is in the widget."""
        return self.window.sheet.view.transform().map(QPointF(x, y)).toPoint()

    def click(self, where: QPoint, modifier: Qt.KeyboardModifier | None = None) -> None:
        held = modifier or Qt.KeyboardModifier.NoModifier
        self._qtbot.mouseClick(self.window.sheet, LEFT, held, where)

    def drag(self, start: QPoint, end: QPoint) -> None:
        sheet = self.window.sheet
        self._qtbot.mousePress(sheet, LEFT, pos=start)
        self._qtbot.mouseMove(sheet, start + (end - start) / 2)
        self._qtbot.mouseMove(sheet, end)
        self._qtbot.mouseRelease(sheet, LEFT, pos=end)

    def key(self, key: Qt.Key, modifier: Qt.KeyboardModifier | None = None) -> None:
        held = modifier or Qt.KeyboardModifier.NoModifier
        self._qtbot.keyClick(self.window.sheet, key, held)

    def do(self, action: str) -> None:
        """Trigger an action of the menus."""
        found = self.window.actions_by_id[action]
        assert found.isEnabled(), action
        found.trigger()

    def open(self, path: Path) -> None:
        self.window.files.open_path(path)
        self.settle()

    def table(self) -> dict[str, list[str]]:
        """The forwarding table as it is shown, by destination."""
        page = self.window.inspector.router_page
        model = page.table_model
        rows = {}
        for row in range(model.rowCount()):
            cells = [str(model.index(row, c).data()) for c in range(model.columnCount())]
            rows[cells[0]] = cells
        return rows


@pytest.fixture
def person(qtbot: QtBot) -> Iterator[Person]:
    window = MainWindow()
    answering = Answering()
    window.ask = window.files.ask = window.ledger._ask = window.survey._ask = answering  # type: ignore[assignment]
    qtbot.addWidget(window)
    window.resize(1400, 900)
    window.show()
    qtbot.waitExposed(window)
    window.activateWindow()
    window.sheet.setFocus()
    window.desk.load_core()
    worker = Person(window, answering, qtbot)
    worker.settle()
    yield worker
    answering.unsaved_answer = questions.THROW_AWAY
    window.close()
