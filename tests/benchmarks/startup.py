"""How long until the window can be used: ``python -m tests.benchmarks.startup [RUNS]``.

Each run is a process of its own. Measured from before the process starts until the demo
of 1,000 routers is drawn and takes a click, against a bare QMainWindow with a menu that is
painted, in turn; medians. The routing core loads behind the window: the time until the
first reading is given too.
"""

from __future__ import annotations

import os
import statistics
import subprocess
import sys
import time
from pathlib import Path

DEMO = Path(__file__).resolve().parents[2] / "demo_topologies" / "backbone-1000.netsketch.json"

BARE = """
from PySide6.QtWidgets import QApplication, QMainWindow
from PySide6.QtCore import QTimer
app = QApplication([])
window = QMainWindow()
window.menuBar().addMenu("File").addAction("Quit")
window.show()
QTimer.singleShot(0, lambda: (window.grab(), print("drawn", time.time()), app.quit()))
app.exec()
"""

WINDOW = """
import sys
from pathlib import Path
from PySide6.QtCore import QTimer, QSettings
from PySide6.QtWidgets import QApplication
app = QApplication([])
from netsketch.window.main_window import MainWindow
from netsketch.window.start import begin
window = MainWindow()
window.show()
QTimer.singleShot(0, window, lambda: begin(window, Path(sys.argv[1])))
state = set()
def look():
    if "drawn" not in state and len(window.desk.document.plan.nodes):
        window.grab()
        state.add("drawn")
        print("drawn", time.time())
        window.go_to(("router", window.desk.document.plan.routers()[0].id))
    if "drawn" in state and window.desk.outward is not None:
        print("read", time.time())
        window.close()
        app.quit()
timer = QTimer(interval=2)
timer.timeout.connect(look)
timer.start()
app.exec()
"""


def run(program: str) -> dict[str, float]:
    """Run a program in a process of its own; return seconds from its start by word."""
    environment = {**os.environ, "XDG_CONFIG_HOME": "/nonexistent"}
    start = time.time()
    done = subprocess.run(
        [sys.executable, "-c", "import time" + program, str(DEMO)],
        capture_output=True, text=True, env=environment, check=True,
    )  # fmt: skip
    lines = [line.split() for line in done.stdout.splitlines()]
    return {word: float(at) - start for word, at in lines}


def main(runs: int) -> None:
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    run(WINDOW)  # fills the caches, as an earlier start would have
    bare, window = [], []
    for _ in range(runs):
        bare.append(run(BARE)["drawn"])
        window.append(run(WINDOW))
    drawn = statistics.median(each["drawn"] for each in window)
    read = statistics.median(each["read"] for each in window)
    blank = statistics.median(bare)
    print(f"bare window {blank:.2f} s; 1,000 routers drawn {drawn:.2f} s ({drawn / blank:.1f}x)")
    print(f"first reading {read:.2f} s")


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 5)
