"""The two looks of the sheet: paper and ink by day, graphite and chalk at night.

Colour carries meaning only in readings. First-hop colours are the seven hues of Okabe and
Ito ("Color Universal Design", 2008; colour-blind safe), lightened or darkened where the
paper asks for it; load uses the cividis ramp (Nuñez, Anderton and Renslow, 2018).
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Look:
    """The colours of one theme, each ``#rrggbb``.

    ``first_hops``, ``band_texts``: seven line and band colours with the text colour on each.
    """

    name: str
    paper: str
    ink: str
    soft: str
    """Small text: sites, hints."""
    faded: str
    """Text and outlines of what a reading does not name."""
    hairline: str
    """Lines of what a reading does not name."""
    tag: str
    """Ground of the cost tags."""
    plate: str
    """Ground of the plates."""
    focus_soft: str
    """Small text on the inverted focus plate."""
    first_hops: tuple[str, ...]
    band_texts: tuple[str, ...]
    path: str
    way_back: str
    before: str
    after: str


FIRST_HOP_COLOURS: tuple[str, ...] = (
    "#0072B2",
    "#D55E00",
    "#009E73",
    "#CC79A7",
    "#E69F00",
    "#56B4E9",
    "#F0E442",
)
"""The seven hues as published, in the order in which first hops take them."""

_DAY_HOPS = ("#0072B2", "#D55E00", "#009E73", "#CC79A7", "#E69F00", "#56B4E9", "#A89A00")
_NIGHT_HOPS = ("#56B4E9", "#E69F00", "#2FBF98", "#CC79A7", "#F0E442", "#4C93D9", "#E5742A")


def _channel(value: int) -> float:
    part = value / 255
    return part / 12.92 if part <= 0.04045 else float(((part + 0.055) / 1.055) ** 2.4)


def luminance(colour: str) -> float:
    """Return the relative luminance of ``#rrggbb``, 0 to 1 (WCAG 2.2, definitions)."""
    red, green, blue = (_channel(int(colour[i : i + 2], 16)) for i in (1, 3, 5))
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue


def contrast(one: str, other: str) -> float:
    """Return the contrast ratio of two colours, 1 to 21 (WCAG 2.2, 1.4.3)."""
    low, high = sorted((luminance(one), luminance(other)))
    return (high + 0.05) / (low + 0.05)


def text_on(ground: str) -> str:
    """Return the one of near-black and white that reads better on ``ground``."""
    return max(("#111316", "#FFFFFF"), key=lambda colour: contrast(colour, ground))


def cividis(value: float) -> str:
    """Return the cividis colour for ``value``, held to 0 to 1.

    A polynomial fit of the published table, within a few of 255 steps a channel.
    """
    t = min(max(value, 0.0), 1.0)
    red = -4.54 - t * (35.34 - t * (2381.73 - t * (6402.7 - t * (7024.72 - t * 2710.57))))
    green = 32.49 + t * (170.73 + t * (52.82 - t * (131.46 - t * (176.58 - t * 67.37))))
    blue = 81.24 + t * (442.36 - t * (2482.43 - t * (6167.24 - t * (6614.94 - t * 2475.67))))
    channels = (min(max(round(part), 0), 255) for part in (red, green, blue))
    return "#" + "".join(f"{part:02X}" for part in channels)


LIGHT = Look(
    name="light",
    paper="#F6F4EF",
    ink="#23262B",
    soft="#5F5E5A",
    faded="#6E6C66",
    hairline="#C9C5BA",
    tag="#F6F4EF",
    plate="#FBFAF7",
    focus_soft="#C9C5BA",
    first_hops=_DAY_HOPS,
    band_texts=tuple(text_on(colour) for colour in _DAY_HOPS),
    path="#0072B2",
    way_back="#B34E00",
    before="#5F5E5A",
    after="#0072B2",
)

DARK = Look(
    name="dark",
    paper="#24272B",
    ink="#EDE9DF",
    soft="#A9A69D",
    faded="#9A978F",
    hairline="#4A4D52",
    tag="#24272B",
    plate="#2B2E33",
    focus_soft="#55534E",
    first_hops=_NIGHT_HOPS,
    band_texts=tuple(text_on(colour) for colour in _NIGHT_HOPS),
    path="#56B4E9",
    way_back="#E69F00",
    before="#A9A69D",
    after="#56B4E9",
)
