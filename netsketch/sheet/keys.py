"""What keys do on the sheet: nudge, walk from plate to plate, delete, rename, zoom."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING

import numpy as np
from PySide6.QtCore import Qt
from PySide6.QtGui import QKeyEvent

from netsketch.model import edits

if TYPE_CHECKING:
    from netsketch.sheet.sheet import Sheet

_NUDGE, _FAR = 1.0, 10.0
_PAN_PIXELS = 60
_CTRL, _SHIFT = Qt.KeyboardModifier.ControlModifier, Qt.KeyboardModifier.ShiftModifier
_ARROWS: dict[int, tuple[int, int]] = {
    Qt.Key.Key_Left: (-1, 0),
    Qt.Key.Key_Right: (1, 0),
    Qt.Key.Key_Up: (0, -1),
    Qt.Key.Key_Down: (0, 1),
}


def press_key(sheet: Sheet, event: QKeyEvent) -> bool:
    """Do what a key asks; return whether it asks anything of the sheet."""
    key = event.key()
    if key in _ARROWS:
        _press_arrow(sheet, event)
        return True
    if key == Qt.Key.Key_Space:
        if not event.isAutoRepeat():
            sheet.hold_space(True)
        return True
    action = _KEYS.get(key)
    if action is None or event.modifiers() & _CTRL:
        return False
    action(sheet)
    return True


def _press_arrow(sheet: Sheet, event: QKeyEvent) -> None:
    """Ctrl walks to the next plate; else the selection is nudged, or the sheet panned."""
    way = _ARROWS[event.key()]
    if event.modifiers() & _CTRL:
        _walk(sheet, way)
    elif sheet.selected_nodes:
        _nudge(sheet, way, _FAR if event.modifiers() & _SHIFT else _NUDGE)
    else:
        sheet.show_view(sheet.view.panned(-way[0] * _PAN_PIXELS, -way[1] * _PAN_PIXELS))


def _nudge(sheet: Sheet, way: tuple[int, int], step: float) -> None:
    nodes = sheet.drawing.frame.contents.nodes
    places = {}
    for key in sheet.selected_nodes:
        row = nodes.row[key]
        places[key] = sheet.drawing.to_plan(
            nodes.x[row] + way[0] * step, nodes.y[row] + way[1] * step
        )
    sheet.propose(edits.move(sheet.drawing.plan, places, merge=f"nudge {' '.join(places)}"))


def _walk(sheet: Sheet, way: tuple[int, int]) -> None:
    """Select the nearest plate in one direction from the selected one."""
    nodes = sheet.drawing.frame.contents.nodes
    if not nodes.ids:
        return
    if not sheet.selected_nodes:
        sheet.click_node(nodes.ids[0], adding=False)
        return
    here = nodes.row[sheet.selected_nodes[-1]]
    dx, dy = nodes.x - nodes.x[here], nodes.y - nodes.y[here]
    ahead = dx * way[0] + dy * way[1]
    aside = np.abs(dx * way[1] + dy * way[0])
    effort = np.where(ahead > np.maximum(aside * 0.5, 1e-6), ahead + 2 * aside, np.inf)
    there = int(effort.argmin())
    if np.isfinite(effort[there]):
        key = nodes.ids[there]
        sheet.click_node(key, adding=False)
        sheet.show_thing(key)


def _delete(sheet: Sheet) -> None:
    if sheet.selected_nodes or sheet.selected_links:
        chosen = sheet.selected_nodes, sheet.selected_links
        sheet.propose(edits.remove(sheet.drawing.plan, *chosen))


def _rename(sheet: Sheet) -> None:
    if sheet.selected_nodes:
        sheet.begin_rename(sheet.selected_nodes[-1])
    elif sheet.selected_links:
        sheet.begin_cost_edit(sheet.selected_links[-1])
    else:
        sheet.hint.emit("Select a router, a segment or a link first")


_KEYS: dict[int, Callable[[Sheet], None]] = {
    Qt.Key.Key_Escape: lambda sheet: sheet.cancel_gesture(),
    Qt.Key.Key_Delete: _delete,
    Qt.Key.Key_Backspace: _delete,
    Qt.Key.Key_F2: _rename,
    Qt.Key.Key_Plus: lambda sheet: sheet.zoom_by(1.2),
    Qt.Key.Key_Equal: lambda sheet: sheet.zoom_by(1.2),
    Qt.Key.Key_Minus: lambda sheet: sheet.zoom_by(1 / 1.2),
    Qt.Key.Key_0: lambda sheet: sheet.fit(),
}
