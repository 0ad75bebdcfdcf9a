from __future__ import annotations

from pathlib import Path

import pytest

from netsketch import compiled


def test_the_usual_folders_are_left_to_numba() -> None:
    environment: dict[str, str] = {}
    compiled.choose_folder(environment)
    assert environment == {}


@pytest.fixture
def nowhere(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Neither the source's folder nor the user's can be made: a file is in the way."""
    in_the_way = tmp_path / "file"
    in_the_way.touch()
    monkeypatch.setattr(compiled, "BESIDE_SOURCE", in_the_way / "__pycache__")
    monkeypatch.setenv("XDG_CACHE_HOME", str(in_the_way))


@pytest.mark.usefixtures("nowhere")
def test_where_nothing_can_be_written_a_private_folder_serves() -> None:
    environment: dict[str, str] = {}
    compiled.choose_folder(environment)
    folder = Path(environment["NUMBA_CACHE_DIR"])
    assert folder.is_dir()
    assert folder.stat().st_mode & 0o077 == 0


@pytest.mark.usefixtures("nowhere")
def test_a_folder_that_was_chosen_stays() -> None:
    environment = {"NUMBA_CACHE_DIR": "/mine"}
    compiled.choose_folder(environment)
    assert environment == {"NUMBA_CACHE_DIR": "/mine"}
