"""What holds for the project as a whole: who imports whom, what a command loads, and that
the papers say what the program does."""

from __future__ import annotations

import re
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest
from importlinter.cli import EXIT_STATUS_SUCCESS, lint_imports

from netsketch import start
from netsketch.cli.main import COMMANDS
from tests.demos import demo_path

ROOT = Path(__file__).resolve().parent.parent

LOADED = """
import sys
from netsketch.start import main
code = main(sys.argv[1:])
found = sorted({name.partition(".")[0] for name in sys.modules})
print(*found, file=sys.stderr)
sys.exit(code)
"""

CALLS = {
    "routes": ["--from", "r1"],
    "path": ["--from", "r1", "--to", "r20"],
    "trial": ["--down", "l8"],
    "load": [],
    "cover": [],
    "survey": ["--of", "links"],
    "record": ["--down", "l8", "--no-pictures", "-o", "{out}.md"],
    "convert": ["{out}.gml"],
    "picture": ["-o", "{out}.svg"],
}


def test_imports_point_one_way(monkeypatch: pytest.MonkeyPatch) -> None:
    """The contracts in pyproject.toml, imports inside functions included."""
    monkeypatch.chdir(ROOT)
    assert lint_imports(no_cache=True) == EXIT_STATUS_SUCCESS


def loaded_by(command: str, tmp_path: Path) -> set[str]:
    """Return the packages in memory after a command has run in a process of its own."""
    words = [word.format(out=tmp_path / "out") for word in CALLS[command]]
    ended = subprocess.run(
        [sys.executable, "-c", LOADED, command, demo_path("harbour-campus"), *words],
        cwd=ROOT, capture_output=True, text=True, check=False, timeout=120,
    )  # fmt: skip
    assert ended.returncode == 0, ended.stderr
    return set(ended.stderr.split())


@pytest.mark.parametrize("command", [name for name in COMMANDS if name != "picture"])
def test_commands_run_without_qt(command: str, tmp_path: Path) -> None:
    loaded = loaded_by(command, tmp_path)
    assert "netsketch" in loaded
    assert not loaded & {"PySide6", "shiboken6"}


@pytest.mark.gui
def test_a_picture_loads_qt(tmp_path: Path) -> None:
    assert "PySide6" in loaded_by("picture", tmp_path)


def test_convert_does_not_load_the_routing_core(tmp_path: Path) -> None:
    assert "numba" not in loaded_by("convert", tmp_path)


@pytest.fixture(scope="module")
def settings() -> dict[str, object]:
    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    assert isinstance(project, dict)
    return project


def test_console_and_window_start_at_one_place(settings: dict[str, object]) -> None:
    assert settings["scripts"] == settings["gui-scripts"] == {"netsketch": "netsketch.start:run"}
    assert callable(start.run)


def test_the_licence_is_whole(settings: dict[str, object]) -> None:
    text = (ROOT / "LICENSE").read_text(encoding="utf-8")
    assert settings["license"] == "Apache-2.0"
    assert "Version 2.0, January 2004" in text
    assert "END OF TERMS AND CONDITIONS" in text


@pytest.mark.parametrize("name", ["README.md", "DEVELOPERS.md"])
def test_papers_point_at_what_is_there(name: str) -> None:
    text = (ROOT / name).read_text(encoding="utf-8")
    targets = re.findall(r"\]\(([^)#:]+)\)", text)
    assert [target for target in targets if not (ROOT / target).exists()] == []


def test_the_readme_explains_every_command() -> None:
    text = (ROOT / "README.md").read_text(encoding="utf-8")
    assert [name for name in COMMANDS if f"netsketch {name} " not in text] == []


def example_calls() -> list[list[str]]:
    """Return the commands of the README's examples, as words."""
    text = (ROOT / "README.md").read_text(encoding="utf-8")
    lines = re.findall(r"^netsketch (.+)$", text, re.MULTILINE)
    return [line.split() for line in lines if line.split()[0] in COMMANDS]


@pytest.mark.gui
def test_the_readmes_examples_run(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    calls = example_calls()
    assert {words[0] for words in calls} == set(COMMANDS)
    for words in calls:
        placed = [str(tmp_path / w) if w.startswith("out.") else w for w in words]
        placed = [str(ROOT / w) if w.startswith("demo_topologies/") else w for w in placed]
        assert start.main(placed) == 0, words
        assert capsys.readouterr().err == "", words
