"""What every test stands on: no screen needed, no settings kept, nothing left behind."""

from __future__ import annotations

import os
import threading
from collections.abc import Iterator
from pathlib import Path

import pytest

from tests import examples

examples.register()

if not os.environ.get("NETSKETCH_TEST_DISPLAY"):
    os.environ["QT_QPA_PLATFORM"] = "offscreen"

_HARMLESS = (
    "This plugin does not support propagateSizeHints()",
    "This plugin does not support raise()",
)
"""What the offscreen platform says of every window."""


def pytest_collection_modifyitems(config: pytest.Config, items: list[pytest.Item]) -> None:
    """Leave the slow tests out unless ``-m`` speaks of them."""
    if "slow" in config.option.markexpr:
        return
    slow = [item for item in items if item.get_closest_marker("slow")]
    if slow:
        config.hook.pytest_deselected(items=slow)
        items[:] = [item for item in items if not item.get_closest_marker("slow")]


def _needs_qt(request: pytest.FixtureRequest) -> bool:
    return request.node.get_closest_marker("gui") is not None


@pytest.fixture(autouse=True)
def own_folders(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Keep what a test stores for the user in a folder of its own."""
    # Not XDG_CACHE_HOME: the caches of kernels and fonts may be shared.
    for variable in ("XDG_CONFIG_HOME", "XDG_DATA_HOME", "XDG_STATE_HOME"):
        monkeypatch.setenv(variable, str(tmp_path / variable.lower()))


@pytest.fixture(autouse=True)
def own_settings(request: pytest.FixtureRequest, tmp_path: Path) -> None:
    """Give each gui test an empty QSettings."""
    if not _needs_qt(request):
        return
    from PySide6.QtCore import QSettings

    for form in (QSettings.Format.IniFormat, QSettings.Format.NativeFormat):
        QSettings.setPath(form, QSettings.Scope.UserScope, str(tmp_path / "settings"))


@pytest.fixture(autouse=True)
def nothing_left_behind(request: pytest.FixtureRequest) -> Iterator[None]:
    """Fail a gui test that leaves a window or a thread, or at which Qt warns."""
    if not _needs_qt(request):
        yield
        return
    from PySide6.QtCore import QCoreApplication, QEvent
    from PySide6.QtWidgets import QApplication

    request.getfixturevalue("qapp")
    log = request.getfixturevalue("qtlog")
    windows = set(QApplication.topLevelWidgets())
    threads = set(threading.enumerate())
    yield
    QCoreApplication.sendPostedEvents(None, QEvent.Type.DeferredDelete.value)
    left = [w for w in QApplication.topLevelWidgets() if w not in windows]
    assert not left, f"left open: {left}"
    running = {
        thread
        for thread in set(threading.enumerate()) - threads
        if not thread.name.startswith("netsketch-routing")  # kept for the next question
    }
    for thread in running:
        thread.join(5)
    assert not [t for t in running if t.is_alive()], f"left running: {running}"
    warnings = [r.message for r in log.records if r.type_name != "QtDebugMsg"]
    serious = [text for text in warnings if not text.startswith(_HARMLESS)]
    assert not serious, f"Qt warned: {serious}"
