"""Which formats there are, and the two doors: :func:`read` and :func:`write`."""

from __future__ import annotations

import re
import stat
from collections.abc import Callable
from pathlib import Path
from typing import Final, NamedTuple

from netsketch.formats import atomic, limits, native, nodelink, strict_json
from netsketch.formats.errors import FormatError, Loaded
from netsketch.model import Plan


class FormatName(NamedTuple):
    """A format as a person picks it."""

    name: str
    suffixes: tuple[str, ...]
    can_read: bool
    can_write: bool


FORMATS: Final = (
    FormatName(native.NAME, (".netsketch.json", ".json"), True, True),
    FormatName(nodelink.NAME, (".json",), True, False),
    FormatName("GraphML", (".graphml", ".xml"), True, True),
    FormatName("GML", (".gml",), True, True),
)


def names() -> list[FormatName]:
    """Return the formats: name, suffixes, whether they can be read and written."""
    return list(FORMATS)


# -- reading ----------------------------------------------------------------------------


def read(path: Path) -> Loaded:
    """Return the plan in the file at ``path``, in whatever format it is.

    The suffix decides; where it is unknown, the content. Raises :class:`FormatError`.
    """
    data = _bytes_of(path)
    reader = _READERS.get(path.suffix.lower()) or _reader_for(data)
    if reader is None:
        raise FormatError(str(path), "", f"not a file that can be read: {_known(reading=True)}")
    return reader(data, str(path))


def _read_json(data: bytes, file: str) -> Loaded:
    raw = strict_json.parse(data, file)
    if native.is_native(raw):
        return native.from_parsed(raw, data, file)
    return nodelink.from_parsed(raw, file)


def _read_graphml(data: bytes, file: str) -> Loaded:
    from netsketch.formats import graphml  # loads networkx, which native files do without

    return graphml.loads(data, file)


def _read_gml(data: bytes, file: str) -> Loaded:
    from netsketch.formats import gml

    return gml.loads(data, file)


_READERS: Final[dict[str, Callable[[bytes, str], Loaded]]] = {
    ".json": _read_json,
    ".graphml": _read_graphml,
    ".xml": _read_graphml,
    ".gml": _read_gml,
}


def _reader_for(data: bytes) -> Callable[[bytes, str], Loaded] | None:
    """Return the reader that the first bytes ask for."""
    start = data.removeprefix(b"\xef\xbb\xbf").lstrip()
    if start.startswith(b"{"):
        return _read_json
    if start.startswith(b"<"):
        return _read_graphml
    return _read_gml if re.search(rb"^\s*graph\s*\[", start, re.MULTILINE) else None


def _bytes_of(path: Path) -> bytes:
    """Return the file's bytes; raise :class:`FormatError` when it cannot be read."""
    file = str(path)
    try:
        kind, data = _kind_and_bytes(path)
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise FormatError(file, "", f"cannot be read: {reason}") from error
    if stat.S_ISDIR(kind):
        raise FormatError(file, "", "it is a folder")
    if not stat.S_ISREG(kind):
        raise FormatError(file, "", "it is not an ordinary file")
    limits.check_size(len(data), file)
    return data


def _kind_and_bytes(path: Path) -> tuple[int, bytes]:
    """Return the kind of file and, when it is an ordinary one, its bytes: of a file that
    is too large only so many that this shows."""
    kind = path.stat().st_mode
    if not stat.S_ISREG(kind):
        return kind, b""
    with path.open("rb") as file:
        return kind, file.read(limits.FILE_BYTES + 1)


# -- writing ----------------------------------------------------------------------------


def write(plan: Plan, path: Path, original: bytes | None = None) -> list[str]:
    """Write ``plan`` to ``path`` in the format of its suffix, whole or not at all.

    ``original`` are the bytes the plan was loaded from: a native file gets them back
    unchanged when they still say the same. Returns notes on what the format could not
    carry. Raises :class:`FormatError`; a file that was there is then untouched.
    """
    suffix = path.suffix.lower()
    notes: list[str] = []
    if suffix == ".json":
        data = _native_bytes(plan, original)
    elif suffix in (".graphml", ".xml"):
        from netsketch.formats import graphml

        data, notes = graphml.dumps(plan, str(path))
    elif suffix == ".gml":
        from netsketch.formats import gml

        data, notes = gml.dumps(plan, str(path))
    else:
        raise FormatError(str(path), "", f"not a format that can be written: {_known()}")
    atomic.write_bytes(path, data)
    return notes


def _native_bytes(plan: Plan, original: bytes | None) -> bytes:
    if original is None:
        return native.dumps(plan)
    try:
        same = native.loads(original, "").plan == plan
    except FormatError:  # bytes that are no native file do not say the same
        same = False
    return original if same else native.dumps(plan)


def _known(reading: bool = False) -> str:
    """Return the suffixes there are, for a refusal."""
    found = [f for f in FORMATS if (f.can_read if reading else f.can_write)]
    return "use " + ", ".join(dict.fromkeys(f.suffixes[0] for f in found))
