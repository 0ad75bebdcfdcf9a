"""The drawing: listens to a document and keeps the frame that shows it.

It changes nothing. What edits touched, and a new reading, are taken in all at once when
the frame is next wanted: several changes in one turn of the event loop cost one.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Protocol

import numpy as np
from PySide6.QtCore import QRectF

from netsketch.model import (
    Change,
    ChangeSet,
    ChangeSettings,
    ChangeTrial,
    Link,
    Plan,
    Router,
    Segment,
    Step,
)
from netsketch.model.trial import subject
from netsketch.readings.reading import Reading
from netsketch.sheet.contents import Flags, Floats, unit_for
from netsketch.sheet.frame import Frame, edited, frame_of, relaid, with_reading
from netsketch.sheet.lettering import Lettering
from netsketch.sheet.look import LIGHT, Look


class PlanHolder(Protocol):
    """What the sheet needs of an open document."""

    plan: Plan

    def subscribe(self, listener: Callable[[ChangeSet], None]) -> Callable[[], None]:
        """Call ``listener`` after every change; return what ends that."""


class Drawing:
    """A document's plan and a reading, ready to paint at any moment.

    ``stale`` tells that the resting picture no longer shows the drawing.
    """

    def __init__(self, changed: Callable[[], None], changing: Callable[[], None]) -> None:
        """``changed`` is called whenever the drawing looks different, ``changing`` before
        it follows an edit."""
        self.plan = Plan()
        self.reading: Reading | None = None
        self.look: Look = LIGHT
        self.lettering = Lettering()
        self.unit = 1.0
        self.stale = True
        self._changed = changed
        self._changing = changing
        self._unsubscribe: Callable[[], None] = lambda: None
        self._frame: Frame | None = None
        self._touched: set[str] = set()
        self._lifted: tuple[Flags, Flags] | None = None
        self._home: tuple[Floats, Floats] | None = None

    def set_document(self, document: PlanHolder | None) -> None:
        """Show another document; ``None`` shows an empty sheet."""
        self._unsubscribe()
        self._unsubscribe = lambda: None
        self.plan, self.reading = Plan(), None
        if document is not None:
            self.plan = document.plan
            self._unsubscribe = document.subscribe(self._on_change)
        self.unit = unit_for(self.plan)
        self._frame = self._lifted = self._home = None
        self._touched.clear()
        self._touch()

    def set_reading(self, reading: Reading | None, look: Look) -> None:
        """Show another reading, in these colours."""
        if reading is self.reading and look is self.look:
            return
        self.reading, self.look = reading, look
        self._touch()

    @property
    def frame(self) -> Frame:
        """The whole drawing at scale 1."""
        if self._frame is None:
            self._frame = frame_of(self.plan, self.reading, self.look, self.lettering, self.unit)
        if self._touched:
            touched, self._touched = self._touched, set()
            self._frame = edited(self._frame, self.plan, touched, self.reading, self.look)
        else:
            self._frame = with_reading(self._frame, self.reading, self.look)
        return self._frame

    def resting(self, scale: float, still: bool) -> Frame:
        """Return the frame without what is lifted off the sheet."""
        frame = replace(self.frame, scale=scale, still=still)
        if self._lifted is None:
            return frame
        nodes, links = self._lifted
        return frame.only(~nodes, ~links)

    def lifted(self, scale: float) -> Frame | None:
        """Return the frame of what is lifted off the sheet, if anything is."""
        if self._lifted is None:
            return None
        return replace(self.frame, scale=scale).only(*self._lifted)

    def lift(self, rows: list[int]) -> None:
        """Lift nodes off the resting picture, with the links and rails that hang on them."""
        contents = self.frame.contents
        nodes = np.zeros(len(contents.nodes.ids), dtype=bool)
        nodes[rows] = True
        tail, head = contents.links.tail, contents.links.head
        for one, other in ((tail, head), (head, tail)):
            rails = one[nodes[other] & contents.nodes.segment[one]]
            nodes[rails] = True
        self._lifted = nodes, nodes[tail] | nodes[head]
        self._home = contents.nodes.x.copy(), contents.nodes.y.copy()
        self._touch()

    def shift(self, rows: list[int], places: np.ndarray) -> None:
        """Draw nodes elsewhere, ``places`` (k, 2), without changing the plan."""
        frame = self.frame
        frame.contents.nodes.x[rows], frame.contents.nodes.y[rows] = places.T
        self._frame = relaid(frame)

    def drop(self) -> None:
        """Set what was lifted back on the sheet, where it was."""
        if self._lifted is not None:
            self._put_back()
            self._touch()

    def _put_back(self) -> None:
        if self._frame is not None and self._home is not None:
            nodes = self._frame.contents.nodes
            nodes.x[:], nodes.y[:] = self._home
            self._frame = relaid(self._frame)
        self._lifted = self._home = None

    def extent(self) -> QRectF:
        """Return the rectangle around everything drawn."""
        return self.frame.extent()

    def to_plan(self, x: float, y: float) -> tuple[float, float]:
        """Return a place on the sheet in the plan's units, without needless decimals."""
        digits = int(np.ceil(np.log10(self.unit)))
        if digits <= 0:
            return round(x / self.unit), round(y / self.unit)
        return round(x / self.unit, digits + 1), round(y / self.unit, digits + 1)

    def _touch(self) -> None:
        self.stale = True
        self._changed()

    def _on_change(self, changes: ChangeSet) -> None:
        self._changing()
        self._put_back()
        for step in changes.steps:
            self._touched.update(_touched(step))
        self._touch()


def _touched(step: Step) -> set[str]:
    """Return the ids of the nodes and links that a step makes look different."""
    if isinstance(step, ChangeTrial):
        return {key for trial in (step.old, step.new) for _, key in map(subject, trial)}
    if isinstance(step, ChangeSettings):
        return set()
    item = step.new if isinstance(step, Change) else step.item
    return {item.id} if isinstance(item, Router | Segment | Link) else set()
