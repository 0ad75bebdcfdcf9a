"""A file <-> a plan: one module a format, one registry."""

from netsketch.formats.errors import FormatError, Loaded
from netsketch.formats.registry import names, read, write

__all__ = ["FormatError", "Loaded", "names", "read", "write"]
