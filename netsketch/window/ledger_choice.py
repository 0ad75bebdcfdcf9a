"""Which rows of a ledger are shown and in which order: index arrays, no Qt."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
import numpy.typing as npt

if TYPE_CHECKING:
    from netsketch.analysis.ledger import Ledger

Rows = npt.NDArray[np.int64]


def alphabet(labels: Sequence[str]) -> Rows:
    """Return the place of each router in the alphabet (R,)."""
    folded = np.array([label.casefold() for label in labels], object)
    return np.argsort(np.argsort(folded, kind="stable"), kind="stable")


@dataclass(frozen=True)
class Choice:
    """Filters and order. ``text`` is looked for in the names and ids of both routers,
    ``outcome`` is a code (-1: any), the least extra cost and delay ``None`` for any."""

    text: str = ""
    outcome: int = -1
    least_cost: int | None = None
    least_delay: float | None = None
    column: int = 0
    backwards: bool = False

    def rows(self, ledger: Ledger, labels: Sequence[str]) -> Rows:
        """Return the indexes of the chosen rows in order. O(rows log rows)."""
        chosen = np.flatnonzero(self._kept(ledger, labels))
        key = self._key(ledger, labels)[chosen]
        return chosen[np.argsort(-key if self.backwards else key, kind="stable")]

    def _kept(self, ledger: Ledger, labels: Sequence[str]) -> npt.NDArray[np.bool_]:
        keep = np.ones(len(ledger), np.bool_)
        if self.text:
            named = np.array(
                [
                    self.text in label.casefold() or self.text in key.casefold()
                    for label, key in zip(labels, ledger.routers, strict=True)
                ]
            )
            keep &= named[ledger.sources] | named[ledger.targets]
        if self.outcome >= 0:
            keep &= ledger.outcomes == self.outcome
        if self.least_cost is not None:
            both = (ledger.before >= 0) & (ledger.after >= 0)
            keep &= both & (ledger.after - ledger.before >= self.least_cost)
        if self.least_delay is not None:
            keep &= ledger.delay_after - ledger.delay_before >= self.least_delay
        return keep

    def _key(self, ledger: Ledger, labels: Sequence[str]) -> npt.NDArray[Any]:
        if self.column in (0, 1):
            ends = (ledger.sources, ledger.targets)[:: 1 if self.column == 0 else -1]
            place = alphabet(labels)
            return np.asarray(place[ends[0]] * len(labels) + place[ends[1]])
        extra = ledger.after - ledger.before
        delay = ledger.delay_after - ledger.delay_before
        outcomes = ledger.outcomes.astype(np.int64)
        return (outcomes, ledger.before, ledger.after, extra, delay)[self.column - 2]
