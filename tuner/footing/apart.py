"""Rulers and maps painted by a process of their own.

An interpreter runs one thread at a time, however many processors there are: what paints beside a window would hold up
the hand, and be held up by it. A process of its own has an interpreter of its own, and can be ended at any moment, also
while it compiles. Questions and answers are pickled; both ends are this program.
"""

import os
import pickle
import subprocess
import sys
import threading
from collections.abc import Callable, Mapping, Sequence
from contextlib import suppress
from dataclasses import dataclass, field
from pathlib import Path
from queue import Empty, SimpleQueue
from typing import IO, TYPE_CHECKING, Literal, NamedTuple, cast

from tuner.errors import LoopError, TrimwrightError
from tuner.footing.classes import Overtaken, PaintedTrack, Track
from tuner.footing.threads import NICE
from tuner.model.sheet import Sheet

if TYPE_CHECKING:
    # It comes with compiled loops, which who only asks need not load.
    from tuner.footing.gain_map import GainMap

_TRIES = 2
"""How often a question is asked before it is answered in this process: one that has died is started anew once."""

_LOOK = 0.01
"""Seconds after which it is looked whether an answer is still wanted."""

Stop = Callable[[], bool]
Road = Literal["rulers", "map"]


class _Question(NamedTuple):
    number: int
    road: Road
    asked: tuple[object, ...]
    named: Mapping[str, object]


class _Answer(NamedTuple):
    """An answer, or what was raised in its place."""

    number: int
    found: object
    raised: Exception | None = None


class _Ended(Exception):  # noqa: N818 - the process has, which is no error of the question
    """There is no process to answer."""


@dataclass(slots=True)
class _Running:
    """A process, and the answers that have come from it; None once there will be no more."""

    process: "subprocess.Popen[bytes]"
    answers: "SimpleQueue[_Answer | None]" = field(default_factory=SimpleQueue)
    reader: threading.Thread = field(init=False)

    def __post_init__(self) -> None:
        """Begin to take answers."""
        self.reader = threading.Thread(target=self._read, name="apart", daemon=True)
        self.reader.start()

    def end(self) -> None:
        """End the process, whatever it does."""
        self.process.kill()
        self.process.wait()
        self.reader.join()
        with suppress(OSError):  # a question may still lie in the pipe
            cast(IO[bytes], self.process.stdin).close()
        cast(IO[bytes], self.process.stdout).close()

    def _read(self) -> None:
        """Take answers until the process has ended; runs in a thread."""
        source = cast(IO[bytes], self.process.stdout)
        try:
            while True:
                self.answers.put(pickle.load(source))  # noqa: S301 - from this program itself
        except Exception:  # however it ended, there is nothing more to read
            self.answers.put(None)

    def ask(self, question: _Question) -> None:
        """Hand over a question."""
        target = cast(IO[bytes], self.process.stdin)
        try:
            pickle.dump(question, target)
            target.flush()
        except (OSError, ValueError) as fault:
            raise _Ended from fault


