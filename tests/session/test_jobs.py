"""Background jobs: newest of a name wins, errors come back, nothing leaks."""

from __future__ import annotations

import threading
from collections.abc import Callable, Iterator
from typing import Any

import pytest

from netsketch.routing import Cancelled
from netsketch.session.jobs import Jobs


@pytest.fixture
def jobs() -> Iterator[Jobs]:
    worker = Jobs()
    yield worker
    worker.close()


class Inbox:
    """Collects what jobs hand over."""

    def __init__(self) -> None:
        self.results: list[tuple[str, int, Any]] = []
        self.got = threading.Semaphore(0)

    def __call__(self, name: str, revision: int, result: Any) -> None:
        self.results.append((name, revision, result))
        self.got.release()

    def wait(self, count: int = 1) -> None:
        for _ in range(count):
            assert self.got.acquire(timeout=10)


def test_results_carry_name_and_revision(jobs: Jobs) -> None:
    inbox = Inbox()
    jobs.submit("sum", 7, lambda cancelled: 1 + 1, inbox)
    inbox.wait()
    assert inbox.results == [("sum", 7, 2)]


def test_an_error_is_handed_over_and_the_worker_goes_on(jobs: Jobs) -> None:
    inbox = Inbox()
    jobs.submit("bad", 1, lambda cancelled: 1 // 0, inbox)
    jobs.submit("good", 2, lambda cancelled: "well", inbox)
    inbox.wait(2)
    assert isinstance(inbox.results[0][2], ZeroDivisionError)
    assert inbox.results[1] == ("good", 2, "well")


def blocking(started: threading.Event) -> Callable[[Callable[[], bool]], str]:
    def task(cancelled: Callable[[], bool]) -> str:
        started.set()
        while not cancelled():
            pass
        raise Cancelled

    return task


def test_a_newer_job_cancels_the_one_of_its_name(jobs: Jobs) -> None:
    inbox, started = Inbox(), threading.Event()
    jobs.submit("ledger", 1, blocking(started), inbox)
    assert started.wait(10)
    jobs.submit("ledger", 2, lambda cancelled: "new", inbox)
    inbox.wait()
    assert inbox.results == [("ledger", 2, "new")]


def test_only_the_newest_waiting_job_runs(jobs: Jobs) -> None:
    inbox, started = Inbox(), threading.Event()
    jobs.submit("first", 1, blocking(started), inbox)
    assert started.wait(10)
    for revision in (2, 3, 4):
        jobs.submit("ledger", revision, lambda cancelled: "done", inbox)
    jobs.cancel("first")
    inbox.wait()
    assert inbox.results == [("ledger", 4, "done")]
    jobs.close()
    assert jobs.is_idle


def test_closing_cancels_and_ends_the_thread() -> None:
    worker, inbox, started = Jobs(), Inbox(), threading.Event()
    worker.submit("endless", 1, blocking(started), inbox)
    assert started.wait(10)
    worker.close()
    worker.submit("late", 2, lambda cancelled: "never", inbox)
    assert inbox.results == []
    assert "netsketch-jobs" not in {thread.name for thread in threading.enumerate()}
