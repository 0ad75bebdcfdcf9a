"""The survey panel: run it, watch it, cancel it, rank it, look at a failure, try it."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import QModelIndex, Signal
from PySide6.QtWidgets import (
    QAbstractItemView,
    QComboBox,
    QHBoxLayout,
    QHeaderView,
    QLabel,
    QProgressBar,
    QPushButton,
    QTableView,
    QVBoxLayout,
    QWidget,
)

from netsketch.formats import FormatError
from netsketch.formats.atomic import write_bytes
from netsketch.model import Plan
from netsketch.reports.tables import csv_text
from netsketch.window.questions import Questions
from netsketch.window.rank_plot import RankPlot
from netsketch.window.survey_model import HEADERS, SurveyModel
from netsketch.window.surveys import Surveys

KINDS = (
    ("links", "every link"),
    ("routers", "every router"),
    ("groups", "every shared-risk group"),
    ("link-pairs", "every pair of links"),
)
_WIDTHS = (300, 90, 90, 130, 110, 90, 90)
MOST_BARS = 4000


class SurveyPanel(QWidget):
    """Shows what :class:`~netsketch.window.surveys.Surveys` computes."""

    tried = Signal(object)
    """A Failure to put into the trial."""
    hint = Signal(str)

    def __init__(self, surveys: Surveys, ask: Questions, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._surveys, self._ask, self._plan = surveys, ask, Plan()
        self.model = SurveyModel(self)
        self.kind = QComboBox()
        self.kind.setAccessibleName("What fails")
        for key, words in KINDS:
            self.kind.addItem(words, key)
        self.start = _button("Survey", "Compute what every such failure does")
        self.cancel = _button("Cancel", "Give the survey up")
        self.progress = QProgressBar()
        self.progress.setAccessibleName("Progress of the survey")
        self.progress.setRange(0, 1000)
        self.progress.setMaximumWidth(160)
        self.state = QLabel()
        self.try_it = _button("Try it", "Put the chosen failure into the trial")
        self.save = _button("Save as CSV…", "Write the table to a file")
        self.plot = RankPlot()
        self.table = _table(self.model)
        self._lay_out()
        self._connect()
        self.show_state()

    def _lay_out(self) -> None:
        top = QHBoxLayout()
        title = QLabel("Survey of")
        title.setProperty("role", "heading")
        for widget in (title, self.kind, self.start, self.cancel, self.progress):
            top.addWidget(widget)
        top.addStretch(1)
        top.addWidget(self.try_it)
        top.addWidget(self.save)
        below = QHBoxLayout()
        below.addWidget(self.table, 3)
        below.addWidget(self.plot, 1)
        column = QVBoxLayout(self)
        column.setContentsMargins(12, 4, 12, 8)
        column.addLayout(top)
        column.addWidget(self.state)
        column.addLayout(below, 1)

    def _connect(self) -> None:
        self.start.clicked.connect(lambda: self._surveys.start(self.kind.currentData()))
        self.cancel.clicked.connect(self._surveys.cancel)
        self.try_it.clicked.connect(self._try)
        self.save.clicked.connect(self._save)
        self.plot.row_picked.connect(self.table.selectRow)
        self.table.selectionModel().currentRowChanged.connect(self._look)
        self.model.modelReset.connect(self._draw_plot)
        self._surveys.changed.connect(self._renew)
        self._surveys.progressed.connect(self._show_progress)
        self._surveys.refused.connect(self.hint)

    def show_plan(self, plan: Plan) -> None:
        """Take names from ``plan``; what was surveyed may be stale now."""
        self._plan = plan
        self.show_state()

    def _renew(self) -> None:
        if self._surveys.done is not self.model.done:
            self.model.show(self._surveys.done, self._plan)
        self.show_state()

    def _show_progress(self, part: float, left: float) -> None:
        if self._surveys.is_running:
            self.progress.setValue(round(1000 * part))
            self.state.setText(f"{left:.0f} s left" if left >= 1 else "nearly done")

    def show_state(self) -> None:
        """Say whether there is a survey, whether it is stale, and what to do."""
        running, done = self._surveys.is_running, self._surveys.done
        self.progress.setVisible(running)
        self.cancel.setEnabled(running)
        self.start.setEnabled(not running)
        self.save.setEnabled(done is not None)
        self.try_it.setEnabled(done is not None and self.table.currentIndex().isValid())
        if running:
            return
        if done is None:
            self.state.setText("Choose what fails and start; the worst comes first.")
            return
        cutting = int((done.survey.cut_off > 0).sum())
        text = f"{len(done.survey.failures):,} failures, {cutting:,} cut pairs off"
        stale = "Stale: the plan has changed since. " if self._surveys.is_stale else ""
        self.state.setText(stale + text)

    def _draw_plot(self) -> None:
        rows = min(self.model.rowCount(), MOST_BARS)
        self.plot.show_totals([self.model.totals(row) for row in range(rows)])

    def _look(self, now: QModelIndex) -> None:
        self.try_it.setEnabled(now.isValid())
        if now.isValid():
            self.plot.choose(now.row())
            self._surveys.show_failure(self.model.failure(now.row()))

    def _try(self) -> None:
        row = self.table.currentIndex().row()
        if row >= 0:
            self.tried.emit(self.model.failure(row))

    def _save(self) -> None:
        path = self._ask.file_for_table(Path.home() / f"{self._plan.settings.name}-survey.csv")
        if path is None:
            return
        try:
            write_bytes(path, csv_text(HEADERS, self.model.csv_rows()).encode("utf-8-sig"))
        except FormatError as error:
            self.hint.emit(str(error))
        else:
            self.hint.emit(f"Written to {path.name}")


def _button(text: str, tip: str) -> QPushButton:
    button = QPushButton(text)
    button.setToolTip(tip)
    return button


def _table(model: SurveyModel) -> QTableView:
    table = QTableView()
    table.setModel(model)
    table.setAccessibleName("Survey")
    table.setSortingEnabled(True)
    table.horizontalHeader().setSortIndicatorClearable(True)
    table.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
    table.setSelectionMode(QAbstractItemView.SelectionMode.SingleSelection)
    table.setShowGrid(False)
    table.setTabKeyNavigation(False)
    table.verticalHeader().hide()
    table.verticalHeader().setSectionResizeMode(QHeaderView.ResizeMode.Fixed)
    table.verticalHeader().setDefaultSectionSize(24)
    table.horizontalHeader().setStretchLastSection(True)
    for column, width in enumerate(_WIDTHS):
        table.setColumnWidth(column, width)
    return table
