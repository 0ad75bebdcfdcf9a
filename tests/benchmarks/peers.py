"""The libraries an engineer would script with, each doing the least that answers."""

from __future__ import annotations

from collections.abc import Iterable

import igraph
import networkx as nx
import numpy as np
import rustworkx as rx
from scipy.sparse import csr_array
from scipy.sparse.csgraph import dijkstra

from netsketch.routing import BLOCKED, AllPairs, Network


class Peers:
    """One network of point-to-point links in the form each library wants it.

    Only distances are asked of them: no next hops, no counts, nothing kept current.
    """

    def __init__(self, network: Network) -> None:
        s = network.structure
        if s.routers != s.vertices:
            raise ValueError("the peers are given routers only")
        self.network = network
        self.routers = s.routers
        use = network.weight < BLOCKED
        arcs = zip(
            s.tail[use].tolist(), s.head[use].tolist(), network.weight[use].tolist(), strict=True
        )
        best: dict[tuple[int, int], int] = {}
        for tail, head, weight in arcs:  # of parallel arcs only the cheapest matters
            best[tail, head] = min(weight, best.get((tail, head), weight))
        self.arcs = [(tail, head, weight) for (tail, head), weight in best.items()]
        ends, costs = np.array(list(best)).T, np.array(list(best.values()), np.float64)
        self.csr = csr_array((costs, ends), shape=(self.routers, self.routers))
        self.rustworkx = rx.PyDiGraph()
        self.rustworkx.add_nodes_from(range(self.routers))
        self.rustworkx.add_edges_from([(t, h, float(w)) for t, h, w in self.arcs])
        self.igraph = igraph.Graph(self.routers, list(best), directed=True)
        self.costs = costs.tolist()
        self.networkx = nx.DiGraph()
        self.networkx.add_nodes_from(range(self.routers))
        self.networkx.add_weighted_edges_from(self.arcs)

    def check(self) -> None:
        """Hold the peers' distances equal to ours, or the race means nothing."""
        ours = AllPairs(self.network)
        distances = np.where(ours.distances == ours.unreached, np.inf, ours.distances)
        assert (dijkstra(self.csr) == distances).all()
        assert (np.array(self.igraph.distances(weights=self.costs, mode="out")) == distances).all()
        lengths = rx.dijkstra_shortest_path_lengths(self.rustworkx, 0, float)
        reached = {v: d for v, d in enumerate(distances[0].tolist()) if d < np.inf}
        assert {**lengths, 0: 0.0} == reached

    def scipy_all(self) -> int:
        dijkstra(self.csr)
        return 1

    def igraph_all(self) -> int:
        self.igraph.distances(weights=self.costs, mode="out")
        return 1

    def rustworkx_all(self) -> int:
        rx.all_pairs_dijkstra_path_lengths(self.rustworkx, float)
        return 1

    def scipy_from(self, source: int) -> int:
        dijkstra(self.csr, indices=source)
        return 1

    def igraph_from(self, source: int) -> int:
        self.igraph.distances(source, weights=self.costs, mode="out")
        return 1

    def rustworkx_from(self, source: int) -> int:
        rx.dijkstra_shortest_path_lengths(self.rustworkx, source, float)
        return 1

    def networkx_from(self, source: int) -> int:
        nx.single_source_dijkstra_path_length(self.networkx, source)
        return 1

    def rustworkx_affected(
        self, failures: Iterable[tuple[list[tuple[int, int]], np.ndarray]]
    ) -> int:
        """Take each failure's arcs out, recompute only the sources whose tree uses one of
        them, and put the arcs back; return the number of failures."""
        count = 0
        for arcs, sources in failures:
            count += 1
            taken = [(t, h, self.rustworkx.get_edge_data(t, h)) for t, h in arcs]
            self.rustworkx.remove_edges_from(arcs)
            for source in sources.tolist():
                rx.dijkstra_shortest_path_lengths(self.rustworkx, source, float)
            self.rustworkx.add_edges_from(taken)
        return count
