"""Menus and actions as a table: what there is, what it says, which key, what it does."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import partial

from PySide6.QtGui import QAction, QActionGroup, QKeySequence
from PySide6.QtWidgets import QMainWindow, QMenu

from netsketch.window.fields import finish_writing

MENUS = ("File", "Edit", "View", "Draw", "Trial", "Reading", "Help")


@dataclass(frozen=True)
class Entry:
    """One action. ``choice`` names the group of which one is on at a time; "" is none,
    "switch" an action that is on or off by itself."""

    id: str
    menu: str
    text: str
    tip: str
    key: str = ""
    choice: str = ""


SEPARATOR = Entry("", "", "", "")

ENTRIES: tuple[Entry, ...] = (
    Entry("new", "File", "New", "Start an empty plan", "Ctrl+N"),
    Entry("open", "File", "Open…", "Open a plan, or import a GraphML, GML or JSON graph", "Ctrl+O"),
    Entry("save", "File", "Save", "Save the plan with its trial", "Ctrl+S"),
    Entry("save_as", "File", "Save as…", "Save under another name or in another format",
          "Ctrl+Shift+S"),
    Entry("save_picture", "File", "Save a picture…", "Save the sheet as SVG, PNG or PDF", "Ctrl+P"),
    Entry("write_record", "File", "Write the record…",
          "Write what the trial changes as HTML, PDF or Markdown, for a change ticket", "Ctrl+R"),
    Entry("quit", "File", "Quit", "Close the window", "Ctrl+Q"),
    Entry("undo", "Edit", "Undo", "Take the last edit back", "Ctrl+Z"),
    Entry("redo", "Edit", "Redo", "Do the last undone edit again", "Ctrl+Shift+Z"),
    Entry("delete", "Edit", "Delete", "Delete what is selected, with the links that hang on it",
          "Del"),
    Entry("select_all", "Edit", "Select all", "Select every router, segment and link", "Ctrl+A"),
    Entry("rename", "Edit", "Rename", "Write the name of the selected router or segment in place",
          "F2"),
    Entry("set_cost", "Edit", "Set cost", "Write the selected link's cost in place", "C"),
    Entry("zoom_in", "View", "Zoom in", "Show less, larger", "Ctrl++"),
    Entry("zoom_out", "View", "Zoom out", "Show more, smaller", "Ctrl+-"),
    Entry("full_size", "View", "Full size", "Show the sheet at 100 %", "Ctrl+0"),
    Entry("fit", "View", "Fit the plan", "Show the whole plan", "F"),
    Entry("ledger", "View", "Ledger", "Show every pair that the trial changes", "L", "switch"),
    Entry("survey", "View", "Survey", "Show what every failure of a kind does", "W", "switch"),
    Entry("look_system", "View", "As the system", "Light or dark as the system is", "", "look"),
    Entry("look_light", "View", "Paper and ink", "Light", "", "look"),
    Entry("look_dark", "View", "Graphite and chalk", "Dark", "", "look"),
    Entry("tool_select", "Draw", "Select", "Select and move", "S", "tool"),
    Entry("tool_router", "Draw", "Router", "Click on the sheet to draw routers", "Shift+R", "tool"),
    Entry("tool_segment", "Draw", "Segment", "Click on the sheet to draw LAN segments", "Shift+S",
          "tool"),
    Entry("tool_link", "Draw", "Link", "Drag from plate to plate to draw links", "Shift+L", "tool"),
    Entry("toggle_down", "Trial", "Take down or bring up",
          "Take what is selected down in the trial, or up again", "D"),
    Entry("toggle_drained", "Trial", "Drain or return",
          "Let the selected routers carry no transit traffic, or return them to service", "R"),
    Entry("drain_by_cost", "Trial", "Drain by cost",
          "Set every cost of leaving the selected router to the highest (RFC 6987)", "Shift+D"),
    Entry("try_cost", "Trial", "Try a cost…", "Give the selected link another cost in the trial",
          "T"),
    Entry("try_link", "Trial", "Try a link", "Join what is selected in the trial", "Shift+T"),
    Entry("adopt", "Trial", "Adopt", "Make the trial the plan", "Ctrl+Return"),
    Entry("discard", "Trial", "Discard", "Drop every change of the trial", "Ctrl+Backspace"),
    Entry("keep_trial", "Trial", "Keep as…", "Put the trial by under a name", "K"),
    Entry("outward", "Reading", "Outward", "Show the focus router's source tree", "O", "reading"),
    Entry("inward", "Reading", "Inward", "Show how everyone reaches the focus router", "I",
          "reading"),
    Entry("effect", "Reading", "Effect", "Show what the trial changes for the focus router", "E",
          "reading"),
    Entry("keys", "Help", "Keys", "Show every key", "F1"),
    Entry("cautions", "Help", "What netsketch computes, and cautions",
          "What the answers hold for, and what to mind before a change"),
)  # fmt: skip

CONTEXT = {
    "router": ("rename", "toggle_down", "toggle_drained", "drain_by_cost", "delete"),
    "segment": ("rename", "toggle_down", "delete"),
    "link": ("set_cost", "try_cost", "toggle_down", "delete"),
    None: ("tool_router", "tool_segment", "tool_link", "select_all", "fit"),
}
"""What the menu on the sheet offers, by what lies under the pointer."""


def build(
    window: QMainWindow, handlers: Mapping[str, Callable[[], object]]
) -> tuple[dict[str, QAction], dict[str, QMenu]]:
    """Build actions and menus on ``window``; return both by id and by title."""
    menus = {title: window.menuBar().addMenu(title) for title in MENUS}
    actions: dict[str, QAction] = {}
    groups: dict[str, QActionGroup] = {}
    for entry in ENTRIES:
        action = QAction(entry.text, window)
        action.setToolTip(f"{entry.tip} ({entry.key})" if entry.key else entry.tip)
        action.setStatusTip(entry.tip)
        if entry.key:
            action.setShortcut(QKeySequence(entry.key))
        if entry.choice:
            action.setCheckable(True)
            if entry.choice != "switch":
                groups.setdefault(entry.choice, QActionGroup(window)).addAction(action)
        action.triggered.connect(partial(_run, handlers[entry.id]))
        menus[entry.menu].addAction(action)
        actions[entry.id] = action
    return actions, menus


def _run(handler: Callable[[], object], _checked: bool = False) -> None:
    finish_writing()
    handler()


def keys_text() -> str:
    """Return every key as an HTML table, menu by menu."""
    rows = [
        f"<tr><td>{e.menu}</td><td>{e.text}</td><td><b>{e.key}</b></td></tr>"
        for e in ENTRIES
        if e.key
    ]
    sheet = (
        ("Click", "ask about a router, a segment or a link"),
        ("Shift+click", "add to the selection; a second router asks for the path to it"),
        ("Drag", "move, or on empty paper select an area"),
        ("Double-click", "rename, change a cost, or draw a router"),
        ("Wheel, + and -", "zoom"),
        ("Space+drag, middle button", "pan"),
        ("Arrows", "nudge what is selected; with Shift further"),
        ("Ctrl+arrows", "go to the next plate"),
        ("Esc", "leave off"),
    )
    rows += [f"<tr><td>Sheet</td><td>{what}</td><td><b>{key}</b></td></tr>" for key, what in sheet]
    return f"<table cellpadding='3'>{''.join(rows)}</table>"
