"""Commands run in this process; what they print, and how they end."""

from __future__ import annotations

import json
from collections.abc import Callable
from pathlib import Path
from typing import Any, NamedTuple

import pytest

from netsketch import formats
from netsketch.cli.main import main
from netsketch.model import Plan


class Ended(NamedTuple):
    """How a command ended."""

    code: int
    out: str
    err: str

    @property
    def json(self) -> Any:
        """The answer, of a command that ended well."""
        assert self.code == 0, self.err
        return json.loads(self.out)

    @property
    def refusal(self) -> str:
        """The one line of a refusal."""
        assert self.code == 1, self
        assert self.out == ""
        assert self.err.startswith("netsketch: "), self.err
        assert self.err.count("\n") == 1, self.err
        assert self.err.endswith("\n")
        assert "internal error" not in self.err
        return self.err.strip()


Run = Callable[..., Ended]


@pytest.fixture
def run(capsys: pytest.CaptureFixture[str]) -> Run:
    """Run a command: ``run("routes", file, "--from", "r1")``."""

    def command(*words: str | Path) -> Ended:
        code = main([str(word) for word in words])
        return Ended(code, *capsys.readouterr())

    return command


@pytest.fixture
def saved(tmp_path: Path) -> Callable[[Plan], Path]:
    """Save a plan as a native file and return where."""

    def save(plan: Plan) -> Path:
        path = tmp_path / "plan.netsketch.json"
        formats.write(plan, path)
        return path

    return save
