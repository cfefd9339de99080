"""Work beside the main thread: newest wins, long work gives way but not for ever, faults become sentences."""

import threading
import time
from collections.abc import Callable, Iterator
from dataclasses import dataclass

import pytest
from pytestqt.qtbot import QtBot

from tuner.errors import LoopError
from tuner.footing.classes import Overtaken
from tuner.window.beside import LATE, LATE_TIMES, SHORT, Beside, Pace, Stop
from tuner.window.shown import Failure


@dataclass(frozen=True, slots=True)
class Asked:
    """A request."""

    number: int


Make = Callable[..., Beside[Asked]]


@pytest.fixture
def make(qtbot: QtBot) -> Iterator[Make]:
    """Return a maker of workers, all of which are closed in the end."""
    del qtbot
    made: list[Beside[Asked]] = []

    def new(answer: Callable[[Asked, Stop], object], *, synchronous: bool = False) -> Beside[Asked]:
        made.append(Beside(answer, synchronous=synchronous))
        return made[-1]

    yield new
    for worker in made:
        worker.close()


class Gate:
    """Holds work up until it is let go, and notes what was begun."""

    def __init__(self) -> None:
        self.begun: list[int] = []
        self.stopped: list[int] = []
        self.arrived, self.open = threading.Event(), threading.Event()

    def __call__(self, asked: Asked, stop: Stop) -> int:
        """Answer with the number of the request, or end when told so."""
        self.begun.append(asked.number)
        self.arrived.set()
        while not self.open.wait(0.001):
            if stop():
                self.stopped.append(asked.number)
                raise Overtaken
        return asked.number


def test_the_answer_comes_back_on_the_main_thread(make: Make, qtbot: QtBot) -> None:
    """The work is done in another thread, the slot runs in the window's."""
    threads: dict[str, int] = {}
    worker = make(lambda asked, _stop: threads.setdefault("work", threading.get_ident()) and asked.number)
    worker.answered.connect(lambda _: threads.setdefault("slot", threading.get_ident()))
    with qtbot.waitSignal(worker.answered, check_params_cb=lambda answer: answer == 7):
        worker.submit(Asked(7))
    assert threads["slot"] == threading.get_ident() != threads["work"]


def test_what_waits_gives_way_to_the_newest(make: Make, qtbot: QtBot) -> None:
    """Of the requests that come during a piece of short work only the last is taken up."""
    gate, answers = Gate(), list[int]()
    worker = make(gate)
    worker.answered.connect(answers.append)
    worker.submit(Asked(1))
    assert gate.arrived.wait(10.0)
    for number in (2, 3, 4):
        worker.submit(Asked(number))
    gate.open.set()
    qtbot.waitUntil(lambda: answers == [1, 4])
    assert gate.stopped == []


def test_long_work_is_ended_for_something_newer(make: Make, qtbot: QtBot) -> None:
    """After a long piece of work was done lately, the next one is given up once a newer request is there."""
    gate, answers = Gate(), list[int]()
    worker = make(gate)
    worker.answered.connect(answers.append)
    worker._pace.cost, worker._pace.ended = 1e6, time.perf_counter()
    worker.submit(Asked(1))
    assert gate.arrived.wait(10.0)
    worker.submit(Asked(2))
    qtbot.waitUntil(lambda: gate.stopped == [1])
    gate.open.set()
    qtbot.waitUntil(lambda: answers == [2])


def test_long_work_is_due_in_the_end() -> None:
    """Short work never gives way; long work does only while the last piece was done not long ago."""
    assert not Pace(SHORT, ended=100.0).gives_way(100.0)
    long = Pace(1.0, ended=100.0)
    assert long.gives_way(100.0 + LATE_TIMES - 0.01)
    assert not long.gives_way(100.0 + LATE_TIMES + 0.01)
    assert not Pace(1.1 * SHORT, ended=100.0).gives_way(100.0 + max(LATE, 1.1 * LATE_TIMES * SHORT) + 0.01)
    assert not Pace().gives_way(0.0)


def test_the_pace_is_that_of_whole_pieces() -> None:
    """What was done whole sets cost and end."""
    pace = Pace()
    pace.note(3.0, 3.5)
    assert (pace.cost, pace.ended) == (0.5, 3.5)


@pytest.mark.parametrize("synchronous", [True, False])
def test_a_fault_is_a_sentence(make: Make, qtbot: QtBot, synchronous: bool) -> None:
    """A loop that cannot be computed is answered with why, and the worker works on."""

    def answer(asked: Asked, _stop: Stop) -> int:
        if asked.number == 1:
            raise LoopError("the loop has no gain")
        return asked.number

    worker = make(answer, synchronous=synchronous)
    with qtbot.waitSignal(worker.failed, check_params_cb=lambda failure: failure == Failure(1, "the loop has no gain")):
        worker.submit(Asked(1))
    with qtbot.waitSignal(worker.answered):
        worker.submit(Asked(2))


def test_a_fault_of_the_program_is_told_and_logged(make: Make, qtbot: QtBot, caplog: pytest.LogCaptureFixture) -> None:
    """What nobody foresaw ends neither the worker nor the window."""

    def answer(_asked: Asked, _stop: Stop) -> int:
        raise RuntimeError("no such row")

    worker, failures = make(answer), list[Failure]()
    worker.failed.connect(failures.append)
    worker.submit(Asked(1))
    qtbot.waitUntil(lambda: len(failures) == 1)
    assert failures[0].sentence.endswith("this is a fault of the program: RuntimeError('no such row')")
    assert "could not be answered" in caplog.text


def test_closing_ends_what_runs(make: Make) -> None:
    """A close stops also work that would not give way, waits for it, and answers nothing more."""
    gate, answers = Gate(), list[int]()
    worker = make(gate)
    worker.answered.connect(answers.append)
    worker.submit(Asked(1))
    assert gate.arrived.wait(10.0)
    worker.close()
    worker.submit(Asked(2))
    assert (gate.stopped, gate.begun, answers) == ([1], [1], [])
