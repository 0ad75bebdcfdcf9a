"""Print how large files and functions are, so that a giant grows under everyone's eyes.

Lists files over 400 lines and functions over 60 (without their docstring), after the
medians. It reports; it refuses nothing.
"""

from __future__ import annotations

import ast
import statistics
from collections.abc import Iterator
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
LONG_FILE, LONG_FUNCTION = 400, 60


def functions(tree: ast.Module) -> Iterator[tuple[str, int]]:
    """Yield the name and length of every function."""
    for node in ast.walk(tree):
        if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef):
            lines = (node.end_lineno or node.lineno) - node.lineno + 1
            first = node.body[0]
            if ast.get_docstring(node) is not None:
                lines -= (first.end_lineno or first.lineno) - first.lineno + 1
            yield node.name, lines


def report(folder: str) -> None:
    """Print the sizes under one folder."""
    files: list[int] = []
    lengths: list[int] = []
    long: list[str] = []
    for path in sorted((ROOT / folder).rglob("*.py")):
        text = path.read_text(encoding="utf-8")
        name = path.relative_to(ROOT)
        lines = len(text.splitlines())
        files += [lines] if lines else []
        long += [f"  {name}: {lines} lines"] if lines > LONG_FILE else []
        for function, length in functions(ast.parse(text)):
            lengths.append(length)
            if length > LONG_FUNCTION:
                long.append(f"  {name}: {function}: {length} lines")
    print(
        f"{folder}: {sum(files)} lines; files {_spread(files)}; functions {_spread(lengths)}",
        *long,
        sep="\n",
    )


def _spread(sizes: list[int]) -> str:
    ninth = statistics.quantiles(sizes, n=10)[8]
    return f"{len(sizes)}, median {statistics.median(sizes):.0f}, 90 % under {ninth:.0f}"


if __name__ == "__main__":
    report("netsketch")
    report("tests")
