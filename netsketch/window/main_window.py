"""The main window: puts the parts together and decides nothing itself."""

# ruff: noqa: N802  (Qt names the event handlers)

from __future__ import annotations

from functools import partial

from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QCloseEvent, QGuiApplication
from PySide6.QtWidgets import (
    QDockWidget,
    QLabel,
    QMainWindow,
    QMenu,
    QToolBar,
    QToolButton,
    QVBoxLayout,
    QWidget,
)

from netsketch.session.jobs import Jobs
from netsketch.sheet import Sheet
from netsketch.window import actions, commands, kept_trials
from netsketch.window.demos import demo_files
from netsketch.window.desk import Desk, Focus
from netsketch.window.files import Files
from netsketch.window.inspector import Inspector
from netsketch.window.ledger_panel import LedgerPanel, totals_text
from netsketch.window.literal import as_tip, on_button
from netsketch.window.notice import Notice
from netsketch.window.questions import Questions
from netsketch.window.relay import Relay
from netsketch.window.settings import Settings
from netsketch.window.survey_panel import SurveyPanel
from netsketch.window.surveys import Surveys
from netsketch.window.theme import apply_look, look_named, more_icon
from netsketch.window.trial_strip import TrialStrip

WRITING = ("record", "picture", "copy")
"""Jobs that write files, for which nothing else waits."""

_RIGHT, _BOTTOM = Qt.DockWidgetArea.RightDockWidgetArea, Qt.DockWidgetArea.BottomDockWidgetArea


