"""Writing a file so that there is always one whole file: the old one or the new one."""

from __future__ import annotations

import contextlib
import os
import secrets
import stat
from collections.abc import Iterable
from pathlib import Path

from netsketch.formats.errors import FormatError


def write_bytes(path: Path, data: bytes) -> None:
    """Put ``data`` in the place of the file at ``path``, or make that file.

    The bytes go to a new file in the same folder, reach the disk, and only then take the
    name. Permissions of the old file stay; a symbolic link keeps pointing at its file.
    Raises :class:`FormatError`; the old file is then untouched.
    """
    write_parts(path, (data,))


def write_parts(path: Path, parts: Iterable[bytes]) -> None:
    """Do what :func:`write_bytes` does with data too long to hold, made as it is written.
    Whatever ``parts`` raises leaves the old file untouched as well."""
    try:
        target = path.resolve()
        mode = _mode_of(target)
        temporary = target.with_name(f".{target.name[:100]}.{secrets.token_hex(6)}.part")
        try:
            _write_through(temporary, parts, mode)
            temporary.replace(target)
        except BaseException:
            with contextlib.suppress(FileNotFoundError):
                temporary.unlink()
            raise
        _sync_folder(target.parent)
    except (OSError, ValueError, RuntimeError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise FormatError(str(path), "", f"cannot be written: {reason}") from error


def _mode_of(target: Path) -> int | None:
    """Return the permissions of the file there is, ``None`` when there is none."""
    try:
        found = target.stat()
    except FileNotFoundError:
        return None
    if stat.S_ISDIR(found.st_mode):
        raise OSError("it is a folder")
    if not stat.S_ISREG(found.st_mode):
        raise OSError("it is not an ordinary file")
    if not os.access(target, os.W_OK):
        raise OSError("it is read-only")
    return stat.S_IMODE(found.st_mode)


def _write_through(temporary: Path, parts: Iterable[bytes], mode: int | None) -> None:
    flags = os.O_WRONLY | os.O_CREAT | os.O_EXCL | getattr(os, "O_BINARY", 0)
    with os.fdopen(os.open(temporary, flags, 0o666), "wb") as file:
        file.writelines(parts)
        file.flush()
        os.fsync(file.fileno())
    if mode is not None:
        temporary.chmod(mode)


def _sync_folder(folder: Path) -> None:
    """Make the new name last through a power cut, where folders can be synced."""
    if os.name != "posix":
        return
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)
