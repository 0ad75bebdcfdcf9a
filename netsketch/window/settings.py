"""What the program remembers between starts."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import QByteArray, QSettings

MOST_RECENT = 10


class Settings:
    """Recent files, the look and the window's layout, kept for the user."""

    def __init__(self) -> None:
        self._store = QSettings(
            QSettings.Format.IniFormat, QSettings.Scope.UserScope, "netsketch", "netsketch"
        )

    @property
    def recent(self) -> list[Path]:
        """The files opened last, newest first."""
        kept = self._store.value("files/recent", [], list)
        return [Path(str(path)) for path in kept] if isinstance(kept, list) else []

    def add_recent(self, path: Path) -> None:
        """Put ``path`` at the head of the recent files."""
        path = path.absolute()
        kept = [path, *(other for other in self.recent if other != path)]
        self._store.setValue("files/recent", [str(other) for other in kept[:MOST_RECENT]])

    def drop_recent(self, path: Path) -> None:
        """Take a file that is gone out of the recent files."""
        kept = [str(other) for other in self.recent if other != path]
        self._store.setValue("files/recent", kept)

    @property
    def look(self) -> str:
        """ "light", "dark" or "system"."""
        kept = str(self._store.value("window/look", "system"))
        return kept if kept in ("light", "dark") else "system"

    @look.setter
    def look(self, name: str) -> None:
        self._store.setValue("window/look", name)

    def bytes_of(self, key: str) -> QByteArray:
        """Return a stored window layout; empty when there is none."""
        kept = self._store.value(f"window/{key}")
        return kept if isinstance(kept, QByteArray) else QByteArray()

    def keep_bytes(self, key: str, value: QByteArray) -> None:
        """Store a window layout."""
        self._store.setValue(f"window/{key}", value)
