"""The segment page: its name, its state and its members."""

from __future__ import annotations

from functools import partial

from PySide6.QtWidgets import QCheckBox, QGridLayout, QScrollArea, QWidget

from netsketch.model import edits
from netsketch.window.literal import on_button
from netsketch.window.pages.page import Page, button, form, label, line, short

MOST_MEMBERS = 200


class SegmentPage(Page):
    """Answers for one LAN segment."""

    def __init__(self) -> None:
        super().__init__()
        self._segment = ""
        self.name = line("Name", "The segment's name")
        self.down = QCheckBox("Down")
        self.down.setToolTip("Down in the trial (D)")
        fields = form()
        fields.addRow("Name", self.name)
        fields.addRow("In the trial", self.down)
        self.column.addLayout(fields)
        self.column.addWidget(label("Members and their cost to it", "heading"))
        self.members = QScrollArea()
        self.members.setWidgetResizable(True)
        self.members.setFrameShape(QScrollArea.Shape.NoFrame)
        self.column.addWidget(self.members, 1)
        self.name.editingFinished.connect(self._rename)
        self.down.clicked.connect(self._toggle_down)

    def show_segment(self, key: str) -> None:
        """Show a segment."""
        self._segment = key
        segment = self.plan.nodes[key]
        self.title.setText(short(segment.label))
        self.name.setText(segment.name)
        self.down.setChecked(not edits.is_up(self.plan, node=key))
        self.members.setWidget(self._list())

    def _list(self) -> QWidget:
        holder = QWidget()
        grid = QGridLayout(holder)
        grid.setContentsMargins(0, 0, 0, 0)
        links = self.plan.links_at(self._segment)
        for row, link in enumerate(links[:MOST_MEMBERS]):
            member = link.other_end(self._segment)
            go = button(on_button(short(self.plan.nodes[member].label, 30)), "Go to this router")
            go.clicked.connect(partial(self.focus_asked.emit, ("router", member)))
            costs = edits.costs_in_trial(self.plan, link.id)
            grid.addWidget(go, row, 0)
            grid.addWidget(label(str(costs[0 if link.source == member else 1])), row, 1)
        if len(links) > MOST_MEMBERS:
            grid.addWidget(label(f"and {len(links) - MOST_MEMBERS} more"), len(links), 0)
        grid.setRowStretch(len(links) + 1, 1)
        return holder

    def _rename(self) -> None:
        if self._segment in self.plan.nodes:
            self.propose(edits.rename(self.plan, self._segment, self.name.text()))

    def _toggle_down(self) -> None:
        self.propose(edits.toggle_down(self.plan, [self._segment]))
