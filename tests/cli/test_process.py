"""Commands as processes: what only a real standard output and a signal show."""

from __future__ import annotations

import io
import os
import signal
import subprocess
import sys
from pathlib import Path

import pytest

from netsketch.start import main
from tests.demos import demo_path

PROGRAM = [sys.executable, "-m", "netsketch"]
ROOT = Path(__file__).resolve().parents[2]


def finished(words: list[str | Path], **streams: object) -> subprocess.CompletedProcess[str]:
    """Run the program in a process; return how it ended."""
    return subprocess.run(
        [*PROGRAM, *map(str, words)],
        cwd=ROOT, text=True, check=False, timeout=120, stdin=subprocess.DEVNULL,
        **{"stdout": subprocess.PIPE, "stderr": subprocess.PIPE, **streams},
    )  # type: ignore[call-overload]  # fmt: skip


def test_a_closed_pipe_is_one_line() -> None:
    """``netsketch trial … | head -1`` on more than a pipe holds."""
    words = ["trial", demo_path("harbour-campus"), "--down", "g1", "--down", "r2"]
    reading, writing = os.pipe()
    os.close(reading)
    ended = finished(words, stdout=writing)
    os.close(writing)
    assert ended.returncode == 1
    assert ended.stderr == ("netsketch: standard output was closed before everything was written\n")


def test_a_full_disk_is_one_line() -> None:
    with Path("/dev/full").open("w") as full:
        ended = finished(["routes", demo_path("harbour-campus"), "--from", "r1"], stdout=full)
    assert ended.returncode == 1
    assert ended.stderr == "netsketch: standard output: No space left on device\n"


class Interrupted(io.StringIO):
    """A standard output at which somebody presses Ctrl-C."""

    def write(self, text: str) -> int:
        signal.raise_signal(signal.SIGINT)
        return super().write(text)


def test_ctrl_c_is_one_line(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setattr(sys, "stdout", Interrupted())
    assert main(["trial", str(demo_path("harbour-campus")), "--down", "g1"]) == 130
    assert capsys.readouterr().err == "netsketch: stopped\n"


STOPPED_WHILE_LOADING = """
import signal, sys
from netsketch.start import run

class Stop:
    def find_spec(self, name, path=None, target=None):
        if name == "netsketch.cli.main":
            signal.raise_signal(signal.SIGINT)

sys.meta_path.insert(0, Stop())
run()
"""


def test_ctrl_c_while_the_program_loads_is_one_line() -> None:
    ended = subprocess.run(
        [sys.executable, "-c", STOPPED_WHILE_LOADING],
        cwd=ROOT, text=True, check=False, timeout=120, capture_output=True,
    )  # fmt: skip
    assert (ended.returncode, ended.stdout, ended.stderr) == (130, "", "netsketch: stopped\n")


def test_names_that_the_terminal_cannot_show() -> None:
    environment = {**os.environ, "PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"}
    words = ["path", demo_path("harbour-campus"), "--from", "r1", "--to", "r20"]
    for form in ("text", "csv", "json"):
        ended = finished([*words, "--as", form], env=environment)
        assert (ended.returncode, ended.stderr) == (0, "")
