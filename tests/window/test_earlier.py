"""What earlier tunings came to: which are asked about, when, and in which words."""

from dataclasses import replace
from math import inf

import pytest
from pytestqt.qtbot import QtBot

from tests.compare.loops import mash
from tests.window.tunings.loops import AS_FOUND
from tuner.assess import assess
from tuner.compare.tuning_table import Column, Tuning
from tuner.compare.tunings import judged
from tuner.judge.assessment import WorstCase
from tuner.model.controller import DisturbanceFeedforward
from tuner.model.loop import Loop, Signal
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.earlier import Earlier, EarlierTunings, EarlierWords, answering_by, earlier_words, question_of
from tuner.window.in_sight import LATE

LOOP = Loop("x", "min", Signal(unit="degC"))


class Judging:
    """Judges by the true road, and remembers what it was asked."""

    def __init__(self) -> None:
        self.asked: list[str] = []

    def __call__(self, sheet: Sheet, tuning: Tuning) -> Column:
        """Return a tuning with its assessment."""
        self.asked.append(tuning.name)
        return judged(sheet, tuning, 5)


@pytest.fixture
def document() -> Document:
    """Return a small loop with a controller as found, opened."""
    return Document(mash(more=AS_FOUND))


def test_as_found_and_the_newest_kept_tuning(document: Document) -> None:
    """Two at most; the present tuning and the limits make no difference."""
    assert [one.name for one in question_of(document).kept] == ["as found"]
    document.keep()
    before = question_of(document)
    document.change_value("kp", 3.0)
    document.change(replace(document.sheet, limits=()), label="Forget the limits")
    assert question_of(document) == before
    document.keep()
    assert [one.name for one in question_of(document).kept] == ["as found", "B"]
    document.forget_as_found()
    assert [one.name for one in question_of(document).kept] == ["B"]


def test_what_is_known_follows_the_document(document: Document, qtbot: QtBot) -> None:
    """Nothing before it may begin, then once for each change that matters; another loop has none at first."""
    del qtbot
    judging = Judging()
    shown: list[tuple[Earlier, ...]] = []
    earlier = EarlierTunings(document, shown.append, Beside(answering_by(judging), synchronous=True))
    document.change_value("kp", 3.0)
    assert (judging.asked, shown) == ([], [])
    earlier.start()
    document.change_value("kp", 2.5)
    document.keep()
    assert judging.asked == ["as found", "as found", "A"]
    assert [[one.name for one in known] for known in shown] == [["as found"], ["as found", "A"]]
    shown.clear()
    document.start(mash())
    assert shown == [(), ()]
    earlier.close()
    document.keep()
    assert len(judging.asked) == 3


def test_values_are_the_worst_over_the_family(document: Document) -> None:
    """Of the controller as found, with the plants by how far they have drifted."""
    found = document.sheet.controller.as_found
    assert found is not None
    shown: list[tuple[Earlier, ...]] = []
    earlier = EarlierTunings(document, shown.append, Beside(answering_by(Judging()), synchronous=True))
    earlier.start()
    expected = assess(replace(document.sheet, controller=found), 5)
    ((known,),) = shown
    assert known.worst["rise_time"].value == expected.worst["rise_time"].value
    assert known.worst["rise_time"].plant == expected.drift_of(expected.worst["rise_time"].plant)
    earlier.close()


def test_a_tuning_that_cannot_be_computed_is_left_out(document: Document) -> None:
    """The other one is shown all the same."""
    odd = replace(document.sheet.controller, disturbance_feedforward=DisturbanceFeedforward("1"), as_found=None)
    document.change(replace(document.sheet, controller=replace(document.sheet.controller, as_found=odd)), label="Odd")
    document.change_value("kp", 1.0)
    document.keep()
    shown: list[tuple[Earlier, ...]] = []
    earlier = EarlierTunings(document, shown.append, Beside(answering_by(Judging()), synchronous=True))
    earlier.start()
    assert [[one.name for one in known] for known in shown] == [["A"]]
    earlier.close()


def test_what_is_out_of_date_for_long_is_taken_away(document: Document, qtbot: QtBot) -> None:
    """Until the answer for the new plant is there."""

    class Slow(Beside):  # type: ignore[type-arg]  # answers nothing
        def submit(self, request: object) -> None:
            """Keep silent."""

    shown: list[tuple[Earlier, ...]] = []
    earlier = EarlierTunings(document, shown.append, Slow(answering_by(Judging())))
    earlier.start()
    qtbot.waitUntil(lambda: shown == [()], timeout=20 * LATE)
    earlier.close()


@pytest.mark.parametrize(
    ("name", "measure", "worst", "words"),
    [
        (
            "as found",
            "rise_time",
            WorstCase(12.345, "gain +15 %"),
            EarlierWords("found 12.3 min", "As found: 12.3 min at gain +15 %."),
        ),
        ("A", "gain_margin", WorstCase(inf, "nominal"), EarlierWords("A ∞", "Tuning A: ∞ at the nominal plant.")),
        (
            "A",
            "steady_state_error",
            WorstCase(-2.0, "nominal"),
            EarlierWords("A 2 %", "Tuning A: 2 % at the nominal plant."),
        ),
        (
            "B",
            "peak_time",
            WorstCase(None, "nominal", none=True),
            EarlierWords("B none", "Tuning B: none at the nominal plant."),
        ),
        ("B", "settling_time", WorstCase(None, "nominal"), EarlierWords("B —", "Tuning B: — at the nominal plant.")),
    ],
)
def test_words(name: str, measure: str, worst: WorstCase, words: EarlierWords) -> None:
    """Short beside the present value, whole in the tip; nothing of a measure that is not known."""
    earlier = (Earlier(name, {measure: worst}), Earlier("other", {}))
    assert earlier_words(earlier, measure, LOOP) == (words,)