class Apart:
    """Asks a process of its own, which is started at the first question, or by `start` ahead of it."""

    def __init__(self) -> None:
        self._running: _Running | None = None
        self._lock = threading.Lock()
        self._number = 0
        self._closed = False

    def start(self) -> None:
        """Start the process, unless it runs or cannot be started."""
        with self._lock:
            running = self._running
            if self._closed or (running is not None and running.process.poll() is None):
                return
            if running is not None:
                running.end()
            self._running = _started()

    def close(self) -> None:
        """End the process at once, whatever it does."""
        with self._lock:
            self._closed = True
            if self._running is not None:
                self._running.end()

    def paint_rulers(
        self, sheet: Sheet, tracks: Sequence[Track], *, stop: Stop, fine: bool = True
    ) -> tuple[PaintedTrack, ...]:
        """See `rulers.paint_rulers`."""
        found = self._answered(stop, "rulers", sheet, tuple(tracks), fine=fine)
        return cast(tuple[PaintedTrack, ...], found)

    def paint_map(self, sheet: Sheet, x: Track, y: Track, measure: str, *, stop: Stop) -> "GainMap":
        """See `gain_map.paint_map`."""
        return cast("GainMap", self._answered(stop, "map", sheet, x, y, measure))

    def _answered(self, stop: Stop, road: Road, *asked: object, **named: object) -> object:
        self._number += 1
        question = _Question(self._number, road, asked, named)
        for _ in range(_TRIES):
            self.start()
            try:
                return self._ask(question, stop)
            except _Ended:
                if self._closed:
                    raise Overtaken("the window is closing") from None
        return _taken(road)(*asked, stop=stop, **named)

    def _ask(self, question: _Question, stop: Stop) -> object:
        running = self._running
        if running is None:
            raise _Ended
        running.ask(question)
        while (answer := _next(running.answers, stop)).number != question.number:
            pass  # an answer that nobody waited for any more
        if answer.raised is not None:
            raise answer.raised
        return answer.found


def _taken(road: Road) -> Callable[..., object]:
    if road == "rulers":
        from tuner.footing.rulers import paint_rulers

        return paint_rulers
    from tuner.footing.gain_map import paint_map

    return paint_map


def _next(answers: "SimpleQueue[_Answer | None]", stop: Stop) -> _Answer:
    """Wait for an answer for as long as it is wanted."""
    while True:
        try:
            answer = answers.get(timeout=_LOOK)
        except Empty:
            if stop():
                raise Overtaken("a newer question has come") from None
            continue
        if answer is None:
            raise _Ended
        return answer


def _started() -> _Running | None:
    """Start the process; None where the system does not let us."""
    package = str(Path(__file__).resolve().parents[2])
    paths = os.pathsep.join(filter(None, (package, os.environ.get("PYTHONPATH"))))
    quiet = 0x08000000 if sys.platform == "win32" else 0  # no console of its own
    try:
        process = subprocess.Popen(
            [sys.executable, "-c", f"from {__name__} import main; main()"],
            stdin=subprocess.PIPE,
            stdout=subprocess.PIPE,
            env=os.environ | {"PYTHONPATH": paths},
            creationflags=quiet,
        )
    except OSError:
        return None
    return _Running(process)


# --- the process ------------------------------------------------------------------------------------------------


def serve(source: IO[bytes], target: IO[bytes]) -> None:
    """Answer questions, the newest first, until there are no more: then the program has ended that asks them."""
    inbox: SimpleQueue[_Question] = SimpleQueue()
    threading.Thread(target=_take, args=(source, inbox), daemon=True).start()
    while True:
        question = inbox.get()
        while not inbox.empty():
            question = inbox.get()
        pickle.dump(_answer(question, lambda: not inbox.empty()), target)
        target.flush()


def _take(source: IO[bytes], inbox: "SimpleQueue[_Question]") -> None:
    try:
        while True:
            inbox.put(pickle.load(source))  # noqa: S301 - from this program itself
    except (OSError, EOFError):
        os._exit(0)


def _answer(question: _Question, stop: Stop) -> _Answer:
    try:
        found = _taken(question.road)(*question.asked, stop=stop, **question.named)
    except TrimwrightError as refusal:
        return _Answer(question.number, None, LoopError(str(refusal)))
    except Exception as fault:  # what nobody foresaw is told where it was asked
        return _Answer(question.number, None, RuntimeError(repr(fault)))
    return _Answer(question.number, found)


def main() -> None:
    """Serve over the standard streams; what anything prints goes to the standard error."""
    if sys.platform != "win32":
        os.nice(NICE)
    target = os.fdopen(os.dup(1), "wb")
    os.dup2(2, 1)
    try:
        serve(sys.stdin.buffer, target)
    except (KeyboardInterrupt, BrokenPipeError):
        os._exit(0)
