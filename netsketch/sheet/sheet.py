"""The sheet: the widget on which a plan is drawn, read and edited."""

# ruff: noqa: N802  (Qt names the event handlers)

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import replace

from PySide6.QtCore import QEvent, QPointF, QRectF, QSizeF, Qt, QTimer, Signal
from PySide6.QtGui import (
    QContextMenuEvent,
    QFocusEvent,
    QHelpEvent,
    QKeyEvent,
    QMouseEvent,
    QNativeGestureEvent,
    QPainter,
    QPaintEvent,
    QResizeEvent,
    QWheelEvent,
)
from PySide6.QtWidgets import QToolTip, QWidget

from netsketch.model import Edit, edits
from netsketch.readings.reading import Reading
from netsketch.sheet import overlay
from netsketch.sheet.drawing import Drawing, PlanHolder
from netsketch.sheet.frame import Frame
from netsketch.sheet.gestures import refusal
from netsketch.sheet.keys import press_key
from netsketch.sheet.look import Look
from netsketch.sheet.painter import paint_frame
from netsketch.sheet.pointer import Pointer
from netsketch.sheet.resting import RestingPicture
from netsketch.sheet.tools import TOOL_HINTS, TOOLS
from netsketch.sheet.view import View, fitting
from netsketch.sheet.writing import Writing

