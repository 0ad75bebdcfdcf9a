from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

from netsketch.model import LinkState, Plan, edits
from tests.cli.conftest import Run
from tests.demos import demo_path
from tests.published import plan_of

SQUARE = "a-b 5, a-c 5, b-d 5, c-d 10"


def test_json_shape(run: Run, saved: Callable[[Plan], Path]) -> None:
    """A square: with b-d down, d is reached by c."""
    answer = run("trial", saved(plan_of(SQUARE)), "--down", "b-d", "--as", "json").json
    pairs = {(pair["from"], pair["to"]): pair for pair in answer.pop("pairs")}
    assert answer == {"moved": 4, "cut_off": 0, "restored": 0}
    assert set(pairs) == {tuple(pair) for pair in ("ad", "da", "bd", "db")}
    assert pairs["a", "d"] == {
        "from": "a",
        "to": "d",
        "outcome": "moved",
        "cost": [10, 15],
        "next_hops": [
            [{"link": "a-b", "router": "b"}],
            [{"link": "a-c", "router": "c"}],
        ],
    }


def test_cut_off_pairs_leave_out_the_failed_router(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 5, b-c 5"))
    answer = run("trial", file, "--down", "b", "--as", "json").json
    assert (answer["moved"], answer["cut_off"]) == (0, 2)
    assert {(p["from"], p["to"]) for p in answer["pairs"]} == {("a", "c"), ("c", "a")}
    assert answer["pairs"][0]["cost"] == [10, None]
    assert answer["pairs"][0]["next_hops"][1] == []


def test_without_changes_nothing_changes(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of(SQUARE))
    assert run("trial", file, "--as", "json").json["pairs"] == []
    assert run("trial", file).out == "0 moved, 0 cut off, 0 restored\n"


def test_a_stored_trial_counts_only_when_asked_for(run: Run, saved: Callable[[Plan], Path]) -> None:
    plan = plan_of(SQUARE)
    plan.apply(edits.try_changes(plan, [LinkState("b-d")], "try"))
    file = saved(plan)
    left_out = run("trial", file, "--as", "json")
    assert left_out.json["moved"] == 0
    assert "the trial stored in the file is left out" in left_out.err
    laid = run("trial", file, "--trial", "--as", "json")
    assert laid.json["moved"] > 0
    assert laid.err == ""


def test_a_group_takes_its_links_down(run: Run) -> None:
    file = demo_path("harbour-campus")
    whole = run("trial", file, "--down", "g3", "--as", "json").json
    links = [word for key in ("l37", "l38") for word in ("--down", key)]
    assert whole["cut_off"] > 0
    assert whole == run("trial", file, *links, "--as", "json").json


def test_cost_at_a_segments_end_stays_0(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-s 5, b-s 5", "s"))
    answer = run("trial", file, "--cost", "a-s=9", "--as", "json").json
    assert {(p["from"], p["to"]): p["cost"] for p in answer["pairs"]} == {("a", "b"): [5, 9]}


def test_a_cost_each_way(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 5"))
    answer = run("trial", file, "--cost", "a-b=7/9", "--as", "json").json
    assert {p["from"]: p["cost"] for p in answer["pairs"]} == {"a": [5, 7], "b": [5, 9]}


def test_csv_and_text(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 5"))
    assert run("trial", file, "--cost", "a-b=7/5", "--as", "csv").out == (
        "from,to,from name,to name,outcome,cost before,cost after,"
        "next hops before,next hops after\n"
        "a,b,a,b,moved,5,7,b over a-b,b over a-b\n"
    )
    text = run("trial", file, "--cost", "a-b=7/5").out.splitlines()
    assert text[0] == "1 moved, 0 cut off, 0 restored"
    assert text[3].split()[:7] == ["a", "b", "a", "b", "moved", "5", "7"]
