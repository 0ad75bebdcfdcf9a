"""The two doors: the format follows the suffix, then the content; originals come back."""

from __future__ import annotations

from pathlib import Path

import pytest

from netsketch.formats import FormatError, names, native, read, write
from netsketch.model import Plan, Router, edits
from tests.demos import demo

SUFFIXES = [".netsketch.json", ".json", ".graphml", ".xml", ".gml", ".GraphML", ".JSON"]


@pytest.fixture
def plan() -> Plan:
    return demo("harbour-campus")


@pytest.mark.parametrize("suffix", SUFFIXES)
def test_what_is_written_is_read_again_in_each_format(
    tmp_path: Path, plan: Plan, suffix: str
) -> None:
    path = tmp_path / f"harbour{suffix}"
    assert write(plan, path) == []
    assert read(path).plan == plan


@pytest.mark.parametrize("suffix", [".json", ".graphml", ".gml"])
def test_an_unknown_suffix_leaves_it_to_the_content(
    tmp_path: Path, plan: Plan, suffix: str
) -> None:
    write(plan, tmp_path / f"a{suffix}")
    for name in ("a", "a.txt", "a.bak"):
        (tmp_path / f"a{suffix}").rename(tmp_path / name)
        loaded = read(tmp_path / name)
        assert loaded.plan == plan
        (tmp_path / name).rename(tmp_path / f"a{suffix}")


def test_an_unknown_suffix_is_not_written(tmp_path: Path, plan: Plan) -> None:
    for name in ("a.pdf", "a"):
        with pytest.raises(FormatError, match=r"use \.netsketch\.json, \.graphml, \.gml"):
            write(plan, tmp_path / name)
    assert list(tmp_path.iterdir()) == []


def test_the_formats_are_listed_with_what_they_can_do() -> None:
    listed = {name: (suffixes, reads, writes) for name, suffixes, reads, writes in names()}
    assert listed["netsketch"] == ((".netsketch.json", ".json"), True, True)
    assert listed["node-link JSON"] == ((".json",), True, False)
    assert listed["GraphML"][1:] == listed["GML"][1:] == (True, True)


def test_an_unchanged_plan_is_saved_with_the_bytes_it_came_from(tmp_path: Path) -> None:
    data = b'\xef\xbb\xbf { "version":1,"format" :"netsketch",\r\n"nodes":[{"kind":"router",'
    data += b'"id":"\\u0061", "up": true }],"edges":[]} \n\n'
    path = tmp_path / "odd.json"
    path.write_bytes(data)
    loaded = read(path)
    assert loaded.original == data
    write(loaded.plan, path, loaded.original)
    assert path.read_bytes() == data
    inverse = loaded.plan.apply(edits.rename(loaded.plan, "a", "Mole"))
    write(loaded.plan, path, loaded.original)
    assert path.read_bytes() == native.dumps(loaded.plan) != data
    loaded.plan.apply(inverse)
    write(loaded.plan, path, loaded.original)
    assert path.read_bytes() == data


def test_an_original_that_is_no_native_file_is_not_written_back(tmp_path: Path) -> None:
    plan = Plan()
    plan.apply(edits.add(plan, Router(id="a")))
    write(plan, tmp_path / "a.json", b"<graphml/>")
    assert (tmp_path / "a.json").read_bytes() == native.dumps(plan)


def test_only_a_native_file_has_an_original(tmp_path: Path, plan: Plan) -> None:
    write(plan, tmp_path / "a.gml")
    write(plan, tmp_path / "a.json")
    assert read(tmp_path / "a.gml").original is None
    assert read(tmp_path / "a.json").original == (tmp_path / "a.json").read_bytes()
    assert read(tmp_path / "a.gml").format == "GML"
    assert read(tmp_path / "a.json").format == "netsketch"
