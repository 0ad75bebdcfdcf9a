"""Both looks can be read: contrast by WCAG 2.2, colours as published."""

from __future__ import annotations

import pytest

from netsketch.sheet.look import (
    DARK,
    FIRST_HOP_COLOURS,
    LIGHT,
    Look,
    cividis,
    contrast,
    luminance,
    text_on,
)

LOOKS = pytest.mark.parametrize("look", [LIGHT, DARK], ids=["light", "dark"])


def test_contrast_is_that_of_wcag() -> None:
    # WCAG 2.2, "contrast ratio" and "relative luminance": black on white is 21 to 1.
    assert contrast("#000000", "#FFFFFF") == pytest.approx(21)
    assert contrast("#808080", "#808080") == 1
    assert luminance("#FF0000") == pytest.approx(0.2126)


def test_first_hops_take_the_colours_of_okabe_and_ito() -> None:
    # Okabe and Ito, "Color Universal Design" (2008), the palette's seven hues; from memory.
    assert sorted(FIRST_HOP_COLOURS) == sorted(
        ["#E69F00", "#56B4E9", "#009E73", "#F0E442", "#0072B2", "#D55E00", "#CC79A7"]
    )


@LOOKS
def test_texts_meet_aa(look: Look) -> None:
    for colour in (look.ink, look.soft, look.faded):
        for ground in (look.paper, look.plate, look.tag):
            assert contrast(colour, ground) >= 4.5, (colour, ground)
    assert contrast(look.paper, look.ink) >= 4.5
    assert contrast(look.focus_soft, look.ink) >= 4.5


@LOOKS
def test_bands_can_be_read_and_tell_seven_hops_apart(look: Look) -> None:
    assert len(set(look.first_hops)) == len(look.band_texts) == 7
    for ground, text in zip(look.first_hops, look.band_texts, strict=True):
        assert contrast(text, ground) >= 4.5


@LOOKS
def test_lines_that_mean_something_stand_out_more_than_the_faded(look: Look) -> None:
    faded = contrast(look.hairline, look.paper)
    for colour in (*look.first_hops, look.path, look.way_back, look.before, look.after):
        assert contrast(colour, look.paper) > faded + 0.3


@LOOKS
def test_colours_that_only_their_role_tells_apart_differ(look: Look) -> None:
    assert look.before != look.after
    assert look.path != look.way_back


def test_text_on_takes_the_better_of_dark_and_white() -> None:
    assert text_on("#FFFFFF") == "#111316"
    assert text_on("#0072B2") == "#FFFFFF"


def test_the_ramp_is_cividis_within_the_fit() -> None:
    # First and last entries of the published table (Nuñez, Anderton and Renslow, 2018) as
    # matplotlib distributes them: (0.0, 0.135, 0.305) and (0.996, 0.909, 0.218); from memory.
    for value, published in ((0, (0, 34, 78)), (1, (254, 232, 56))):
        found = cividis(value)
        channels = [int(found[i : i + 2], 16) for i in (1, 3, 5)]
        assert channels == pytest.approx(published, abs=16)
    assert cividis(-1) == cividis(0)
    assert cividis(9) == cividis(1)


def test_the_ramp_grows_lighter_all_the_way() -> None:
    steps = [luminance(cividis(i / 20)) for i in range(21)]
    assert steps == sorted(steps)
