"""A graph as a file has it: named attributes on nodes and edges, nothing interpreted yet.

GraphML, GML and node-link JSON meet here: each module turns its file into a Drawing or a
Drawing into its file; :mod:`imports` and :mod:`exports` know what the attributes mean.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import msgspec

from netsketch.formats.attributes import text

if TYPE_CHECKING:
    import networkx as nx

Attributes = dict[str, Any]

POSITION = "netsketch_position"
"""Edge attribute under which a reader keeps an edge's position in its file."""


class DrawnEdge(msgspec.Struct):
    """An edge from ``source`` to ``target``; ``key`` is its name when the file gives one."""

    source: str
    target: str
    key: str | None
    attributes: Attributes


class Drawing(msgspec.Struct):
    """Nodes and edges in file order. In an undirected drawing an edge keeps the order of
    its ends, because ``cost`` belongs to the first."""

    graph: Attributes
    nodes: list[tuple[str, Attributes]]
    edges: list[DrawnEdge]
    directed: bool = False


def of_networkx(graph: nx.MultiDiGraph[Any], directed: bool) -> Drawing:
    """Return the drawing of a networkx graph whose edges carry :data:`POSITION`."""
    edges = sorted(graph.edges(keys=True, data=True), key=lambda edge: edge[3][POSITION])
    return Drawing(
        graph={str(key): value for key, value in graph.graph.items()},
        nodes=[(str(node), dict(data)) for node, data in graph.nodes(data=True)],
        edges=[
            DrawnEdge(
                str(source),
                str(target),
                text(key) if isinstance(key, str | tuple) else None,
                {name: value for name, value in data.items() if name != POSITION},
            )
            for source, target, key, data in edges
        ],
        directed=directed,
    )
