"""A picture of the sheet as a file: PNG, SVG or PDF, painted as in the window.

Texts go through Qt, which escapes them for SVG and PDF.
"""

from __future__ import annotations

import os
import sys
from collections.abc import Callable
from pathlib import Path

from PySide6.QtCore import QBuffer, QByteArray, QIODevice, QMarginsF, QPointF, QRectF, QSizeF
from PySide6.QtGui import QColor, QGuiApplication, QImage, QPageSize, QPainter, QPdfWriter
from PySide6.QtSvg import QSvgGenerator

from netsketch.formats import FormatError
from netsketch.formats.atomic import write_bytes
from netsketch.model import Plan
from netsketch.readings.reading import Reading
from netsketch.session.layout import place_missing
from netsketch.sheet.contents import unit_for
from netsketch.sheet.frame import Frame, frame_of
from netsketch.sheet.legend import TITLE_HEIGHT, entries, paint_legend, paint_title, size_of
from netsketch.sheet.lettering import Lettering, flat
from netsketch.sheet.look import LIGHT, Look
from netsketch.sheet.painter import paint_frame

MARGIN = 32.0
LEAST_WIDTH = 360.0
MOST_PIXELS = 40_000_000
_POINTS = 72 / 96


class PictureError(ValueError):
    """Why a picture of this size or kind cannot be painted."""


class Picture:
    """A plan with a reading on a page: title, drawing, legend."""

    def __init__(self, plan: Plan, reading: Reading | None, look: Look) -> None:
        self.look, self.lettering = look, Lettering()
        self.frame: Frame = frame_of(plan, reading, look, self.lettering, unit_for(plan))
        self._title = _title(plan, reading)
        self._entries = entries(plan, reading, look)
        self._drawn = self.frame.extent()
        width = max(self._drawn.width(), LEAST_WIDTH)
        self._legend_height = size_of(self._entries, width)[1]
        height = self._drawn.height() + (TITLE_HEIGHT if self._title else 0)
        height += self._legend_height + (16 if self._legend_height else 0)
        self.size = QSizeF(width + 2 * MARGIN, height + 2 * MARGIN)

    def paint(self, painter: QPainter, scale: float) -> None:
        """Paint the page at ``scale`` device units for one sheet unit."""
        painter.scale(scale, scale)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.fillRect(QRectF(QPointF(0, 0), self.size), QColor(self.look.paper))
        top = MARGIN
        if self._title:
            start = QPointF(MARGIN, top + 16)
            paint_title(painter, self._title, self.look, self.lettering, start)
            top += TITLE_HEIGHT
        painter.save()
        painter.translate(MARGIN - self._drawn.left(), top - self._drawn.top())
        paint_frame(painter, self.frame)
        painter.restore()
        below = top + self._drawn.height() + 16
        area = QRectF(MARGIN, below, self.size.width() - 2 * MARGIN, self._legend_height)
        if self._entries:
            paint_legend(painter, self._entries, self.look, self.lettering, area)


def write_picture(
    plan: Plan,
    reading: Reading | None,
    path: Path,
    look: Look = LIGHT,
    width: int | None = None,
) -> None:
    """Write a picture of ``plan`` with ``reading`` to ``path``, whose suffix says how:
    .png, .svg or .pdf. ``width``: in pixels; ``None`` takes the natural size, twice as
    many pixels for a PNG as far as memory allows. With a reading comes a legend.

    Raises FormatError for another suffix, for a PNG beyond 40 million pixels and when the
    file cannot be written. A file that is there is replaced only by a whole picture.
    """
    suffix = path.suffix.lower()
    if suffix not in WRITERS:
        raise FormatError(str(path), "", f"a picture is one of {', '.join(WRITERS)}")
    try:
        data = picture_bytes(plan, reading, suffix, look, width)
    except PictureError as error:
        raise FormatError(str(path), "", str(error)) from error
    write_bytes(path, data)


def picture_bytes(
    plan: Plan,
    reading: Reading | None,
    suffix: str,
    look: Look = LIGHT,
    width: int | None = None,
) -> bytes:
    """Return what :func:`write_picture` writes to a file with this suffix (".svg"). Raises
    :class:`PictureError`."""
    ensure_application()
    picture = Picture(_placed(plan), reading, look)
    data = QByteArray()
    buffer = QBuffer(data)
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    WRITERS[suffix](picture, buffer, width)
    buffer.close()
    return bytes(data.data())


_started: list[QGuiApplication] = []
"""Keeps what was started here until the process ends."""


def ensure_application() -> None:
    """Start a Qt application unless one runs; it needs no screen."""
    if isinstance(QGuiApplication.instance(), QGuiApplication):
        return
    if sys.platform.startswith("linux") and not (
        os.environ.get("DISPLAY") or os.environ.get("WAYLAND_DISPLAY")
    ):
        os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    _started.append(QGuiApplication(["netsketch"]))


def _placed(plan: Plan) -> Plan:
    """Return the plan with a place for every node; the one given stays as it is."""
    if all(node.x is not None for node in plan.nodes):
        return plan
    placed = plan.snapshot()
    place_missing(placed)
    return placed


def _title(plan: Plan, reading: Reading | None) -> str:
    parts = [plan.settings.name, reading.title if reading else ""]
    return flat(" — ".join(part for part in parts if part))


def _write_png(picture: Picture, device: QIODevice, width: int | None) -> None:
    most = (MOST_PIXELS / (picture.size.width() * picture.size.height())) ** 0.5
    scale = min(2.0, most) if width is None else width / picture.size.width()
    if scale > most:
        widest = int(most * picture.size.width())
        raise PictureError(f"this plan is drawn at most {widest} pixels wide as PNG, not {width}")
    image = QImage((picture.size * scale).toSize(), QImage.Format.Format_RGB32)
    image.fill(QColor(picture.look.paper))
    picture.frame.scale = max(scale, 1.0)
    with QPainter(image) as painter:
        picture.paint(painter, scale)
    if not image.save(device, "PNG"):  # type: ignore[call-overload]
        raise PictureError("the picture could not be turned into PNG")


def _write_svg(picture: Picture, device: QIODevice, width: int | None) -> None:
    scale = 1.0 if width is None else width / picture.size.width()
    size = (picture.size * scale).toSize()
    generator = QSvgGenerator()
    generator.setOutputDevice(device)
    generator.setSize(size)
    generator.setViewBox(QRectF(0, 0, size.width(), size.height()))
    generator.setTitle(picture._title)
    with QPainter(generator) as painter:
        picture.paint(painter, scale)


def _write_pdf(picture: Picture, device: QIODevice, width: int | None) -> None:
    scale = 1.0 if width is None else width / picture.size.width()
    page = QPdfWriter(device)
    page.setTitle(picture._title)
    page.setCreator("netsketch")
    page.setPageSize(QPageSize(picture.size * scale * _POINTS, QPageSize.Unit.Point))
    page.setPageMargins(QMarginsF(0, 0, 0, 0))
    page.setResolution(288)
    with QPainter(page) as painter:
        picture.paint(painter, scale * 288 / 96)


WRITERS: dict[str, Callable[[Picture, QIODevice, int | None], None]] = {
    ".png": _write_png,
    ".svg": _write_svg,
    ".pdf": _write_pdf,
}
"""How each suffix is written."""
