from __future__ import annotations

import os

import pytest

from netsketch import screen
from netsketch.screen import QT_LIBRARIES, WAYLAND_LIBRARIES, X11_LIBRARIES, missing_library


@pytest.fixture(autouse=True)
def on_linux(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("sys.platform", "linux")


def test_no_screen_at_all() -> None:
    assert screen.refusal({}) == ("there is no screen (neither DISPLAY nor WAYLAND_DISPLAY is set)")


def test_offscreen_needs_no_display() -> None:
    assert screen.refusal({"QT_QPA_PLATFORM": "offscreen"}) == missing_library()
    assert screen.refusal({"QT_QPA_PLATFORM": "offscreen:size=1x1"}) == missing_library()


@pytest.mark.parametrize("platform", ["", "xcb"])
def test_a_display_nobody_serves(monkeypatch: pytest.MonkeyPatch, platform: str) -> None:
    monkeypatch.setenv("DISPLAY", "host.invalid:77")
    monkeypatch.delenv("WAYLAND_DISPLAY", raising=False)
    monkeypatch.setenv("QT_QPA_PLATFORM", platform)
    lacking = missing_library(QT_LIBRARIES) or missing_library(X11_LIBRARIES)
    expected = lacking or "the display 'host.invalid:77' cannot be opened"
    assert screen.refusal(os.environ) == expected


def test_a_wayland_display_nobody_serves(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("DISPLAY", raising=False)
    monkeypatch.delenv("QT_QPA_PLATFORM", raising=False)
    monkeypatch.setenv("WAYLAND_DISPLAY", "/nowhere/wayland-77")
    lacking = missing_library(QT_LIBRARIES) or missing_library(WAYLAND_LIBRARIES)
    expected = lacking or "the Wayland display '/nowhere/wayland-77' cannot be opened"
    assert screen.refusal(os.environ) == expected


def test_a_missing_library_is_named_with_its_package() -> None:
    line = missing_library({"libnosuchthing.so.9": "libnosuchthing9"})
    assert line is not None
    assert "libnosuchthing.so.9 is missing" in line
    assert "apt-get install libnosuchthing9" in line
    assert "\n" not in line


def test_elsewhere_nothing_is_looked_at(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("sys.platform", "darwin")
    assert screen.refusal({}) is None
    assert missing_library({"libnosuchthing.so.9": "libnosuchthing9"}) is None
