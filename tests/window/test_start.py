"""The first moments: a file on the sheet, and the answers that come behind it."""

from __future__ import annotations

import threading
from collections.abc import Iterator
from pathlib import Path

import pytest
from pytestqt.qtbot import QtBot

from netsketch.window.main_window import MainWindow
from netsketch.window.start import begin
from tests.demos import demo_path
from tests.window.conftest import Answering

pytestmark = pytest.mark.gui


@pytest.fixture
def window(qtbot: QtBot) -> Iterator[MainWindow]:
    """A window that was just shown: the routing core is not loaded yet."""
    window = MainWindow()
    window.files.ask = Answering()  # type: ignore[assignment]
    qtbot.addWidget(window)
    window.show()
    yield window
    window.close()


def wait_for_core(window: MainWindow, qtbot: QtBot) -> None:
    qtbot.waitUntil(lambda: window.desk.core_is_ready, timeout=60_000)


def test_what_is_asked_before_the_core_is_there_is_answered_when_it_is(
    window: MainWindow, qtbot: QtBot
) -> None:
    held_up = threading.Event()
    window.core_jobs.submit("hold", 0, lambda cancelled: held_up.wait(60), lambda *done: None)
    begin(window, demo_path("harbour-campus"))
    qtbot.waitUntil(lambda: len(window.desk.document.plan.nodes) > 20)
    assert not window.desk.core_is_ready
    window.go_to(("router", window.desk.document.plan.routers()[0].id))
    page = window.inspector.router_page
    assert page.table_model.rowCount() == 0
    assert page.count.text() == "the routing core is being loaded"
    held_up.set()
    wait_for_core(window, qtbot)
    assert page.table_model.rowCount() > 20
    assert window.sheet.drawing.reading.kind == "outward"
    assert window.state.text() == ""


def test_the_core_is_loaded_behind_a_refused_file(
    window: MainWindow, qtbot: QtBot, tmp_path: Path
) -> None:
    begin(window, tmp_path / "missing.netsketch.json")
    wait_for_core(window, qtbot)
    assert "missing.netsketch.json" in window.files.ask.said[0]  # type: ignore[attr-defined]


def test_the_core_is_loaded_behind_an_empty_sheet(window: MainWindow, qtbot: QtBot) -> None:
    begin(window, None)
    assert "Preparing" in window.state.text()
    wait_for_core(window, qtbot)
    assert window.desk.reading is None
