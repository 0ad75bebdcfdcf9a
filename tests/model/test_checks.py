"""How refusals quote what they refuse."""

from __future__ import annotations

import pytest

from netsketch.model import quoted


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("Quay-1", "“Quay-1”"),
        ("Tür 東 🛰", "“Tür 東 🛰”"),
        ("two\nlines\tand \x1b[0m", "“two lines and  [0m”"),
        ("half \ud800", "“half  ”"),
        ("x" * 60, f"“{'x' * 60}”"),
        ("x" * 61, f"“{'x' * 59}…”"),
        ("", "“”"),
    ],
)
def test_a_text_is_quoted_on_one_short_line(text: str, shown: str) -> None:
    assert quoted(text) == shown
    assert quoted(text).isprintable()
