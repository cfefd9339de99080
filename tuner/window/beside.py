"""Answers requests beside the main thread: the newest wins, and slow work gives way to it, but not for ever."""

import logging
import time
from collections.abc import Callable
from dataclasses import dataclass
from typing import Generic, Protocol, TypeVar

from PySide6.QtCore import QObject, QThread, Signal

from tuner.errors import TrimwrightError
from tuner.footing.classes import Overtaken
from tuner.footing.threads import give_way
from tuner.window.ending import end
from tuner.window.shown import Failure
from tuner.window.slot import Slot

SHORT = 0.120
"""Seconds that a piece of work may take and still be done whole when something newer is asked."""

REST = 0.060
"""Seconds that longer work waits for the hand to rest before it begins."""

LATE, LATE_TIMES = 0.100, 1.0
"""Seconds, or times its cost, after which longer work is due although the hand still moves."""

_log = logging.getLogger(__name__)


Stop = Callable[[], bool]
"""Tells whether an answer is not wanted any more."""


class Numbered(Protocol):
    """A request; the newest has the highest number."""

    @property
    def number(self) -> int:
        """Counts the requests."""
        ...


Asked = TypeVar("Asked", bound=Numbered)


@dataclass(slots=True)
class Pace:
    """How long the last whole piece of work took and when it was done, and what follows for the next one.

    Parameters
    ----------
    cost : float
        Seconds.
    ended : float
        On the clock of `time.perf_counter`.
    """

    cost: float = 0.0
    ended: float = float("-inf")

    def gives_way(self, now: float) -> bool:
        """Tell whether work that would begin now lets something newer pass: it is long, and there was some lately."""
        return self.cost > SHORT and now - self.ended <= max(LATE, LATE_TIMES * self.cost)

    def note(self, began: float, ended: float) -> None:
        """Note a piece of work that was done whole."""
        self.cost, self.ended = ended - began, ended


class Beside(QObject, Generic[Asked]):
    """Takes requests on the main thread and answers them there, through signals, from a thread of its own.

    Parameters
    ----------
    answer : callable
        Turns a request into an answer, in the thread; its second argument tells when to end with `Overtaken`.
    synchronous : bool
        Answer at once, inside `submit`, for tests that want no thread.
    """

    answered = Signal(object)
    """What `answer` returned."""
    failed = Signal(object)
    """A `Failure`."""

    def __init__(self, answer: Callable[[Asked, Stop], object], *, synchronous: bool = False) -> None:
        super().__init__()
        self._answer = answer
        self._slot: Slot[Asked] = Slot()
        self._pace = Pace()
        self._thread = None if synchronous else _Thread(self.work)

    def submit(self, request: Asked) -> None:
        """Ask for an answer; a request that waits already is dropped for it."""
        if self._thread is None:
            self._tell(request, lambda: False)
            return
        self._slot.put(request)
        if not self._thread.isRunning():
            self._thread.start()

    def close(self) -> None:
        """End the thread, and wait for it unless that takes long; nothing is answered from then on."""
        self._slot.close()
        if self._thread is not None:
            end(self._thread)

    def work(self) -> None:
        """Answer requests until `close`; runs in the thread."""
        while (request := self._slot.take()) is not None:
            gives_way = self._pace.gives_way(time.perf_counter())
            if not (gives_way and self._slot.newer(REST)):
                self._tell(request, self._overtaken if gives_way else self._ended)

    def _overtaken(self) -> bool:
        return self._slot.newer(0.0)

    def _ended(self) -> bool:
        return self._slot.closed

    def _tell(self, request: Asked, stop: Stop) -> None:
        """Send an answer or a failure, or nothing when something newer came between."""
        began = time.perf_counter()
        try:
            answer = self._answer(request, stop)
        except Overtaken:
            pass  # what overtook it is answered next
        except TrimwrightError as fault:
            self.failed.emit(Failure(request.number, str(fault)))
        except Exception as fault:  # the window outlives whatever a room below it did not foresee
            _log.exception("A request could not be answered.")
            sentence = f"The loop could not be computed; this is a fault of the program: {fault!r}"
            self.failed.emit(Failure(request.number, sentence))
        else:
            self._pace.note(began, time.perf_counter())
            self.answered.emit(answer)


class _Thread(QThread):
    """Runs the work."""

    def __init__(self, work: Callable[[], None]) -> None:
        super().__init__()
        self._work = work

    def run(self) -> None:
        """Work until there is nothing more, behind the curves."""
        give_way()
        self._work()
