"""The router page: name, state, and its forwarding table."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING

from PySide6.QtCore import Qt, Signal
from PySide6.QtGui import QGuiApplication, QKeySequence, QShortcut
from PySide6.QtWidgets import (
    QAbstractItemView,
    QCheckBox,
    QCompleter,
    QHBoxLayout,
    QHeaderView,
    QLabel,
)

from netsketch.model import Router, edits
from netsketch.reports.tables import csv_text
from netsketch.window.filling_table import FillingTable
from netsketch.window.pages.page import Page, button, form, label, line, short
from netsketch.window.route_table import CHANGE, CSV_HEADER, RouteTable

if TYPE_CHECKING:
    from netsketch.session.answers import Inward, Outward

_WIDTHS = (100, 74, 30, 140, 46, 42, 72)
_NEXT_HOP, _LEAST_NEXT_HOP = 3, 110


class RouterPage(Page):
    """Answers for one router."""

    path_lit = Signal(object)
    """link id -> direction of the row chosen in the table; ``None`` when none is."""
    path_asked = Signal(str, str)

    def __init__(self) -> None:
        super().__init__()
        self._router = ""
        self.name = line("Name", "The router's name")
        self.site = line("Site", "Its site or role, shown under the name")
        self.down = QCheckBox("Down")
        self.down.setToolTip("Down in the trial (D)")
        self.drained = QCheckBox("Drained")
        self.drained.setToolTip("In the trial: carries nothing that is not its own (R)")
        self.table_model = RouteTable(self)
        self.table = _table(self.table_model)
        self.filter = line("Filter the forwarding table", "Show rows that hold this text")
        self.filter.setPlaceholderText("Filter")
        self.filter.setClearButtonEnabled(True)
        self.copy = button("Copy as CSV", "Copy the rows shown to the clipboard")
        self.show_path = button("Show as path", "Show the chosen row as a path, with the way back")
        self.path_to = line("Path to", "Write a name and press Return to see the way there")
        self.path_to.setPlaceholderText("Path to…")
        self.heading = label("Forwarding table", "heading")
        self.count = QLabel()
        self.count.setProperty("role", "soft")
        self._lay_out()
        self._connect()

    def _lay_out(self) -> None:
        fields = form()
        fields.addRow("Name", self.name)
        fields.addRow("Site", self.site)
        states = QHBoxLayout()
        states.setSpacing(16)
        states.addWidget(self.down)
        states.addWidget(self.drained)
        states.addStretch(1)
        fields.addRow("In the trial", states)
        self.column.addLayout(fields)
        head = QHBoxLayout()
        head.addWidget(self.heading)
        head.addStretch(1)
        head.addWidget(self.count)
        self.column.addLayout(head)
        self.column.addWidget(self.filter)
        self.column.addWidget(self.table, 1)
        foot = QHBoxLayout()
        foot.addWidget(self.path_to, 1)
        foot.addWidget(self.show_path)
        foot.addWidget(self.copy)
        self.column.addLayout(foot)

    def _connect(self) -> None:
        self.name.editingFinished.connect(self._rename)
        self.site.editingFinished.connect(self._resite)
        self.down.clicked.connect(self._toggle_down)
        self.drained.clicked.connect(self._toggle_drained)
        self.filter.textChanged.connect(self._refilter)
        self.copy.clicked.connect(self._copy)
        self.path_to.returnPressed.connect(self._find)
        self.show_path.clicked.connect(self._ask_path)
        self.table.doubleClicked.connect(self._ask_path)
        self.table.selectionModel().currentRowChanged.connect(self._light)
        for key, action in (
            (QKeySequence.StandardKey.Copy, self._copy),
            (QKeySequence(Qt.Key.Key_Escape), self.table.clearSelection),
            (QKeySequence(Qt.Key.Key_Return), self._ask_path),
        ):
            shortcut = QShortcut(QKeySequence(key), self.table)
            shortcut.setContext(Qt.ShortcutContext.WidgetShortcut)
            shortcut.activated.connect(action)
        self.table.selectionModel().selectionChanged.connect(self._unlight)

    def show_router(self, key: str) -> None:
        """Show a router; its table comes with :meth:`show_outward`."""
        if key != self._router:
            self.table.clearSelection()
        self._router = key
        router = self.plan.nodes[key]
        self.title.setText(short(router.label))
        self.name.setText(router.name)
        self.site.setText(router.site)
        names = [node.label[:80] for node in self.plan.nodes if node.id != key]
        completer = QCompleter(names, self.path_to)
        completer.setCaseSensitivity(Qt.CaseSensitivity.CaseInsensitive)
        completer.setFilterMode(Qt.MatchFlag.MatchContains)
        self.path_to.setCompleter(completer)
        self.down.setChecked(not edits.is_up(self.plan, node=key))
        self.drained.setChecked(edits.is_drained(self.plan, key))

    def show_outward(self, outward: Outward | None) -> None:
        """Show the forwarding table; ``None`` while the routing core is being loaded."""
        chosen = self._chosen()
        self.heading.setText("Forwarding table")
        self.table_model.show(outward, self.plan)
        changed = outward is not None and bool(outward.changed)
        self.table.show_column(CHANGE, changed)
        self._show_count(outward is None)
        row = self.table_model.row_of(chosen) if chosen else None
        if row is not None:
            self.table.selectRow(row)

    def show_inward(self, inward: Inward) -> None:
        """Show every router's way to this one."""
        self.heading.setText("How everyone reaches it")
        self.table_model.show_ways(inward, self.plan)
        self.table.show_column(CHANGE, False)
        self._show_count()

    def _show_count(self, waiting: bool = False) -> None:
        shown, of = self.table_model.counts()
        text = f"{of:,} routes" if shown == of else f"{shown:,} of {of:,} routes"
        self.count.setText("the routing core is being loaded" if waiting else text)

    def _chosen(self) -> str | None:
        rows = self.table.selectionModel().selectedRows()
        return self.table_model.line(rows[0].row()).row.to if rows else None

    def _light(self) -> None:
        row = self.table.currentIndex().row()
        if row < 0 or self.answers is None:
            return
        other = self.table_model.line(row).row.to
        ends = (other, self._router) if self.table_model.inwards else (self._router, other)
        self.path_lit.emit(self.directions(*ends))

    def _unlight(self) -> None:
        if not self.table.selectionModel().hasSelection():
            self.path_lit.emit(None)

    def directions(self, source: str, target: str) -> Mapping[str, int]:
        """Return the links on the way between two routers with the direction of travel."""
        assert self.answers is not None
        plan = self.plan
        return {
            share.link: 1 if plan.links[share.link].source == share.tail else -1
            for share in self.answers.path(source, target).links
        }

    def _ask_path(self) -> None:
        other = self._chosen()
        if other is None:
            self.hint.emit("Choose a row of the table first")
        elif self.table_model.inwards:
            self.path_asked.emit(other, self._router)
        else:
            self.path_asked.emit(self._router, other)

    def _find(self) -> None:
        """Ask for the path to the node that was named: in full, or by the only beginning."""
        text = self.path_to.text().strip().casefold()
        named = {
            node.id: (node.label.casefold(), node.id.casefold())
            for node in self.plan.nodes
            if node.id != self._router
        }
        exact = [key for key, names in named.items() if text in names]
        found = exact or [
            key for key, names in named.items() if any(name.startswith(text) for name in names)
        ]
        if len(found) == 1:
            self.path_asked.emit(self._router, found[0])
        else:
            several = f"{len(found)} names begin so; write more of it" if found else "No such name"
            self.hint.emit(several)

    def _rename(self) -> None:
        if self._router in self.plan.nodes:
            self.propose(edits.rename(self.plan, self._router, self.name.text()))

    def _resite(self) -> None:
        router = self.plan.nodes.get(self._router)
        if isinstance(router, Router):
            changed = edits.replace(router, site=self.site.text())
            self.propose(edits.change(self.plan, [changed], f"change site of {router.label}"))

    def _toggle_down(self) -> None:
        self.propose(edits.toggle_down(self.plan, [self._router]))

    def _toggle_drained(self) -> None:
        self.propose(edits.toggle_drained(self.plan, [self._router]))

    def _refilter(self) -> None:
        self.table_model.set_filter(self.filter.text())
        self._show_count()

    def _copy(self) -> None:
        rows = self.table_model.as_rows()
        QGuiApplication.clipboard().setText(csv_text(CSV_HEADER, rows))
        self.hint.emit(f"{len(rows):,} rows copied as CSV")


def _table(model: RouteTable) -> FillingTable:
    table = FillingTable(_NEXT_HOP, _LEAST_NEXT_HOP)
    table.setModel(model)
    table.setAccessibleName("Forwarding table")
    table.setSortingEnabled(True)
    table.setSelectionBehavior(QAbstractItemView.SelectionBehavior.SelectRows)
    table.setSelectionMode(QAbstractItemView.SelectionMode.SingleSelection)
    table.setShowGrid(False)
    table.setTabKeyNavigation(False)
    table.setWordWrap(False)
    table.verticalHeader().hide()
    table.verticalHeader().setSectionResizeMode(QHeaderView.ResizeMode.Fixed)
    table.verticalHeader().setDefaultSectionSize(24)
    header = table.horizontalHeader()
    header.setMinimumSectionSize(26)
    header.setDefaultAlignment(Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter)
    for column, width in enumerate(_WIDTHS):
        table.setColumnWidth(column, width)
    table.sortByColumn(0, Qt.SortOrder.AscendingOrder)
    return table
