"""From the worker thread to the GUI thread: one object that carries results over."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

from PySide6.QtCore import QObject, Signal, Slot

from netsketch.session.jobs import Jobs, Task

Arrived = Callable[[Any], None]


class Relay(QObject):
    """Submits jobs and hands their results to methods in the GUI thread.

    A result is dropped when a newer job of its name was submitted or the name was given
    up since. An exception is handed on as the result it is. ``apart`` has threads of their
    own for jobs, by name, that others should not wait for.
    """

    _crossed = Signal(str, int, object)

    def __init__(
        self,
        jobs: Jobs,
        parent: QObject | None = None,
        apart: Mapping[str, Jobs] | None = None,
    ) -> None:
        super().__init__(parent)
        self._jobs, self._apart = jobs, dict(apart or {})
        self._ticket = 0
        self._wanted: dict[str, tuple[int, Arrived]] = {}
        self._crossed.connect(self._arrive)

    def submit(self, name: str, task: Task, arrived: Arrived) -> None:
        """Run ``task`` in the background and call ``arrived`` with what comes of it."""
        self._ticket += 1
        self._wanted[name] = (self._ticket, arrived)
        self._jobs_for(name).submit(name, self._ticket, task, self._crossed.emit)

    def give_up(self, name: str) -> None:
        """Cancel the job of this name and drop its result."""
        self._wanted.pop(name, None)
        self._jobs_for(name).cancel(name)

    def _jobs_for(self, name: str) -> Jobs:
        return self._apart.get(name, self._jobs)

    @Slot(str, int, object)
    def _arrive(self, name: str, ticket: int, result: Any) -> None:
        wanted = self._wanted.get(name)
        if wanted is not None and wanted[0] == ticket:
            del self._wanted[name]
            wanted[1](result)
