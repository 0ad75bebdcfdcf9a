"""The Path reading: every equal-cost path of a pair with shares, and the way back."""

from __future__ import annotations

from collections.abc import Iterable

from netsketch.readings.reading import LinkMark, PlateMark, Reading, Travel, TravelRole
from netsketch.routing import Network, Routes, ShareOfLink


def path(out: Routes, back: Routes | None, target: int, labels: tuple[str, str]) -> Reading:
    """Return the paths from the source of ``out`` to vertex ``target`` and, where
    ``back`` (the routes of the target) is given, the way back."""
    ids = out.network.structure.vertex_ids
    source = ids[out.source]
    shares = out.shares(target)
    marks = _travels(out.network, shares, "path")
    for link, travels in _travels(
        out.network, back.shares(out.source) if back else [], "way back"
    ).items():
        marks.setdefault(link, []).extend(travels)
    plates = {share.tail: PlateMark("reached") for share in shares}
    cut_off = out.cost(target) is None
    plates[source] = PlateMark("focus")
    plates[ids[target]] = PlateMark("cut off" if cut_off else "target", cost=out.cost(target))
    return Reading(
        kind="path",
        focus=(source, ids[target]),
        title=f"Path from {labels[0]} to {labels[1]}",
        links={link: LinkMark(tuple(travels)) for link, travels in marks.items()},
        plates=plates,
    )


def before_and_after(
    before: Routes, after: Routes, target: int, labels: tuple[str, str]
) -> Reading:
    """Return the paths to vertex ``target`` in the plan and in the trial: the links of
    both, those only the plan used ("before") and those only the trial uses ("after")."""
    ids = after.network.structure.vertex_ids
    source = ids[after.source]
    old, new = before.shares(target), after.shares(target)
    both = {(share.link, share.tail) for share in old} & {(share.link, share.tail) for share in new}
    marks: dict[str, list[Travel]] = {}
    for shares, role in ((old, "before"), (new, "after")):
        kept = [share for share in shares if (share.link, share.tail) not in both]
        for link, travels in _travels(after.network, kept, role).items():  # type: ignore[arg-type]
            marks.setdefault(link, []).extend(travels)
    same = [share for share in new if (share.link, share.tail) in both]
    for link, travels in _travels(after.network, same, "path").items():
        marks.setdefault(link, []).extend(travels)
    plates = {share.tail: PlateMark("reached") for share in (*old, *new)}
    plates[source] = PlateMark("focus")
    cost = after.cost(target)
    plates[ids[target]] = PlateMark("cut off" if cost is None else "target", cost=cost)
    return Reading(
        kind="effect",
        focus=(source, ids[target]),
        title=f"{labels[0]} to {labels[1]}, before and after",
        links={link: LinkMark(tuple(travels)) for link, travels in marks.items()},
        plates=plates,
    )


def _travels(
    network: Network, shares: Iterable[ShareOfLink], role: TravelRole
) -> dict[str, list[Travel]]:
    s = network.structure
    found: dict[str, list[Travel]] = {}
    for share in shares:
        first_arc = s.arcs[s.link_of[share.link], 0]
        direction = 1 if s.vertex_ids[s.tail[first_arc]] == share.tail else -1
        found.setdefault(share.link, []).append(Travel(direction, role, share=share.share))
    return found
