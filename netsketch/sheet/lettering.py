"""The sheet's fonts, and text made safe and measured for it."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtGui import QFont, QFontMetricsF, QGuiApplication

LONGEST = 80
"""Characters looked at when a text is fitted; more never fit a plate."""

LARGER_BELOW = 0.72
_ELIDE_RIGHT = Qt.TextElideMode.ElideRight
_JOINERS = "\u200d\ufe0f"  # inside emoji; everything else unprintable becomes a space


def flat(text: str) -> str:
    """Return ``text`` on one line without control or direction characters, cut to
    :data:`LONGEST` characters."""
    if text.isprintable() and len(text) <= LONGEST:
        return text.strip()
    cut = text[: LONGEST + 1]
    clean = "".join(c if c.isprintable() or c in _JOINERS else " " for c in cut).strip()
    return clean if len(text) <= LONGEST else clean[:LONGEST] + "…"


class Face:
    """One font with its metrics; remembers what it has measured."""

    def __init__(self, pixels: int, bold: bool = False) -> None:
        self.font = QFont(QGuiApplication.font())
        self.font.setPixelSize(pixels)
        self.font.setBold(bold)
        self.metrics = QFontMetricsF(self.font)
        self.rise = (self.metrics.ascent() - self.metrics.descent()) / 2
        """From the middle of a line of text down to its baseline."""
        self._fitted: dict[tuple[str, float], tuple[str, float]] = {}

    def fitted(self, text: str, widest: float) -> tuple[str, float]:
        """Return the text as it is drawn within ``widest`` pixels, and its width."""
        known = self._fitted.get((text, widest))
        if known is None:
            known = self._fitted[text, widest] = self._fit(flat(text), widest)
        return known

    def width(self, text: str) -> float:
        """Return the width of a short text."""
        return self.fitted(text, 1e4)[1]

    def _fit(self, text: str, widest: float) -> tuple[str, float]:
        width = self.metrics.horizontalAdvance(text)
        if width <= widest:
            return text, width
        text = self.metrics.elidedText(text, _ELIDE_RIGHT, widest)
        return text, self.metrics.horizontalAdvance(text)


class Lettering:
    """The faces of the sheet, in sheet units (pixels at scale 1).

    Below the scale :data:`LARGER_BELOW` what can grow takes a larger face, so that a plan
    that just fits a window can still be read.
    """

    def __init__(self) -> None:
        self.name, self.large_name = Face(14, bold=True), Face(16, bold=True)
        self.site = Face(11)
        self.tag, self.large_tag = Face(12), Face(15)
        self.band, self.large_band = Face(11, bold=True), Face(14, bold=True)
