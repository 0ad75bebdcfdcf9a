"""The page when nothing is asked about: the plan as a whole, and what to do next."""

from __future__ import annotations

from functools import partial

from PySide6.QtCore import Signal
from PySide6.QtWidgets import QComboBox, QVBoxLayout, QWidget

from netsketch.model import COST_RANGES, PlanError, edits
from netsketch.window.demos import demo_files
from netsketch.window.pages.page import Page, button, form, label, line, short

_BEGIN = (
    "Double-click on the sheet to draw a router, or take the Router tool. Drag from plate to "
    "plate with the Link tool."
)
_NEXT = (
    "Click a router to read its routes. Select links or routers and press D to take them down "
    "in the trial."
)


class PlanPage(Page):
    """Counts and settings of the plan; where it is empty, ways to begin."""

    opened = Signal(object)
    """A demo network to open; ``None`` asks for a file."""

    def __init__(self) -> None:
        super().__init__()
        self.counts = label("", wrap=True)
        self.advice = label("", "soft", wrap=True)
        self.ways = self._ways_to_begin()
        self.name = line("Name of the plan", "Shown in the title and in records")
        self.cost_style = QComboBox()
        self.cost_style.setAccessibleName("Cost style")
        self.cost_style.setToolTip("Which costs links may have")
        for key, (low, high) in COST_RANGES.items():
            self.cost_style.addItem(f"{key}: {low} to {high:,}", key)
        self.column.addWidget(self.counts)
        self.column.addWidget(self.advice)
        fields = form()
        fields.addRow("Name", self.name)
        fields.addRow("Cost style", self.cost_style)
        self.column.addLayout(fields)
        self.column.addWidget(self.ways)
        self.column.addStretch(1)
        self.name.editingFinished.connect(self._rename)
        self.cost_style.activated.connect(self._change_style)

    def _ways_to_begin(self) -> QWidget:
        holder = QWidget()
        column = QVBoxLayout(holder)
        column.setContentsMargins(0, 0, 0, 0)
        column.addWidget(label("Or begin with", "heading"))
        demos = [(f"{name} (demo)", path) for name, path in demo_files()]
        for text, path in [("A plan or graph on disk…", None), *demos]:
            tip = "Choose a file" if path is None else f"Open {path.name}"
            way = button(text, tip)
            way.clicked.connect(partial(self.opened.emit, path))
            column.addWidget(way)
        return holder

    def show_plan(self) -> None:
        """Show the plan."""
        assert self.document is not None
        plan = self.plan
        self.title.setText(short(plan.settings.name or self.document.title))
        parts = [
            (len(plan.routers()), "router"),
            (len(plan.segments()), "segment"),
            (len(plan.links), "link"),
            (len(plan.groups), "shared-risk group"),
            (len(plan.demands), "demand"),
        ]
        words = [edits.counted(number, word) for number, word in parts if number]
        self.counts.setText(", ".join(words))
        self.counts.setVisible(bool(words))
        self.advice.setText(_NEXT if len(plan.nodes) else _BEGIN)
        self.ways.setVisible(not len(plan.nodes))
        self.name.setText(plan.settings.name)
        self.cost_style.setCurrentIndex(self.cost_style.findData(plan.settings.cost_style))
        if self.answers is not None and not self.answers.keeps_all_pairs:
            self.counts.setText(
                self.counts.text()
                + ". At this size the ledger is computed a few routers at a time; nothing is kept."
            )

    def _rename(self) -> None:
        if self.name.text() != self.plan.settings.name:
            self.propose(edits.set_settings(self.plan, name=self.name.text()))

    def _change_style(self) -> None:
        style = self.cost_style.currentData()
        if style == self.plan.settings.cost_style:
            return
        try:
            self.plan.snapshot().apply(edits.set_settings(self.plan, cost_style=style))
        except PlanError as error:
            self.hint.emit(str(error))
            self.show_plan()
        else:
            self.propose(edits.set_settings(self.plan, cost_style=style))
