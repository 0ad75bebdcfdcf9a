"""Saving: the whole new file or the whole old one, never something between."""

from __future__ import annotations

import os
import stat
from pathlib import Path

import pytest

from netsketch.formats import FormatError
from netsketch.formats.atomic import write_bytes


def names_in(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir())


def test_a_file_is_made_and_replaced_with_nothing_left_beside_it(tmp_path: Path) -> None:
    path = tmp_path / "plan.json"
    write_bytes(path, b"one")
    write_bytes(path, b"two")
    assert path.read_bytes() == b"two"
    assert names_in(tmp_path) == ["plan.json"]


def test_permissions_stay_and_a_new_file_has_the_usual_ones(tmp_path: Path) -> None:
    path, other = tmp_path / "plan.json", tmp_path / "usual"
    write_bytes(path, b"one")
    other.touch()
    assert stat.S_IMODE(path.stat().st_mode) == stat.S_IMODE(other.stat().st_mode)
    path.chmod(0o640)
    write_bytes(path, b"two")
    assert stat.S_IMODE(path.stat().st_mode) == 0o640


def test_a_symbolic_link_goes_on_pointing_at_its_file(tmp_path: Path) -> None:
    (tmp_path / "far").mkdir()
    target, link = tmp_path / "far" / "plan.json", tmp_path / "link.json"
    target.write_bytes(b"one")
    link.symlink_to(target)
    write_bytes(link, b"two")
    assert link.is_symlink()
    assert target.read_bytes() == b"two"
    assert names_in(target.parent) == ["plan.json"]


@pytest.mark.parametrize("step", ["fsync", "replace"])
def test_the_old_file_stays_when_writing_fails(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, step: str
) -> None:
    path = tmp_path / "plan.json"
    path.write_bytes(b"one")

    def fail(*args: object) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(*((os, "fsync") if step == "fsync" else (Path, "replace")), fail)
    with pytest.raises(FormatError) as refused:
        write_bytes(path, b"two")
    assert str(refused.value) == f"{path}: cannot be written: No space left on device"
    assert path.read_bytes() == b"one"
    assert names_in(tmp_path) == ["plan.json"]


def test_places_that_cannot_be_written_are_refused(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    with pytest.raises(FormatError, match="it is a folder"):
        write_bytes(tmp_path, b"x")
    with pytest.raises(FormatError, match="No such file"):
        write_bytes(tmp_path / "missing" / "plan.json", b"x")
    path = tmp_path / "plan.json"
    path.write_bytes(b"one")
    monkeypatch.setattr(os, "access", lambda *args: False)  # whoever is root may write anyway
    with pytest.raises(FormatError, match="read-only"):
        write_bytes(path, b"two")
    assert path.read_bytes() == b"one"
