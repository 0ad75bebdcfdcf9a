"""The desk: the open document, what is asked about it, and the answers as they come.

Single routers are answered in the GUI thread, in milliseconds; the ledger over all pairs
and the loading of the routing core run in the background.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from PySide6.QtCore import QObject, Signal

from netsketch.model import Change, ChangeSet, Edit, PlanError, Router, Segment, Step, edits
from netsketch.readings.reading import Reading
from netsketch.session.document import Document
from netsketch.window.relay import Relay

if TYPE_CHECKING:
    from netsketch.analysis.ledger import Ledger
    from netsketch.session.answers import Answers, Outward, Path

Focus = tuple[str, str]
"""("router" | "segment" | "link", id)."""


class Desk(QObject):
    """Holds the document and the focus; tells the window when something is new."""

    document_changed = Signal()
    plan_changed = Signal()
    focus_changed = Signal()
    answered = Signal()
    """:attr:`reading`, :attr:`outward` or :attr:`path` is new."""
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
        self.wants_effect = False
        self.reading: Reading | None = None
        self.outward: Outward | None = None
        self.path: Path | None = None
        self.ledger: Ledger | None = None
        self.is_computing = False
        self._compared: tuple[object, object] = (None, None)
        """The two networks that the ledger was last asked about."""

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
        if not plan.trial:
            self.wants_effect = False
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

    def set_pair(self, source: str, target: str) -> None:
        """Ask about the way from one router to another router or segment."""
        self.focus, self.pair = ("router", source), (source, target)
        self.focus_changed.emit()
        self._answer()

    def show_effect(self, wanted: bool) -> None:
        """Show the trial against the plan for the focus router, or its plain source tree."""
        self.wants_effect, self.pair = wanted, None
        self._answer()

    def _answer(self) -> None:
        self.reading = self.outward = self.path = None
        if self.answers is not None and self.focus is not None and self.focus[0] == "router":
            router = self.focus[1]
            self.outward = self.answers.outward(router)
            self.reading = self.outward.reading
            if self.pair is not None:
                self.path = self.answers.path(*self.pair)
                self.reading = self.path.reading
            elif self.wants_effect:
                self.reading = self.answers.effect(router)
        self.answered.emit()

    # -- the ledger -----------------------------------------------------------------------

    def _ask_ledger(self) -> None:
        if self.answers is None:
            return
        plan = self.document.plan
        compared = self.answers.network, self.answers.in_trial
        if all(one is other for one, other in zip(compared, self._compared, strict=True)):
            return
        self._compared = compared
        self.is_computing = bool(plan.trial)
        if not plan.trial:
            self.ledger = None
        if any(isinstance(node, Router) for node in plan.nodes):
            self._relay.submit("ledger", self.answers.ledger_task(), self._ledger_came)
        else:
            self._relay.give_up("ledger")
            self.is_computing = False
        self.ledger_changed.emit()

    def _ledger_came(self, result: Any) -> None:
        self.is_computing = False
        if isinstance(result, Exception):
            self.refused.emit(f"The ledger could not be computed: {result}")
        else:
            self.ledger = result if self.document.plan.trial else None
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
