"""The demo networks that came with the program."""

from __future__ import annotations

from pathlib import Path

DEMOS = Path(__file__).resolve().parents[2] / "demo_topologies"


def demo_files() -> list[tuple[str, Path]]:
    """Return (name, file) of each, smallest first; none where the folder is not beside the
    program."""
    found = sorted(DEMOS.glob("*.netsketch.json"), key=lambda path: path.stat().st_size)
    return [(path.name.split(".")[0].replace("-", " ").capitalize(), path) for path in found]
