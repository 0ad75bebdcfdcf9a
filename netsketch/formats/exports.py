"""A plan -> a drawing that GraphML and GML can carry without loss.

What is a list or an object in the native file becomes JSON text.
"""

from __future__ import annotations

import json
from typing import Any

from netsketch.formats import objects, records
from netsketch.formats.drawing import Attributes, Drawing, DrawnEdge
from netsketch.model import Item, Plan


def of_plan(plan: Plan) -> Drawing:
    """Return the drawing from which :func:`imports.to_loaded` makes an equal plan."""
    return Drawing(
        graph=_graph(plan),
        nodes=[(node.id, _attributes(records.node_object(node), node)) for node in plan.nodes],
        edges=[
            DrawnEdge(
                link.source, link.target, link.id, _attributes(records.edge_object(link), link)
            )
            for link in plan.links
        ],
    )


def _graph(plan: Plan) -> Attributes:
    graph = records.settings_object(plan.settings)
    whole = objects.from_plan(plan)["graph"]
    graph.update(
        {
            key: _json(whole[key])
            for key in ("groups", "demands", "trial", "trials")
            if whole.get(key)
        }
    )
    for key in ("extra", "top_extra"):
        if value := getattr(plan.settings, key):
            graph[key] = _json(value)
    return graph


def _attributes(found: dict[str, Any], item: Item) -> Attributes:
    kept = {k: v for k, v in found.items() if k not in ("id", "source", "target", "key")}
    if "groups" in kept:
        kept["groups"] = _json(kept["groups"])
    return {**kept, "extra": _json(item.extra)} if item.extra else kept


def _json(value: Any) -> str:
    return json.dumps(value, ensure_ascii=False, allow_nan=False)
