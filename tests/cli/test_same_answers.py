"""The commands' JSON against networkx on open data and random plans, trials included."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings

from netsketch.cli.main import main
from netsketch.formats import write
from netsketch.model import LinkState, Plan, Trial
from tests import open_data, reference, strategies


def ask(capsys: pytest.CaptureFixture[str], *words: str) -> dict:  # type: ignore[type-arg]
    assert main([*words, "--as", "json"]) == 0
    found: dict = json.loads(capsys.readouterr().out)  # type: ignore[type-arg]
    return found


def hops(raw: list[dict[str, str | None]]) -> set[tuple[str | None, str | None]]:
    return {(hop["link"], hop["router"]) for hop in raw}


def assert_routes(capsys: pytest.CaptureFixture[str], plan: Plan, file: Path, *more: str) -> None:
    tried = plan
    if more:
        tried = reference.with_trial(plan, Trial((LinkState(more[1].removeprefix("link:")),)))
    for source, answer in reference.answers(tried).items():
        found = ask(capsys, "routes", str(file), f"--from={source}", *more)
        assert found["from"] == source
        assert [row["to"] for row in found["routes"]] == sorted(
            node.id for node in plan.nodes if node.id != source
        )
        for row in found["routes"]:
            assert row["cost"] == answer.distance.get(row["to"])
            assert hops(row["next_hops"]) == answer.next_hops.get(row["to"], set())


def assert_trial(capsys: pytest.CaptureFixture[str], plan: Plan, file: Path, link: str) -> None:
    tried = reference.with_trial(plan, Trial((LinkState(link),)))
    expected = reference.outcomes(plan, tried)
    found = ask(capsys, "trial", str(file), "--down", f"link:{link}")
    assert {(row["from"], row["to"]): row["outcome"] for row in found["pairs"]} == expected
    words = list(expected.values())
    assert (found["moved"], found["cut_off"]) == (words.count("moved"), words.count("cut off"))
    old, new = reference.answers(plan), reference.answers(tried)
    for row in found["pairs"]:
        for answers, cost, listed in zip((old, new), row["cost"], row["next_hops"], strict=True):
            answer = answers[row["from"]]
            assert cost == answer.distance.get(row["to"])
            assert hops(listed) == answer.next_hops.get(row["to"], set())


@pytest.mark.parametrize("key", ["sndlib/abilene", "sndlib/polska", "topozoo/Arpanet19706"])
def test_on_open_data(key: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    plan = open_data.plan_of(key, "ties")
    file = tmp_path / "plan.netsketch.json"
    write(plan, file)
    link = next(iter(plan.links)).id
    assert_routes(capsys, plan, file)
    assert_routes(capsys, plan, file, "--down", f"link:{link}")
    assert_trial(capsys, plan, file, link)


@settings(
    deadline=None,
    max_examples=25,
    suppress_health_check=[HealthCheck.function_scoped_fixture],
)
@given(plan=strategies.plans(with_trial=False, max_nodes=6))
def test_on_random_plans(plan: Plan, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "plan.netsketch.json"
    write(plan, file)
    assert_routes(capsys, plan, file)
    for link in plan.links.keys()[:2]:
        assert_trial(capsys, plan, file, link)
