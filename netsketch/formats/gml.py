"""GML, the Graph Modelling Language: read through networkx, written as plain ASCII."""

from __future__ import annotations

import re
from collections.abc import Iterator
from typing import Any, Final

import networkx as nx

from netsketch.formats import drawing, exports, imports, strict_json
from netsketch.formats.attributes import text, truth
from netsketch.formats.drawing import Attributes, Drawing
from netsketch.formats.errors import FormatError, Loaded, shortened
from netsketch.model import Plan, quoted

NAME: Final = "GML"

_WORDS = re.compile(r'"[^"]*"|#[^\n]*|\b(?:directed|multigraph)\b|\b(?:graph|edge)\s*\[')
_DIRECTED: Final = "netsketch_directed"


def loads(data: bytes, file: str) -> Loaded:
    """Return the plan drawn from a GML file. Raises :class:`FormatError`."""
    lines = _prepared(strict_json.decode_text(data, file)).split("\n")
    try:
        graph = nx.parse_gml(lines, label=None)
    except RecursionError as error:
        raise FormatError(file, "", "nested too deeply") from error
    except StopIteration as error:
        raise FormatError(file, f"line {len(lines)}", "ends too early") from error
    except (nx.NetworkXException, ValueError, LookupError, TypeError, AttributeError) as error:
        raise _refusal(str(error), file) from error
    if not all(type(n) is int for *_, n in graph.edges(data=drawing.POSITION)):
        raise FormatError(file, "", "not GML: quotation marks do not pair up")
    directed = truth(graph.graph.pop(_DIRECTED, False)) is True
    graph.graph.pop("netsketch_multigraph", None)
    drawn = drawing.of_networkx(graph, directed)
    return imports.to_loaded(_named_by_label(drawn), file, NAME)


def _refusal(message: str, file: str) -> FormatError:
    """Return the error for what networkx says, with its line as the place."""
    found = re.fullmatch(r"(.*) at \((\d+), \d+\)", message, re.DOTALL)
    reason, place = (found[1], f"line {found[2]}") if found else (message, "")
    if reason.startswith("cannot tokenize "):
        rest = reason.removeprefix("cannot tokenize ")
        return FormatError(file, place, f"not GML: cannot be read from {quoted(rest, 30)} on")
    return FormatError(file, place, f"not GML that can be read: {shortened(reason)}")


def _prepared(source: str) -> str:
    """Have networkx read a directed multigraph in any case, because it would lose which
    end of an undirected edge came first; number the edges, which it would reorder."""
    count = 0

    def replaced(word: re.Match[str]) -> str:
        nonlocal count
        found = word[0]
        if found[0] in '"#':
            return found
        if found.startswith("graph"):
            return "graph [ directed 1 multigraph 1 "
        if found.startswith("edge"):
            count += 1
            return f"edge [ {drawing.POSITION} {count} "
        return f"netsketch_{found}"

    return _WORDS.sub(replaced, source.replace("\r\n", "\n"))


def _named_by_label(drawn: Drawing) -> Drawing:
    """Name nodes by their labels where each has one of its own, else by their numbers."""
    labels = {key: text(attributes.get("label", "")) for key, attributes in drawn.nodes}
    if "" in labels.values() or len(set(labels.values())) != len(labels):
        return drawn
    return Drawing(
        graph=drawn.graph,
        nodes=[(labels[key], attributes) for key, attributes in drawn.nodes],
        edges=[
            drawing.DrawnEdge(labels[edge.source], labels[edge.target], edge.key, edge.attributes)
            for edge in drawn.edges
        ],
        directed=drawn.directed,
    )


# -- writing ----------------------------------------------------------------------------


def dumps(plan: Plan, file: str) -> tuple[bytes, list[str]]:
    """Return the bytes of the GML file for ``plan``; nothing is lost.

    Raises :class:`FormatError` for the one link id that networkx would not read back.
    """
    if "[]" in plan.links:
        raise FormatError(file, f"link {quoted('[]')}", "GML readers take this id for a list")
    drawn = exports.of_plan(plan)
    numbers = {key: number for number, (key, _) in enumerate(drawn.nodes)}
    lines = ["graph [", "  multigraph 1", *_members(drawn.graph, "  ")]
    for key, attributes in drawn.nodes:
        lines += ["  node [", f"    id {numbers[key]}", f"    label {_value(key)}"]
        lines += [*_members(attributes, "    "), "  ]"]
    for edge in drawn.edges:
        ends = [f"    source {numbers[edge.source]}", f"    target {numbers[edge.target]}"]
        lines += ["  edge [", *ends, f"    key {_value(edge.key)}"]
        lines += [*_members(edge.attributes, "    "), "  ]"]
    return "\n".join([*lines, "]\n"]).encode("ascii"), []


def _members(attributes: Attributes, margin: str) -> Iterator[str]:
    for name, value in attributes.items():
        yield f"{margin}{name} {_value(value)}"


def _value(value: Any) -> str:
    """Return ``value`` as GML has it: whole numbers of 32 bits, reals with a point,
    texts in ASCII with character references."""
    if isinstance(value, bool):
        return "1" if value else "0"
    if isinstance(value, int) and abs(value) < 2**31:
        return str(value)
    if isinstance(value, int | float):
        mantissa, exponent, power = repr(float(value)).partition("e")
        return f"{mantissa if '.' in mantissa else mantissa + '.0'}{exponent.upper()}{power}"
    return '"' + "".join(map(_character, str(value))) + '"'


def _character(character: str) -> str:
    plain = " " <= character <= "~" and character not in '&"'
    return character if plain else f"&#{ord(character)};"
