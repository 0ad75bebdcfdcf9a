"""A large invented backbone, the same for the same seed: the plan that speed is measured on.

Regions lie on a staggered grid. Each has two core routers in its middle, distribution
routers around them and two rings of edge routers; the cores of neighbouring regions are
joined in pairs. ``python -m tests.benchmarks.backbone FILE [ROUTERS]`` writes it.
"""

from __future__ import annotations

import math
import random
import sys
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path

from netsketch.formats import write
from netsketch.model import Add, Edit, Item, Link, Plan, Router, Settings

REGION_SIZE = 40
PITCH_X, PITCH_Y = 1900, 1150
KM_PER_UNIT = 0.06
MS_PER_KM = 0.005  # light in glass: about 200,000 km/s
FIRST = ("Tar", "Ves", "Ol", "Brem", "Kas", "Mur", "Ost", "Sil", "Dor", "Pal", "Wen", "Il")
LAST = ("vo", "mark", "dal", "holm", "rin", "sted", "ka", "mont", "lo", "wick", "nes", "tir")


@dataclass
class Region:
    """One cluster: its name, its middle and the indexes of its routers by role."""

    name: str
    x: float
    y: float
    row: int
    column: int
    roles: dict[str, list[int]] = field(default_factory=dict)


class Backbone:
    """The routers and links so far."""

    def __init__(self, seed: int) -> None:
        self.random = random.Random(seed)
        self.routers: list[Router] = []
        self.links: list[Link] = []

    def router(self, region: Region, role: str, x: float, y: float) -> None:
        """Add a router of ``role`` ("C", "D" or "E") to ``region``, near (x, y)."""
        number = len(self.routers) + 1
        index = len(region.roles.setdefault(role, [])) + 1
        region.roles[role].append(number - 1)
        self.routers.append(
            Router(
                id=f"r{number}",
                name=f"{region.name}-{role}{index}",
                site=region.name,
                x=round(region.x + x + self.random.uniform(-12, 12)),
                y=round(region.y + y + self.random.uniform(-12, 12)),
            )
        )

    def link(self, source: int, target: int, capacity: int, cost: int) -> None:
        """Join two routers; about one link in twelve costs more on the way back."""
        a, b = self.routers[source], self.routers[target]
        length = math.hypot(a.x - b.x, a.y - b.y) * KM_PER_UNIT
        back = cost + self.random.choice((5, 10, 20)) if self.random.random() < 1 / 12 else cost
        self.links.append(
            Link(
                id=f"l{len(self.links) + 1}",
                source=a.id,
                target=b.id,
                cost=cost,
                cost_back=back,
                capacity_mbps=capacity,
                delay_ms=max(0.1, round(length * MS_PER_KM * 10, 1)),
            )
        )


def backbone(routers: int = 1000, seed: int = 20) -> Plan:
    """Return a plan of ``routers`` routers (200 or more) and about 1.9 links for each."""
    drawn = Backbone(seed)
    regions = _regions(drawn.random, routers)
    for region, size in zip(regions, _sizes(drawn.random, routers, len(regions)), strict=True):
        _place(drawn, region, size)
        _join_region(drawn, region)
    for near, far in _neighbours(regions):
        _join_regions(drawn, near, far)
    plan = Plan(Settings(name=f"Invented backbone, {routers} routers"))
    items: tuple[tuple[Item, ...], ...] = (tuple(drawn.routers), tuple(drawn.links))
    steps = tuple(Add(item, index) for kind in items for index, item in enumerate(kind))
    plan.apply(Edit("draw the backbone", steps))
    return plan


def _regions(rng: random.Random, routers: int) -> list[Region]:
    count = max(5, round(routers / REGION_SIZE))
    columns = max(2, round(math.sqrt(count)))
    names = [first + last for first in FIRST for last in LAST]
    names += [f"{name} {number}" for number in range(2, count // len(names) + 3) for name in names]
    chosen = rng.sample(names[: max(144, count)], count)
    return [
        Region(
            name,
            (index % columns + index // columns % 2 / 2) * PITCH_X + rng.uniform(-90, 90),
            index // columns * PITCH_Y + rng.uniform(-70, 70),
            index // columns,
            index % columns,
        )
        for index, name in enumerate(chosen)
    ]


def _sizes(rng: random.Random, routers: int, regions: int) -> list[int]:
    """Return region sizes that differ and add up to ``routers``."""
    sizes = [routers // regions + (index < routers % regions) for index in range(regions)]
    for _ in range(regions):
        give, take = rng.randrange(regions), rng.randrange(regions)
        moved = rng.randrange(6)
        if give != take and sizes[give] - moved >= 30 and sizes[take] + moved <= 46:
            sizes[give] -= moved
            sizes[take] += moved
    return sizes


def _place(drawn: Backbone, region: Region, size: int) -> None:
    drawn.router(region, "C", -90, -30)
    drawn.router(region, "C", 90, 30)
    spread = 8 if size >= 36 else 6
    outer = (size - 2 - spread) // 2
    for role, number, rx, ry, turn in (
        ("D", spread, 330, 175, 0.5),
        ("E", size - 2 - spread - outer, 580, 320, 0.0),
        ("E", outer, 790, 450, 0.5),
    ):
        for step in range(number):
            angle = 2 * math.pi * (step + turn) / number
            drawn.router(region, role, rx * math.cos(angle), ry * math.sin(angle))


def _join_region(drawn: Backbone, region: Region) -> None:
    """Join cores to distribution, distribution to the inner ring, that to the outer."""
    rng = drawn.random
    cores, spread, edge = (region.roles[role] for role in "CDE")
    half = (len(edge) + 1) // 2
    inner, outer = edge[:half], edge[half:]
    drawn.link(*cores, 400_000, 5)
    for index, router in enumerate(spread):
        for core in cores:
            drawn.link(router, core, 100_000, rng.choice((10, 10, 15)))
        if index % 2 == 0:
            drawn.link(router, spread[(index + 1) % len(spread)], 40_000, 30)
    for index, router in enumerate(inner):
        near = round(index * len(spread) / len(inner) - 0.5)
        for step in (near, near + 1):
            drawn.link(router, spread[step % len(spread)], 10_000, rng.choice((40, 50, 50, 60)))
    for index, router in enumerate(outer):
        drawn.link(router, inner[index % len(inner)], 1_000, rng.choice((100, 120)))
        if index % 2 == 0 and index + 1 < len(outer):
            drawn.link(router, outer[index + 1], 1_000, 150)


def _neighbours(regions: list[Region]) -> Iterator[tuple[Region, Region]]:
    """Pairs side by side, and pairs of one row and the next on one side."""
    at = {(region.row, region.column): region for region in regions}
    for region in regions:
        leaning = region.column - 1 if region.row % 2 == 0 else region.column + 1
        places = [(region.row, region.column + 1), (region.row + 1, region.column)]
        if region.column % 2 == 0:
            places.append((region.row + 1, leaning))
        for place in places:
            if place in at:
                yield region, at[place]


def _join_regions(drawn: Backbone, near: Region, far: Region) -> None:
    length = math.hypot(near.x - far.x, near.y - far.y) / 100
    base = round(length + drawn.random.choice((0, 2, 5)))
    for source, target in zip(near.roles["C"], far.roles["C"], strict=True):
        drawn.link(source, target, 400_000, base)


if __name__ == "__main__":
    write(backbone(int(sys.argv[2]) if len(sys.argv) > 2 else 1000), Path(sys.argv[1]))
