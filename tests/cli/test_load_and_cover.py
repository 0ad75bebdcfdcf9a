from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from netsketch.analysis.load import load_of
from netsketch.model import Demand, Plan, edits
from netsketch.routing import compile_plan
from tests.cli.conftest import Run
from tests.demos import demo, demo_path
from tests.published import plan_of


def test_load_json_shape(run: Run, saved: Callable[[Plan], Path]) -> None:
    plan = plan_of("a-b 1, a-c 1, b-d 1, c-d 1")
    plan.apply(edits.set_demands(plan, [Demand(source="a", target="d", mbps=100)]))
    link = edits.replace(plan.links["a-b"], capacity_mbps=200)
    plan.apply(edits.change(plan, [link], "set capacity"))
    answer = run("load", saved(plan), "--as", "json").json
    assert answer["undelivered_mbps"] == 0
    assert answer["links"][0] == {
        "link": "a-b", "tail": "a", "head": "b", "load_mbps": 50.0, "utilisation": 0.25,
    }  # fmt: skip
    failed = run("load", saved(plan), "--down", "d", "--as", "json").json
    assert failed["undelivered_mbps"] == 100


def test_load_is_the_analysis(run: Run) -> None:
    plan = demo("water-utility")
    expected = load_of(plan, compile_plan(plan)).rows()
    answer = run("load", demo_path("water-utility"), "--as", "json").json
    found = [tuple(row.values()) for row in answer["links"]]
    assert found == expected


@pytest.mark.parametrize("form", ["text", "csv"])
def test_tables(run: Run, form: str) -> None:
    for command in ("load", "cover"):
        ended = run(command, demo_path("harbour-campus"), "--as", form)
        assert ended.code == 0
        assert "Gate-N" in ended.out


def test_cover_of_the_ring(run: Run, saved: Callable[[Plan], Path]) -> None:
    """RFC 7490, Figure 1: every route of the ring is protected with remote alternates,
    only those to the router opposite without."""
    file = saved(plan_of("S-E 1, E-D 1, D-C 1, C-B 1, B-A 1, A-S 1"))
    answer = run("cover", file, "--as", "json").json
    assert (answer["routes"], answer["link_protected"]) == (36, 12)
    assert answer["link_protected_with_remote"] == 36
    assert answer["routers"][0] == {
        "router": "S", "routes": 6, "link_protected": 2, "node_routes": 4, "node_protected": 2,
        "link_protected_with_remote": 6,
    }  # fmt: skip


def test_survey_tells_the_worst_utilisation(run: Run) -> None:
    file, plan = demo_path("water-utility"), demo("water-utility")
    failures = run("survey", file, "--of", "groups", "--as", "json").json["failures"]
    for failure in failures[:3]:
        (group,) = failure["failed"]
        loads = run("load", file, "--down", f"group:{group}", "--as", "json").json["links"]
        used = [row["utilisation"] for row in loads if row["utilisation"] is not None]
        assert failure["worst_utilisation"] == pytest.approx(max(used))
    assert len(failures) == len(plan.groups)
