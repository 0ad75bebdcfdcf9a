"""What ``--down``, ``--drain``, ``--cost`` and a router's name mean, on every command."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from netsketch import formats
from netsketch.model import Link, LinkState, NodeState, Plan, Router, SharedRiskGroup, edits
from netsketch.model import Segment as Rail
from tests.cli.conftest import Run


def crowded() -> Plan:
    """Two routers called Quay, a router and a link called x, a group and a link called g."""
    plan = Plan()
    nodes = [
        Router(id="r1", name="Quay"),
        Router(id="r2", name="Quay"),
        Router(id="x", name="Lock"),
        Rail(id="s1", name="Yard"),
        SharedRiskGroup(id="g"),
        SharedRiskGroup(id="duct"),
    ]
    plan.apply(edits.add(plan, *nodes))
    links = [
        Link(id="x", source="r1", target="r2", cost=5, cost_back=5, groups=("duct",)),
        Link(id="g", source="r2", target="x", cost=5, cost_back=5, groups=("duct", "g")),
        Link(id="link:x", source="x", target="r1", cost=5, cost_back=5),
        Link(id="a=b", source="x", target="s1", cost=5, cost_back=0),
    ]
    plan.apply(edits.add(plan, *links))
    return plan


@pytest.fixture
def trial_of(run: Run, saved: Callable[[Plan], Path], tmp_path: Path) -> Callable[..., object]:
    """Return the trial that options make of the crowded plan, as ``convert`` stores it."""
    file, out = saved(crowded()), tmp_path / "out.netsketch.json"

    def changes(*words: str) -> object:
        ended = run("convert", file, out, *words)
        return formats.read(out).plan.trial.changes if ended.code == 0 else ended.refusal

    return changes


@pytest.mark.parametrize(
    ("word", "changes"),
    [
        ("a=b", (LinkState("a=b"),)),
        ("r1", (NodeState("r1"),)),
        ("s1", (NodeState("s1"),)),
        ("Lock", (NodeState("x"),)),
        ("Yard", (NodeState("s1"),)),
        ("duct", (LinkState("x"), LinkState("g"))),
        ("node:x", (NodeState("x"),)),
        ("link:g", (LinkState("g"),)),
        ("group:g", (LinkState("g"),)),
        ("link:x", (LinkState("link:x"),)),  # an exact id goes first
    ],
)
def test_down(trial_of: Callable[..., object], word: str, changes: object) -> None:
    assert trial_of("--down", word) == changes


@pytest.mark.parametrize(
    ("words", "reason"),
    [
        (("--down", "x"), "--down: “x” is the id of more than one thing: write link:x or node:x"),
        (("--down", "g"), "--down: “g” is the id of more than one thing: write link:g or group:g"),
        (("--down", "Quay"), "--down: “Quay” names more than one thing: r1, r2"),
        (("--down", "no"), "--down: there is no link, router, segment or shared-risk group “no”"),
        (("--down", "group:x"), "there is no link, router, segment or shared-risk group"),
        (("--drain", "Quay"), "--drain: “Quay” names more than one router: r1, r2"),
        (("--drain", "Yard"), "--drain: “Yard” is a segment, not a router"),
        (("--drain", "no"), "--drain: there is no router “no”"),
        (("--cost", "no=5"), "--cost: there is no link “no”"),
        (("--cost", "g=0"), "--cost: link “g”: cost 0 is outside 1 to 65535 (ospf)"),
        (("--cost", "g=-3"), "--cost: link “g”: cost -3 is outside 1 to 65535 (ospf)"),
        (("--cost", "g=65536"), "--cost: link “g”: cost 65536 is outside 1 to 65535 (ospf)"),
        (("--cost", "g=5/0"), "--cost: link “g”: cost 0 is outside 1 to 65535 (ospf)"),
        (("--cost", "g=1.5"), "--cost: link “g”: cost “1.5” is not a whole number"),
        (("--cost", "g=nan"), "--cost: link “g”: cost “nan” is not a whole number"),
        (("--cost", "g=1e3"), "--cost: link “g”: cost “1e3” is not a whole number"),
        (("--cost", "g=٣"), "--cost: link “g”: cost “٣” is not a whole number"),
        (("--cost", f"g={'9' * 5000}"), "--cost: link “g”: cost “999"),
        (("--cost", f"g={'9' * 50}"), "--cost: link “g”: cost with over 20 digits is outside"),
        (("--cost", "a=b=5/7"), "--cost: link “a=b”: leaving segment “s1” costs 0, not 7"),
    ],
)
def test_what_is_refused(trial_of: Callable[..., str], words: tuple[str, ...], reason: str) -> None:
    assert reason in trial_of(*words)


def test_later_costs_and_equals_signs(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(crowded())
    words = ("--cost", "a=b=6", "--cost", "a=b=7")
    answer = run("path", file, "--from", "x", "--to", "r2", *words, "--as", "json").json
    assert answer["cost"] == 5
    routes = run("routes", file, "--from", "Lock", *words, "--as", "json").json["routes"]
    assert {row["to"]: row["cost"] for row in routes}["s1"] == 7


COMMANDS = [
    ("routes", "--from", "x"),
    ("path", "--from", "x", "--to", "r2"),
    ("trial",),
    ("survey", "--of", "links"),
]


@pytest.mark.parametrize("form", ["text", "csv", "json"])
@pytest.mark.parametrize("words", COMMANDS, ids=lambda words: words[0])
def test_every_command_takes_every_change(
    run: Run, saved: Callable[[Plan], Path], words: tuple[str, ...], form: str
) -> None:
    file = saved(crowded())
    changes = ("--down", "link:g", "--drain", "r1", "--cost", "x=9/8")
    command, *rest = words
    plain = run(command, file, *rest, "--as", form)
    changed = run(command, file, *rest, *changes, "--as", form)
    assert (plain.code, changed.code) == (0, 0)
    assert plain.out != changed.out


def test_a_name_that_names_many_is_cut_short(run: Run, saved: Callable[[Plan], Path]) -> None:
    plan = Plan()
    plan.apply(edits.add(plan, *(Router(id=f"r{i}", name="Hut") for i in range(20))))
    line = run("routes", saved(plan), "--from", "Hut").refusal
    assert line.endswith("r0, r1, r2, r3, r4, r5, r6, r7 and 12 more")
