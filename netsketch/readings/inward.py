"""The Inward reading: the sink tree of a router or segment."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from netsketch.readings.reading import LinkMark, PlateMark, PlateRole, Reading, Travel
from netsketch.routing import Sink


def inward(
    sink: Sink, counts: npt.NDArray[np.int64], mbps: npt.NDArray[np.float64], label: str
) -> Reading:
    """Return how everyone reaches the sink's target: every link on a way to it with the
    number of routers that use it, ``counts`` (A,), and the demand on it, ``mbps`` (A,),
    where there is any."""
    s = sink.network.structure
    highest = max(int(counts.max(initial=0)), 1)
    links = {}
    for a in sink.arcs:
        k = s.link[a]
        travel = Travel(1 if s.arcs[k, 0] == a else -1, "path", share=float(counts[a]) / highest)
        text = str(int(counts[a])) + (f" · {mbps[a]:.4g} Mbit/s" if mbps.any() else "")
        links[s.link_ids[k]] = LinkMark((travel,), text)
    plates = {}
    for v, key in enumerate(s.vertex_ids):
        cut_off = int(sink.row[v]) == sink.unreached
        role: PlateRole = "cut off" if cut_off else "reached"
        cost = None if cut_off else int(sink.row[v])
        plates[key] = PlateMark("focus" if v == sink.target else role, cost=cost)
    return Reading(
        kind="inward",
        focus=(s.vertex_ids[sink.target],),
        title=f"Ways to {label}",
        links=links,
        plates=plates,
    )
