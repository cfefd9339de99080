"""A page in sight is kept answered: the newest question, once, and nothing while nobody looks."""

from dataclasses import replace

import pytest
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tuner.compare.tuning_table import Tuning
from tuner.errors import LoopError
from tuner.session.document import Document
from tuner.window.beside import Beside, Stop
from tuner.window.in_sight import LATE, Answer, InSight, Question, Request, without_as_found
from tuner.window.shown import Failure


class Worker(Beside[Request]):
    """Takes requests, and answers them when it is told to."""

    def __init__(self) -> None:
        super().__init__(lambda request, _stop: Answer(request, request.number))
        self.asked: list[Request] = []

    def submit(self, request: Request) -> None:
        """Remember a request."""
        self.asked.append(request)


@pytest.fixture
def worker(qtbot: QtBot) -> Worker:
    """Return what answers."""
    del qtbot
    return Worker()


@pytest.fixture
def answers(worker: Worker) -> InSight:
    """Return what asks, in sight."""
    made = InSight(worker)
    made.activate(True)
    return made


def question(kp: float = 1.0) -> Question:
    """Return a question."""
    return Question(made_up.sheet(kp))


def test_a_question_is_asked_once(answers: InSight, worker: Worker) -> None:
    """The same sheet again, or the page in sight again, asks nothing."""
    answers.want(question())
    answers.want(question())
    answers.activate(True)
    answers.want(question(2.0))
    assert [request.question for request in worker.asked] == [question(), question(2.0)]
    assert [request.number for request in worker.asked] == [1, 2]


def test_kept_tunings_are_part_of_the_question(answers: InSight, worker: Worker) -> None:
    """Another tuning kept is another question."""
    answers.want(question())
    answers.want(replace(question(), kept=(Tuning("A", "", made_up.sheet(3.0).controller),)))
    assert len(worker.asked) == 2


def test_out_of_sight_nothing_is_asked(answers: InSight, worker: Worker) -> None:
    """Only the newest is, once the page is seen again."""
    answers.activate(False)
    answers.want(question())
    answers.want(question(2.0))
    assert worker.asked == []
    answers.activate(True)
    assert [request.question for request in worker.asked] == [question(2.0)]


def test_answers_come_in_order_and_none_that_was_forgotten(answers: InSight, worker: Worker) -> None:
    """An answer that a newer one has passed, and one on a loop that was left, are dropped."""
    found: list[object] = []
    answers.answered.connect(found.append)
    answers.want(question())
    answers.want(question(2.0))
    first, second = worker.asked
    worker.answered.emit(Answer(second, "second"))
    worker.answered.emit(Answer(first, "first"))
    answers.forget()
    worker.answered.emit(Answer(second, "of the loop before"))
    answers.want(question(2.0))
    worker.answered.emit(Answer(worker.asked[-1], "third"))
    assert found == ["second", "third"]


def test_what_takes_long_is_late(answers: InSight, worker: Worker, qtbot: QtBot) -> None:
    """After a while without an answer; not when one has come in time."""
    late: list[bool] = []
    answers.late.connect(lambda: late.append(True))
    answers.want(question())
    worker.answered.emit(Answer(worker.asked[-1], None))
    qtbot.wait(LATE + 100)
    assert late == []
    answers.want(question(2.0))
    qtbot.waitUntil(lambda: late == [True], timeout=10 * LATE)


def test_a_failure_counts_for_the_newest_question_alone(answers: InSight, worker: Worker) -> None:
    """An older one is of no interest any more."""
    said: list[str] = []
    answers.failed.connect(said.append)
    answers.want(question())
    answers.want(question(2.0))
    worker.failed.emit(Failure(1, "old"))
    worker.failed.emit(Failure(2, "new"))
    assert said == ["new"]


def test_after_closing_nothing_is_asked(answers: InSight, worker: Worker) -> None:
    """Whatever changes then."""
    answers.close()
    answers.want(question())
    assert worker.asked == []


def test_a_true_worker_answers_beside_the_main_thread(qtbot: QtBot) -> None:
    """The finding comes back by signal, a refusal as its sentence."""

    def answer(request: Request, _stop: Stop) -> Answer:
        if request.question == question(2.0):
            raise LoopError("there is no such loop")
        return Answer(request, "found")

    answers = InSight(Beside(answer))
    answers.activate(True)
    with qtbot.waitSignal(answers.answered) as answered:
        answers.want(question())
    with qtbot.waitSignal(answers.failed) as failed:
        answers.want(question(2.0))
    assert (answered.args, failed.args) == (["found"], ["there is no such loop"])
    answers.close()


def test_the_controller_as_found_is_left_out() -> None:
    """Two sheets that differ in it alone become one."""
    document = Document(made_up.sheet())
    document.note_as_found()
    assert without_as_found(document.sheet) == made_up.sheet()
