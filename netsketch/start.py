"""Where the program starts: a command goes to the commands, everything else to the window.

What it starts is loaded inside its functions, so that Ctrl-C meanwhile ends in words too.
"""

from __future__ import annotations

import io
import os
import sys
from collections.abc import Sequence
from pathlib import Path
from typing import Final

INTERRUPTED: Final = 130  # 128 and the number of SIGINT, as shells count


def main(argv: Sequence[str]) -> int:
    """Run ``netsketch`` with these words (without the program's name); return the exit
    code: 0 done, 1 refused (one line on standard error), 2 bad usage, 130 stopped by Ctrl-C."""
    try:
        return _begin(argv)
    except KeyboardInterrupt:
        print("netsketch: stopped", file=sys.stderr)
        return INTERRUPTED


def _begin(argv: Sequence[str]) -> int:
    from netsketch import compiled
    from netsketch.cli.main import COMMANDS, refused, window_options
    from netsketch.cli.main import main as run_command

    try:
        compiled.choose_folder(os.environ)
    except OSError as error:
        return refused(f"there is no folder for temporary files: {error}")
    if argv and argv[0] in COMMANDS:
        return run_command(argv)
    try:
        options = window_options(argv)
    except SystemExit as left:  # argparse: 0 after --help and --version, 2 for bad usage
        return left.code if isinstance(left.code, int) else 2
    return _open_window(Path(options.file) if options.file else None)


def _open_window(file: Path | None) -> int:
    from netsketch import screen
    from netsketch.cli.main import COMMANDS, refused

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
    sys.exit(main(sys.argv[1:]))
