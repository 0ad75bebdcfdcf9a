"""The menu of kept trials: lay one over the plan, or forget it."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

from PySide6.QtWidgets import QMenu

from netsketch.model import Edit, Plan, edits
from netsketch.window.literal import on_button


def fill(menu: QMenu, plan: Plan, apply: Callable[[Edit], None]) -> None:
    """Offer every kept trial of ``plan``."""
    menu.clear()
    for kept in plan.trials:
        part = menu.addMenu(on_button(kept.name[:60]))
        part.setToolTip(edits.counted(len(kept.changes), "change"))
        for text, edit in (
            ("Lay over the plan", edits.lay_kept),
            ("Forget", edits.forget_trial),
        ):
            part.addAction(text, partial(_do, apply, edit, plan, kept.name))


def _do(
    apply: Callable[[Edit], None], edit: Callable[[Plan, str], Edit], plan: Plan, name: str
) -> None:
    apply(edit(plan, name))
