"""The drawing: listens to a document and keeps the frame that shows it.

It changes nothing. Moves lay the lines anew; every other change of the plan reads it
anew, at the next painting.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Protocol

import numpy as np
from PySide6.QtCore import QRectF

from netsketch.model import Change, ChangeSet, Plan, Router, Segment, Step
from netsketch.readings.reading import Reading
from netsketch.sheet.contents import Flags, Floats, unit_for
from netsketch.sheet.frame import Frame, frame_of, relaid, with_reading
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
        self._touch()

    def set_reading(self, reading: Reading | None, look: Look) -> None:
        """Show another reading, in these colours."""
        if reading is self.reading and look is self.look:
            return
        self.reading, self.look = reading, look
        if self._frame is not None:
            self._frame = with_reading(self._frame, reading, look)
        self._touch()

    @property
    def frame(self) -> Frame:
        """The whole drawing at scale 1."""
        if self._frame is None:
            self._frame = frame_of(self.plan, self.reading, self.look, self.lettering, self.unit)
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
        if self._lifted is None or self._frame is None or self._home is None:
            return
        nodes = self._frame.contents.nodes
        nodes.x[:], nodes.y[:] = self._home
        self._frame = relaid(self._frame)
        self._lifted = self._home = None
        self._touch()

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
        frame = self._frame
        moves = [move for move in map(_moved, changes.steps) if move is not None]
        if frame is not None and len(moves) == len(changes.steps):
            nodes = frame.contents.nodes
            for key, x, y in moves:
                row = nodes.row[key]
                nodes.x[row], nodes.y[row] = x * self.unit, y * self.unit
            self._frame = relaid(frame)
        else:
            self._frame = None
        self._lifted = self._home = None
        self._touch()


def _moved(step: Step) -> tuple[str, float, float] | None:
    """Return a node's id and new place, if all that the step does is move it."""
    if not isinstance(step, Change) or not isinstance(step.new, Router | Segment):
        return None
    old, new = step.old, step.new
    if not isinstance(old, Router | Segment) or new.x is None or new.y is None:
        return None
    same = (old.name, old.site, old.up) == (new.name, new.site, new.up)
    same &= getattr(old, "drained", False) == getattr(new, "drained", False)
    return (new.id, new.x, new.y) if same else None
