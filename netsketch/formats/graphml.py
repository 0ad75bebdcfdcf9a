"""GraphML (graphml.graphdrawing.org): read through networkx, behind a parser that refuses
document types and entities; written with every edge's ends and order as in the plan."""

from __future__ import annotations

import re
from typing import Any, Final
from xml.etree.ElementTree import Element, ParseError, SubElement, indent, tostring

import defusedxml
import networkx as nx
from defusedxml.ElementTree import fromstring
from networkx.readwrite.graphml import GraphMLReader

from netsketch.formats import drawing, exports, imports, limits
from netsketch.formats.drawing import Attributes, Drawing
from netsketch.formats.errors import FormatError, Loaded, shortened
from netsketch.model import Plan, quoted

NAME: Final = "GraphML"
NAMESPACE: Final = "http://graphml.graphdrawing.org/xmlns"
_NOT_XML = re.compile("[^\t\n\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")
"""Characters that XML 1.0 (2.2) cannot hold, and the carriage return, which it changes."""


def loads(data: bytes, file: str) -> Loaded:
    """Return the plan drawn from a GraphML file. Raises :class:`FormatError`."""
    root = _parse(data, file)
    _prepare_names(root)
    _check_types(root, file)
    graphs = root.findall(_tag("graph"))
    if root.tag != _tag("graphml") or len(graphs) != 1:
        raise FormatError(file, "", f"not GraphML with one graph: it has {len(graphs)}")
    directed = _settle_direction(graphs[0], file)
    keys = _prepare(graphs[0], file)
    return imports.to_loaded(_drawing(root, graphs[0], keys, directed, file), file, NAME)


def _tag(name: str) -> str:
    return f"{{{NAMESPACE}}}{name}"


def _parse(data: bytes, file: str) -> Element:
    try:
        root: Element = fromstring(data, forbid_dtd=True)
    except defusedxml.DefusedXmlException as error:
        reason = "it declares a document type or entities, which are not read"
        raise FormatError(file, "", reason) from error
    except ParseError as error:
        line, column = error.position
        reason = f"not XML: {str(error).partition(':')[0]}"
        raise FormatError(file, f"line {line}, column {column + 1}", reason) from error
    except (ValueError, LookupError) as error:
        reason = f"its encoding cannot be read: {shortened(str(error))}"
        raise FormatError(file, "", reason) from error
    waiting = [(root, 0)]
    while waiting:
        element, depth = waiting.pop()
        if depth > limits.NESTING:
            raise FormatError(file, "", f"nested more than {limits.NESTING} deep")
        waiting.extend((child, depth + 1) for child in element)
    return root


def _prepare_names(root: Element) -> None:
    """Give elements without a namespace GraphML's, and keys without a type the usual one."""
    for element in root.iter():
        if isinstance(element.tag, str) and not element.tag.startswith("{"):
            element.tag = _tag(element.tag)
    for key in root.iter(_tag("key")):
        if key.get("attr.type") is None and key.get("yfiles.type") is None:
            key.set("attr.type", "string")


def _check_types(root: Element, file: str) -> None:
    """Check every value against the type of its key, and take whole numbers for reals: a
    cost of 1.5 is then refused with its link, like any other."""
    types: dict[str | None, tuple[str, str]] = {}
    for key in root.iter(_tag("key")):
        kind = key.get("attr.type", "string")
        if kind not in _TYPES:
            raise FormatError(file, f"key {quoted(key.get('id', ''))}", f"type {quoted(kind)}")
        types[key.get("id")] = key.get("attr.name", ""), kind
        if _TYPES[kind] is float:
            key.set("attr.type", "double")
    for element in root.iter():
        for data in element.findall(_tag("data")):
            name, kind = types.get(data.get("key"), ("", "string"))
            if data.text is not None and len(data) == 0 and not _fits(data.text, kind):
                reason = f"{name}: {quoted(data.text)} is not of type {kind}"
                raise FormatError(file, _place_of(element), reason)


_TYPES: Final[dict[str, type]] = {
    "string": str,
    "boolean": bool,
    **dict.fromkeys(("int", "integer", "long", "float", "double"), float),
}


def _fits(text: str, kind: str) -> bool:
    if _TYPES[kind] is bool:
        return text.lower() in ("true", "false", "0", "1")
    try:
        _TYPES[kind](text)
    except ValueError:
        return False
    return True


def _place_of(element: Element) -> str:
    """Return the words for a node or an edge."""
    if element.tag == _tag("edge"):
        ends = (quoted(element.get(end, "")) for end in ("source", "target"))
        return "link from {} to {}".format(*ends)
    return f"node {quoted(element.get('id', ''))}" if element.tag == _tag("node") else "graph"


def _settle_direction(graph: Element, file: str) -> bool:
    """Return whether the graph is directed. Afterwards networkx takes it for directed in
    any case: it would lose which end of an undirected edge came first."""
    usual = graph.get("edgedefault", "undirected") == "directed"
    found = set()
    for edge in graph.iter(_tag("edge")):
        found.add({"true": True, "false": False}.get(edge.attrib.pop("directed", ""), usual))
    if len(found) > 1:
        raise FormatError(file, "", "it mixes directed and undirected edges")
    graph.set("edgedefault", "directed")
    return found.pop() if found else usual


