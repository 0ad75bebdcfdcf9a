from __future__ import annotations

import csv
import io
from collections.abc import Callable
from pathlib import Path

from netsketch.model import Plan
from tests.cli.conftest import Run
from tests.demos import demo_path
from tests.published import plan_of, rfc2328_figure_2

# RFC 2328, section 2.2, Table 2: RT6's routing table without areas. Ib is on RT6 itself.
TABLE_2 = {
    "N1": (10, "RT3"),
    "N2": (10, "RT3"),
    "N3": (7, "RT3"),
    "N4": (8, "RT3"),
    "Ib": (7, None),
    "Ia": (12, "RT10"),
    "N6": (8, "RT10"),
    "N7": (12, "RT10"),
    "N8": (10, "RT10"),
    "N9": (11, "RT10"),
    "N10": (13, "RT10"),
    "N11": (14, "RT10"),
    "H1": (21, "RT10"),
    "RT5": (6, "RT5"),
    "RT7": (8, "RT10"),
}


def test_rfc2328_table_2(run: Run, saved: Callable[[Plan], Path]) -> None:
    answer = run("routes", saved(rfc2328_figure_2()), "--from", "RT6", "--as", "json").json
    routes = {row["to"]: row for row in answer["routes"]}
    found = {
        to: (routes[to]["cost"], *(hop["router"] for hop in routes[to]["next_hops"]))
        for to in TABLE_2
    }
    assert found == TABLE_2


def test_json_shape(run: Run, saved: Callable[[Plan], Path]) -> None:
    """Every other router and every segment, sorted by id; nulls where there is nothing."""
    plan = plan_of("b-a 10, b-s 5, c-s 5", "s", alone="d")
    answer = run("routes", saved(plan), "--from", "b", "--as", "json").json
    assert answer == {
        "from": "b",
        "routes": [
            {
                "to": "a", "kind": "router", "cost": 10, "hops": 1, "delay_ms": None,
                "next_hops": [{"link": "b-a", "router": "a"}],
            },
            {
                "to": "c", "kind": "router", "cost": 5, "hops": 1, "delay_ms": None,
                "next_hops": [{"link": "b-s", "router": "c"}],
            },
            {
                "to": "d", "kind": "router", "cost": None, "hops": None, "delay_ms": None,
                "next_hops": [],
            },
            {
                "to": "s", "kind": "segment", "cost": 5, "hops": 1, "delay_ms": None,
                "next_hops": [{"link": "b-s", "router": None}],
            },
        ],
    }  # fmt: skip


def test_delays_are_least_and_most(run: Run) -> None:
    answer = run("routes", demo_path("harbour-campus"), "--from", "r1", "--as", "json").json
    delays = {row["to"]: row["delay_ms"] for row in answer["routes"]}
    assert delays["r26"] == [1.9, 2.1]


def test_csv(run: Run, saved: Callable[[Plan], Path]) -> None:
    ended = run("routes", saved(rfc2328_figure_2()), "--from", "RT6", "--as", "csv")
    rows = {row["to"]: row for row in csv.DictReader(io.StringIO(ended.out))}
    assert len(rows) == 11 + 13
    assert (rows["H1"]["cost"], rows["H1"]["next hops"]) == ("21", "RT10 over RT6-RT10")


def test_text_names_routers_and_aligns(run: Run) -> None:
    ended = run("routes", demo_path("harbour-campus"), "--from", "Tower-A")
    lines = ended.out.splitlines()
    assert lines[0] == "Routes from r1 Tower-A"
    assert lines[1] == ""
    at = lines[2].index("kind")
    assert all(line[at:].startswith(("router", "segment")) for line in lines[3:])
    assert len(lines) == 3 + 26 + 2
