"""The answers by their definitions, through networkx: slow, plain and independent.

Distances are networkx's Dijkstra; a next hop is a link out of the source whose cost and
the distance beyond it add up to the distance. Nothing here uses netsketch.routing.
"""

from __future__ import annotations

from dataclasses import dataclass

import networkx as nx

from netsketch.model import ChangeTrial, Edit, Plan, Segment, Trial, edits

Hops = set[tuple[str, str | None]]


@dataclass(frozen=True)
class Answer:
    """For one source: distance and next hops by destination; what is cut off is missing."""

    distance: dict[str, int]
    next_hops: dict[str, Hops]


def with_trial(plan: Plan, trial: Trial) -> Plan:
    """Return a plan in which ``trial``, and not the plan's own, has been adopted."""
    changed = plan.snapshot()
    changed.apply(Edit("try", (ChangeTrial(plan.trial, trial),)))
    changed.apply(edits.adopt(changed))
    return changed


def graph_of(plan: Plan) -> nx.MultiDiGraph:
    """Return an arc for each direction of each link that carries traffic."""
    graph = nx.MultiDiGraph()
    for node in plan.nodes:
        graph.add_node(node.id, segment=isinstance(node, Segment))
    for link in plan.links:
        if link.up and all(plan.nodes[end].up for end in link.ends):
            graph.add_edge(link.source, link.target, key=link.id, cost=link.cost)
            graph.add_edge(link.target, link.source, key=link.id, cost=link.cost_back)
    return graph


def answers(plan: Plan) -> dict[str, Answer]:
    """Return the answer for every router of ``plan`` as it stands, its trial left out."""
    graph = graph_of(plan)
    segments = {segment.id for segment in plan.segments()}
    drained = {router.id for router in plan.routers() if router.drained}
    return {
        router.id: answer(_seen_from(graph, drained, router.id), segments, router.id)
        for router in plan.routers()
    }


def _seen_from(graph: nx.MultiDiGraph, drained: set[str], source: str) -> nx.MultiDiGraph:
    """Return the graph without the arcs out of drained routers other than ``source``, but
    for those to segments that no other router is on."""
    if not drained - {source}:
        return graph
    seen = graph.copy()
    for router in drained - {source}:
        own = {
            v for v, segment in graph.nodes(data="segment") if segment and set(graph[v]) == {router}
        }
        seen.remove_edges_from(
            [edge for edge in seen.out_edges(router, keys=True) if edge[1] not in own]
        )
    return seen


def answer(graph: nx.MultiDiGraph, segments: set[str], source: str) -> Answer:
    """Return distances and next hops from ``source``."""
    distance = nx.single_source_dijkstra_path_length(graph, source, weight="cost")
    hops: dict[str, Hops] = {}
    backwards = graph.reverse(copy=False)
    for target in distance:
        if target == source:
            continue
        left = nx.single_source_dijkstra_path_length(backwards, target, weight="cost")
        hops[target] = set()
        for _, head, link, arc in graph.out_edges(source, keys=True, data=True):
            if head not in left or arc["cost"] + left[head] != distance[target]:
                continue
            if head not in segments:
                hops[target].add((link, head))
            elif head == target:
                hops[target].add((link, None))
            else:
                hops[target] |= {
                    (link, beyond)
                    for _, beyond, more in graph.out_edges(head, data=True)
                    if beyond != source
                    and beyond in left
                    and more["cost"] + left[beyond] == left[head]
                }
    return Answer(distance, hops)


def outcomes(before: Plan, after: Plan) -> dict[tuple[str, str], str]:
    """Return what becomes of each ordered pair of routers that changes."""
    failed = {node.id for node in before.nodes if node.up and not after.nodes[node.id].up}
    return outcomes_of(answers(before), answers(after), failed)


def outcomes_of(
    old: dict[str, Answer], new: dict[str, Answer], failed: set[str]
) -> dict[tuple[str, str], str]:
    """Return the same from the answers before and after, and what failed in between."""
    found = {}
    routers = [router for router in old if router not in failed]
    for source in routers:
        for target in routers:
            if source == target:
                continue
            was, now = old[source].distance.get(target), new[source].distance.get(target)
            if was is None and now is not None:
                found[source, target] = "restored"
            elif was is not None and now is None:
                found[source, target] = "cut off"
            elif was is not None and (
                was != now or old[source].next_hops[target] != new[source].next_hops[target]
            ):
                found[source, target] = "moved"
    return found
