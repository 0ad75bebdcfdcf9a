from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from netsketch import formats
from netsketch.model import Drained, LinkCost, LinkState, Plan, edits
from tests.cli.conftest import Run
from tests.demos import demo_path
from tests.published import rfc2328_figure_2


def test_a_native_file_comes_out_byte_for_byte(run: Run, tmp_path: Path) -> None:
    out = tmp_path / "out.netsketch.json"
    assert run("convert", demo_path("water-utility"), out) == (0, "", "")
    assert out.read_bytes() == demo_path("water-utility").read_bytes()


@pytest.mark.parametrize("suffix", [".graphml", ".gml"])
def test_there_and_back_gives_the_same_plan(
    run: Run, tmp_path: Path, saved: Callable[[Plan], Path], suffix: str
) -> None:
    other, back = tmp_path / f"other{suffix}", tmp_path / "back.netsketch.json"
    assert run("convert", saved(rfc2328_figure_2()), other).code == 0
    assert run("convert", other, back).code == 0
    answers = [
        run("routes", file, "--from", "RT6", "--as", "json").json["routes"]
        for file in (other, back, saved(rfc2328_figure_2()))
    ]
    assert answers[0] == answers[1] == answers[2]


def test_what_an_import_assumed_is_said(run: Run, tmp_path: Path) -> None:
    file = tmp_path / "plain.gml"
    file.write_text(
        'graph [ node [ id 0 label "a" ] node [ id 1 label "b" ]'
        " edge [ source 0 target 1 weight 7 ] ]"
    )
    ended = run("convert", file, tmp_path / "out.netsketch.json")
    assert ended.code == 0
    assert f"{file}: note: " in ended.err
    assert "weight" in ended.err
    assert formats.read(tmp_path / "out.netsketch.json").plan.links.keys()


def test_changes_become_the_stored_trial(
    run: Run, saved: Callable[[Plan], Path], tmp_path: Path
) -> None:
    plan = rfc2328_figure_2()
    plan.apply(edits.try_changes(plan, [LinkState("RT3-RT6")], "try"))
    out = tmp_path / "out.netsketch.json"
    words = ("--drain", "RT10", "--cost", "RT5-RT7=20/30")
    assert run("convert", saved(plan), out, *words).code == 0
    assert formats.read(out).plan.trial.changes == (
        LinkState("RT3-RT6"),
        Drained("RT10"),
        LinkCost("RT5-RT7", 20, 30),
    )
