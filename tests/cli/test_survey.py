from __future__ import annotations

import math
from collections.abc import Callable
from pathlib import Path

import pytest

from netsketch.model import Plan
from tests.cli.conftest import Run
from tests.demos import demo, demo_path
from tests.published import plan_of


def test_json_shape_worst_first(run: Run, saved: Callable[[Plan], Path]) -> None:
    """A triangle with a stub: the stub's link cuts off, the triangle's links move."""
    file = saved(plan_of("a-b 5, b-c 5, a-c 20, c-d 5"))
    answer = run("survey", file, "--of", "links", "--as", "json").json
    assert answer["of"] == "links"
    assert answer["failures"][0] == {
        "failed": ["c-d"],
        "moved": 0,
        "cut_off": 6,
        "worst_extra_cost": None,
        "worst_utilisation": None,
    }
    rest = {tuple(f["failed"]): f["worst_extra_cost"] for f in answer["failures"][1:]}
    # a-b: 5 becomes 20 + 5; b-c: 5 becomes 5 + 20; a-c carries nothing.
    assert rest == {("a-b",): 20, ("b-c",): 20, ("a-c",): None}


@pytest.mark.parametrize("kind", ["links", "routers", "groups", "link-pairs"])
def test_every_kind_counts_what_the_trial_counts(run: Run, kind: str) -> None:
    file, plan = demo_path("harbour-campus"), demo("harbour-campus")
    count = {
        "links": len(plan.links),
        "routers": len(plan.routers()),
        "groups": len(plan.groups),
        "link-pairs": math.comb(len(plan.links), 2),
    }[kind]
    failures = run("survey", file, "--of", kind, "--as", "json").json["failures"]
    assert len(failures) == count
    for failure in (failures[0], failures[len(failures) // 2]):
        words = [word for key in failure["failed"] for word in ("--down", key)]
        alone = run("trial", file, *words, "--as", "json").json
        assert (failure["moved"], failure["cut_off"]) == (alone["moved"], alone["cut_off"])


def test_on_top_of_changes(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 5, b-c 5, a-c 20"))
    words = ("survey", file, "--of", "links", "--down", "a-c", "--as", "json")
    failures = {f["failed"][0]: f["cut_off"] for f in run(*words).json["failures"]}
    assert failures == {"a-b": 4, "b-c": 4, "a-c": 0}


def test_text_and_csv(run: Run, saved: Callable[[Plan], Path]) -> None:
    words = ("survey", saved(plan_of("a-b 5")), "--of", "links")
    assert run(*words).out == (
        "Failures of links, the worst first\n"
        "\n"
        "failed  moved  cut off  worst extra cost  worst utilisation\n"
        "a-b         0        2                 –                  –\n"
    )
    assert run(*words, "--as", "csv").out == (
        "failed,moved,cut off,worst extra cost,worst utilisation\na-b,0,2,,\n"
    )
