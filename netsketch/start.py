"""Where the program starts: a command goes to the commands, everything else to the window."""

from __future__ import annotations

import io
import os
import sys
from collections.abc import Sequence
from pathlib import Path

from netsketch import compiled, screen
from netsketch.cli.main import COMMANDS, refused, window_options
from netsketch.cli.main import main as run_command


def main(argv: Sequence[str]) -> int:
    """Run ``netsketch`` with these words (without the program's name); return the exit
    code: 0 done, 1 refused (one line on standard error), 2 bad usage."""
    if argv and argv[0] in COMMANDS:
        return run_command(argv)
    try:
        options = window_options(argv)
    except SystemExit as left:  # argparse: 0 after --help and --version, 2 for bad usage
        return left.code if isinstance(left.code, int) else 2
    return _open_window(Path(options.file) if options.file else None)


def _open_window(file: Path | None) -> int:
    reason = screen.refusal(os.environ)
    if reason is not None:
        *most, last = COMMANDS
        return refused(f"{reason}; the commands {', '.join(most)} and {last} need no screen")
    try:
        from netsketch.window.start import open_window
    except ImportError as error:
        if os.environ.get("NETSKETCH_DEBUG"):
            raise
        return refused(f"the window cannot be loaded: {error}")
    return open_window(file)


def run() -> None:
    """Run the program with the words it was called with, and leave with its exit code."""
    if isinstance(sys.stdout, io.TextIOWrapper):  # a name the terminal cannot show is no failure
        sys.stdout.reconfigure(errors="backslashreplace")
    try:
        compiled.choose_folder(os.environ)
    except OSError as error:
        sys.exit(refused(f"there is no folder for temporary files: {error}"))
    sys.exit(main(sys.argv[1:]))
