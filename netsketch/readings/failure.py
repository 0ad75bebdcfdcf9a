"""The Effect reading of a failure over all pairs: who moves and who is cut off."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np

from netsketch.analysis.ledger import Ledger
from netsketch.readings.reading import LinkMark, PlateMark, PlateRole, Reading, Travel
from netsketch.routing import derive


def failure(ledger: Ledger, links: Iterable[str], nodes: Iterable[str], label: str) -> Reading:
    """Return the plates that a failure concerns: cut off where a router loses at least
    half of the routers it reaches pairs with, moved where any of its pairs moves. The
    failed links show as what traffic leaves."""
    count = len(ledger.routers)
    pairs = np.concatenate([ledger.sources, ledger.targets])
    outcomes = np.concatenate([ledger.outcomes, ledger.outcomes])
    moved = np.bincount(pairs[outcomes == derive.MOVED], minlength=count)
    lost = np.bincount(pairs[outcomes == derive.CUT_OFF], minlength=count)
    failed = set(nodes)
    plates = {}
    for index, key in enumerate(ledger.routers):
        # Each lost partner counts twice, once a direction.
        cut_off = key in failed or lost[index] >= max(count - 1, 1)
        role: PlateRole = "cut off" if cut_off else "reached"
        plates[key] = PlateMark(role, moved=bool(moved[index]) and not cut_off)
    gone = LinkMark((Travel(1, "before"), Travel(-1, "before")))
    return Reading(
        kind="effect",
        focus=(),
        title=f"Effect of losing {label}",
        links=dict.fromkeys(links, gone),
        plates=plates,
    )
