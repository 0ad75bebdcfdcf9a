"""Surveys in the background: one at a time, with progress, and stale once the plan moves
on."""

from __future__ import annotations

import time
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from PySide6.QtCore import QObject, Signal

from netsketch.session.jobs import Jobs
from netsketch.window.desk import Desk
from netsketch.window.relay import Relay

if TYPE_CHECKING:
    from netsketch.analysis.ledger import Ledger
    from netsketch.analysis.survey import Failure, Survey
    from netsketch.analysis.survey_load import SurveyLoads


@dataclass(frozen=True)
class Done:
    """A survey with the loads that go with it (``None`` where there are no demands), and
    the fingerprint of the network it is of."""

    survey: Survey
    loads: SurveyLoads | None
    fingerprint: str


class Surveys(QObject):
    """Runs surveys of the desk's plan in its trial, in a worker of its own."""

    progressed = Signal(float, float)
    """Part done (0 to 1) and seconds left, from the worker thread."""
    changed = Signal()
    failure_shown = Signal()
    refused = Signal(str)

    def __init__(self, desk: Desk, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._desk = desk
        self._jobs = Jobs()
        self._relay = Relay(self._jobs, self)
        self.done: Done | None = None
        self.is_running = False
        self.ledger: Ledger | None = None
        self.failure: Failure | None = None

    def start(self, kind: str) -> None:
        """Survey every failure of a kind on the plan in its trial."""
        answers = self._desk.answers
        if answers is None:
            self.refused.emit("The routing core is still being loaded; try again in a moment")
            return
        from netsketch.analysis.survey import failures_of

        plan, network = self._desk.document.plan, answers.in_trial
        failures, demands = failures_of(plan, kind), list(plan.demands)
        if not failures:
            self.refused.emit(f"The plan has no {kind} that could fail")
            return
        self.is_running = True
        self._relay.submit(
            "survey",
            lambda cancelled: self._run(kind, network, failures, demands, cancelled),
            self._arrived,
        )
        self.changed.emit()

    def _run(self, kind: str, network: Any, failures: Any, demands: Any, cancelled: Any) -> Done:
        """Compute in the worker thread; only signals leave it."""
        from netsketch.analysis.survey import survey
        from netsketch.analysis.survey_load import survey_loads

        start = time.monotonic()

        def tell(part: float) -> None:
            if part > 0:
                left = (time.monotonic() - start) / part * (1 - part)
                self.progressed.emit(part, left)

        weight = 0.5 if demands else 1.0
        found = survey(network, kind, failures, lambda part: tell(part * weight), cancelled)
        loads = None
        if demands:
            loads = survey_loads(
                network, failures, demands, lambda part: tell(weight + part * weight), cancelled
            )
        return Done(found, loads, network.fingerprint)

    def _arrived(self, result: Any) -> None:
        self.is_running = False
        if isinstance(result, Exception):
            self.refused.emit(f"The survey could not be computed: {result}")
        else:
            self.done = result
        self.changed.emit()

    def cancel(self) -> None:
        """Give up the survey that runs; the last one done stays."""
        self._relay.give_up("survey")
        self.is_running = False
        self.changed.emit()

    @property
    def is_stale(self) -> bool:
        """Whether the plan in its trial is no longer what was surveyed."""
        answers = self._desk.answers
        if self.done is None or answers is None:
            return False
        return answers.in_trial.fingerprint != self.done.fingerprint

    def show_failure(self, failure: Failure) -> None:
        """Ask for the ledger of one failure on top of the trial."""
        answers = self._desk.answers
        if answers is None:
            return
        from netsketch.analysis.ledger import compare_networks
        from netsketch.analysis.survey_load import as_trial

        before = answers.in_trial
        after = before.laid_over(as_trial(failure))
        self.failure = failure
        self._relay.submit(
            "failure", lambda cancelled: compare_networks(before, after, cancelled), self._shown
        )

    def _shown(self, result: Any) -> None:
        if isinstance(result, Exception):
            self.refused.emit(f"The ledger of the failure could not be computed: {result}")
        else:
            self.ledger = result
            self.failure_shown.emit()

    def forget(self) -> None:
        """Drop what was surveyed: another document is open."""
        self.cancel()
        self.done = self.ledger = self.failure = None
        self.changed.emit()

    def close(self) -> None:
        """End the worker."""
        self._jobs.close()
