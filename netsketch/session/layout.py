"""Positions for what a file left without: a readable drawing at once.

networkx's force-directed layout (Fruchterman and Reingold, 1991) places up to
:data:`DIRECT` nodes; above that communities (Louvain) are placed first and then the nodes
of each inside it, which keeps the time low and regions together.
"""

from __future__ import annotations

import math
from collections.abc import Iterable

import networkx as nx
import numpy as np
import numpy.typing as npt

from netsketch.model import Plan, edits

DIRECT = 300
SPACING = 190.0
"""Aimed distance between neighbours on the sheet; a plate is about 100 wide."""

Places = dict[str, tuple[float, float]]


def place_missing(plan: Plan) -> None:
    """Give every node of ``plan`` without a position one; others stay where they are."""
    missing = [node.id for node in plan.nodes if node.x is None]
    if not missing:
        return
    graph = _graph(plan)
    places = spread(graph) if len(missing) == len(plan.nodes) else _beside(plan, graph, missing)
    plan.apply(edits.move(plan, {key: places[key] for key in missing}))


def _graph(plan: Plan) -> nx.Graph:
    graph = nx.Graph()
    graph.add_nodes_from(node.id for node in plan.nodes)
    graph.add_edges_from(link.ends for link in plan.links)
    return graph


def spread(graph: nx.Graph) -> Places:
    """Return a place for every node: components side by side, the largest first."""
    parts = sorted(nx.connected_components(graph), key=len, reverse=True)
    places: Places = {}
    left = 0.0
    for part in parts:
        keys = [key for key in graph if key in part]
        points = _scaled(graph.subgraph(part), keys, _component(graph.subgraph(part), keys))
        points -= points.min(axis=0)
        places.update(_named(keys, points + np.array([left, 0.0])))
        left += float(points[:, 0].max()) + 2 * SPACING
    return places


def _named(keys: Iterable[str], points: npt.NDArray[np.float64]) -> Places:
    return {
        key: (round(float(x), 1), round(float(y), 1))
        for key, (x, y) in zip(keys, points, strict=True)
    }


def _component(graph: nx.Graph, keys: list[str]) -> npt.NDArray[np.float64]:
    if len(keys) <= DIRECT:
        return _spring(graph, keys)
    communities = nx.community.louvain_communities(graph, seed=1)
    home = {key: number for number, members in enumerate(communities) for key in members}
    outline = nx.Graph()
    outline.add_nodes_from(range(len(communities)))
    outline.add_edges_from((home[a], home[b]) for a, b in graph.edges if home[a] != home[b])
    centres = _component(outline, list(outline)) if len(outline) < len(keys) else None
    if centres is None:
        return _ring(len(keys))
    widest = max(math.sqrt(len(members)) for members in communities)
    centres *= 2.4 * widest / max(_nearest(centres), 1e-9)
    points: npt.NDArray[np.float64] = np.empty((len(keys), 2))
    index = {key: i for i, key in enumerate(keys)}
    for number, members in enumerate(communities):
        inside = [key for key in keys if key in members]
        local = _component(graph.subgraph(members), inside) if len(inside) <= DIRECT else None
        if local is None:
            local = _ring(len(inside))
        reach = float(np.abs(local).max()) or 1.0
        points[[index[key] for key in inside]] = centres[number] + local / reach * math.sqrt(
            len(inside)
        )
    return points


def _ring(count: int) -> npt.NDArray[np.float64]:
    """Return ``count`` points on a sunflower spiral: evenly spread, no force needed."""
    number = np.arange(count)
    angle = number * math.pi * (3 - math.sqrt(5))
    spiral: npt.NDArray[np.float64] = np.sqrt(number)[:, None] * np.stack(
        [np.cos(angle), np.sin(angle)], axis=1
    )
    return spiral


def _spring(graph: nx.Graph, keys: list[str]) -> npt.NDArray[np.float64]:
    if len(keys) == 1:
        return np.zeros((1, 2))
    found = nx.spring_layout(graph, seed=1, iterations=120)
    return np.array([found[key] for key in keys])


def _nearest(points: npt.NDArray[np.float64]) -> float:
    """Return the distance from a point to its nearest neighbour, at the tenth percentile."""
    if len(points) < 2:
        return 1.0
    nearest = []
    for i, point in enumerate(points):
        away: npt.NDArray[np.float64] = np.hypot(*(points - point).T)
        away[i] = np.inf
        nearest.append(away.min())
    return float(np.quantile(nearest, 0.1))


def _scaled(
    graph: nx.Graph, keys: list[str], points: npt.NDArray[np.float64]
) -> npt.NDArray[np.float64]:
    """Return ``points`` scaled so that plates are apart and links readable."""
    if len(keys) < 2:
        return points
    index = {key: i for i, key in enumerate(keys)}
    lengths = [np.hypot(*(points[index[a]] - points[index[b]])) for a, b in graph.edges]
    by_links = SPACING / max(float(np.median(lengths)), 1e-9)
    by_plates = 0.7 * SPACING / max(_nearest(points), 1e-9)
    return points * min(max(by_links, by_plates), 4 * by_links)


def _beside(plan: Plan, graph: nx.Graph, missing: list[str]) -> Places:
    """Return a place near its placed neighbours for each of ``missing``."""
    placed = {
        node.id: (float(node.x), float(node.y or 0.0)) for node in plan.nodes if node.x is not None
    }
    middle = tuple(np.mean(list(placed.values()), axis=0))
    waiting = list(missing)
    turn = 0
    while waiting:
        near = max(waiting, key=lambda key: sum(other in placed for other in graph[key]))
        waiting.remove(near)
        around = [placed[other] for other in graph[near] if other in placed] or [middle]
        x, y = np.mean(around, axis=0)
        angle = turn * math.pi * (3 - math.sqrt(5))
        reach = SPACING * (0.8 + 0.25 * (turn % 3))
        turn += 1
        placed[near] = (
            round(float(x + reach * math.cos(angle)), 1),
            round(float(y + reach * math.sin(angle)), 1),
        )
    return placed
