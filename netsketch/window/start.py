"""Starting the window: drawn first, the routing core loaded behind it."""

from __future__ import annotations

import sys
from functools import partial
from pathlib import Path

from PySide6.QtCore import Qt, QTimer
from PySide6.QtWidgets import QApplication

from netsketch.window.main_window import MainWindow


def open_window(file: Path | None) -> int:
    """Show the window, with ``file`` on the sheet where one is given, until it is closed;
    return the exit code."""
    app = QApplication.instance() or QApplication(sys.argv[:1])
    assert isinstance(app, QApplication)
    app.setApplicationName("netsketch")
    app.setDesktopFileName("netsketch")
    window = MainWindow()
    window.show()
    # One turn of the event loop paints the window; then there is time for the rest.
    QTimer.singleShot(0, window, lambda: begin(window, file))
    return app.exec()


def begin(window: MainWindow, file: Path | None) -> None:
    """Open the file that was asked for, then load the routing core: at the same time both
    would come late."""
    if file is None:
        window.desk.load_core()
        return
    load_next = partial(QTimer.singleShot, 0, window.desk.load_core)
    window.files.came.connect(load_next, Qt.ConnectionType.SingleShotConnection)
    window.files.open_path(file)
