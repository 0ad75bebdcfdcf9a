"""Open data: topologies of the topohub package as plans.

topohub 1.5 (MIT licence) carries SNDlib and the Internet Topology Zoo as node-link data:
real networks with positions, distances and, for SNDlib, demands.
"""

from __future__ import annotations

import importlib.resources
import json
import random
from functools import cache
from pathlib import Path
from typing import Any

import topohub

from netsketch.model import Link, Plan, Router, edits


def keys(*folders: str, most_nodes: int = 30) -> list[str]:
    """Return the topologies of these folders with at most so many nodes, by name."""
    return [key for folder in folders for key, nodes in _sizes(folder) if nodes <= most_nodes]


@cache
def _sizes(folder: str) -> list[tuple[str, int]]:
    place = Path(str(importlib.resources.files(topohub))) / "data" / folder
    return [
        (f"{folder}/{path.stem}", len(json.loads(path.read_text())["nodes"]))
        for path in sorted(place.glob("*.json"))
    ]


def topology(key: str) -> dict[str, Any]:
    """Return a topology as topohub gives it."""
    found: dict[str, Any] = topohub.get(key)
    return found


def plan_of(key: str, costs: str = "ones") -> Plan:
    """Return a topology as a plan. Costs: all 1 ("ones"), the same each way and few enough
    to tie ("ties"), or unequal each way ("unequal"), the last two seeded by the name."""
    data = topology(key)
    rng = random.Random(key)
    plan = Plan()
    plan.apply(edits.add(plan, *(Router(id=str(n["id"]), name=n["name"]) for n in data["nodes"])))
    links = []
    for number, edge in enumerate(data["edges"]):
        cost = 1 if costs == "ones" else rng.randint(1, 4)
        back = rng.randint(1, 4) if costs == "unequal" else cost
        ends = str(edge["source"]), str(edge["target"])
        if ends[0] != ends[1]:
            links.append(
                Link(id=f"l{number}", source=ends[0], target=ends[1], cost=cost, cost_back=back)
            )
    plan.apply(edits.add(plan, *links))
    return plan
