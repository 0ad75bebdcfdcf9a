"""A race: several ways to the same answer, run in turn in one process, medians compared."""

from __future__ import annotations

import statistics
import time
from collections.abc import Callable
from dataclasses import dataclass, field

OURS = "netsketch"


@dataclass
class Race:
    """Ways to one answer. Each returns how many answers it gave, so that a peer may be
    timed on a part of the work; times are compared per answer."""

    name: str
    unit: str
    ways: dict[str, Callable[[], int]]
    seconds: dict[str, list[float]] = field(default_factory=dict)

    def run(self, repeats: int) -> None:
        """Run every way ``repeats`` times, interleaved, after one warm-up each."""
        for way in self.ways.values():
            way()
        for _ in range(repeats):
            for name, way in self.ways.items():
                start = time.perf_counter()
                answers = way()
                took = time.perf_counter() - start
                self.seconds.setdefault(name, []).append(took / answers)

    def median(self, way: str) -> float:
        """Return the median seconds for one answer."""
        return statistics.median(self.seconds[way])

    def line(self) -> str:
        """Return the row of the table: our time, and how many times longer peers take."""
        ours = self.median(OURS)
        ratios = [f"{way} {self.median(way) / ours:,.1f}x" for way in self.ways if way != OURS]
        return f"{self.name:<44} {_time(ours):>9} {self.unit:<12} {'  '.join(ratios)}"


def _time(seconds: float) -> str:
    for limit, factor, unit in ((1e-3, 1e6, "us"), (1, 1e3, "ms")):
        if seconds < limit:
            return f"{seconds * factor:.3g} {unit}"
    return f"{seconds:.3g} s"
