"""The legend of a picture: what the reading on it says, in words beside the signs."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from netsketch.model import Plan
from netsketch.readings.reading import Reading
from netsketch.sheet.lettering import Lettering
from netsketch.sheet.look import Look, cividis
from netsketch.sheet.marks import DASHES

TITLE_HEIGHT = 40.0
ROW_HEIGHT = 20.0
_SIGN = 34.0
_WIDEST = 260.0
_COLUMN = _SIGN + _WIDEST + 20.0


@dataclass(frozen=True, slots=True)
class Entry:
    """One line of a legend. ``letter``: in a coloured cell; else a line is drawn."""

    text: str
    colour: str
    letter: str = ""
    ink: str = ""
    dash: tuple[float, ...] = ()


def entries(plan: Plan, reading: Reading | None, look: Look) -> list[Entry]:
    """Return the lines of the legend: the first hops, and the roles in use."""
    return [] if reading is None else [*_hops(plan, reading, look), *_roles(reading, look)]


def _hops(plan: Plan, reading: Reading, look: Look) -> Iterator[Entry]:
    for hop in reading.first_hops:
        router, hue = plan.nodes.get(hop.router), hop.colour % len(look.first_hops)
        name = router.label if router is not None else hop.router
        text = f"{name} over {hop.link}"
        yield Entry(text, look.first_hops[hue], hop.letter, look.band_texts[hue])


def _roles(reading: Reading, look: Look) -> Iterator[Entry]:
    if reading.kind == "load":
        for share in (0.0, 0.5, 1.0):
            yield Entry(f"{share:.0%} of capacity", cividis(share))
        return
    used = {travel.role for mark in reading.links.values() for travel in mark.travels}
    colours = {
        "path": look.path,
        "way back": look.way_back,
        "before": look.before,
        "after": look.after,
    }
    for role, colour in colours.items():
        if role in used:
            yield Entry(role, colour, dash=DASHES.get(role, ()))
    if any(mark.moved for mark in reading.plates.values()):
        yield Entry("moved: second outline", look.ink)
    if any(mark.role == "cut off" for mark in reading.plates.values()):
        yield Entry("cut off: hatched", look.ink)


def size_of(listed: list[Entry], width: float) -> tuple[int, float]:
    """Return how many columns the legend takes in ``width``, and its height."""
    columns = max(1, min(len(listed), int(width // _COLUMN)))
    return columns, -(-len(listed) // columns) * ROW_HEIGHT


def paint_title(
    painter: QPainter, text: str, look: Look, lettering: Lettering, at: QPointF
) -> None:
    """Paint the title of a picture."""
    font = lettering.name.font
    font.setPixelSize(17)
    painter.setFont(font)
    font.setPixelSize(14)
    painter.setPen(QColor(look.ink))
    painter.drawText(at, text)


def paint_legend(
    painter: QPainter, listed: list[Entry], look: Look, lettering: Lettering, area: QRectF
) -> None:
    """Paint the legend into ``area``, column by column."""
    columns, _ = size_of(listed, area.width())
    rows = -(-len(listed) // columns)
    for place, entry in enumerate(listed):
        x = area.left() + (place // rows) * _COLUMN
        y = area.top() + (place % rows + 0.5) * ROW_HEIGHT
        _paint_sign(painter, entry, lettering, x, y)
        painter.setFont(lettering.tag.font)
        painter.setPen(QColor(look.ink))
        text, _ = lettering.tag.fitted(entry.text, _WIDEST)
        painter.drawText(QPointF(x + _SIGN, y + lettering.tag.rise), text)


def _paint_sign(painter: QPainter, entry: Entry, lettering: Lettering, x: float, y: float) -> None:
    if entry.letter:
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(QColor(entry.colour))
        cell = QRectF(x, y - 7, 26, 14)
        painter.drawRoundedRect(cell, 3, 3)
        painter.setPen(QColor(entry.ink))
        painter.setFont(lettering.band.font)
        painter.drawText(cell, int(Qt.AlignmentFlag.AlignCenter), entry.letter)
        return
    pen = QPen(QColor(entry.colour), 4.0)
    pen.setCapStyle(Qt.PenCapStyle.FlatCap)
    if entry.dash:
        pen.setDashPattern(list(entry.dash))
    painter.setPen(pen)
    painter.drawLine(QPointF(x, y), QPointF(x + 26, y))
