"""Texts of the plan shown as they are: Qt reads & as a key and < as markup."""

from __future__ import annotations

from html import escape


def on_button(text: str) -> str:
    """Return ``text`` for a button, a menu or an action."""
    return text.replace("&", "&&")


def as_tip(text: str) -> str:
    """Return ``text`` for a tooltip or a label that takes markup; its lines stay lines."""
    return f"<span>{'<br>'.join(map(escape, text.splitlines()))}</span>"