class MainWindow(QMainWindow):
    """Sheet in the middle, inspector on the right, ledger and trial strip below."""

    def __init__(self) -> None:
        super().__init__()
        self.setObjectName("netsketch")
        self.resize(1440, 900)
        self.settings = Settings()
        self.ask = Questions(self)
        self.jobs, self.core_jobs, self.writing_jobs = Jobs(), Jobs(), Jobs()
        apart = {"core": self.core_jobs, **dict.fromkeys(WRITING, self.writing_jobs)}
        self.relay = Relay(self.jobs, self, apart)
        self.desk = Desk(self.relay, self)
        self.files = Files(self.desk, self.relay, self.settings, self.ask, self)
        self.sheet = Sheet()
        self.inspector = Inspector()
        self.ledger = LedgerPanel(self.ask, self.relay)
        self.surveys = Surveys(self.desk, self)
        self.survey = SurveyPanel(self.surveys, self.ask)
        self.strip = TrialStrip()
        self.notice = Notice()
        self.state, self.files_state = _state_label(), _state_label()
        self.actions_by_id, self.menus = actions.build(self, commands.handlers(self))
        self._lay_out()
        self._connect()
        self._fill_recent()
        self.set_look(self.settings.look)
        self.restoreGeometry(self.settings.bytes_of("geometry"))
        self.restoreState(self.settings.bytes_of("state"))
        self.ledger_dock.hide()
        self.survey_dock.hide()
        self._show_document()
        self._show_selection()
        self._show_tool("select")
        self._show_answer()

    # -- assembly -----------------------------------------------------------------------

    def _lay_out(self) -> None:
        middle = QWidget()
        column = QVBoxLayout(middle)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        column.addWidget(self.notice)
        column.addWidget(self.sheet, 1)
        self.setCentralWidget(middle)
        self.inspector_dock = self._dock("Inspector", self.inspector, _RIGHT)
        self.ledger_dock = self._dock("Ledger", self.ledger, _BOTTOM)
        self.survey_dock = self._dock("Survey", self.survey, _BOTTOM)
        self.tabifyDockWidget(self.ledger_dock, self.survey_dock)
        self.setCorner(Qt.Corner.BottomRightCorner, _RIGHT)
        self.resizeDocks([self.inspector_dock], [500], Qt.Orientation.Horizontal)
        self.resizeDocks([self.ledger_dock], [260], Qt.Orientation.Vertical)
        self._fill_tools()
        below = QToolBar("Trial", self)
        below.setObjectName("Trial")
        below.setMovable(False)
        below.addWidget(self.strip)
        self.addToolBar(Qt.ToolBarArea.BottomToolBarArea, below)
        for state in (self.files_state, self.state):
            self.statusBar().addPermanentWidget(state)
        self._demos = QMenu("Open a demo network", self)
        for name, path in demo_files():
            self._demos.addAction(name, partial(self.files.open_demo, path))
        self._demos.setEnabled(not self._demos.isEmpty())
        self._recent = QMenu("Open recent", self)
        self._recent.setToolTipsVisible(True)
        self._kept = QMenu("Kept trials", self)
        self.menus["Trial"].addMenu(self._kept)
        for menu in (self._demos, self._recent):
            self.menus["File"].insertMenu(self.actions_by_id["save"], menu)

    def _dock(self, title: str, widget: QWidget, area: Qt.DockWidgetArea) -> QDockWidget:
        dock = QDockWidget(title, self)
        dock.setObjectName(title)
        dock.setWidget(widget)
        dock.setTitleBarWidget(QWidget(dock))
        self.addDockWidget(area, dock)
        return dock

    def _fill_tools(self) -> None:
        bar = QToolBar("Tools", self)
        bar.setObjectName("Tools")
        bar.setMovable(False)
        for group in (
            ("tool_select", "tool_router", "tool_segment", "tool_link"),
            ("toggle_down", "toggle_drained", "try_cost"),
            ("outward", "inward", "effect"),
            ("undo", "redo"),
            ("fit", "ledger", "survey"),
        ):
            bar.addActions([self.actions_by_id[key] for key in group])
            bar.addSeparator()
        self.addToolBar(bar)
        self._more = bar.findChildren(QToolButton, "qt_toolbar_ext_button")
        for button in self._more:
            button.setAccessibleName("More tools")
            button.setToolTip("The tools that have no room here")

    def _connect(self) -> None:
        sheet, desk = self.sheet, self.desk
        for edited in (sheet.edited, self.inspector.edited, self.strip.edited):
            edited.connect(desk.apply)
        for hint in (sheet.hint, self.inspector.hint, self.ledger.hint, self.survey.hint):
            hint.connect(self.hint)
        sheet.focus_asked.connect(desk.set_focus)
        sheet.selection_changed.connect(self._show_selection)
        sheet.menu_asked.connect(self._show_menu)
        sheet.tool_changed.connect(self._show_tool)
        self.inspector.opened.connect(self.files.begin_with)
        self.inspector.focus_asked.connect(self.go_to)
        self.inspector.path_lit.connect(sheet.light_path)
        self.inspector.path_asked.connect(desk.set_pair)
        self.ledger.pair_asked.connect(partial(desk.set_pair, changed=True))
        self.ledger.baseline_asked.connect(desk.set_baseline)
        self.surveys.failure_shown.connect(self._show_failure)
        self.survey.tried.connect(partial(commands.try_failure, self))
        desk.tipping_changed.connect(self._show_tipping)
        self.strip.ledger_asked.connect(self.toggle_ledger)
        desk.document_changed.connect(self._show_document)
        desk.plan_changed.connect(self._show_plan)
        desk.focus_changed.connect(self._show_focus)
        desk.answered.connect(self._show_answer)
        desk.ledger_changed.connect(self._show_ledger)
        desk.refused.connect(self.hint)
        desk.state_changed.connect(self.state.setText)
        self.files.state_changed.connect(self.files_state.setText)
        self.files.noted.connect(self.notice.say)
        self.files.recent_changed.connect(self._fill_recent)
        QGuiApplication.styleHints().colorSchemeChanged.connect(self._follow_system)

    # -- showing ------------------------------------------------------------------------

    def hint(self, text: str) -> None:
        """Say in the status bar what to do next, or why something was not done."""
        self.statusBar().showMessage(text)

    def _show_document(self) -> None:
        self.notice.hide()
        self.surveys.forget()
        self.sheet.set_document(self.desk.document)
        self.inspector.set_document(self.desk.document, self.desk.answers)
        self._show_plan()

    def _show_plan(self) -> None:
        document = self.desk.document
        title = document.title.replace("[*]", "[*][*]")  # Qt's own mark, doubled, is a text
        self.setWindowTitle(f"{title}[*] – netsketch")
        self.setWindowModified(document.is_modified)
        self.strip.show_trial(document.plan)
        self.survey.show_plan(document.plan)
        self.inspector.refresh()
        for key, label in (("undo", document.undo_label), ("redo", document.redo_label)):
            action = self.actions_by_id[key]
            word = key.capitalize()
            action.setEnabled(label is not None)
            action.setStatusTip(f"{word}: {label}" if label else f"Nothing to {key}")
            action.setToolTip(as_tip(f"{word}: {label}") if label else f"Nothing to {key}")
            action.setIconText(word)
            action.setText(on_button(f"{word}: {label[:60]}") if label else word)
        kept_trials.fill(self._kept, document.plan, self.desk.apply)
        self._kept.setEnabled(len(document.plan.trials) > 0)
        self.ledger.show_kept(document.plan.trials.keys(), self.desk.baseline)
        tried = bool(document.plan.trial)
        for key in ("adopt", "discard", "effect", "keep_trial"):
            self.actions_by_id[key].setEnabled(tried)

    def _show_focus(self) -> None:
        self.sheet.light_path(None)
        self._show_selection()

    def _show_selection(self) -> None:
        chosen = self.sheet.selected_nodes, self.sheet.selected_links
        if self._is_pair(*chosen):
            self.desk.set_pair(*chosen[0])  # comes back here
            return
        self.inspector.show_focus(self.desk.focus, chosen)
        several = len(chosen[0]) + len(chosen[1])
        for key in ("delete", "toggle_down"):
            self.actions_by_id[key].setEnabled(several > 0)
        self.actions_by_id["set_cost"].setEnabled(len(chosen[1]) > 0)
        self.actions_by_id["try_cost"].setEnabled(len(chosen[1]) == 1)
        self.actions_by_id["try_link"].setEnabled(len(chosen[0]) == 2 and not chosen[1])
        for key in ("rename", "toggle_drained", "drain_by_cost"):
            self.actions_by_id[key].setEnabled(len(chosen[0]) > 0)

    def _show_answer(self) -> None:
        desk = self.desk
        self.inspector.set_document(desk.document, desk.answers)
        self.sheet.set_reading(desk.reading)
        self.inspector.show_pair(desk.pair_answer)
        self.inspector.show_tipping(None)
        if desk.inward is not None:
            self.inspector.show_inward(desk.inward)
        else:
            self.inspector.show_outward(desk.outward)
        self.actions_by_id[desk.kind].setChecked(True)

    def _show_tipping(self) -> None:
        self.inspector.show_tipping(self.desk.tipping)

    def _is_pair(self, nodes: list[str], links: list[str]) -> bool:
        """Tell whether the selection asks for a pair anew: the focus router, and one more
        node clicked with Shift or Ctrl."""
        return (
            len(nodes) == 2
            and not links
            and self.desk.focus == ("router", nodes[0])
            and self.desk.pair != (nodes[0], nodes[1])
        )

    def _show_ledger(self) -> None:
        desk = self.desk
        self.ledger.show_kept(desk.document.plan.trials.keys(), desk.baseline)
        if desk.is_computing:
            self.ledger.show_computing()
            self.strip.show_totals("computing…")
            return
        self.ledger.set_ledger(desk.ledger, desk.document.plan)
        ledger = desk.ledger if desk.compares else None
        self.strip.show_totals("" if ledger is None else f"{totals_text(ledger)} of all pairs")

    def _show_failure(self) -> None:
        """Show the ledger of a surveyed failure, and whom it concerns on the sheet."""
        from netsketch.readings.failure import failure

        failed, ledger = self.surveys.failure, self.surveys.ledger
        if failed is None or ledger is None:
            return
        self.ledger.set_ledger(ledger, self.desk.document.plan)
        self.ledger_dock.show()
        self.actions_by_id["ledger"].setChecked(True)
        label = self.survey.model.name_of(failed)
        self.sheet.set_reading(failure(ledger, failed.links, failed.nodes, label))

    def _show_tool(self, tool: str) -> None:
        self.actions_by_id[f"tool_{tool}"].setChecked(True)

    def _show_menu(self, focus: Focus | None, at: QPoint) -> None:
        menu = QMenu(self)
        menu.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        menu.addActions(
            [self.actions_by_id[key] for key in actions.CONTEXT[focus[0] if focus else None]]
        )
        menu.popup(at)

    def _fill_recent(self) -> None:
        self._recent.clear()
        for path in self.settings.recent:
            open_it = partial(self.files.open_path, path)
            action = self._recent.addAction(on_button(path.name), open_it)
            action.setToolTip(as_tip(str(path)))
            action.setStatusTip(str(path))
        self._recent.setEnabled(bool(self.settings.recent))

    # -- what commands ask of the window -------------------------------------------------

    def go_to(self, focus: Focus) -> None:
        """Select a thing, show it on the sheet and ask about it."""
        kind, key = focus
        self.sheet.select(*([(), [key]] if kind == "link" else [[key], ()]))
        self.sheet.show_thing(key)
        self.desk.set_focus(focus)

    def set_look(self, name: str) -> None:
        """Change the colours and remember it."""
        self.settings.look = name
        look = look_named(name)
        apply_look(look)
        self.sheet.set_look(look)
        for button in self._more:
            button.setIcon(more_icon(look))
        self.actions_by_id[f"look_{name}"].setChecked(True)

    def _follow_system(self) -> None:
        if self.settings.look == "system":
            self.set_look("system")

    def toggle_ledger(self) -> None:
        """Show or hide the ledger."""
        self.ledger_dock.setVisible(not self.ledger_dock.isVisible())
        self.actions_by_id["ledger"].setChecked(self.ledger_dock.isVisible())

    def toggle_survey(self) -> None:
        """Show or hide the survey."""
        self.survey_dock.setVisible(not self.survey_dock.isVisible())
        self.survey_dock.raise_()
        self.actions_by_id["survey"].setChecked(self.survey_dock.isVisible())

    def closeEvent(self, event: QCloseEvent) -> None:
        if not self.files.may_leave():
            event.ignore()
            return
        self.settings.keep_bytes("geometry", self.saveGeometry())
        self.settings.keep_bytes("state", self.saveState())
        self.hide()  # a routing core that is being compiled can not be told to stop
        self.surveys.close()
        for jobs in (self.jobs, self.writing_jobs, self.core_jobs):
            jobs.close()
        super().closeEvent(event)


def _state_label() -> QLabel:
    made = QLabel()
    made.setTextFormat(Qt.TextFormat.PlainText)
    return made
