"""The tools of the sheet and what each is for, in one line."""

from __future__ import annotations

TOOL_HINTS = {
    "select": "",
    "router": "Click on the sheet to draw routers; Esc ends",
    "segment": "Click on the sheet to draw LAN segments; Esc ends",
    "link": "Drag from plate to plate to draw links; Esc ends",
}
TOOLS = tuple(TOOL_HINTS)
