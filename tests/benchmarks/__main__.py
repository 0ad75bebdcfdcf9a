"""``python -m tests.benchmarks [--short] [--plot FILE]``: the table of ratios.

Everything runs in one process, the ways to each answer in turn, medians of at least five
runs (three with ``--short``, on the smaller plans). Every peer answers with distances
alone; ours keeps next hops too where the row says so. A ratio is the peer's time over
ours for the same answer; networkx is timed on some sources and scaled.
"""

from __future__ import annotations

import argparse
import os
import random
import statistics
import time
from pathlib import Path

from netsketch.analysis import failures_of, survey
from netsketch.model import Plan
from netsketch.routing import AllPairs, Network
from tests.benchmarks.core import course, per_changed_pair
from tests.benchmarks.plot import scatter

SHORT, FULL = (100, 200), (100, 200, 1000, 5000)


def main() -> None:
    parser = argparse.ArgumentParser(prog="python -m tests.benchmarks", description=__doc__)
    parser.add_argument("--short", action="store_true", help="smaller plans, fewer runs")
    parser.add_argument("--plot", type=Path, help="write time against changed pairs as SVG")
    chosen = parser.parse_args()
    print(f"{os.cpu_count()} processors; a ratio above 1 means the peer takes longer\n")
    series = {}
    for routers in SHORT if chosen.short else FULL:
        track = course(routers, chosen.short)
        pairs = failures_of(track.plan, "link-pairs") if routers == 100 else []
        races = [track.survey("link-pairs", pairs, track.sample)] if pairs else track.races()
        kept = AllPairs(track.network).distances.nbytes / 1e6
        print(f"{routers:,} routers, {len(track.plan.links):,} links; all pairs {kept:.1f} MB")
        repeats = 3 if chosen.short else 5
        for race in races:
            race.run(repeats)
            print(race.line(), flush=True)
        if routers >= 200:
            series[f"{routers:,} routers"] = _changed(track.network, track.plan)
    if chosen.plot:
        scatter(series, "changed pairs", "milliseconds", chosen.plot)


def _changed(network: Network, plan: Plan) -> list[tuple[float, float]]:
    """Print and return the time of updates against the pairs they change."""
    links = random.Random(4).sample(plan.links.keys(), min(300, len(plan.links)))
    found = per_changed_pair(network, links)
    each = statistics.median(1e9 * seconds / pairs for pairs, seconds in found if pairs >= 500)
    start = time.perf_counter()
    whole = survey(network, "links", failures_of(plan, "links"))
    took = 1e9 * (time.perf_counter() - start) / int(whole.changed.sum())
    routers = network.structure.routers
    print(
        f"time per changed pair, {routers:,} routers: update {each:.0f} ns "
        f"(updates of 500 pairs or more), survey {took:.0f} ns; "
        f"{int(whole.changed.sum()):,} changed pairs in {len(whole.failures):,} failures\n"
    )
    return [(pairs, 1e3 * seconds) for pairs, seconds in found if pairs]


if __name__ == "__main__":
    main()
