from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from netsketch.model import Plan
from tests.cli.conftest import Run
from tests.published import plan_of, rfc2328_figure_2


def test_json_shape(run: Run, saved: Callable[[Plan], Path]) -> None:
    """RFC 2328, Figure 2: RT6 reaches RT3 at 6, RT3 reaches RT6 at 8, over one line."""
    file = saved(rfc2328_figure_2())
    answer = run("path", file, "--from", "RT6", "--to", "RT3", "--as", "json").json
    link = {"link": "RT3-RT6", "tail": "RT6", "head": "RT3", "share": 1.0}
    back = {"link": "RT3-RT6", "tail": "RT3", "head": "RT6", "share": 1.0}
    assert answer == {
        "from": "RT6",
        "to": "RT3",
        "cost": 6,
        "links": [link],
        "path_count": 1,
        "way_back": {"from": "RT3", "to": "RT6", "cost": 8, "links": [back], "path_count": 1},
    }


def test_equal_cost_paths_share(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 5, a-c 5, b-d 5, c-d 5"))
    answer = run("path", file, "--from", "a", "--to", "d", "--as", "json").json
    assert answer["path_count"] == 2
    assert {link["link"]: link["share"] for link in answer["links"]} == {
        "a-b": 0.5, "a-c": 0.5, "b-d": 0.5, "c-d": 0.5,
    }  # fmt: skip


def test_cut_off(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 5, b-c 5"))
    words = ("path", file, "--from", "a", "--to", "c", "--down", "b")
    answer = run(*words, "--as", "json").json
    assert (answer["cost"], answer["links"], answer["path_count"]) == (None, [], 0)
    assert run(*words).out == "Out: a to c: cut off\nBack: c to a: cut off\n"


def test_text_and_csv(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 5/7"))
    words = ("path", file, "--from", "a", "--to", "b")
    assert run(*words).out == (
        "Out: a to b: cost 5, 1 path\n"
        "Back: b to a: cost 7, 1 path\n"
        "\n"
        "way   link  tail  head  share\n"
        "out   a-b   a     b         1\n"
        "back  a-b   b     a         1\n"
    )
    assert run(*words, "--as", "csv").out == (
        "way,link,tail,head,share\nout,a-b,a,b,1.0\nback,a-b,b,a,1.0\n"
    )


@pytest.mark.parametrize("target", ["a", "s", "nowhere"])
def test_the_ends_are_two_routers(run: Run, saved: Callable[[Plan], Path], target: str) -> None:
    file = saved(plan_of("a-b 5, b-s 5", "s"))
    line = run("path", file, "--from", "a", "--to", target).refusal
    assert str(file) in line
    assert "--to" in line
    assert f"“{target}”" in line
