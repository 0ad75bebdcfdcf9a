"""A ledger of a million rows: chosen behind the window, right, and never in its way."""

from __future__ import annotations

import numpy as np
import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from netsketch.analysis.ledger import Ledger
from netsketch.model import Plan, Router, edits
from netsketch.routing import compile_plan
from netsketch.window.ledger_choice import Choice
from tests.window.conftest import Person

pytestmark = pytest.mark.gui

ROUTERS = 1000


def million() -> tuple[Plan, Ledger]:
    """Return a plan of 1,000 routers and a ledger of 1,000,000 invented rows."""
    plan = Plan()
    items = (Router(id=f"r{i}", name=f"Node-{i:03}", x=i, y=i) for i in range(ROUTERS))
    plan.apply(edits.add(plan, *items))
    chance = np.random.default_rng(1)
    sources, targets = np.divmod(np.arange(ROUTERS**2), ROUTERS)
    columns = (
        sources, targets, chance.integers(0, 2, ROUTERS**2), chance.integers(1, 900, ROUTERS**2),
        chance.integers(1, 900, ROUTERS**2), chance.random(ROUTERS**2), chance.random(ROUTERS**2),
    )  # fmt: skip
    network = compile_plan(plan)
    return plan, Ledger(network, network, [columns])


def test_a_million_rows_are_sorted_and_filtered_behind_the_window(
    person: Person, qtbot: QtBot
) -> None:
    panel = person.window.ledger
    plan, ledger = million()
    panel.set_ledger(ledger, plan)
    assert panel.totals.text() == "sorting…", "the window does not wait for it"
    person.settle()
    assert panel.model.rowCount() == ROUTERS**2
    panel.table.sortByColumn(5, Qt.SortOrder.DescendingOrder)
    person.settle()
    pairs = [panel.model.pair(row) for row in range(50)]
    rows = [ROUTERS * int(a.removeprefix("r")) + int(b.removeprefix("r")) for a, b in pairs]
    extra = (ledger.after - ledger.before)[rows].tolist()
    assert extra == sorted(extra, reverse=True)
    assert extra[0] == int((ledger.after - ledger.before).max())
    panel.filter.setText("node-007")
    person.settle()
    assert panel.model.rowCount() == 2 * ROUTERS - 1
    assert "1,999 of 1,000,000" in panel.totals.text()


def test_only_the_newest_choice_is_taken(person: Person, qtbot: QtBot) -> None:
    panel = person.window.ledger
    plan, ledger = million()
    panel.set_ledger(ledger, plan)
    for text in ("node-0", "node-01", "node-012"):
        panel.filter.setText(text)
    person.settle()
    expected = Choice(text="node-012").rows(ledger, [node.label for node in plan.nodes])
    assert panel.model.rowCount() == len(expected) == 2 * ROUTERS - 1


@pytest.mark.parametrize("column", range(7))
def test_every_column_orders_by_what_it_shows(column: int) -> None:
    plan, ledger = million()
    labels = [node.label for node in plan.nodes]
    rows = Choice(text="node-00", outcome=1, column=column).rows(ledger, labels)
    shown = (
        ledger.sources, ledger.targets, ledger.outcomes, ledger.before, ledger.after,
        ledger.after - ledger.before, ledger.delay_after - ledger.delay_before,
    )[column][rows]  # fmt: skip
    assert (np.diff(shown) >= 0).all()
    backwards = Choice(text="node-00", outcome=1, column=column, backwards=True)
    assert set(backwards.rows(ledger, labels)) == set(rows)