_REST_MS = 100
_Reason = Qt.FocusReason

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
        self.drawing = Drawing(self._on_drawing_changed, self._leave_off)
        self.view = View()
        self.tool = "select"
        self.selected_nodes: list[str] = []
        self.selected_links: list[str] = []
        self._lit: Mapping[str, int] = {}
        self._pointer = Pointer(self)
        self._writing = Writing(self)
        self._focus_shown = False
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
        self._leave_off()
        self._lit = {}
        self._resting.forget()
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
    def finished(self) -> bool:
        """Whether the last painting showed everything; if not, the next ones will."""
        return self._resting.finished

    @property
    def look(self) -> Look:
        """The colours in use."""
        return self.drawing.look

    @property
    def frame(self) -> Frame:
        """The whole drawing at the present scale."""
        return replace(self.drawing.frame, scale=self.view.scale)

    def _leave_off(self) -> None:
        """Drop what was begun on a plan that is about to look different."""
        self._writing.close()
        self._pointer.cancel()

    def _on_drawing_changed(self) -> None:
        nodes, links = self.drawing.plan.nodes, self.drawing.plan.links
        kept_nodes = [key for key in self.selected_nodes if key in nodes]
        kept_links = [key for key in self.selected_links if key in links]
        self._pointer.node = self._pointer.link = None
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
        at = self.middle_of(key)
        if at is None:
            return
        size, margin = QSizeF(self.size()), 60 / self.view.scale
        inner = self.view.area(size).adjusted(margin, margin, -margin, -margin)
        if self.view.scale < 0.5:
            self.show_view(View(0.8).centred(at, size))
        elif not inner.contains(at):
            self.show_view(self.view.centred(at, size))

    def middle_of(self, key: str) -> QPointF | None:
        """Return the middle of a node or link on the sheet; ``None`` for no such thing."""
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
            self.focus_asked.emit(self.focus_of_node(key))

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

    def focus_of_node(self, key: str) -> Focus:
        """Return a node as a focus."""
        segment = self.drawing.frame.contents.nodes.segment
        row = self.drawing.frame.contents.nodes.row[key]
        return ("segment" if segment[row] else "router"), key

    def _selected_focus(self) -> Focus | None:
        if self.selected_nodes:
            return self.focus_of_node(self.selected_nodes[-1])
        return ("link", self.selected_links[-1]) if self.selected_links else None

    # -- editing ----------------------------------------------------------------------

    def propose(self, edit: Edit) -> None:
        """Offer an edit that does something to whoever holds the document."""
        if edit:
            self.edited.emit(edit)

    def set_tool(self, tool: str) -> None:
        """Take up a tool: one of :data:`~netsketch.sheet.tools.TOOLS`."""
        if tool not in TOOLS:
            raise ValueError(f"no such tool: {tool}")
        if tool != self.tool:
            self._pointer.cancel()
            self.tool = tool
            self._pointer.show_cursor()
            self.tool_changed.emit(tool)
            self.hint.emit(TOOL_HINTS[tool])

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
        self._pointer.cancel()
        self._writing.begin_name(key)

    def begin_cost_edit(self, key: str) -> None:
        """Open a line over a link to write its cost in: the trial's cost where the trial
        has one, else the plan's."""
        self._pointer.cancel()
        middle = self.middle_of(key)
        if middle is not None:
            self._writing.begin_cost(key, middle)

    def cancel_gesture(self) -> None:
        """Drop what is under way: writing, a gesture, or else the tool in hand."""
        if self._writing.line is not None:
            self._writing.close()
        elif self._pointer.cancel():
            self.hint.emit("")
        elif self.tool != "select":
            self.set_tool("select")

    def hold_space(self, held: bool) -> None:
        """While the space bar is held a drag pans."""
        self._pointer.hold_space(held)

    # -- events -----------------------------------------------------------------------

    def paintEvent(self, event: QPaintEvent) -> None:
        still = not self._rest.isActive()
        picture = self._resting.picture(
            self.drawing, self.view, self.size(), self.devicePixelRatioF(), still
        )
        if not self._resting.finished:
            self.update()
        with QPainter(self) as painter:
            painter.drawPixmap(0, 0, picture)
            painter.setRenderHint(QPainter.RenderHint.Antialiasing)
            if not self.drawing.plan.nodes:
                overlay.paint_begin(painter, self.look, QRectF(self.rect()))
            painter.setTransform(self.view.transform(), True)
            self._paint_overlay(painter)
            if self._focus_shown:
                painter.resetTransform()
                overlay.paint_focus(painter, self.look, QRectF(self.rect()))

    def _paint_overlay(self, painter: QPainter) -> None:
        frame = self.frame
        lifted = self.drawing.lifted(self.view.scale)
        if lifted is not None:
            paint_frame(painter, lifted)
        overlay.paint_lit_path(painter, frame, self._lit)
        overlay.paint_hover(painter, frame, self._pointer.node, self._pointer.link)
        nodes = [frame.contents.nodes.row[key] for key in self.selected_nodes]
        links = [frame.contents.links.row[key] for key in self.selected_links]
        overlay.paint_selection(painter, frame, nodes, links)
        reading = self.drawing.reading
        overlay.paint_large(painter, frame, reading.focus if reading else (), nodes)
        if self._pointer.gesture is not None:
            self._pointer.gesture.paint(painter, frame)

    def resizeEvent(self, event: QResizeEvent) -> None:
        if self._fit_wanted:
            self.fit()
        super().resizeEvent(event)

    def mousePressEvent(self, event: QMouseEvent) -> None:
        self._pointer.press(event)

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        self._pointer.move(event.position())

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        self._pointer.release(event)

    def mouseDoubleClickEvent(self, event: QMouseEvent) -> None:
        self._pointer.double_click(event)

    def wheelEvent(self, event: QWheelEvent) -> None:
        self._pointer.turn(event)

    def event(self, event: QEvent) -> bool:
        if isinstance(event, QHelpEvent):
            words = self._pointer.words(QPointF(event.pos()))
            QToolTip.showText(event.globalPos(), words, self)
            return True
        pinch = Qt.NativeGestureType.ZoomNativeGesture
        if isinstance(event, QNativeGestureEvent) and event.gestureType() == pinch:
            self.show_view(self.view.zoomed(1 + event.value(), event.position()))
            return True
        return super().event(event)

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        if event.reason() == QContextMenuEvent.Reason.Mouse:
            focus = self._pointer.select_under(QPointF(event.pos()))
        else:
            focus = self._selected_focus()
        self.menu_asked.emit(focus, event.globalPos())

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if not press_key(self, event):
            super().keyPressEvent(event)

    def keyReleaseEvent(self, event: QKeyEvent) -> None:
        if event.key() == Qt.Key.Key_Space and not event.isAutoRepeat():
            self.hold_space(False)
        super().keyReleaseEvent(event)

    def leaveEvent(self, event: QEvent) -> None:
        self._pointer.hover(None)
        super().leaveEvent(event)

    def focusInEvent(self, event: QFocusEvent) -> None:
        by_key = event.reason() in (_Reason.TabFocusReason, _Reason.BacktabFocusReason)
        self._show_focus(by_key)
        super().focusInEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        self._pointer.hold_space(False)
        self._show_focus(False)
        super().focusOutEvent(event)

    def _show_focus(self, shown: bool) -> None:
        self._focus_shown = shown
        self.update()


def _toggled(keys: list[str], key: str) -> list[str]:
    return [k for k in keys if k != key] if key in keys else [*keys, key]
