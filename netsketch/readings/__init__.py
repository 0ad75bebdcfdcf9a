"""Results as readings: what the sheet shows about the focus, as plain data."""

from netsketch.readings.outward import effect, outward
from netsketch.readings.path import path
from netsketch.readings.reading import (
    FirstHop,
    LinkMark,
    PlateMark,
    PlateRole,
    Reading,
    ReadingKind,
    Travel,
    TravelRole,
    letter,
)

__all__ = [
    "FirstHop",
    "LinkMark",
    "PlateMark",
    "PlateRole",
    "Reading",
    "ReadingKind",
    "Travel",
    "TravelRole",
    "effect",
    "letter",
    "outward",
    "path",
]
