"""The window stays awake while the ledger of all pairs of 1,000 routers is built."""

from __future__ import annotations

import time

import pytest
from PySide6.QtWidgets import QApplication

from netsketch.model import edits
from tests.demos import demo_path
from tests.window.conftest import Person

pytestmark = pytest.mark.gui

LONGEST = 0.050
"""Seconds of its own that the GUI thread may spend without turning to the next event."""


def test_no_event_holds_the_window_while_the_ledger_is_built(
    person: Person, qapp: QApplication
) -> None:
    """The event loop is watched turn by turn. Time is what the GUI thread itself spends,
    so that a busy machine does not count as a busy window. The first turn draws the edit
    itself, several events in one; the ledger is built during the ones that follow."""
    person.open(demo_path("backbone-1000"))
    window = person.window
    window.go_to(("router", person.plan.routers()[400].id))
    person.settle()
    qapp.processEvents()
    plan = person.plan
    core = [router.id for router in plan.routers() if router.name.endswith("-C1")]
    window.desk.apply(edits.toggle_down(plan, nodes=core[:4]))
    assert window.desk.is_computing, "the ledger is built behind the window"
    turns = []
    deadline = time.monotonic() + 60
    while window.desk.is_computing or "ledger" in window.relay._wanted:
        assert time.monotonic() < deadline
        start = time.thread_time()
        qapp.processEvents()
        turns.append(time.thread_time() - start)
    assert window.desk.ledger is not None
    assert window.desk.ledger.moved > 10_000
    assert len(turns) > 3
    assert turns[0] < 2 * LONGEST
    assert max(turns[1:]) < LONGEST
