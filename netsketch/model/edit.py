"""An Edit: the one way a plan changes, with absolute values and an exact inverse.

A step says what was and what is; inverting swaps the two. The steps that a plan has
applied are also its change set: whoever listens reads them in order.
"""

from __future__ import annotations

import msgspec

from netsketch.model.items import Item, Settings
from netsketch.model.trial import Trial


class Add(msgspec.Struct, frozen=True, tag="add", tag_field="step"):
    """Put ``item`` in at position ``index`` among its kind."""

    item: Item
    index: int


class Remove(msgspec.Struct, frozen=True, tag="remove", tag_field="step"):
    """Take ``item`` out from position ``index`` among its kind."""

    item: Item
    index: int


class Change(msgspec.Struct, frozen=True, tag="change", tag_field="step"):
    """Put ``new`` in the place of ``old``; both have the same kind and key."""

    old: Item
    new: Item


class ChangeSettings(msgspec.Struct, frozen=True, tag="settings", tag_field="step"):
    """Put one set of plan settings in the place of another."""

    old: Settings
    new: Settings


class ChangeTrial(msgspec.Struct, frozen=True, tag="trial", tag_field="step"):
    """Put one trial in the place of another."""

    old: Trial
    new: Trial


Step = Add | Remove | Change | ChangeSettings | ChangeTrial


def inverse_step(step: Step) -> Step:
    """Return the step that undoes ``step``."""
    if isinstance(step, Add):
        return Remove(step.item, step.index)
    if isinstance(step, Remove):
        return Add(step.item, step.index)
    return type(step)(step.new, step.old)  # type: ignore[arg-type]


class Edit(msgspec.Struct, frozen=True):
    """A named, ordered list of steps that apply together or not at all.

    ``label`` completes "Undo: …". Edits with the same non-empty ``merge`` that follow
    each other (a run of nudges) are undone as one.
    """

    label: str
    steps: tuple[Step, ...]
    merge: str = ""

    def inverse(self) -> Edit:
        """Return the edit that takes this one back."""
        return Edit(self.label, tuple(inverse_step(s) for s in reversed(self.steps)), self.merge)

    def __bool__(self) -> bool:
        return bool(self.steps)
