"""A record as one HTML file: no scripts, nothing fetched, every name escaped."""

from __future__ import annotations

import re
from functools import cache

from jinja2 import Environment, PackageLoader, StrictUndefined
from markupsafe import Markup

from netsketch.reports import cautions
from netsketch.reports.record import Record
from netsketch.reports.record_figures import MOST, cost, count, more, percent, rate, signed
from netsketch.reports.record_words import shown

PAGE_PICTURE = "picture:{}"
"""Name under which a picture stands in the pages that are printed."""

_ID = re.compile(r' id="([^"]+)"')


def html(record: Record) -> str:
    """Return the record as a page for a browser, with its pictures in it."""
    pictures = [
        Markup(inline_svg(picture.svg, f"p{n}-")) for n, picture in enumerate(record.pictures)
    ]
    return _rendered(record, "screen.css", pictures)


def print_html(record: Record) -> str:
    """Return the record in the HTML that Qt lays out on pages; its pictures are images
    called :data:`PAGE_PICTURE`."""
    names = (PAGE_PICTURE.format(n) for n in range(len(record.pictures)))
    return _rendered(record, "page.css", [Markup('<img src="{}">').format(n) for n in names])


def inline_svg(svg: str, prefix: str) -> str:
    """Return a picture as an element of HTML: without the XML declaration, its ids told
    apart from those of other pictures by ``prefix``."""
    text = svg[svg.index("<svg") :]
    definitions = text[: text.find("</defs>")]
    for key in dict.fromkeys(_ID.findall(definitions)):
        text = text.replace(f' id="{key}"', f' id="{prefix}{key}"')
        text = text.replace(f"url(#{key})", f"url(#{prefix}{key})")
    return text


def _rendered(record: Record, style: str, pictures: list[Markup]) -> str:
    return (
        _environment()
        .get_template("record.html")
        .render(
            record=record,
            style=style,
            pictures=pictures,
            file=shown(record.origin.file) or "not saved to a file",
            fresh=sum(point.is_new for point in record.single_points),
            most=MOST,
            computes=cautions.COMPUTES,
            does_not=cautions.DOES_NOT,
            cautions=cautions.CAUTIONS,
        )
    )


@cache
def _environment() -> Environment:
    environment = Environment(
        loader=PackageLoader("netsketch.reports"),
        autoescape=True,
        trim_blocks=True,
        lstrip_blocks=True,
        undefined=StrictUndefined,
    )
    environment.filters.update(
        count=count, cost=cost, signed=signed, rate=rate, percent=percent, more=more
    )
    return environment
