"""Asks a worker for what a page shows of a sheet, the newest first, and only while the page is in sight."""

from dataclasses import dataclass, replace

from PySide6.QtCore import QObject, QTimer, Signal

from tuner.compare.tuning_table import Tuning
from tuner.model.sheet import Sheet
from tuner.window.beside import Beside
from tuner.window.shown import Failure

LATE = 250
"""Milliseconds after which what a change made untrue is shown paler, if nothing newer has come."""


@dataclass(frozen=True, slots=True)
class Question:
    """What a page is about: a sheet, and tunings to compare with; two equal ones have one answer."""

    sheet: Sheet
    kept: tuple[Tuning, ...] = ()


@dataclass(frozen=True, slots=True)
class Request:
    """A question; the newest `number` wins."""

    number: int
    question: Question


@dataclass(frozen=True, slots=True, eq=False)
class Answer:
    """What a worker found for a request."""

    request: Request
    found: object


class InSight(QObject):
    """Keeps a page answered.

    Parameters
    ----------
    worker : Beside
        Answers a `Request` with an `Answer`.
    """

    answered = Signal(object)
    """What was found for the newest question that has an answer."""
    late = Signal()
    """What is shown is not true any more, and what is true is still awaited."""
    failed = Signal(str)
    """Why there is no answer, a sentence."""

    def __init__(self, worker: Beside[Request]) -> None:
        super().__init__()
        self._worker = worker
        self._wanted: Question | None = None
        self._asked_for: Question | None = None
        self._asked = self._first = 0
        self._active = False
        self._late = QTimer(self, singleShot=True, interval=LATE)
        self._late.timeout.connect(self.late)
        worker.answered.connect(self._answered)
        worker.failed.connect(self._failed)

    def want(self, question: Question) -> None:
        """Take up a question, unless it is the one that is or was answered."""
        self._wanted = question
        self._go_on()

    def activate(self, active: bool) -> None:
        """Ask from now on, or no more: nobody sees the page."""
        self._active = active
        self._go_on()

    def forget(self) -> None:
        """Take no answer to what was asked so far."""
        self._wanted = self._asked_for = None
        self._first = self._asked + 1
        self._late.stop()

    def close(self) -> None:
        """Ask no more, and end the worker."""
        self._active = False
        self._late.stop()
        self._worker.close()

    def _go_on(self) -> None:
        if not self._active or self._wanted is None or self._wanted == self._asked_for:
            return
        self._asked += 1
        self._asked_for = self._wanted
        if not self._late.isActive():
            self._late.start()
        self._worker.submit(Request(self._asked, self._wanted))

    def _answered(self, answer: Answer) -> None:
        if answer.request.number < self._first:
            return
        self._first = answer.request.number
        if answer.request.number == self._asked:
            self._late.stop()
        self.answered.emit(answer.found)

    def _failed(self, failure: Failure) -> None:
        if failure.number == self._asked and failure.number >= self._first:
            self._late.stop()
            self.failed.emit(failure.sentence)


def without_as_found(sheet: Sheet) -> Sheet:
    """Return a sheet without the controller met on site, which a structure does not depend on."""
    return replace(sheet, controller=replace(sheet.controller, as_found=None))
