from __future__ import annotations

from netsketch.reports.text import number, text_table


def test_columns_align_and_numbers_stand_right() -> None:
    rows = [("a", 5, 0.5), ("long name", 1000, None)]
    assert list(text_table(("name", "cost", "delay"), rows)) == [
        "name       cost  delay",
        "a             5    0.5",
        "long name  1000      –",
    ]


def test_wide_and_combining_letters_take_the_room_they_take() -> None:
    lines = list(text_table(("a", "b"), [("港", "x"), ("e\u0301", "x"), ("zz", "x")]))
    assert lines == ["a   b", "港  x", "e\u0301   x", "zz  x"]


def test_control_characters_become_blanks() -> None:
    assert list(text_table(("a",), [("x\x1b[2Jy",)]))[1] == "x [2Jy"


def test_no_rows() -> None:
    assert list(text_table(("a", "b"), [])) == ["a  b"]


def test_numbers_are_short() -> None:
    assert [number(x) for x in (0.15000000000000002, 12.0, 1 / 3)] == ["0.15", "12", "0.333333"]
