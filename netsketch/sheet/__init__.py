"""The drawing surface: draws a plan and a reading, turns gestures into edits."""

from netsketch.sheet.sheet import Sheet

__all__ = ["Sheet"]
