"""The worker: newest wins, nominal first where the family is slow, faults as sentences, an end that is waited for."""

import threading
from collections.abc import Callable, Iterator

import pytest
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tuner.errors import LoopError
from tuner.judge.assessment import Assessment
from tuner.model.sheet import Sheet
from tuner.session.tunings import KeptTuning
from tuner.window import worker
from tuner.window.shown import Failure, Request, Shown
from tuner.window.worker import Assessing, Assessor

Make = Callable[..., Assessor]


@pytest.fixture
def make(qtbot: QtBot) -> Iterator[Make]:
    """Return a maker of assessors, all of which are closed in the end."""
    del qtbot
    made: list[Assessor] = []

    def new(judge: Callable[[Sheet, int], Assessment] = made_up.judge, *, synchronous: bool = False) -> Assessor:
        made.append(
            Assessor(
                made_up.sketching(judge), lambda sheet, _plant: judge(sheet, 1), made_up.draw, synchronous=synchronous
            )
        )
        return made[-1]

    yield new
    for assessor in made:
        assessor.close()


def test_an_answer_comes_back_on_the_main_thread(make: Make, qtbot: QtBot) -> None:
    """The slot runs where the window lives."""
    assessor, threads = make(), []
    assessor.answered.connect(lambda _: threads.append(threading.current_thread()))
    with qtbot.waitSignal(assessor.answered, check_params_cb=lambda shown: shown.whole):
        assessor.submit(Request(1, made_up.sheet()))
    assert set(threads) == {threading.main_thread()}


def test_the_nominal_plant_comes_first_while_the_cost_is_unknown(make: Make, qtbot: QtBot) -> None:
    """The first request is answered for the nominal plant, then for the whole family."""
    assessor = make()
    answers: list[Shown] = []
    assessor.answered.connect(answers.append)
    assessor.submit(Request(1, made_up.sheet()))
    qtbot.waitUntil(lambda: len(answers) == 2)
    assert [(shown.whole, shown.assessment.family_size) for shown in answers] == [(False, 1), (True, 25)]


def test_the_newest_request_wins(make: Make, qtbot: QtBot) -> None:
    """Requests that come while one is being answered are dropped, all but the last."""
    busy, go = threading.Event(), threading.Event()
    judged: list[float] = []

    def judge(sheet: Sheet, size: int) -> Assessment:
        judged.append(sheet.controller.gain_1)
        busy.set()
        assert go.wait(10.0)
        return made_up.judge(sheet, size)

    assessor = make(judge)
    answers: list[Shown] = []
    assessor.answered.connect(answers.append)
    assessor.submit(Request(1, made_up.sheet(1.0)))
    assert busy.wait(10.0)
    for number, kp in ((2, 1.1), (3, 1.2), (4, 1.3)):
        assessor.submit(Request(number, made_up.sheet(kp)))
    go.set()
    qtbot.waitUntil(lambda: any(shown.whole for shown in answers))
    assert set(judged) == {1.0, 1.3}
    assert [shown.number for shown in answers if shown.whole] == [4]


@pytest.mark.parametrize(("late", "whole"), [(0.0, {1, 2, 3, 4, 5}), (1e9, {1, 5})])
def test_the_family_is_not_put_off_for_ever(
    make: Make, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch, late: float, whole: set[int]
) -> None:
    """While newer requests keep coming, the family waits until it is due, and then comes between them."""
    monkeypatch.setattr(worker, "LATE", late)
    monkeypatch.setattr(worker, "LATE_TIMES", 0.0)
    monkeypatch.setattr(worker, "QUICK", 0.0)
    monkeypatch.setattr(worker, "OUTLINED", 0.0)

    def judge(sheet: Sheet, size: int) -> Assessment:
        number = round(sheet.controller.gain_1)
        if size == 1 and 1 < number < 5:
            assessor.submit(Request(number + 1, made_up.sheet(number + 1.0)))
        return made_up.judge(sheet, size)

    assessor = make(judge)
    answers: list[Shown] = []
    assessor.answered.connect(answers.append)
    assessor.submit(Request(1, made_up.sheet(1.0)))
    qtbot.waitUntil(lambda: any(shown.whole for shown in answers))
    assessor.submit(Request(2, made_up.sheet(2.0)))
    qtbot.waitUntil(lambda: any(shown.whole and shown.number == 5 for shown in answers))
    assert {shown.number for shown in answers if shown.whole} == whole


