from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from netsketch.model import Plan
from tests.cli.conftest import Run
from tests.demos import demo_path
from tests.published import plan_of

pytestmark = pytest.mark.gui

STARTS = {".png": b"\x89PNG", ".svg": b"<?xml", ".pdf": b"%PDF"}


@pytest.mark.parametrize("suffix", STARTS)
def test_the_suffix_says_what_is_written(run: Run, tmp_path: Path, suffix: str) -> None:
    out = tmp_path / f"picture{suffix}"
    assert run("picture", demo_path("harbour-campus"), "-o", out) == (0, "", "")
    assert out.read_bytes().startswith(STARTS[suffix])


def test_a_reading_has_its_title_and_legend(run: Run, tmp_path: Path) -> None:
    file, out = demo_path("harbour-campus"), tmp_path / "picture.svg"
    texts = []
    for words in ([], ["--from", "Tower-A"], ["--from", "r1", "--to", "r20"]):
        assert run("picture", file, "-o", out, *words).code == 0
        texts.append(out.read_text(encoding="utf-8"))
    bare, routes, path = texts
    assert "Routes from Tower-A" not in bare
    assert "Routes from Tower-A" in routes
    assert "Path from Tower-A to Ferry-2" in path


def test_dark_and_trial_show(run: Run, tmp_path: Path) -> None:
    file, out = demo_path("harbour-campus"), tmp_path / "picture.svg"
    texts = set()
    for words in ([], ["--dark"], ["--down", "l8"]):
        assert run("picture", file, "-o", out, *words).code == 0
        texts.add(out.read_text(encoding="utf-8"))
    assert len(texts) == 3


def test_refusals(run: Run, saved: Callable[[Plan], Path], tmp_path: Path) -> None:
    file = saved(plan_of("a-b 5"))
    wrong = tmp_path / "picture.txt"
    assert f"{wrong}: a picture is one of" in run("picture", file, "-o", wrong).refusal
    assert not wrong.exists()
    nowhere = tmp_path / "none" / "picture.svg"
    assert f"{nowhere}: cannot be written" in run("picture", file, "-o", nowhere).refusal
    line = run("picture", file, "-o", tmp_path / "p.svg", "--to", "a").refusal
    assert "--to: a path needs --from" in line
