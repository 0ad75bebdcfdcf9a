"""Where the demo networks are, wherever the tests are started from."""

from __future__ import annotations

from pathlib import Path
from typing import Final

from netsketch.formats import read
from netsketch.model import Plan

DEMOS: Final = Path(__file__).resolve().parent.parent / "demo_topologies"


def demo_path(name: str) -> Path:
    """Return the file of the demo network ``name`` ("harbour-campus", …)."""
    return DEMOS / f"{name}.netsketch.json"


def demo(name: str) -> Plan:
    """Return the plan of the demo network ``name``."""
    return read(demo_path(name)).plan
