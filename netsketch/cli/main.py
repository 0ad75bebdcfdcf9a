"""The commands by name, and the one place where every failure becomes one line."""

from __future__ import annotations

import os
import sys
from argparse import ArgumentParser, Namespace, RawDescriptionHelpFormatter
from collections.abc import Sequence
from importlib import import_module
from typing import Final, Protocol, cast

from netsketch import __version__
from netsketch.cli.refusal import InputError
from netsketch.formats import FormatError
from netsketch.formats.errors import one_line

COMMANDS: Final = {
    "routes": "the forwarding table of one router",
    "path": "the equal-cost paths between two routers, and the way back",
    "trial": "every pair of routers that failures or cost changes move or cut off",
    "survey": "every failure of a kind, ranked by what it does",
    "load": "what every link carries of the demands",
    "cover": "what loop-free alternates protect (RFC 5286, RFC 7490)",
    "record": "the change record of failures or cost changes, to attach to a change ticket",
    "picture": "a picture of the plan, bare or with a reading",
    "convert": "the plan in another file format",
}
"""Command -> what it answers. Each is a module of this package."""


class Command(Protocol):
    """What the module of a command holds."""

    def add_options(self, parser: ArgumentParser) -> None:
        """Add what the command takes."""

    def run(self, options: Namespace) -> None:
        """Answer on standard output, or raise ``FormatError`` or ``InputError``."""


def main(argv: Sequence[str]) -> int:
    """Run the command in ``argv`` (without the program's name) and return its exit code:
    0 done, 1 the input was refused (one line on standard error), 2 bad usage.

    Ctrl-C goes through as ``KeyboardInterrupt``."""
    try:
        _run(argv)
        sys.stdout.flush()
    except SystemExit as left:  # argparse: 0 after --help and --version, 2 for bad usage
        return left.code if isinstance(left.code, int) else 2
    except (FormatError, InputError) as error:
        return refused(str(error))
    except BrokenPipeError:
        _give_output_up()
        return refused("standard output was closed before everything was written")
    except OSError as error:
        _give_output_up()
        return refused(f"{error.filename or 'standard output'}: {error.strerror or error}")
    except Exception as error:
        if os.environ.get("NETSKETCH_DEBUG"):
            raise
        what = f"{type(error).__name__}: {error}"
        return refused(f"internal error: {what} (NETSKETCH_DEBUG=1 shows where)")
    return 0


def _run(argv: Sequence[str]) -> None:
    name = argv[0] if argv else ""
    if name not in COMMANDS:
        window_options(argv)
        _general_parser().error("a file alone opens the window")
    command = cast(Command, import_module(f"netsketch.cli.{name}"))
    parser = ArgumentParser(
        prog=f"netsketch {name}", description=f"{COMMANDS[name].capitalize()}.", allow_abbrev=False
    )
    command.add_options(parser)
    command.run(parser.parse_args(argv[1:]))


def window_options(argv: Sequence[str]) -> Namespace:
    """Return what a call without a command asks for (``file``, or ``None``). Leaves with
    ``SystemExit`` after ``--help`` and ``--version``, and on bad usage."""
    parser = _general_parser()
    if len(argv) > 1 and not argv[0].startswith("-"):
        parser.error(f"there is no command {argv[0]!r}; there are {', '.join(COMMANDS)}")
    return parser.parse_args(argv)


def _general_parser() -> ArgumentParser:
    listed = "\n".join(f"  netsketch {name:8} {what}" for name, what in COMMANDS.items())
    parser = ArgumentParser(
        prog="netsketch",
        description="Plan the interior routing of a campus or wide-area network.",
        epilog=f"commands, which need no screen (netsketch COMMAND --help):\n{listed}",
        formatter_class=RawDescriptionHelpFormatter,
        allow_abbrev=False,
    )
    parser.add_argument("file", metavar="FILE", nargs="?", help="the plan to open in the window")
    parser.add_argument("--version", action="version", version=f"netsketch {__version__}")
    return parser


def refused(line: str) -> int:
    """Print why nothing was done, and return the exit code that says so."""
    print(one_line(f"netsketch: {line}"), file=sys.stderr)
    return 1


def _give_output_up() -> None:
    """Send what is still buffered nowhere, so that the end of the process does not try to
    write it again."""
    nowhere = os.open(os.devnull, os.O_WRONLY)
    os.dup2(nowhere, sys.__stdout__.fileno() if sys.__stdout__ else 1)
    os.close(nowhere)
