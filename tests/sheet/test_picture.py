"""Pictures as files: whole, with the same paint, texts escaped."""

from __future__ import annotations

import xml.etree.ElementTree as ET
from pathlib import Path

import pytest
from PySide6.QtGui import QImage

from netsketch.formats import FormatError
from netsketch.model import Plan, edits
from netsketch.sheet.look import DARK
from netsketch.sheet.picture import write_picture
from tests.sheet.conftest import quay_plan
from tests.sheet.test_sheet import OUTWARD

pytestmark = [pytest.mark.gui, pytest.mark.usefixtures("qapp")]


def texts(path: Path) -> list[str]:
    found = ET.parse(path).iter("{http://www.w3.org/2000/svg}text")
    return [element.text or "" for element in found]


def test_svg_holds_names_costs_and_the_legend_as_text(tmp_path: Path) -> None:
    path = tmp_path / "quay.svg"
    write_picture(quay_plan(), OUTWARD, path)
    found = texts(path)
    for wanted in ("Quay", "Crane", "Yard", "10", "25", "A 10", "A", "Crane over l1"):
        assert wanted in found
    assert "Routes from Quay" in found


def test_texts_are_escaped_for_svg(tmp_path: Path) -> None:
    plan, path = quay_plan(), tmp_path / "quay.svg"
    odd = "<script>&\"'\x00\ud800"
    plan.apply(edits.rename(plan, "r1", odd))
    write_picture(plan, OUTWARD, path)
    assert any("<script>&" in text for text in texts(path))


@pytest.mark.parametrize("width", [None, 500])
def test_png_has_the_width_asked_for(tmp_path: Path, width: int | None) -> None:
    path = tmp_path / "quay.png"
    write_picture(quay_plan(), OUTWARD, path, look=DARK, width=width)
    image = QImage(str(path))
    assert image.width() == width if width else image.width() > 700
    assert image.pixelColor(0, 0).name().upper() == DARK.paper


def test_pdf_is_a_pdf(tmp_path: Path) -> None:
    path = tmp_path / "quay.pdf"
    write_picture(quay_plan(), None, path)
    data = path.read_bytes()
    assert data.startswith(b"%PDF-")
    assert data.rstrip().endswith(b"%%EOF")


def test_an_empty_plan_and_one_without_places_have_pictures(tmp_path: Path) -> None:
    plan = Plan()
    write_picture(plan, None, tmp_path / "empty.png")
    plan.apply(edits.add_router(plan, 0, 0, name="Lone"))
    lone = edits.replace(plan.nodes["r1"], x=None, y=None)
    plan.apply(edits.change(plan, [lone], "lose its place"))
    write_picture(plan, None, tmp_path / "lone.svg")
    assert texts(tmp_path / "lone.svg") == ["Lone"]
    assert plan.nodes["r1"].x is None


def test_another_suffix_is_refused_and_nothing_written(tmp_path: Path) -> None:
    path = tmp_path / "quay.bmp"
    with pytest.raises(FormatError, match=r"quay\.bmp.*\.png, \.svg, \.pdf"):
        write_picture(quay_plan(), None, path)
    assert not path.exists()


def test_a_folder_that_is_not_there_is_an_error_of_one_line(tmp_path: Path) -> None:
    with pytest.raises(FormatError) as caught:
        write_picture(quay_plan(), None, tmp_path / "nowhere" / "quay.png")
    assert "\n" not in str(caught.value)


def test_a_png_too_large_for_memory_is_refused(tmp_path: Path) -> None:
    path = tmp_path / "quay.png"
    with pytest.raises(FormatError, match=r"at most \d+ pixels wide as PNG, not 1000000"):
        write_picture(quay_plan(), None, path, width=1_000_000)
    assert not path.exists()


def test_a_plan_as_wide_as_a_country_still_fits_a_png(tmp_path: Path) -> None:
    plan, path = quay_plan(), tmp_path / "wide.png"
    plan.apply(edits.add_router(plan, 90_000, 90_000, name="Outpost"))
    write_picture(plan, None, path)
    image = QImage(str(path))
    assert 39_000_000 < image.width() * image.height() <= 40_100_000
