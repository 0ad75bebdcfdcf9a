"""What a person means by a word: a router, a link, a segment, a shared-risk group."""

from __future__ import annotations

from netsketch.cli.refusal import InputError
from netsketch.formats.errors import one_line
from netsketch.model import LinkState, NodeState, Plan, Router, TrialChange, quoted

MOST_NAMED = 8


def router(plan: Plan, word: str, place: tuple[str, str]) -> str:
    """Return the id of the router ``word`` means: an id, or a name that is unique.

    Raises :class:`InputError` under ``place`` (file, option) where there is no such router
    or more than one.
    """
    found = plan.nodes.get(word)
    if isinstance(found, Router):
        return found.id
    named = [r.id for r in plan.routers() if r.name == word]
    if len(named) == 1:
        return named[0]
    if named:
        raise InputError(*place, f"{quoted(word)} names more than one router: {_listed(named)}")
    if found is not None or any(s.name == word for s in plan.segments()):
        raise InputError(*place, f"{quoted(word)} is a segment, not a router")
    raise InputError(*place, f"there is no router {quoted(word)}")


def taken_down(plan: Plan, word: str, place: tuple[str, str]) -> list[TrialChange]:
    """Return the changes that take down what ``word`` means: the id of a link, router,
    segment or shared-risk group, or the unique name of a router or segment.

    Exact ids go first; ``link:``, ``node:`` and ``group:`` before an id say which is
    meant. Raises :class:`InputError` under ``place``.
    """
    found = _with_id(plan, word)
    kind, colon, rest = word.partition(":")
    if not found and colon:
        found = {k: changes for k, changes in _with_id(plan, rest).items() if k == kind}
    if len(found) > 1:
        ways = " or ".join(f"{kind}:{word}" for kind in found)
        raise InputError(*place, f"{quoted(word)} is the id of more than one thing: write {ways}")
    if found:
        return next(iter(found.values()))
    named = [node.id for node in plan.nodes if node.name == word]
    if len(named) > 1:
        raise InputError(*place, f"{quoted(word)} names more than one thing: {_listed(named)}")
    if not named:
        raise InputError(
            *place, f"there is no link, router, segment or shared-risk group {quoted(word)}"
        )
    return [NodeState(named[0])]


def _with_id(plan: Plan, key: str) -> dict[str, list[TrialChange]]:
    """Return what has this id, by kind, as the changes that take it down."""
    found: dict[str, list[TrialChange]] = {}
    if key in plan.links:
        found["link"] = [LinkState(key)]
    if key in plan.nodes:
        found["node"] = [NodeState(key)]
    if key in plan.groups:
        found["group"] = [LinkState(link.id) for link in plan.links_in_group(key)]
    return found


def _listed(ids: list[str]) -> str:
    more = f" and {len(ids) - MOST_NAMED} more" if len(ids) > MOST_NAMED else ""
    return ", ".join(ids[:MOST_NAMED]) + more


def named(plan: Plan, key: str) -> str:
    """Return "r1 Quay-1" on one line, or the id alone where that is the name."""
    label = plan.nodes[key].label
    return one_line(key if label == key else f"{key} {label}")
