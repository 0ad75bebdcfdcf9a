"""A scatter plot on logarithmic axes as SVG: time against changed pairs."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from pathlib import Path

WIDTH, HEIGHT, LEFT, BOTTOM, TOP = 860, 520, 90, 70, 40
INK, PAPER = "#23262B", "#F6F4EF"
COLOURS = ("#0072B2", "#D55E00", "#009E73")  # Okabe-Ito
SHAPES = ("circle", "square", "triangle")

Points = Sequence[tuple[float, float]]


def scatter(series: Mapping[str, Points], across: str, up: str, path: Path) -> None:
    """Write ``series`` (name -> points, both coordinates above 0) as an SVG picture."""
    points = [point for each in series.values() for point in each]
    xs, ys = _decades(p[0] for p in points), _decades(p[1] for p in points)
    parts = [
        f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {WIDTH} {HEIGHT}" '
        f'font-family="sans-serif" font-size="14" fill="{INK}">',
        f'<rect width="{WIDTH}" height="{HEIGHT}" fill="{PAPER}"/>',
        *_axis(xs, ys),
        f'<text x="{(LEFT + WIDTH) / 2}" y="{HEIGHT - 18}" text-anchor="middle">{across}</text>',
        f'<text transform="translate(22 {HEIGHT / 2}) rotate(-90)" text-anchor="middle">'
        f"{up}</text>",
    ]
    for number, (name, each) in enumerate(series.items()):
        colour, shape = COLOURS[number % 3], SHAPES[number % 3]
        parts += [_mark(shape, _x(x, xs), _y(y, ys), colour) for x, y in each]
        parts.append(_mark(shape, LEFT + 20, TOP + 16 + 22 * number, colour))
        parts.append(f'<text x="{LEFT + 32}" y="{TOP + 21 + 22 * number}">{name}</text>')
    path.write_text("\n".join([*parts, "</svg>", ""]))


def _decades(values: object) -> tuple[int, int]:
    listed = list(values)  # type: ignore[call-overload]
    return math.floor(math.log10(min(listed))), math.ceil(math.log10(max(listed)))


def _x(value: float, decades: tuple[int, int]) -> float:
    low, high = decades
    return LEFT + (math.log10(value) - low) / (high - low) * (WIDTH - LEFT - 30)


def _y(value: float, decades: tuple[int, int]) -> float:
    low, high = decades
    return HEIGHT - BOTTOM - (math.log10(value) - low) / (high - low) * (HEIGHT - BOTTOM - TOP)


def _axis(xs: tuple[int, int], ys: tuple[int, int]) -> list[str]:
    line = f'stroke="{INK}" stroke-opacity="0.2"'
    parts = []
    for power in range(xs[0], xs[1] + 1):
        x = _x(10**power, xs)
        parts.append(f'<line x1="{x}" x2="{x}" y1="{TOP}" y2="{HEIGHT - BOTTOM}" {line}/>')
        label = f"{10**power:,}" if power >= 0 else f"{10.0**power:g}"
        parts.append(
            f'<text x="{x}" y="{HEIGHT - BOTTOM + 20}" text-anchor="middle">{label}</text>'
        )
    for power in range(ys[0], ys[1] + 1):
        y = _y(10.0**power, ys)
        parts.append(f'<line x1="{LEFT}" x2="{WIDTH - 30}" y1="{y}" y2="{y}" {line}/>')
        parts.append(f'<text x="{LEFT - 8}" y="{y + 5}" text-anchor="end">{10.0**power:g}</text>')
    return parts


def _mark(shape: str, x: float, y: float, colour: str) -> str:
    fill = f'fill="{colour}" fill-opacity="0.55"'
    if shape == "circle":
        return f'<circle cx="{x:.1f}" cy="{y:.1f}" r="3.5" {fill}/>'
    if shape == "square":
        return f'<rect x="{x - 3:.1f}" y="{y - 3:.1f}" width="6" height="6" {fill}/>'
    return f'<path d="M{x:.1f} {y - 4:.1f}l4 7h-8z" {fill}/>'
