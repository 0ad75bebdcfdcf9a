"""The sheet: the widget on which a plan is drawn, read and edited."""

# ruff: noqa: N802  (Qt names the event handlers)

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import replace

from PySide6.QtCore import QEvent, QPointF, QRectF, QSizeF, Qt, QTimer, Signal
from PySide6.QtGui import (
    QContextMenuEvent,
    QKeyEvent,
    QMouseEvent,
    QNativeGestureEvent,
    QPainter,
    QPaintEvent,
    QResizeEvent,
    QWheelEvent,
)
from PySide6.QtWidgets import QWidget

from netsketch.model import Edit, LinkCost, edits
from netsketch.readings.reading import Reading
from netsketch.sheet import overlay
from netsketch.sheet.drawing import Drawing, PlanHolder
from netsketch.sheet.editors import Accept, WritingLine, cost_hint, cost_text, read_costs
from netsketch.sheet.frame import Frame
from netsketch.sheet.gestures import Gesture, Pan, gesture_for, refusal
from netsketch.sheet.hits import link_at, node_at
from netsketch.sheet.keys import press_key
from netsketch.sheet.look import Look
from netsketch.sheet.paint_plates import READABLE_NAME
from netsketch.sheet.painter import paint_frame
from netsketch.sheet.resting import RestingPicture
from netsketch.sheet.view import View, fitting

TOOLS = ("select", "router", "segment", "link")
_TOOL_HINTS = {
    "select": "",
    "router": "Click on the sheet to draw routers; Esc ends",
    "segment": "Click on the sheet to draw LAN segments; Esc ends",
    "link": "Drag from plate to plate to draw links; Esc ends",
}
_REST_MS = 100
_LEFT, _MIDDLE = Qt.MouseButton.LeftButton, Qt.MouseButton.MiddleButton
_SHIFT, _CTRL = Qt.KeyboardModifier.ShiftModifier, Qt.KeyboardModifier.ControlModifier

Focus = tuple[str, str]
"""("router" | "segment" | "link", id)."""


