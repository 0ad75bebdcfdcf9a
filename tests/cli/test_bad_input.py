"""Bad input to every command: exit 1, one line that names file, place and reason, and
nothing written; bad usage: exit 2."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from netsketch import formats
from netsketch.cli.main import COMMANDS
from tests.cli.conftest import Run
from tests.published import plan_of

Words = Callable[[Path, Path], list[str | Path]]

CALLS: dict[str, Words] = {
    "routes": lambda file, out: ["routes", file, "--from", "a"],
    "path": lambda file, out: ["path", file, "--from", "a", "--to", "b"],
    "trial": lambda file, out: ["trial", file, "--down", "a-b"],
    "load": lambda file, out: ["load", file],
    "cover": lambda file, out: ["cover", file],
    "survey": lambda file, out: ["survey", file, "--of", "links"],
    "record": lambda file, out: [
        "record", file, "--down", "a-b", "-o", out.with_suffix(".md"), "--no-pictures",
    ],
    "picture": lambda file, out: ["picture", file, "-o", out.with_suffix(".svg")],
    "convert": lambda file, out: ["convert", file, out.with_suffix(".gml")],
}  # fmt: skip

BILLION_LAUGHS = (
    b'<?xml version="1.0"?><!DOCTYPE graphml [<!ENTITY a "ha"><!ENTITY b "&a;&a;&a;&a;">]>'
    b'<graphml xmlns="http://graphml.graphdrawing.org/xmlns"><graph edgedefault="undirected">'
    b'<node id="&b;"/></graph></graphml>'
)
OUTSIDE_FILE = (
    b'<?xml version="1.0"?><!DOCTYPE graphml [<!ENTITY x SYSTEM "file:///etc/hostname">]>'
    b'<graphml xmlns="http://graphml.graphdrawing.org/xmlns"><graph edgedefault="undirected">'
    b'<node id="&x;"/></graph></graphml>'
)
WHOLE = formats.native.dumps(plan_of("a-b 5, b-c 5"))
NODES = b'"nodes": [{"id": "a", "kind": "router"}, {"id": "b", "kind": "router"}]'

# name of the file, its bytes, what the line must say beside the name of the file
BAD_FILES: dict[str, tuple[str, bytes, str]] = {
    "empty": ("p.netsketch.json", b"", ""),
    "junk": ("p.netsketch.json", b"\x00\xff\xfejunk", ""),
    "junk of no known kind": ("p.bin", b"\x00\x01\x02", "not a file that can be read"),
    "truncated": ("p.netsketch.json", WHOLE[: len(WHOLE) // 2], "line"),
    "truncated XML": ("p.graphml", b"<graphml><graph><node", "line"),
    "truncated GML": ("p.gml", b"graph [ node [ id 0", ""),
    "entities": ("p.graphml", BILLION_LAUGHS, "ntit"),
    "an outside file": ("p.graphml", OUTSIDE_FILE, "ntit"),
    "a list": ("p.json", b"[1, 2]", ""),
    "deeply nested": ("p.json", b"[" * 100_000, ""),
    "a newer version": (
        "p.netsketch.json", WHOLE.replace(b'"version": 1', b'"version": 99'), "99",
    ),
    "a cost of 0": (
        "p.netsketch.json",
        b'{"format": "netsketch", "version": 1, ' + NODES
        + b', "edges": [{"source": "a", "target": "b", "key": "l1", "cost": 0}]}',
        "l1",
    ),
}  # fmt: skip


@pytest.mark.parametrize("bad", BAD_FILES)
@pytest.mark.parametrize("command", CALLS)
def test_bad_files(run: Run, tmp_path: Path, command: str, bad: str) -> None:
    name, data, reason = BAD_FILES[bad]
    file = tmp_path / name
    file.write_bytes(data)
    line = run(*CALLS[command](file, tmp_path / "out")).refusal
    assert line.startswith(f"netsketch: {file}: ")
    assert reason in line
    assert list(tmp_path.iterdir()) == [file]


@pytest.mark.parametrize("command", CALLS)
def test_no_file_and_a_folder(run: Run, tmp_path: Path, command: str) -> None:
    gone, out = tmp_path / "gone.netsketch.json", tmp_path / "out"
    assert f"{gone}: cannot be read: " in run(*CALLS[command](gone, out)).refusal
    assert f"{tmp_path}: it is a folder" in run(*CALLS[command](tmp_path, out)).refusal
    odd = run(*CALLS[command](Path("a\0b\nc"), out)).refusal
    assert "cannot be read" in odd
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize(
    "words",
    [
        ["routes", "--from", "nobody"],
        ["path", "--from", "nobody", "--to", "a"],
        ["path", "--from", "a", "--to", "nobody"],
        ["trial", "--drain", "nobody"],
        ["survey", "--of", "links", "--drain", "nobody"],
        ["record", "-o", "out.md", "--down", "a-b", "--from", "nobody"],
        ["picture", "-o", "out.svg", "--from", "nobody"],
    ],
)
def test_unknown_routers(run: Run, tmp_path: Path, words: list[str]) -> None:
    file = tmp_path / "plan.netsketch.json"
    file.write_bytes(WHOLE)
    line = run(words[0], file, *words[1:]).refusal
    assert line.startswith(f"netsketch: {file}: --")
    assert line.endswith("there is no router “nobody”")


@pytest.mark.parametrize(
    ("out", "reason"),
    [
        ("none/out.gml", "cannot be written"),
        ("out.txt", "not a format that can be written"),
        ("out", "not a format that can be written"),
        (".", "not a format that can be written"),
        ("folder.gml", "cannot be written"),
    ],
)
def test_convert_to_where_it_cannot(run: Run, tmp_path: Path, out: str, reason: str) -> None:
    file, target = tmp_path / "plan.netsketch.json", tmp_path / out
    file.write_bytes(WHOLE)
    (tmp_path / "folder.gml").mkdir()
    line = run("convert", file, target).refusal
    assert line.startswith(f"netsketch: {target}: ")
    assert reason in line
    assert sorted(p.name for p in tmp_path.iterdir()) == ["folder.gml", file.name]


def test_control_characters_do_not_reach_the_terminal(run: Run, tmp_path: Path) -> None:
    plan = plan_of("a-b 5")
    file = tmp_path / "plan.netsketch.json"
    file.write_bytes(formats.native.dumps(plan).replace(b'"name": "b"', b'"name": "\\u001b[2J"'))
    assert "\x1b" not in run("routes", file, "--from", "a").out
    assert "\x1b" not in run("routes", file, "--from", "\x1b[2J\n").refusal
    assert "\x1b" not in run("path", file, "--from", "a", "--to", "b").out


USAGE = [
    [],
    ["--nothing"],
    ["plan.json"],
    ["route", "plan.json"],
    ["routes"],
    ["routes", "plan.json"],
    ["routes", "plan.json", "--from", "a", "--as", "html"],
    ["routes", "plan.json", "--from", "a", "--dow", "b"],
    ["path", "plan.json", "--from", "a"],
    ["trial"],
    ["trial", "plan.json", "--cost", "l1"],
    ["trial", "plan.json", "--cost", "=5"],
    ["trial", "plan.json", "--cost", "l1="],
    ["survey", "plan.json"],
    ["survey", "plan.json", "--of", "moons"],
    ["record", "plan.json"],
    ["picture", "plan.json"],
    ["convert", "plan.json"],
    ["convert", "a.json", "b.gml", "c.gml"],
]


@pytest.mark.parametrize("words", USAGE, ids=" ".join)
def test_bad_usage(run: Run, words: list[str]) -> None:
    ended = run(*words)
    assert ended.code == 2
    assert ended.out == ""
    assert ended.err.startswith("usage: netsketch")
    assert "Traceback" not in ended.err


def test_every_command_is_called_here() -> None:
    assert set(CALLS) == set(COMMANDS)
