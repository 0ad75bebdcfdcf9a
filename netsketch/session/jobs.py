"""Background work: one thread, the newest job of each name, answers tagged with a revision."""

from __future__ import annotations

import threading
from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Any

Task = Callable[[Callable[[], bool]], Any]
Done = Callable[[str, int, Any], None]


@dataclass(eq=False)
class _Job:
    name: str
    revision: int
    task: Task
    done: Done
    cancel: threading.Event = field(default_factory=threading.Event)


class Jobs:
    """A worker thread that runs tasks one after another.

    A newer job takes the place of a waiting one of its name and cancels a running one. A
    task is called with a function that tells whether it is cancelled. ``done`` is called
    in the worker thread with (name, revision, result or exception); not for a job that was
    cancelled.
    """

    def __init__(self) -> None:
        self._waiting: dict[str, _Job] = {}
        self._running: _Job | None = None
        self._changed = threading.Condition()
        self._closed = False
        self._thread = threading.Thread(target=self._run, name="netsketch-jobs", daemon=True)
        self._thread.start()

    def submit(self, name: str, revision: int, task: Task, done: Done) -> None:
        """Queue ``task``; nothing happens once closed."""
        with self._changed:
            if self._closed:
                return
            self._cancel_running(name)
            self._waiting.pop(name, None)
            self._waiting[name] = _Job(name, revision, task, done)
            self._changed.notify_all()

    def cancel(self, name: str) -> None:
        """Give up the waiting and the running job of this name."""
        with self._changed:
            self._waiting.pop(name, None)
            self._cancel_running(name)

    def _cancel_running(self, name: str) -> None:
        if self._running is not None and self._running.name == name:
            self._running.cancel.set()

    @property
    def is_idle(self) -> bool:
        """Whether nothing runs or waits."""
        with self._changed:
            return self._running is None and not self._waiting

    def close(self) -> None:
        """Cancel everything and wait for the thread to end."""
        with self._changed:
            self._closed = True
            self._waiting.clear()
            if self._running is not None:
                self._running.cancel.set()
            self._changed.notify_all()
        self._thread.join()

    def _run(self) -> None:
        while True:
            with self._changed:
                self._running = None
                self._changed.notify_all()
                self._changed.wait_for(lambda: self._closed or self._waiting)
                if self._closed:
                    return
                job = self._waiting.pop(next(iter(self._waiting)))
                self._running = job
            self._do(job)

    def _do(self, job: _Job) -> None:
        result: Any
        try:
            result = job.task(job.cancel.is_set)
        except Exception as error:  # handed to whoever asked, unless that was to stop
            result = error
        if not job.cancel.is_set():
            job.done(job.name, job.revision, result)