class Sheet(QWidget):
    """Draws a plan with a reading over it and turns gestures into Edits.

    The sheet never applies an edit itself: it emits :attr:`edited`.
    """

    edited = Signal(object)
    focus_asked = Signal(object)
    selection_changed = Signal()
    hint = Signal(str)
    menu_asked = Signal(object, object)
    tool_changed = Signal(str)

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.drawing = Drawing(self._on_drawing_changed)
        self.view = View()
        self.tool = "select"
        self.space_held = False
        self.selected_nodes: list[str] = []
        self.selected_links: list[str] = []
        self._lit: Mapping[str, int] = {}
        self._hovered: tuple[int | None, int | None] = (None, None)
        self._gesture: Gesture | None = None
        self._writing: WritingLine | None = None
        self._resting = RestingPicture()
        self._rest = QTimer(self, singleShot=True, interval=_REST_MS)
        self._rest.timeout.connect(self.update)
        self._fit_wanted = True
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setMouseTracking(True)
        self.setAttribute(Qt.WidgetAttribute.WA_OpaquePaintEvent)
        self.setMinimumSize(200, 150)
        self.setAccessibleName("Sheet")

    # -- what is shown ----------------------------------------------------------------

    def set_document(self, document: PlanHolder | None) -> None:
        """Show another document, whole; ``None`` shows an empty sheet."""
        self.cancel_gesture()
        self._lit = {}
        self.drawing.set_document(document)
        self.select()
        self.fit()

    def set_reading(self, reading: Reading | None) -> None:
        """Show another reading over the plan."""
        self.drawing.set_reading(reading, self.drawing.look)

    def set_look(self, look: Look) -> None:
        """Paint in other colours."""
        self.drawing.set_reading(self.drawing.reading, look)

    def light_path(self, links: Mapping[str, int] | None) -> None:
        """Light one path above the reading: link id -> direction (1 or -1)."""
        self._lit = dict(links or {})
        self.update()

    @property
    def look(self) -> Look:
        """The colours in use."""
        return self.drawing.look

    @property
    def frame(self) -> Frame:
        """The whole drawing at the present scale."""
        return replace(self.drawing.frame, scale=self.view.scale)

    def _on_drawing_changed(self) -> None:
        nodes, links = self.drawing.plan.nodes, self.drawing.plan.links
        kept_nodes = [key for key in self.selected_nodes if key in nodes]
        kept_links = [key for key in self.selected_links if key in links]
        self._hovered = (None, None)
        self.select(kept_nodes, kept_links)
        self.update()

    # -- the view ---------------------------------------------------------------------

    def show_view(self, view: View) -> None:
        """Show another part of the sheet, quickly now and finely at rest."""
        if view != self.view:
            self.view = view
            self._fit_wanted = False
            self._rest.start()
            self.update()

    def fit(self) -> None:
        """Show the whole plan."""
        extent = self.drawing.extent()
        size = QSizeF(self.size())
        if extent.isEmpty():
            self.show_view(View().centred(QPointF(0, 0), size))
        else:
            self.show_view(fitting(extent, size))
        self._fit_wanted = True

    def zoom_by(self, factor: float) -> None:
        """Enlarge by ``factor`` about the middle of the window."""
        self.show_view(self.view.zoomed(factor, QRectF(self.rect()).center()))

    def zoom_to(self, scale: float) -> None:
        """Show the sheet at ``scale`` pixels a unit, 1 being full size."""
        self.zoom_by(scale / self.view.scale)

    def show_thing(self, key: str) -> None:
        """Bring a node or link into view, and large enough to read."""
        at = self._middle_of(key)
        if at is None:
            return
        size = QSizeF(self.size())
        inner = self.view.area(size)
        margin = 60 / self.view.scale
        if self.view.scale < 0.5:
            self.show_view(View(0.8).centred(at, size))
        elif not inner.adjusted(margin, margin, -margin, -margin).contains(at):
            self.show_view(self.view.centred(at, size))

    def _middle_of(self, key: str) -> QPointF | None:
        contents, lines = self.drawing.frame.contents, self.drawing.frame.lines
        if key in contents.nodes.row:
            row = contents.nodes.row[key]
            return QPointF(contents.nodes.x[row], contents.nodes.y[row])
        if key in contents.links.row:
            return QPointF(*lines.points[contents.links.row[key], 1:3].mean(axis=0))
        return None

    # -- selection --------------------------------------------------------------------

    def select(self, nodes: Iterable[str] = (), links: Iterable[str] = ()) -> None:
        """Select these and nothing else."""
        chosen = list(nodes), list(links)
        if chosen != (self.selected_nodes, self.selected_links):
            self.selected_nodes, self.selected_links = chosen
            self.selection_changed.emit()
            self.update()

    def select_all(self) -> None:
        """Select every node and link."""
        self.select(self.drawing.plan.nodes.keys(), self.drawing.plan.links.keys())

    def click_node(self, key: str, adding: bool) -> None:
        """Select a node, or add it to or take it from the selection; ask its focus."""
        if adding:
            self.select(_toggled(self.selected_nodes, key), self.selected_links)
        else:
            self.select([key])
            self.focus_asked.emit(self._focus_of_node(key))

    def click_link(self, key: str, adding: bool) -> None:
        """Select a link, or add it to or take it from the selection; ask its focus."""
        if adding:
            self.select(self.selected_nodes, _toggled(self.selected_links, key))
        else:
            self.select((), [key])
            self.focus_asked.emit(("link", key))

    def click_nothing(self) -> None:
        """Select nothing and ask no focus."""
        self.select()
        self.focus_asked.emit(None)

    def _focus_of_node(self, key: str) -> Focus:
        segment = self.drawing.frame.contents.nodes.segment
        row = self.drawing.frame.contents.nodes.row[key]
        return ("segment" if segment[row] else "router"), key

    # -- editing ----------------------------------------------------------------------

    def propose(self, edit: Edit) -> None:
        """Offer an edit that does something to whoever holds the document."""
        if edit:
            self.edited.emit(edit)

    def set_tool(self, tool: str) -> None:
        """Take up a tool: one of :data:`TOOLS`."""
        if tool not in TOOLS:
            raise ValueError(f"no such tool: {tool}")
        if tool != self.tool:
            self._end_gesture()
            self.tool = tool
            self._show_cursor()
            self.tool_changed.emit(tool)
            self.hint.emit(_TOOL_HINTS[tool])

    def draw_node(self, at: QPointF) -> None:
        """Draw a router, or a segment with that tool in hand, at a place on the sheet."""
        draw = edits.add_segment if self.tool == "segment" else edits.add_router
        self._add_and_select(draw(self.drawing.plan, *self.drawing.to_plan(at.x(), at.y())))

    def draw_link(self, tail: str, head: str) -> None:
        """Draw a link between two nodes."""
        reason = refusal(self, tail, head)
        if reason:
            self.hint.emit(reason)
            return
        self._add_and_select(edits.add_link(self.drawing.plan, tail, head))

    def _add_and_select(self, edit: Edit) -> None:
        self.propose(edit)
        key = edit.steps[0].item.id  # type: ignore[union-attr]
        if key in self.drawing.plan.nodes:
            self.select([key])
            self.hint.emit("F2 names it")
        elif key in self.drawing.plan.links:
            self.select((), [key])
            self.hint.emit("Double-click on the cost to change it")

    def begin_rename(self, key: str) -> None:
        """Open a line over a node to write its name in."""
        node = self.drawing.plan.nodes[key]
        frame = self.drawing.frame
        box = frame.lines.boxes[frame.contents.nodes.row[key]].tolist()
        self._write(node.name, QRectF(QPointF(*box[:2]), QPointF(*box[2:])), self._rename_of(key))
        self.hint.emit("Type the name; Enter keeps it, Esc drops it")

    def begin_cost_edit(self, key: str) -> None:
        """Open a line over a link to write its cost in: the trial's cost where the trial
        has one, else the plan's."""
        plan = self.drawing.plan
        link, middle = plan.links[key], self._middle_of(key)
        assert middle is not None
        text = cost_text(link, edits.costs_in_trial(plan, key), plan)
        self._write(text, QRectF(middle, middle), self._costs_of(key))
        self.hint.emit(cost_hint(link, plan))

    def _rename_of(self, key: str) -> Accept:
        return lambda text: self.propose(edits.rename(self.drawing.plan, key, text.strip()))

    def _costs_of(self, key: str) -> Accept:
        def accept(text: str) -> None:
            plan = self.drawing.plan
            costs = read_costs(text, plan.links[key], plan)
            tried = plan.trial.find(LinkCost, key) is not None
            change = edits.try_costs if tried else edits.set_costs
            self.propose(change(plan, key, *costs))

        return accept

    def _write(self, text: str, over: QRectF, accept: Accept) -> None:
        self._end_gesture()
        if self._writing is not None:
            self._writing.close_line()
        self._writing = WritingLine(self, text, self.view.rect_to_window(over), accept)
        self._writing.refused.connect(self.hint)
        self._writing.closed.connect(self._on_written)

    def _on_written(self) -> None:
        self._writing = None
        self.hint.emit("")
        self.setFocus()

    def cancel_gesture(self) -> None:
        """Drop what is under way: writing, a gesture, or else the tool in hand."""
        if self._writing is not None:
            self._writing.close_line()
        elif self._gesture is not None:
            self._end_gesture()
            self.hint.emit("")
        elif self.tool != "select":
            self.set_tool("select")

    def _end_gesture(self) -> None:
        if self._gesture is not None:
            self._gesture.cancel()
            self._gesture = None
            self._show_cursor()
            self.update()

    # -- events -----------------------------------------------------------------------

    def paintEvent(self, event: QPaintEvent) -> None:
        still = not self._rest.isActive()
        picture = self._resting.picture(
            self.drawing, self.view, self.size(), self.devicePixelRatioF(), still
        )
        with QPainter(self) as painter:
            painter.drawPixmap(0, 0, picture)
            painter.setRenderHint(QPainter.RenderHint.Antialiasing)
            if not self.drawing.plan.nodes:
                overlay.paint_begin(painter, self.look, QRectF(self.rect()))
            painter.setTransform(self.view.transform(), True)
            self._paint_overlay(painter)

    def _paint_overlay(self, painter: QPainter) -> None:
        frame = self.frame
        lifted = self.drawing.lifted(self.view.scale)
        if lifted is not None:
            paint_frame(painter, lifted)
        overlay.paint_lit_path(painter, frame, self._lit)
        overlay.paint_hover(painter, frame, *self._hovered)
        rows = frame.contents.nodes.row, frame.contents.links.row
        nodes = [rows[0][key] for key in self.selected_nodes]
        overlay.paint_selection(painter, frame, nodes, [rows[1][k] for k in self.selected_links])
        if self.view.scale < READABLE_NAME:
            self._paint_enlarged(painter, frame, nodes)
        if self._gesture is not None:
            self._gesture.paint(painter, frame)

    def _paint_enlarged(self, painter: QPainter, frame: Frame, selected: list[int]) -> None:
        """Where names are too small to read, show the focus and one selected plate large."""
        focus = () if self.drawing.reading is None else self.drawing.reading.focus
        rows = [frame.contents.nodes.row[key] for key in focus if key in frame.contents.nodes.row]
        for row in dict.fromkeys([*rows, *(selected if len(selected) == 1 else ())]):
            overlay.paint_enlarged(painter, frame, row)

    def resizeEvent(self, event: QResizeEvent) -> None:
        if self._fit_wanted:
            self.fit()
        super().resizeEvent(event)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        at = event.position()
        if self._gesture is not None:
            return
        if event.button() == _MIDDLE or (event.button() == _LEFT and self.space_held):
            self._gesture = Pan(self, at)
        elif event.button() == _LEFT:
            adding = bool(event.modifiers() & (_SHIFT | _CTRL))
            self._gesture = gesture_for(self, at, adding)
        self._show_cursor()

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        if self._gesture is not None:
            self._gesture.move(event.position())
            return
        self._hover(event.position())

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        gesture = self._gesture
        if gesture is not None and event.button() in (_LEFT, _MIDDLE):
            if gesture.end(event.position()) and self._gesture is gesture:
                self._gesture = None
                self._hover(event.position())
            self.update()

    def mouseDoubleClickEvent(self, event: QMouseEvent) -> None:
        if event.button() != _LEFT or self.tool != "select" or self._gesture is not None:
            self.mousePressEvent(event)
            return
        place = self.view.to_sheet(event.position())
        node, link = node_at(self.frame, place), link_at(self.frame, place)
        contents = self.drawing.frame.contents
        if node is not None:
            self.begin_rename(contents.nodes.ids[node])
        elif link is not None:
            self.begin_cost_edit(contents.links.ids[link])
        else:
            self.draw_node(place)

    def wheelEvent(self, event: QWheelEvent) -> None:
        """A wheel zooms at the pointer, with Shift it pans sideways; two fingers pan, or
        zoom with Ctrl."""
        fingers, turn = event.pixelDelta(), event.angleDelta()
        zooming = bool(event.modifiers() & _CTRL) or fingers.isNull()
        if event.modifiers() & _SHIFT:
            self.show_view(self.view.panned((turn.x() or turn.y()) / 2, 0))
        elif zooming:
            self.show_view(self.view.zoomed(1.2 ** (turn.y() / 120), event.position()))
        else:
            self.show_view(self.view.panned(fingers.x(), fingers.y()))
        event.accept()

    def event(self, event: QEvent) -> bool:
        if (
            isinstance(event, QNativeGestureEvent)
            and event.gestureType() == Qt.NativeGestureType.ZoomNativeGesture
        ):
            self.show_view(self.view.zoomed(1 + event.value(), event.position()))
            return True
        return super().event(event)

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        if event.reason() == QContextMenuEvent.Reason.Mouse:
            focus = self._select_under(QPointF(event.pos()))
        else:
            focus = self._selected_focus()
        self.menu_asked.emit(focus, event.globalPos())

    def _select_under(self, at: QPointF) -> Focus | None:
        """Select what is under the pointer unless it is among the selected already."""
        place = self.view.to_sheet(at)
        node, link = node_at(self.frame, place), link_at(self.frame, place)
        contents = self.drawing.frame.contents
        if node is not None:
            key = contents.nodes.ids[node]
            if key not in self.selected_nodes:
                self.select([key])
            return self._focus_of_node(key)
        if link is not None:
            key = contents.links.ids[link]
            if key not in self.selected_links:
                self.select((), [key])
            return "link", key
        return None

    def _selected_focus(self) -> Focus | None:
        if self.selected_nodes:
            return self._focus_of_node(self.selected_nodes[-1])
        return ("link", self.selected_links[-1]) if self.selected_links else None

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if not press_key(self, event):
            super().keyPressEvent(event)

    def keyReleaseEvent(self, event: QKeyEvent) -> None:
        if event.key() == Qt.Key.Key_Space and not event.isAutoRepeat():
            self.hold_space(False)
        super().keyReleaseEvent(event)

    def leaveEvent(self, event: QEvent) -> None:
        self._set_hovered((None, None))
        super().leaveEvent(event)

    def hold_space(self, held: bool) -> None:
        """While the space bar is held a drag pans."""
        self.space_held = held
        self._show_cursor()

    def _hover(self, at: QPointF) -> None:
        place = self.view.to_sheet(at)
        node = node_at(self.frame, place)
        link = link_at(self.frame, place) if node is None and self.tool == "select" else None
        self._set_hovered((node, link))

    def _set_hovered(self, hovered: tuple[int | None, int | None]) -> None:
        if hovered != self._hovered:
            self._hovered = hovered
            self.update()
        self._show_cursor()

    def _show_cursor(self) -> None:
        self.setCursor(self._cursor())

    def _cursor(self) -> Qt.CursorShape:
        if self._gesture is not None:
            return self._gesture.cursor
        if self.space_held:
            return Qt.CursorShape.OpenHandCursor
        if self.tool != "select":
            return Qt.CursorShape.CrossCursor
        on_something = self._hovered != (None, None)
        return Qt.CursorShape.PointingHandCursor if on_something else Qt.CursorShape.ArrowCursor


def _toggled(keys: list[str], key: str) -> list[str]:
    return [k for k in keys if k != key] if key in keys else [*keys, key]
