"""The pointer on the sheet: what is under it, the gesture it makes, the shape it has."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QMouseEvent, QWheelEvent

from netsketch.sheet.gestures import Gesture, Pan, gesture_for
from netsketch.sheet.hits import link_at, node_at
from netsketch.sheet.words import link_words, node_words

if TYPE_CHECKING:
    from netsketch.sheet.sheet import Sheet

_LEFT, _MIDDLE = Qt.MouseButton.LeftButton, Qt.MouseButton.MiddleButton
_ADDING = Qt.KeyboardModifier.ShiftModifier | Qt.KeyboardModifier.ControlModifier
_Shape = Qt.CursorShape


class Pointer:
    """Turns presses, moves and releases into one gesture at a time."""

    def __init__(self, sheet: Sheet) -> None:
        self._sheet = sheet
        self.gesture: Gesture | None = None
        self.node: int | None = None
        """The row of the node under the pointer."""
        self.link: int | None = None
        """The row of the link under the pointer, where there is no node."""
        self._space = False

    def press(self, event: QMouseEvent) -> None:
        """Start the gesture that a button starts with the tool in hand."""
        if self.gesture is not None:
            return
        at, button = event.position(), event.button()
        if button == _MIDDLE or (button == _LEFT and self._space):
            self.gesture = Pan(self._sheet, at)
        elif button == _LEFT:
            self.gesture = gesture_for(self._sheet, at, bool(event.modifiers() & _ADDING))
        self.show_cursor()

    def move(self, at: QPointF) -> None:
        """Follow the pointer."""
        if self.gesture is not None:
            self.gesture.move(at)
        else:
            self.hover(at)

    def release(self, event: QMouseEvent) -> None:
        """End the gesture, unless it goes on to a second click."""
        gesture = self.gesture
        if gesture is None or event.button() not in (_LEFT, _MIDDLE):
            return
        if gesture.end(event.position()) and self.gesture in (gesture, None):
            self.gesture = None
            self.hover(event.position())
        self._sheet.update()

    def double_click(self, event: QMouseEvent) -> None:
        """Write over what is under the pointer; draw a router on empty paper."""
        sheet = self._sheet
        if event.button() != _LEFT or sheet.tool != "select" or self.gesture is not None:
            self.press(event)
            return
        node, link = self.under(event.position())
        contents = sheet.drawing.frame.contents
        if node is not None:
            sheet.begin_rename(contents.nodes.ids[node])
        elif link is not None:
            sheet.begin_cost_edit(contents.links.ids[link])
        else:
            sheet.draw_node(sheet.view.to_sheet(event.position()))

    def turn(self, event: QWheelEvent) -> None:
        """A wheel zooms at the pointer, with Shift it pans sideways; two fingers pan, or
        zoom with Ctrl."""
        view, fingers, turn = self._sheet.view, event.pixelDelta(), event.angleDelta()
        if event.modifiers() & Qt.KeyboardModifier.ShiftModifier:
            view = view.panned((turn.x() or turn.y()) / 2, 0)
        elif event.modifiers() & Qt.KeyboardModifier.ControlModifier or fingers.isNull():
            view = view.zoomed(1.2 ** (turn.y() / 120), event.position())
        else:
            view = view.panned(fingers.x(), fingers.y())
        self._sheet.show_view(view)
        event.accept()

    def cancel(self) -> bool:
        """Drop the gesture under way; return whether there was one."""
        gesture, self.gesture = self.gesture, None
        if gesture is not None:
            gesture.cancel()
            self.show_cursor()
            self._sheet.update()
        return gesture is not None

    def hold_space(self, held: bool) -> None:
        """While the space bar is held a drag pans."""
        self._space = held
        self.show_cursor()

    def under(self, at: QPointF) -> tuple[int | None, int | None]:
        """Return the rows of the node and of the link under a pixel, one of them at most."""
        place, frame = self._sheet.view.to_sheet(at), self._sheet.frame
        node = node_at(frame, place)
        return node, (link_at(frame, place) if node is None else None)

    def hover(self, at: QPointF | None) -> None:
        """Show what the pointer is on; ``None`` when it has left the sheet."""
        found = (None, None) if at is None else self.under(at)
        if self._sheet.tool != "select":
            found = found[0], None
        if found != (self.node, self.link):
            self.node, self.link = found
            self._sheet.update()
        self.show_cursor()

    def select_under(self, at: QPointF) -> tuple[str, str] | None:
        """Select what is under the pointer unless it is among the selected already;
        return it as a focus."""
        sheet, (node, link) = self._sheet, self.under(at)
        contents = sheet.drawing.frame.contents
        if node is not None:
            key = contents.nodes.ids[node]
            if key not in sheet.selected_nodes:
                sheet.select([key])
            return sheet.focus_of_node(key)
        if link is not None:
            key = contents.links.ids[link]
            if key not in sheet.selected_links:
                sheet.select((), [key])
            return "link", key
        return None

    def words(self, at: QPointF) -> str:
        """Return what the thing under a pixel says of itself, or nothing."""
        node, link = self.under(at)
        contents, plan = self._sheet.drawing.frame.contents, self._sheet.drawing.plan
        if node is not None:
            return node_words(plan, contents.nodes.ids[node])
        return "" if link is None else link_words(plan, contents.links.ids[link])

    def show_cursor(self) -> None:
        """Give the pointer the shape of what a press would do."""
        self._sheet.setCursor(self._cursor())

    def _cursor(self) -> Qt.CursorShape:
        if self.gesture is not None:
            return self.gesture.cursor
        if self._space:
            return _Shape.OpenHandCursor
        if self._sheet.tool != "select":
            return _Shape.CrossCursor
        on_paper = self.node is None and self.link is None
        return _Shape.ArrowCursor if on_paper else _Shape.PointingHandCursor
