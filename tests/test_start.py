from __future__ import annotations

import pytest

import netsketch
from netsketch import start
from netsketch.cli.main import COMMANDS
from tests.demos import demo_path


@pytest.fixture
def no_screen(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("sys.platform", "linux")
    for variable in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(variable, raising=False)


def test_a_command_goes_to_the_commands(capsys: pytest.CaptureFixture[str]) -> None:
    words = ["routes", str(demo_path("harbour-campus")), "--from", "r1", "--as", "json"]
    assert start.main(words) == 0
    assert capsys.readouterr().out.startswith('{"from": "r1"')


def test_help_names_every_command(capsys: pytest.CaptureFixture[str]) -> None:
    assert start.main(["--help"]) == 0
    out = capsys.readouterr().out
    assert all(f"netsketch {name}" in out for name in COMMANDS)


@pytest.mark.parametrize("name", COMMANDS)
def test_every_command_has_help(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert start.main([name, "--help"]) == 0
    out = capsys.readouterr().out
    assert out.startswith(f"usage: netsketch {name}")
    assert all(option in out for option in ("--down", "--drain", "--cost"))


def test_version(capsys: pytest.CaptureFixture[str]) -> None:
    assert start.main(["--version"]) == 0
    assert capsys.readouterr().out == f"netsketch {netsketch.__version__}\n"


@pytest.mark.parametrize("words", [[], ["plan.netsketch.json"]])
@pytest.mark.usefixtures("no_screen")
def test_without_a_screen(words: list[str], capsys: pytest.CaptureFixture[str]) -> None:
    assert start.main(words) == 1
    out, err = capsys.readouterr()
    assert out == ""
    assert err.count("\n") == 1
    assert err.startswith("netsketch: there is no screen")
    assert all(name in err for name in COMMANDS)


@pytest.mark.parametrize("words", [["--windows"], ["plan.json", "other.json"]])
def test_bad_usage(words: list[str], capsys: pytest.CaptureFixture[str]) -> None:
    assert start.main(words) == 2
    assert capsys.readouterr().err.startswith("usage: netsketch")


def test_an_internal_error_is_one_line(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    def broken(options: object) -> None:
        raise RuntimeError("two\nlines")

    monkeypatch.setattr("netsketch.cli.convert.run", broken)
    monkeypatch.delenv("NETSKETCH_DEBUG", raising=False)
    assert start.main(["convert", "a", "b"]) == 1
    assert capsys.readouterr().err == (
        "netsketch: internal error: RuntimeError: two lines (NETSKETCH_DEBUG=1 shows where)\n"
    )
    monkeypatch.setenv("NETSKETCH_DEBUG", "1")
    with pytest.raises(RuntimeError):
        start.main(["convert", "a", "b"])
