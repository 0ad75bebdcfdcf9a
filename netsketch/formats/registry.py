"""Which formats there are, and the two doors: :func:`read` and :func:`write`."""

from __future__ import annotations

import stat
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
)


def names() -> list[FormatName]:
    """Return the formats: name, suffixes, whether they can be read and written."""
    return list(FORMATS)


def read(path: Path) -> Loaded:
    """Return the plan in the file at ``path``, in whatever format it is.

    The suffix decides; where it is unknown, the content. Raises :class:`FormatError`.
    """
    data = _bytes_of(path)
    return _read_json(data, str(path))


def _read_json(data: bytes, file: str) -> Loaded:
    raw = strict_json.parse(data, file)
    if native.is_native(raw):
        return native.from_parsed(raw, data, file)
    return nodelink.from_parsed(raw, file)


def _bytes_of(path: Path) -> bytes:
    """Return the file's bytes; raise :class:`FormatError` when it cannot be read."""
    try:
        found = path.stat()
        if stat.S_ISDIR(found.st_mode):
            raise FormatError(str(path), "", "it is a folder")
        if not stat.S_ISREG(found.st_mode):
            raise FormatError(str(path), "", "it is not an ordinary file")
        limits.check_size(found.st_size, str(path))
        data = path.read_bytes()
    except OSError as error:
        reason = error.strerror or str(error)
        raise FormatError(str(path), "", f"cannot be read: {reason}") from error
    return data


def write(plan: Plan, path: Path, original: bytes | None = None) -> list[str]:
    """Write ``plan`` to ``path`` in the format of its suffix, whole or not at all.

    ``original`` are the bytes the plan was loaded from: a native file gets them back
    unchanged when they still say the same. Returns notes on what the format could not
    carry. Raises :class:`FormatError`; a file that was there is then untouched.
    """
    data = native.dumps(plan) if original is None else _native_bytes(plan, original)
    atomic.write_bytes(path, data)
    return []


def _native_bytes(plan: Plan, original: bytes) -> bytes:
    try:
        unchanged = native.loads(original, "").plan == plan
    except FormatError:
        unchanged = False
    return original if unchanged else native.dumps(plan)
