"""Where the compiled loops are kept between runs.

numba keeps them beside their source, else in the user's cache folder, and refuses to
compile at all where it can write neither: an installation for all users, started by an
account without a home. Then they go into a private folder that lasts one run (not a shared
one with a name others can guess: what numba reads back is trusted).
"""

from __future__ import annotations

import os
import tempfile
from collections.abc import MutableMapping
from pathlib import Path
from typing import Final

import platformdirs

BESIDE_SOURCE: Final = Path(__file__).parent / "routing" / "__pycache__"

_lasting: list[tempfile.TemporaryDirectory[str]] = []
"""Keeps the folder of this run until the process ends."""


def choose_folder(environment: MutableMapping[str, str]) -> None:
    """Set NUMBA_CACHE_DIR where numba would find no folder by itself; call this before
    the loops are loaded. Raises ``OSError`` when there is no folder for temporary files."""
    users = Path(platformdirs.user_cache_dir("numba", appauthor=False))
    if "NUMBA_CACHE_DIR" in environment or _can_hold(BESIDE_SOURCE) or _can_hold(users):
        return
    _lasting.append(tempfile.TemporaryDirectory(prefix="netsketch-"))
    environment["NUMBA_CACHE_DIR"] = _lasting[-1].name


def _can_hold(folder: Path) -> bool:
    """Return whether files can be put into ``folder``, or into where it would be made."""
    there = next(place for place in (folder, *folder.parents) if place.exists())
    return there.is_dir() and os.access(there, os.W_OK | os.X_OK)
