from __future__ import annotations

import importlib.util
import os
import struct
from pathlib import Path

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


EVERYWHERE = {
    "ld-linux-x86-64.so.2", "libc.so.6", "libdl.so.2", "libgcc_s.so.1", "libm.so.6",
    "libpthread.so.0", "librt.so.1", "libstdc++.so.6",
}  # fmt: skip
"""The C and C++ libraries: where they are missing, Python or numba fails before Qt does."""

DYNAMIC, NEEDED = 6, 1  # a section's type and an entry's tag in an ELF file (System V ABI)


def needed_by(file: Path) -> set[str]:
    """Return the libraries that a 64-bit little-endian ELF file asks the loader for."""
    data = file.read_bytes()
    (table,) = struct.unpack_from("<Q", data, 0x28)
    size, count = struct.unpack_from("<HH", data, 0x3A)
    # type, offset, length and linked section of each section
    sections = [struct.unpack_from("<4xI16xQQI", data, table + i * size) for i in range(count)]
    _, offset, length, linked = next(s for s in sections if s[0] == DYNAMIC)
    names = sections[linked][1]
    entries = struct.iter_unpack("<qQ", data[offset : offset + length])
    starts = [names + value for tag, value in entries if tag == NEEDED]
    return {data[start : data.index(b"\0", start)].decode() for start in starts}


def asked_of_the_system(*files: Path) -> set[str]:
    """Return what files of Qt and all they load from the same installation need besides."""
    own = {path.name: path for path in QT.parent.glob("*/**/*.so*") if path.parent in OWN_FOLDERS}
    asked: set[str] = set()
    waiting = list(files)
    while waiting:
        new = needed_by(waiting.pop()) - asked
        asked |= new
        waiting += [own[name] for name in new if name in own]
    return asked - own.keys() - EVERYWHERE


QT = Path(str(importlib.util.find_spec("PySide6").submodule_search_locations[0]))  # type: ignore[union-attr,index]
OWN_FOLDERS = {QT, QT / "Qt" / "lib", QT.parent / "shiboken6"}
PLATFORMS = QT / "Qt" / "plugins" / "platforms"


@pytest.mark.parametrize(
    ("plugin", "listed"),
    [
        ("libqoffscreen.so", {*QT_LIBRARIES}),
        ("libqxcb.so", {*QT_LIBRARIES, *X11_LIBRARIES}),
        ("libqwayland.so", {*QT_LIBRARIES, *WAYLAND_LIBRARIES}),
    ],
)
def test_the_lists_name_all_that_qt_asks_for(plugin: str, listed: set[str]) -> None:
    """Held against the Qt that is installed; nothing of it is loaded."""
    modules = [QT / f"Qt{name}.abi3.so" for name in ("Core", "Gui", "Svg", "Widgets")]
    asked = asked_of_the_system(PLATFORMS / plugin, *modules)
    assert asked
    assert asked <= listed