def _prepare(graph: Element, file: str) -> list[str | None]:
    """Check nodes and edges, number the edges in file order and return their own ids:
    networkx would invent missing nodes and melt edges of one id."""
    if graph.find(f".//{_tag('graph')}") is not None:
        raise FormatError(file, "", "it nests a graph in a node; only plain graphs are read")
    nodes: set[str] = set()
    for node in graph.iter(_tag("node")):
        name = _attribute(node, "id", f"node {len(nodes) + 1}", file)
        if name in nodes:
            raise FormatError(file, f"node {quoted(name)}", "stands in the file twice")
        nodes.add(name)
        _drop_ports(node)
    keys: list[str | None] = []
    for edge in graph.iter(_tag("edge")):
        place = f"edge {len(keys) + 1}"
        for end in ("source", "target"):
            name = _attribute(edge, end, place, file)
            if name not in nodes:
                raise FormatError(file, place, f"there is no node {quoted(name)}")
        keys.append(edge.get("id"))
        edge.set("id", str(len(keys) - 1))
    return keys


def _attribute(element: Element, name: str, place: str, file: str) -> str:
    found = element.get(name)
    if not found:
        raise FormatError(file, place, f"has no {quoted(name)}")
    return found


def _drop_ports(node: Element) -> None:
    for port in node.findall(_tag("port")):
        node.remove(port)


def _drawing(
    root: Element, graph: Element, keys: list[str | None], directed: bool, file: str
) -> Drawing:
    reader = GraphMLReader(node_type=str, edge_key_type=int, force_multigraph=True)
    try:
        found = reader.make_graph(graph, *reader.find_graphml_keys(root))
    except (nx.NetworkXException, ValueError, LookupError, TypeError, AttributeError) as error:
        reason = f"not GraphML that can be read: {shortened(str(error))}"
        raise FormatError(file, "", reason) from error
    defaults = [found.graph.pop(name, {}) for name in ("node_default", "edge_default")]
    for _, node in found.nodes(data=True):
        node.update({**defaults[0], **node})
    for _, _, position, edge in found.edges(keys=True, data=True):
        edge.update({**defaults[1], **edge, drawing.POSITION: position})
    drawn = drawing.of_networkx(found, directed)
    for edge, key in zip(drawn.edges, keys, strict=True):
        own = edge.attributes.pop("key", None)
        edge.key = key or (own if isinstance(own, str) else None)
    return drawn


# -- writing ----------------------------------------------------------------------------


def dumps(plan: Plan, file: str) -> tuple[bytes, list[str]]:
    """Return the bytes of the GraphML file for ``plan``, and notes on what was lost.

    Raises :class:`FormatError` when an id holds a character that XML cannot.
    """
    drawn = exports.of_plan(plan)
    for name in (*(key for key, _ in drawn.nodes), *(edge.key or "" for edge in drawn.edges)):
        if _NOT_XML.search(name):
            raise FormatError(file, quoted(name), "an id with a character that XML cannot hold")
    root = Element("graphml", xmlns=NAMESPACE)
    keys = _Keys(root)
    keys.declare("graph", [drawn.graph])
    keys.declare("node", [attributes for _, attributes in drawn.nodes])
    keys.declare("edge", [edge.attributes for edge in drawn.edges])
    graph = SubElement(root, "graph", edgedefault="undirected")
    keys.put(graph, "graph", drawn.graph)
    for name, attributes in drawn.nodes:
        keys.put(SubElement(graph, "node", id=name), "node", attributes)
    for edge in drawn.edges:
        element = SubElement(
            graph, "edge", id=edge.key or "", source=edge.source, target=edge.target
        )
        keys.put(element, "edge", edge.attributes)
    indent(root, space=" ")
    return tostring(root, encoding="utf-8", xml_declaration=True) + b"\n", keys.notes()


class _Keys:
    """The declarations at the head of the file: one for each attribute and its type."""

    def __init__(self, root: Element) -> None:
        self.root = root
        self.declared: dict[tuple[str, str], tuple[str, str]] = {}
        self.changed: dict[str, None] = {}

    def declare(self, scope: str, found: list[Attributes]) -> None:
        """Declare every attribute that stands in ``found``, with the type that holds all."""
        types: dict[str, set[type]] = {}
        for attributes in found:
            for name, value in attributes.items():
                types.setdefault(name, set()).add(type(value))
        for name, kinds in types.items():
            key = f"d{len(self.declared)}"
            kind = _type_name(kinds)
            self.declared[scope, name] = key, kind
            SubElement(
                self.root, "key", {"id": key, "for": scope, "attr.name": name, "attr.type": kind}
            )

    def put(self, element: Element, scope: str, attributes: Attributes) -> None:
        """Add the data elements for ``attributes``."""
        for name, value in attributes.items():
            key, kind = self.declared[scope, name]
            data = SubElement(element, "data", key=key)
            data.text = self._text(name, value, kind)

    def _text(self, name: str, value: Any, kind: str) -> str:
        if kind == "boolean":
            return "true" if value else "false"
        text = str(value)
        if _NOT_XML.search(text):
            self.changed[name] = None
            return _NOT_XML.sub("\ufffd", text)
        return text

    def notes(self) -> list[str]:
        """Return a line on what XML could not hold."""
        if not self.changed:
            return []
        names = ", ".join(quoted(name) for name in self.changed)
        return [f"characters that XML cannot hold were replaced in {names}"]


def _type_name(kinds: set[type]) -> str:
    if kinds == {bool}:
        return "boolean"
    if kinds == {int}:
        return "long"
    return "double" if kinds <= {int, float} else "string"