def test_a_loop_that_cannot_be_computed_is_a_sentence(make: Make, qtbot: QtBot) -> None:
    """A refusal of the loop arrives as its own words, once."""
    assessor = make()
    failures: list[Failure] = []
    assessor.failed.connect(failures.append)
    with qtbot.waitSignal(assessor.failed):
        assessor.submit(Request(7, made_up.sheet(0.0)))
    with qtbot.waitSignal(assessor.answered):
        assessor.submit(Request(8, made_up.sheet(1.0)))
    assert failures == [Failure(7, "the loop has no gain: kp is 0")]


def test_a_fault_of_the_program_is_a_sentence_too(make: Make, caplog: pytest.LogCaptureFixture) -> None:
    """What nobody foresaw does not end the thread; it is logged and said."""

    def judge(_sheet: Sheet, _size: int) -> Assessment:
        message = "division by nothing"
        raise ZeroDivisionError(message)

    assessor = make(judge, synchronous=True)
    failures: list[Failure] = []
    assessor.failed.connect(failures.append)
    assessor.submit(Request(1, made_up.sheet()))
    assert failures[0].sentence == (
        "The loop could not be computed; this is a fault of the program: ZeroDivisionError('division by nothing')"
    )
    assert "could not be assessed" in caplog.text


def test_synchronous_answers_at_once(make: Make) -> None:
    """With the switch for tests, `submit` answers before it returns, for the whole family."""
    assessor = make(synchronous=True)
    answers: list[Shown] = []
    assessor.answered.connect(answers.append)
    assessor.submit(Request(1, made_up.sheet()))
    assert [shown.whole for shown in answers] == [True]


def test_closing_waits_for_work_in_flight(make: Make) -> None:
    """`close` returns only when the thread has ended, and nothing is answered afterwards."""
    busy = threading.Event()

    def judge(sheet: Sheet, size: int) -> Assessment:
        busy.set()
        threading.Event().wait(0.2)
        return made_up.judge(sheet, size)

    assessor = make(judge)
    assessor.submit(Request(1, made_up.sheet()))
    assert busy.wait(10.0)
    assessor.close()
    before = threading.active_count()
    assessor.submit(Request(2, made_up.sheet()))
    assessor.close()
    assert threading.active_count() == before


def test_kept_tunings_run_once_for_the_same_plant() -> None:
    """A kept tuning is run again only when what it runs on has changed."""
    runs: list[float] = []

    def judge(sheet: Sheet, size: int) -> Assessment:
        runs.append(sheet.controller.gain_1)
        return made_up.judge(sheet, size)

    assessing = Assessing(made_up.sketching(judge), lambda sheet, _plant: judge(sheet, 1), made_up.draw)
    kept = (KeptTuning("A", "kp 3", made_up.sheet(3.0).controller),)
    for number in range(3):
        shown = assessing.whole(Request(number, made_up.sheet(1.0 + 0.1 * number), kept))
    assert runs.count(3.0) == 1
    assert [result.name for result in shown.kept] == ["A"]


def test_a_kept_tuning_that_cannot_run_is_left_out() -> None:
    """The present tuning is answered all the same."""
    kept = (KeptTuning("A", "kp 0", made_up.sheet(0.0).controller),)
    shown = Assessing(made_up.sketch, made_up.glance, made_up.draw).whole(Request(1, made_up.sheet(1.0), kept))
    assert shown.kept == ()
    with pytest.raises(LoopError):
        made_up.judge(made_up.sheet(0.0))


