"""The desk: the open document, what is asked about it, and the answers as they come.

Single routers are answered in the GUI thread, in milliseconds; the ledger over all pairs
and the loading of the routing core run in the background.
"""

from __future__ import annotations

import gc
from typing import TYPE_CHECKING, Any

from PySide6.QtCore import QObject, Signal

from netsketch.model import Change, ChangeSet, Edit, PlanError, Router, Segment, Step, edits
from netsketch.readings.reading import Reading
from netsketch.session.document import Document
from netsketch.window.relay import Relay

if TYPE_CHECKING:
    from netsketch.analysis.ledger import Ledger
    from netsketch.analysis.tipping import Tipping
    from netsketch.session.answers import Answers, Inward, Outward, Pair

Focus = tuple[str, str]
"""("router" | "segment" | "link", id)."""


class Desk(QObject):
    """Holds the document and the focus; tells the window when something is new."""

    document_changed = Signal()
    plan_changed = Signal()
    focus_changed = Signal()
    answered = Signal()
    """:attr:`reading` and what belongs to it is new."""
    tipping_changed = Signal()
    ledger_changed = Signal()
    refused = Signal(str)
    state_changed = Signal(str)
    """What is going on in the background; empty when nothing is."""

    def __init__(self, relay: Relay, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._relay = relay
        self.document = Document.new()
        self._leave = self.document.subscribe(self._follow)
        self.answers: Answers | None = None
        self.focus: Focus | None = None
        self.pair: tuple[str, str] | None = None
        self.shows_change = False
        self.kind = "outward"
        self.reading: Reading | None = None
        self.outward: Outward | None = None
        self.inward: Inward | None = None
        self.pair_answer: Pair | None = None
        self.tipping: tuple[Tipping, Tipping] | None = None
        self.ledger: Ledger | None = None
        self.is_computing = False
        self.baseline = ""
        self._compared: tuple[object, ...] = (None, None, None)
        """What the ledger was last asked about: two networks and the kept trial."""

    # -- the document -------------------------------------------------------------------

    def load_core(self) -> None:
        """Load the routing core in the background, compiling it on the very first use."""
        self.state_changed.emit("Preparing the routing core; the first start takes a minute")
        document = Document(self.document.plan.snapshot())
        self._relay.submit("core", lambda cancelled: _load_core(document), self._core_loaded)

    def _core_loaded(self, result: Any) -> None:
        if isinstance(result, Exception):
            self.refused.emit(f"The routing core could not be loaded: {result}")
            return
        self.state_changed.emit("")
        self._new_answers()
        self._answer()
        self._ask_ledger()

    @property
    def core_is_ready(self) -> bool:
        """Whether answers can be given."""
        return self.answers is not None

    def _new_answers(self) -> None:
        from netsketch.session.answers import Answers  # loads the routing core

        if self.answers is not None:
            self.answers.close()
        # Answers must hear of an edit before the desk asks them about it.
        self._leave()
        self.answers = Answers(self.document)
        self._leave = self.document.subscribe(self._follow)

    def set_document(self, document: Document) -> None:
        """Take up another document."""
        self._leave()
        self.document = document
        self._leave = document.subscribe(self._follow)
        self.focus = self.pair = None
        self.kind = "outward"
        self.ledger = None
        if self.core_is_ready:
            self._new_answers()
        self.document_changed.emit()
        self.focus_changed.emit()
        self._answer()
        self._ask_ledger()

    def apply(self, edit: Edit) -> None:
        """Apply an edit, or say why it is refused."""
        try:
            self.document.apply(edit)
        except PlanError as error:
            self.refused.emit(str(error))

    def undo(self) -> None:
        """Take the last edit back."""
        self.document.undo()

    def redo(self) -> None:
        """Do the last undone edit again."""
        self.document.redo()

    def _follow(self, changes: ChangeSet) -> None:
        plan = self.document.plan
        if self.focus is not None:
            shelf: Any = plan.links if self.focus[0] == "link" else plan.nodes
            if self.focus[1] not in shelf:
                self.focus = self.pair = None
                self.focus_changed.emit()
        if self.pair is not None and any(end not in plan.nodes for end in self.pair):
            self.pair = None
        if not plan.trial and self.kind == "effect":
            self.kind = "outward"
        self.plan_changed.emit()
        if not all(_is_move(step) for step in changes.steps):
            self._answer()
            self._ask_ledger()

    # -- what is asked --------------------------------------------------------------------

    def set_focus(self, focus: Focus | None) -> None:
        """Ask about a router, a segment or a link."""
        self.focus, self.pair = focus, None
        self.focus_changed.emit()
        self._answer()

    def set_pair(self, source: str, target: str, *, changed: bool = False) -> None:
        """Ask about the way from one router to another router or segment; ``changed``
        shows the old and the new way rather than the way and the way back."""
        self.focus, self.pair, self.shows_change = ("router", source), (source, target), changed
        self.focus_changed.emit()
        self._answer()

    def show_kind(self, kind: str) -> None:
        """Show the focus router's source tree ("outward"), its sink tree ("inward") or what
        the trial does to it ("effect")."""
        self.kind, self.pair = kind, None
        self._answer()

    def _answer(self) -> None:
        self.reading = self.outward = self.inward = self.pair_answer = None
        if self.answers is not None and self.focus is not None:
            kind, key = self.focus
            if kind == "link":
                self._ask_tipping(key)
            elif kind == "router":
                self._answer_router(self.answers, key)
            elif self.kind == "inward":
                self.reading = self.answers.inward(key).reading
        self.answered.emit()

    def _answer_router(self, answers: Answers, router: str) -> None:
        if self.pair is not None:
            self.pair_answer = answers.pair(*self.pair)
            changed = self.shows_change and bool(self.document.plan.trial)
            self.reading = (
                answers.changed_path(*self.pair) if changed else answers.path(*self.pair).reading
            )
        elif self.kind == "inward":
            self.inward = answers.inward(router)
            self.reading = self.inward.reading
        else:
            self.outward = answers.outward(router)
            self.reading = self.outward.reading
            if self.kind == "effect":
                self.reading = answers.effect(router)

    def _ask_tipping(self, link: str) -> None:
        assert self.answers is not None
        self.tipping = None
        self._relay.submit("tipping", self.answers.tipping_task(link), self._tipping_came)

    def _tipping_came(self, result: Any) -> None:
        if isinstance(result, Exception):
            self.refused.emit(f"The pairs of the link could not be computed: {result}")
            return
        self.tipping = result
        self.tipping_changed.emit()

    # -- the ledger -----------------------------------------------------------------------

    def set_baseline(self, kept: str) -> None:
        """Compare the trial with a kept trial, or ("") with the plan."""
        self.baseline = kept
        self._ask_ledger()

    @property
    def compares(self) -> bool:
        """Whether there are two states to compare."""
        return bool(self.document.plan.trial) or bool(self.baseline)

    def _ask_ledger(self) -> None:
        if self.answers is None:
            return
        plan = self.document.plan
        if self.baseline not in plan.trials:
            self.baseline = ""
        kept = plan.trials[self.baseline].changes if self.baseline else ()
        compared = self.answers.network, self.answers.in_trial, kept
        if all(one is other for one, other in zip(compared, self._compared, strict=True)):
            return
        self._compared = compared
        self.is_computing = self.compares
        if not self.compares:
            self.ledger = None
        if any(isinstance(node, Router) for node in plan.nodes):
            task = self.answers.ledger_task(self.baseline)
            self._relay.submit("ledger", task, self._ledger_came)
        else:
            self._relay.give_up("ledger")
            self.is_computing = False
        self.ledger_changed.emit()

    def _ledger_came(self, result: Any) -> None:
        self.is_computing = False
        if isinstance(result, Exception):
            self.refused.emit(f"The ledger could not be computed: {result}")
        else:
            self.ledger = result if self.compares else None
        self.ledger_changed.emit()


def _is_move(step: Step) -> bool:
    """Tell whether a step only moves a node on the sheet."""
    return (
        isinstance(step, Change)
        and isinstance(step.new, Router | Segment)
        and edits.replace(step.old, x=step.new.x, y=step.new.y) == step.new
    )


def _load_core(document: Document) -> None:
    from netsketch.session.answers import Answers

    Answers(document).prepare()
    # What is loaded now stays for good. A full collection that walks through it again holds
    # every thread up for a fifth of a second.
    gc.freeze()
