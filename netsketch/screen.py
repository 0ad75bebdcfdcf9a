"""Whether the window can open here, asked before Qt is loaded: Qt ends the process with a
core dump where it finds no display or a library of the system is missing.

Libraries: what libQt6Gui and the platform plugins of PySide6 6.11 ask the system for
(their NEEDED entries); packages: Debian's names, which Ubuntu shares.
"""

from __future__ import annotations

import ctypes
import sys
from collections.abc import Callable, Mapping
from typing import Final

QT_LIBRARIES: Final = {
    "libEGL.so.1": "libegl1",
    "libGL.so.1": "libgl1",
    "libX11.so.6": "libx11-6",
    "libdbus-1.so.3": "libdbus-1-3",
    "libfontconfig.so.1": "libfontconfig1",
    "libfreetype.so.6": "libfreetype6",
    "libglib-2.0.so.0": "libglib2.0-0",
    "libgthread-2.0.so.0": "libglib2.0-0",
    "libxkbcommon.so.0": "libxkbcommon0",
    "libz.so.1": "zlib1g",
    "libzstd.so.1": "libzstd1",
}
"""What Qt needs wherever it draws, with the package that brings each."""

X11_LIBRARIES: Final = {
    "libX11-xcb.so.1": "libx11-xcb1",
    "libxcb.so.1": "libxcb1",
    "libxcb-cursor.so.0": "libxcb-cursor0",
    "libxcb-icccm.so.4": "libxcb-icccm4",
    "libxcb-image.so.0": "libxcb-image0",
    "libxcb-keysyms.so.1": "libxcb-keysyms1",
    "libxcb-randr.so.0": "libxcb-randr0",
    "libxcb-render-util.so.0": "libxcb-render-util0",
    "libxcb-render.so.0": "libxcb-render0",
    "libxcb-shape.so.0": "libxcb-shape0",
    "libxcb-shm.so.0": "libxcb-shm0",
    "libxcb-sync.so.1": "libxcb-sync1",
    "libxcb-util.so.1": "libxcb-util1",
    "libxcb-xfixes.so.0": "libxcb-xfixes0",
    "libxcb-xkb.so.1": "libxcb-xkb1",
    "libxkbcommon-x11.so.0": "libxkbcommon-x11-0",
}
"""What a window under X11 needs besides."""

WAYLAND_LIBRARIES: Final = {
    "libwayland-client.so.0": "libwayland-client0",
    "libwayland-cursor.so.0": "libwayland-cursor0",
}
"""What a window under Wayland needs besides."""


def refusal(environment: Mapping[str, str]) -> str | None:
    """Return why no window can open in this environment, in one line; ``None`` when
    nothing is known to be in the way. Only Linux is looked at."""
    if not sys.platform.startswith("linux"):
        return None
    platform = environment.get("QT_QPA_PLATFORM", "").partition(":")[0].partition(";")[0]
    wayland = platform.startswith("wayland") or (not platform and "WAYLAND_DISPLAY" in environment)
    x11 = platform == "xcb" or (not platform and "DISPLAY" in environment)
    if not platform and not (wayland or x11):
        return "there is no screen (neither DISPLAY nor WAYLAND_DISPLAY is set)"
    reason = missing_library(QT_LIBRARIES)
    if reason or not (wayland or x11):
        return reason
    reasons = [_under_wayland(environment)] if wayland else []
    reasons += [_under_x11(environment)] if x11 else []
    return None if None in reasons else reasons[-1]


def missing_library(needed: Mapping[str, str] = QT_LIBRARIES) -> str | None:
    """Return which library of ``needed`` (library -> package) the system lacks and what
    brings it, in one line; ``None`` when all are there, or off Linux."""
    if not sys.platform.startswith("linux"):
        return None
    for library, package in needed.items():
        try:
            ctypes.CDLL(library)
        except OSError:
            return (
                f"the system library {library} is missing; Debian and Ubuntu have it in the "
                f"package {package} (apt-get install {package}), other systems in one of a "
                "similar name"
            )
    return None


def _under_x11(environment: Mapping[str, str]) -> str | None:
    return missing_library(X11_LIBRARIES) or _unless(
        _x11_opens, f"the display {environment.get('DISPLAY', '')!r} cannot be opened"
    )


def _under_wayland(environment: Mapping[str, str]) -> str | None:
    name = environment.get("WAYLAND_DISPLAY", "")
    return missing_library(WAYLAND_LIBRARIES) or _unless(
        _wayland_opens, f"the Wayland display {name!r} cannot be opened"
    )


def _unless(opens: Callable[[], bool], reason: str) -> str | None:
    return None if opens() else reason


def _x11_opens() -> bool:
    xcb = ctypes.CDLL("libxcb.so.1")
    xcb.xcb_connect.restype = ctypes.c_void_p
    connection = ctypes.c_void_p(xcb.xcb_connect(None, None))
    opened = bool(xcb.xcb_connection_has_error(connection) == 0)
    xcb.xcb_disconnect(connection)
    return opened


def _wayland_opens() -> bool:
    client = ctypes.CDLL("libwayland-client.so.0")
    client.wl_display_connect.restype = ctypes.c_void_p
    connection = client.wl_display_connect(None)
    if connection is None:
        return False
    client.wl_display_disconnect(ctypes.c_void_p(connection))
    return True
