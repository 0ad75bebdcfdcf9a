"""Gestures: each is one object from the press that starts it to its end or cancelling.

A gesture changes nothing on its way; at its end it proposes one Edit.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter

from netsketch.model import Segment, edits
from netsketch.sheet.contents import Floats
from netsketch.sheet.frame import Frame
from netsketch.sheet.hits import link_at, node_at, rows_in
from netsketch.sheet.overlay import paint_hover, paint_rubber_line
from netsketch.sheet.paint_links import pen_of

if TYPE_CHECKING:
    from netsketch.sheet.sheet import Sheet

START_DISTANCE = 5.0
"""Pixels the pointer travels before a press becomes a drag."""


class Gesture:
    """The base: does nothing. Places are pixels of the window."""

    cursor = Qt.CursorShape.ArrowCursor

    def __init__(self, sheet: Sheet, at: QPointF, adding: bool = False) -> None:
        self.sheet, self.start, self.at = sheet, at, at
        self.adding = adding
        self.dragging = False

    def move(self, at: QPointF) -> None:
        """Follow the pointer."""
        self.at = at
        distance = at - self.start
        if not self.dragging and distance.manhattanLength() >= START_DISTANCE:
            self.dragging = True
            self.drag_started()
        if self.dragging:
            self.dragged()

    def drag_started(self) -> None:
        """The pointer has gone far enough to mean a drag."""

    def dragged(self) -> None:
        """The pointer has moved while dragging."""

    def end(self, at: QPointF) -> bool:
        """Finish at the release; return whether the gesture is over."""
        self.at = at
        return True

    def cancel(self) -> None:
        """Leave everything as it was."""

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """Paint what shows only while the gesture lasts, in sheet units."""


class Pan(Gesture):
    """Push the sheet."""

    cursor = Qt.CursorShape.ClosedHandCursor

    def __init__(self, sheet: Sheet, at: QPointF) -> None:
        super().__init__(sheet, at)
        self._view = sheet.view
        self.dragging = True

    def dragged(self) -> None:
        way = self.at - self.start
        self.sheet.show_view(self._view.panned(way.x(), way.y()))

    def cancel(self) -> None:
        self.sheet.show_view(self._view)


class Grab(Gesture):
    """Press on a plate or rail: a click selects it, a drag moves all that is selected."""

    def __init__(self, sheet: Sheet, at: QPointF, node: int, adding: bool) -> None:
        super().__init__(sheet, at, adding)
        self._node = node
        self._rows: list[int] = []
        self._places = np.empty((0, 2))

    def drag_started(self) -> None:
        nodes = self.sheet.drawing.frame.contents.nodes
        key = nodes.ids[self._node]
        if key not in self.sheet.selected_nodes:
            self.sheet.select([*(self.sheet.selected_nodes if self.adding else ()), key])
        self._rows = [nodes.row[key] for key in self.sheet.selected_nodes]
        self._places = np.stack([nodes.x[self._rows], nodes.y[self._rows]], axis=1)
        self.sheet.drawing.lift(self._rows)

    def dragged(self) -> None:
        self.sheet.drawing.shift(self._rows, self._moved())
        self.sheet.update()

    def _moved(self) -> Floats:
        way = (self.at - self.start) / self.sheet.view.scale
        return np.asarray(self._places + np.array([way.x(), way.y()]))

    def end(self, at: QPointF) -> bool:
        self.at = at
        key = self.sheet.drawing.frame.contents.nodes.ids[self._node]
        if not self.dragging:
            self.sheet.click_node(key, self.adding)
            return True
        ids = self.sheet.drawing.frame.contents.nodes.ids
        places = {
            ids[row]: self.sheet.drawing.to_plan(x, y)
            for row, (x, y) in zip(self._rows, self._moved().tolist(), strict=True)
        }
        self.sheet.drawing.drop()
        self.sheet.propose(edits.move(self.sheet.drawing.plan, places))
        return True

    def cancel(self) -> None:
        self.sheet.drawing.drop()


class ClickLink(Gesture):
    """Press on a link: a click selects it."""

    def __init__(self, sheet: Sheet, at: QPointF, link: int, adding: bool) -> None:
        super().__init__(sheet, at, adding)
        self._link = link

    def end(self, at: QPointF) -> bool:
        self.sheet.click_link(self.sheet.drawing.frame.contents.links.ids[self._link], self.adding)
        return True


class RubberBand(Gesture):
    """Press on empty paper: a drag selects what it takes in, a click selects nothing."""

    cursor = Qt.CursorShape.CrossCursor

    def _area(self) -> QRectF:
        view = self.sheet.view
        return QRectF(view.to_sheet(self.start), view.to_sheet(self.at)).normalized()

    def dragged(self) -> None:
        self.sheet.update()

    def end(self, at: QPointF) -> bool:
        self.at = at
        if not self.dragging:
            if not self.adding:
                self.sheet.click_nothing()
            return True
        contents = self.sheet.drawing.frame.contents
        nodes, links = rows_in(self.sheet.frame, self._area())
        keys = [contents.nodes.ids[row] for row in nodes]
        link_keys = [contents.links.ids[row] for row in links]
        if self.adding:
            keys = list(dict.fromkeys([*self.sheet.selected_nodes, *keys]))
            link_keys = list(dict.fromkeys([*self.sheet.selected_links, *link_keys]))
        self.sheet.select(keys, link_keys)
        return True

    def paint(self, painter: QPainter, frame: Frame) -> None:
        if not self.dragging:
            return
        wash = QColor(frame.look.ink)
        wash.setAlphaF(0.07)
        painter.setBrush(wash)
        pen = pen_of(frame, frame.look.ink, 1 / frame.scale)
        pen.setDashPattern([4.0, 3.0])
        painter.setPen(pen)
        painter.drawRect(self._area())


class PlaceNode(Gesture):
    """Press on empty paper with the router or segment tool: draws one at the release."""

    cursor = Qt.CursorShape.CrossCursor

    def end(self, at: QPointF) -> bool:
        self.sheet.draw_node(self.sheet.view.to_sheet(at))
        return True


class DrawLink(Gesture):
    """Draw a link: drag from one plate to another, or click one and then the other."""

    cursor = Qt.CursorShape.CrossCursor

    def __init__(self, sheet: Sheet, at: QPointF, node: int) -> None:
        super().__init__(sheet, at)
        self._tail = node
        self._head: int | None = None
        nodes = sheet.drawing.frame.contents.nodes
        self._key = nodes.ids[node]
        sheet.hint.emit(f"Link from {nodes.names[node]}: release or click on the other end")

    def move(self, at: QPointF) -> None:
        super().move(at)
        self._head = self._target()
        self.sheet.update()

    def _target(self) -> int | None:
        node = node_at(self.sheet.frame, self.sheet.view.to_sheet(self.at))
        return None if node == self._tail else node

    def end(self, at: QPointF) -> bool:
        self.at = at
        self._head = self._target()
        on_tail = node_at(self.sheet.frame, self.sheet.view.to_sheet(at)) == self._tail
        if self._head is not None:
            self.sheet.draw_link(self._key, self.sheet.drawing.frame.contents.nodes.ids[self._head])
            return True
        if on_tail and not self.dragging:
            return False
        self.sheet.hint.emit("No link drawn: a link ends on a plate or a rail")
        return True

    def paint(self, painter: QPainter, frame: Frame) -> None:
        nodes = frame.contents.nodes
        start = QPointF(nodes.x[self._tail], nodes.y[self._tail])
        end = self.sheet.view.to_sheet(self.at)
        paint_hover(painter, frame, self._tail, None)
        if self._head is not None:
            both = nodes.segment[[self._tail, self._head]].all()
            if not both:
                paint_hover(painter, frame, self._head, None)
                end = QPointF(nodes.x[self._head], nodes.y[self._head])
        paint_rubber_line(painter, frame, start, end)


def gesture_for(sheet: Sheet, at: QPointF, adding: bool) -> Gesture | None:
    """Return the gesture that a press of the main button starts with the tool in hand."""
    place = sheet.view.to_sheet(at)
    node = node_at(sheet.frame, place)
    if sheet.tool == "link":
        if node is not None:
            return DrawLink(sheet, at, node)
        sheet.hint.emit("A link begins on a plate or a rail")
        return None
    if node is not None:
        return Grab(sheet, at, node, adding)
    if sheet.tool in ("router", "segment"):
        return PlaceNode(sheet, at)
    link = link_at(sheet.frame, place)
    return RubberBand(sheet, at, adding) if link is None else ClickLink(sheet, at, link, adding)


def refusal(sheet: Sheet, tail: str, head: str) -> str:
    """Return why no link can join two nodes, or an empty text."""
    nodes = sheet.drawing.plan.nodes
    if isinstance(nodes[tail], Segment) and isinstance(nodes[head], Segment):
        return "A link cannot join two segments; put a router between them"
    return ""