def test_the_plant_that_is_looked_at_comes_first_too() -> None:
    """The quick answer has the nominal plant and that one, which stands first for the plots; kept tunings run on it."""
    assessing = Assessing(made_up.sketch, made_up.glance, made_up.draw)
    plant = made_up.judge(made_up.sheet()).members[3].name
    kept = (KeptTuning("A", "kp 3", made_up.sheet(3.0).controller),)
    shown = assessing.nominal(Request(1, made_up.sheet(), kept, looked_at=plant, family_view="band"))
    assert [member.name for member in shown.assessment.members] == ["nominal", plant]
    assert (shown.looked_at, shown.family_view) == (plant, "band")
    assert shown.as_seen().assessment.nominal.name == plant
    assert shown.kept[0].member.name == plant


def test_a_plant_that_the_family_has_no_more_is_not_looked_at() -> None:
    """The nominal one is shown in its place."""
    assessing = Assessing(made_up.sketch, made_up.glance, made_up.draw)
    for answer in (assessing.nominal, assessing.whole):
        shown = answer(Request(1, made_up.sheet(), looked_at="gain 7"))
        assert shown.looked_at == ""
        assert shown.as_seen().assessment.nominal.name == "nominal"


def test_the_family_goes_on_once_the_first_picture_is_painted(
    make: Make, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Without that word it waits for its time."""
    monkeypatch.setattr(worker, "FRAME", 60.0)
    monkeypatch.setattr(worker, "QUICK", 0.0)
    monkeypatch.setattr(worker, "SLOW", 60.0)
    assessor = make()
    answers: list[Shown] = []
    assessor.answered.connect(answers.append)
    assessor._assessing.cost = 1.0
    assessor.submit(Request(1, made_up.sheet()))
    qtbot.waitUntil(lambda: len(answers) == 1)
    assessor.go_on()
    qtbot.waitUntil(lambda: len(answers) == 2)
    assert answers[1].whole


def test_all_curves_come_first_where_they_are_quick(make: Make, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch) -> None:
    """Once it is known what they take; their verdict follows, and nothing is run twice for it."""
    monkeypatch.setattr(worker, "QUICK", 0.0)
    monkeypatch.setattr(worker, "FRAME", 0.0)
    assessor = make()
    answers: list[Shown] = []
    assessor.answered.connect(answers.append)
    for number in (1, 2):
        assessor.submit(Request(number, made_up.sheet(float(number))))
        qtbot.waitUntil(lambda: bool(answers) and answers[-1].whole)
        first, second = answers
        answers.clear()
        assert not first.whole
        assert second.assessment.family_size == 25
        assert first.has_family == first.outlined == (number == 2)
    assert first.assessment.family_size == 25
    assert first.assessment.limits == made_up.glance(made_up.sheet(2.0)).limits


def test_curves_over_frequency_wait_for_the_margins() -> None:
    """They are part of the same picture."""
    assessing = Assessing(made_up.sketch, made_up.glance, made_up.draw, half=0.0)
    assert assessing.first(Request(1, made_up.sheet())).outlined
    assert assessing.first(Request(2, made_up.sheet(), looked_at="gain 7")).outlined
    # The made-up loop has no response over frequency; that it is asked for decides.
    assert assessing._answers_in_outline(Request(3, made_up.sheet()))
    assert not assessing._answers_in_outline(Request(3, made_up.sheet(), frequency=True))


def test_half_an_answer_is_of_use_to_its_own_request_alone() -> None:
    """What was begun for an older sheet is begun anew for a newer one."""
    begun: list[float] = []

    def sketch(sheet: Sheet, size: int) -> made_up.Sketched:
        begun.append(sheet.controller.gain_1)
        return made_up.sketch(sheet, size)

    assessing = Assessing(sketch, made_up.glance, made_up.draw)
    one, other = Request(1, made_up.sheet(1.0)), Request(2, made_up.sheet(2.0))
    assessing.outlined(one)
    assert assessing.whole(one).whole
    assert begun == [1.0]
    assessing.outlined(one)
    assert assessing.whole(other).assessment.nominal.measures == made_up.judge(other.sheet, 1).nominal.measures
    assert begun == [1.0, 1.0, 2.0]
