"""What the actions do: each reads the selection and asks the desk or the sheet."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import TYPE_CHECKING

from netsketch.model import PlanError, Segment, edits, quoted
from netsketch.reports import cautions
from netsketch.sheet.editors import cost_hint, cost_text, read_costs
from netsketch.window import actions
from netsketch.window.record import write_record

if TYPE_CHECKING:
    from netsketch.analysis.survey import Failure
    from netsketch.window.main_window import MainWindow

_STEP = 1.25


def handlers(window: MainWindow) -> dict[str, Callable[[], object]]:
    """Return what each action of the table does."""
    w, sheet, desk, files = window, window.sheet, window.desk, window.files
    found: dict[str, Callable[[], object]] = {
        "new": files.new,
        "open": files.open,
        "save": files.save,
        "save_as": files.save_as,
        "save_picture": files.save_picture,
        "write_record": partial(write_record, w),
        "quit": window.close,
        "undo": desk.undo,
        "redo": desk.redo,
        "delete": partial(_delete, w),
        "select_all": sheet.select_all,
        "rename": partial(_rename, w),
        "set_cost": partial(_set_cost, w),
        "zoom_in": partial(sheet.zoom_by, _STEP),
        "zoom_out": partial(sheet.zoom_by, 1 / _STEP),
        "full_size": partial(sheet.zoom_to, 1.0),
        "fit": sheet.fit,
        "ledger": window.toggle_ledger,
        "survey": window.toggle_survey,
        "toggle_down": partial(_toggle_down, w),
        "toggle_drained": partial(_toggle_drained, w),
        "drain_by_cost": partial(_drain_by_cost, w),
        "try_cost": partial(_try_cost, w),
        "try_link": partial(_try_link, w),
        "keep_trial": partial(_keep_trial, w),
        "adopt": lambda: desk.apply(edits.adopt(desk.document.plan)),
        "discard": lambda: desk.apply(edits.discard(desk.document.plan)),
        "outward": partial(desk.show_kind, "outward"),
        "inward": partial(desk.show_kind, "inward"),
        "effect": partial(desk.show_kind, "effect"),
        "keys": lambda: window.ask.read("Keys", actions.keys_text()),
        "cautions": lambda: window.ask.read("Cautions", cautions.as_html()),
    }
    found.update({f"look_{name}": partial(window.set_look, name) for name in LOOKS})
    found.update({f"tool_{name}": partial(sheet.set_tool, name) for name in TOOLS})
    return found


LOOKS = ("system", "light", "dark")
TOOLS = ("select", "router", "segment", "link")


def try_failure(window: MainWindow, failure: Failure) -> None:
    """Put a surveyed failure into the trial."""
    from netsketch.analysis.survey_load import as_trial

    plan = window.desk.document.plan
    name = window.survey.model.name_of(failure)
    try:
        window.desk.apply(edits.try_changes(plan, as_trial(failure).changes, f"try {name} down"))
    except PlanError:
        window.hint("The plan no longer has what failed there: survey it again")


def _delete(window: MainWindow) -> None:
    chosen = window.sheet.selected_nodes, window.sheet.selected_links
    window.desk.apply(edits.remove(window.desk.document.plan, *chosen))


def _rename(window: MainWindow) -> None:
    if window.sheet.selected_nodes:
        window.sheet.begin_rename(window.sheet.selected_nodes[-1])


def _set_cost(window: MainWindow) -> None:
    if window.sheet.selected_links:
        window.sheet.begin_cost_edit(window.sheet.selected_links[-1])


def _toggle_down(window: MainWindow) -> None:
    chosen = window.sheet.selected_nodes, window.sheet.selected_links
    window.desk.apply(edits.toggle_down(window.desk.document.plan, *chosen))


def _toggle_drained(window: MainWindow) -> None:
    plan, nodes = window.desk.document.plan, window.sheet.selected_nodes
    if all(isinstance(plan.nodes[key], Segment) for key in nodes):
        window.hint("Only routers can be drained")
        return
    window.desk.apply(edits.toggle_drained(plan, nodes))


def _drain_by_cost(window: MainWindow) -> None:
    node = window.sheet.selected_nodes[-1]
    if isinstance(window.desk.document.plan.nodes[node], Segment):
        window.hint("Only routers can be drained")
        return
    window.desk.apply(edits.drain_by_cost(window.desk.document.plan, node))


def _try_link(window: MainWindow) -> None:
    plan, nodes = window.desk.document.plan, window.sheet.selected_nodes
    if all(isinstance(plan.nodes[key], Segment) for key in nodes):
        window.hint("A link joins two routers, or a router and a segment")
        return
    text = window.ask.text("Try a link", "Cost, the same both ways", "10")
    if text is None:
        return
    try:
        window.desk.apply(edits.try_link(plan, nodes[0], nodes[1], _whole(text)))
    except PlanError as error:
        window.hint(str(error))


def _whole(text: str) -> int:
    if not text.strip().isdecimal() or len(text) > 15:
        raise PlanError(f"cost {quoted(text)} is not a whole number")
    return int(text)


def _keep_trial(window: MainWindow) -> None:
    name = window.ask.text("Keep the trial", "Name", "")
    if name is not None and name.strip():
        window.desk.apply(edits.keep_trial(window.desk.document.plan, name.strip()))


def _try_cost(window: MainWindow) -> None:
    plan = window.desk.document.plan
    link = plan.links[window.sheet.selected_links[-1]]
    now = cost_text(link, edits.costs_in_trial(plan, link.id), plan)
    text = window.ask.text("Try a cost", cost_hint(link, plan), now)
    if text is None:
        return
    try:
        window.desk.apply(edits.try_costs(plan, link.id, *read_costs(text, link, plan)))
    except PlanError as error:
        window.hint(str(error))
