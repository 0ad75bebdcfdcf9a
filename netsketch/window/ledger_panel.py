"""The ledger panel: every pair that the trial changes, before and after."""

from __future__ import annotations

import math
import time
from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any

from PySide6.QtCore import QTimer, Signal
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import (
    QAbstractItemView,
    QComboBox,
    QHBoxLayout,
    QHeaderView,
    QLabel,
    QLineEdit,
    QPushButton,
    QTableView,
    QVBoxLayout,
    QWidget,
)

from netsketch.model import Plan
from netsketch.reports.tables import csv_text
from netsketch.session.jobs import Task
from netsketch.window.ledger_model import HEADERS, OUTCOMES, LedgerModel
from netsketch.window.questions import Questions
from netsketch.window.relay import Relay

if TYPE_CHECKING:
    from netsketch.analysis.ledger import Ledger

ROWS_AT_ONCE, SECONDS_AT_ONCE = 20, 0.015
MOST_COPIED = 100_000
_WIDTHS = (140, 140, 96, 90, 86, 64, 72, 240, 240)


class LedgerPanel(QWidget):
    """A table over the ledger with a filter, and ways to take it away."""

    pair_asked = Signal(str, str)
    hint = Signal(str)
    baseline_asked = Signal(str)
    """The kept trial to compare with; "" is the plan."""

    def __init__(self, ask: Questions, relay: Relay, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._ask, self._relay = ask, relay
        self._title = "ledger"
        self.model = LedgerModel(self)
        self.totals = QLabel()
        self.filter = QLineEdit()
        self.filter.setPlaceholderText("Filter by router")
        self.filter.setAccessibleName("Filter the ledger by router")
        self.filter.setClearButtonEnabled(True)
        self.against = QComboBox()
        self.against.setAccessibleName("What the trial is compared with")
        self.against.setToolTip("Compare the trial with the plan or with a kept trial")
        self.least_cost = _least("extra cost ≥", "Least extra cost")
        self.least_delay = _least("extra ms ≥", "Least extra delay in ms")
        self.outcome = QComboBox()
        self.outcome.addItems(["every outcome", *OUTCOMES])
        self.outcome.setAccessibleName("Filter the ledger by outcome")
        self.copy = QPushButton("Copy as CSV")
        self.copy.setToolTip("Copy the rows shown to the clipboard")
        self.export = QPushButton("Save…")
        self.export.setToolTip("Write the rows shown to a CSV file")
        self.table = _table(self.model)
        self._lay_out()
        self.filter.textChanged.connect(self._refilter)
        self.outcome.currentIndexChanged.connect(self._refilter)
        self.least_cost.textChanged.connect(self._refilter)
        self.least_delay.textChanged.connect(self._refilter)
        self.against.activated.connect(self._compare)
        self.copy.clicked.connect(self._copy)
        self.export.clicked.connect(self._export)
        self.table.selectionModel().currentRowChanged.connect(self._ask_pair)
        self.model.work_asked.connect(self._choose_behind)
        self.model.modelReset.connect(self._show_totals)
        self._writer = _CsvWriter(self)
        self.set_ledger(None, Plan())

    def _lay_out(self) -> None:
        top = QHBoxLayout()
        title = QLabel("Ledger")
        title.setProperty("role", "name")
        top.addWidget(title)
        top.addWidget(self.totals, 1)
        top.addWidget(self.copy)
        top.addWidget(self.export)
        below = QHBoxLayout()
        below.addWidget(self.against)
        below.addWidget(self.filter, 1)
        for widget in (self.outcome, self.least_cost, self.least_delay):
            below.addWidget(widget)
        column = QVBoxLayout(self)
        column.setContentsMargins(12, 4, 12, 8)
        column.addLayout(top)
        column.addLayout(below)
        column.addWidget(self.table, 1)

    def set_ledger(self, ledger: Ledger | None, plan: Plan) -> None:
        """Show another ledger; ``None`` where there is no trial."""
        self._writer.stop()
        self._title = plan.settings.name or "ledger"
        self.model.show(ledger, plan)

    def _choose_behind(self, task: Task) -> None:
        self.totals.setText("sorting…")
        self._relay.submit("ledger rows", task, self._chosen)

    def _chosen(self, result: Any) -> None:
        if isinstance(result, Exception):
            raise result
        self.model.take(result)

    def show_kept(self, names: Sequence[str], chosen: str) -> None:
        """Offer the plan and kept trials to compare with."""
        self.against.clear()
        self.against.addItem("against the plan", "")
        for name in names:
            self.against.addItem(f"against {name[:40]}", name)
        self.against.setCurrentIndex(max(self.against.findData(chosen), 0))
        self.against.setVisible(bool(names))

    def _compare(self) -> None:
        self.baseline_asked.emit(self.against.currentData())

    def show_computing(self) -> None:
        """Say that the ledger is on its way; the rows of before stay until then."""
        self.totals.setText("computing…")

    def _show_totals(self) -> None:
        ledger = self.model.ledger
        rows = self.model.rowCount()
        for button in (self.copy, self.export):
            button.setEnabled(rows > 0)
        if ledger is None:
            self.totals.setText("Nothing is tried: take a link or a router down to see what moves.")
        elif not len(ledger):
            self.totals.setText("The trial changes no pair of routers.")
        else:
            shown = "" if rows == len(ledger) else f"{rows:,} of {len(ledger):,} pairs: "
            self.totals.setText(shown + totals_text(ledger))

    def _refilter(self) -> None:
        self._writer.stop()
        cost, delay = _number(self.least_cost.text()), _number(self.least_delay.text())
        self.model.set_filter(
            self.filter.text(),
            self.outcome.currentIndex() - 1,
            None if cost is None else math.ceil(cost),
            delay,
        )

    def _ask_pair(self) -> None:
        row = self.table.currentIndex().row()
        if row >= 0:
            self.pair_asked.emit(*self.model.pair(row))

    def _copy(self) -> None:
        rows = self.model.rowCount()
        if rows > MOST_COPIED:
            self.hint.emit(f"{rows:,} rows are too many for the clipboard: save them as CSV")
            return
        self._writer.start(rows, None)

    def _export(self) -> None:
        path = self._ask.file_for_table(Path.home() / f"{self._title}-ledger.csv")
        if path is not None:
            self._writer.start(self.model.rowCount(), path)


def totals_text(ledger: Ledger) -> str:
    """Return how many pairs a trial changes, by outcome."""
    words = [f"{ledger.moved:,} moved", f"{ledger.cut_off:,} cut off"]
    if ledger.restored:
        words.append(f"{ledger.restored:,} restored")
    return ", ".join(words)


def _least(words: str, name: str) -> QLineEdit:
    field = QLineEdit()
    field.setPlaceholderText(words)
    field.setAccessibleName(name)
    field.setFixedWidth(96)
    return field


def _number(text: str) -> float | None:
    """Return the number that was typed; none where it is not one yet."""
    try:
        return float(text)
    except ValueError:
        return None


class _CsvWriter(QTimer):
    """Turns the rows into CSV a few at a time, so that the window stays awake."""

    def __init__(self, panel: LedgerPanel) -> None:
        super().__init__(panel, interval=0)
        self._panel = panel
        self._parts: list[str] = []
        self._next = self._rows = 0
        self._path: Path | None = None
        self.timeout.connect(self._step)

    def start(self, rows: int, path: Path | None) -> None:  # type: ignore[override]
        """Write ``rows`` rows to ``path``, or to the clipboard."""
        self._parts, self._next = [csv_text(HEADERS, [])], 0
        self._rows, self._path = rows, path
        super().start()

    def _step(self) -> None:
        start = time.perf_counter()
        while self._next < self._rows and time.perf_counter() - start < SECONDS_AT_ONCE:
            rows = self._panel.model.csv_rows(self._next, self._next + ROWS_AT_ONCE)
            self._parts.append(csv_text((), rows).removeprefix("\r\n"))
            self._next += ROWS_AT_ONCE
        if self._next < self._rows:
            self._panel.hint.emit(f"Writing CSV: {self._next:,} of {self._rows:,} rows")
            return
        self.stop()
        self._finish("".join(self._parts))

    def _finish(self, text: str) -> None:
        from netsketch.formats import FormatError
        from netsketch.formats.atomic import write_bytes

        if self._path is None:
            QGuiApplication.clipboard().setText(text)
            self._panel.hint.emit(f"{self._rows:,} rows copied as CSV")
            return
        try:
            write_bytes(self._path, text.encode("utf-8-sig"))
        except FormatError as error:
            self._panel.hint.emit(str(error))
        else:
            self._panel.hint.emit(f"{self._rows:,} rows written to {self._path.name}")


def _table(model: LedgerModel) -> QTableView:
    table = QTableView()
    table.setModel(model)
    table.setAccessibleName("Ledger")
    table.setSortingEnabled(True)
    table.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
    table.setSelectionMode(QAbstractItemView.SelectionMode.SingleSelection)
    table.setShowGrid(False)
    table.setTabKeyNavigation(False)
    table.verticalHeader().hide()
    table.verticalHeader().setSectionResizeMode(QHeaderView.ResizeMode.Fixed)
    table.verticalHeader().setDefaultSectionSize(24)
    table.horizontalHeader().setStretchLastSection(True)
    table.sortByColumn(0, table.horizontalHeader().sortIndicatorOrder().AscendingOrder)
    for column, width in enumerate(_WIDTHS):
        table.setColumnWidth(column, width)
    return table
