"""The inspector: the one pane on the right; it answers for the focus."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import Signal
from PySide6.QtWidgets import QStackedWidget, QWidget

from netsketch.window.pages.link_page import LinkPage
from netsketch.window.pages.page import Page
from netsketch.window.pages.path_page import PathPage
from netsketch.window.pages.plan_page import PlanPage
from netsketch.window.pages.router_page import RouterPage
from netsketch.window.pages.segment_page import SegmentPage
from netsketch.window.pages.several_page import SeveralPage

if TYPE_CHECKING:
    from netsketch.analysis.tipping import Tipping
    from netsketch.session.answers import Answers, Inward, Outward, Pair
    from netsketch.session.document import Document

Focus = tuple[str, str]


class Inspector(QStackedWidget):
    """Shows the page that fits what is asked about and what is selected."""

    edited = Signal(object)
    focus_asked = Signal(object)
    path_lit = Signal(object)
    path_asked = Signal(str, str)
    hint = Signal(str)
    opened = Signal(object)

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setAccessibleName("Inspector")
        self.setMinimumWidth(340)
        self.plan_page, self.router_page = PlanPage(), RouterPage()
        self.link_page, self.segment_page = LinkPage(), SegmentPage()
        self.several_page, self.path_page = SeveralPage(), PathPage()
        self._pages: tuple[Page, ...] = (
            self.plan_page, self.router_page, self.link_page, self.segment_page, self.several_page,
            self.path_page,
        )  # fmt: skip
        for page in self._pages:
            self.addWidget(page)
            page.edited.connect(self.edited)
            page.focus_asked.connect(self.focus_asked)
            page.hint.connect(self.hint)
        self.plan_page.opened.connect(self.opened)
        self.router_page.path_lit.connect(self.path_lit)
        self.router_page.path_asked.connect(self.path_asked)
        self.link_page.usage.pair_asked.connect(self.path_asked)
        self._focus: Focus | None = None
        self._selection: tuple[list[str], list[str]] = ([], [])
        self._pair: Pair | None = None

    def set_document(self, document: Document, answers: Answers | None) -> None:
        """Answer for another document; ``answers`` is ``None`` while the core loads."""
        for page in self._pages:
            page.document, page.answers = document, answers

    def show_focus(self, focus: Focus | None, selection: tuple[list[str], list[str]]) -> None:
        """Show the page for what is asked about; several selected things go first."""
        self._focus, self._selection = focus, selection
        self.refresh()

    def show_pair(self, pair: Pair | None) -> None:
        """Show a pair of routers; ``None`` when none is asked about."""
        if pair is not None or self._pair is not None:
            self._pair = pair
            self.refresh()

    def show_tipping(self, tipping: tuple[Tipping, Tipping] | None) -> None:
        """Show which pairs use the focus link."""
        if self._focus is not None and self._focus[0] == "link":
            self.link_page.show_tipping(tipping)

    def show_inward(self, inward: Inward) -> None:
        """Show how everyone reaches the focus router."""
        self.router_page.show_inward(inward)

    def show_outward(self, outward: Outward | None) -> None:
        """Show the focus router's forwarding table."""
        if self._focus is not None and self._focus[0] == "router":
            self.router_page.show_outward(outward)

    def refresh(self) -> None:
        """Show everything as the plan has it now."""
        nodes, links = self._selection
        if self._pair is not None and self._pair_is_there(self._pair):
            self.path_page.show_pair(self._pair)
            self.setCurrentWidget(self.path_page)
        elif len(nodes) + len(links) > 1:
            self._show_several()
        elif self._focus is None or not self._is_there(self._focus):
            self.plan_page.show_plan()
            self.setCurrentWidget(self.plan_page)
        else:
            self._show_one(*self._focus)

    def _pair_is_there(self, pair: Pair) -> bool:
        nodes = self.path_page.plan.nodes
        return pair.out.source in nodes and pair.out.target in nodes

    def _is_there(self, focus: Focus) -> bool:
        kind, key = focus
        plan = self.plan_page.plan
        return key in plan.links if kind == "link" else key in plan.nodes

    def _show_several(self) -> None:
        plan = self.plan_page.plan
        nodes = [key for key in self._selection[0] if key in plan.nodes]
        links = [key for key in self._selection[1] if key in plan.links]
        self.several_page.show_several(nodes, links)
        self.setCurrentWidget(self.several_page)

    def _show_one(self, kind: str, key: str) -> None:
        if kind == "link":
            self.link_page.show_link(key)
            self.setCurrentWidget(self.link_page)
        elif kind == "segment":
            self.segment_page.show_segment(key)
            self.setCurrentWidget(self.segment_page)
        else:
            self.router_page.show_router(key)
            self.setCurrentWidget(self.router_page)
