"""A question is that of the sheet without its two gains, and the answer has contours where there is a scale."""

import numpy as np
import pytest

from tests.window import made_up, made_up_footing
from tests.window.gain_map.made_up_map import Mapping
from tuner.footing.classes import LOST
from tuner.footing.gain_map import paint_map
from tuner.model.parameters import find, rulers
from tuner.session.document import Document
from tuner.window.gain_map.axis import Axis, axis_of
from tuner.window.gain_map.question import MapRequest, PlaceRequest, drawing_by, question_of, reading_by


def axes() -> tuple[Axis, Axis]:
    """Return kp across and ki upwards."""
    document = Document(made_up.sheet())
    return axis_of(document, find("controller.kp")), axis_of(document, find("controller.ki"))


def test_the_two_gains_do_not_change_the_question() -> None:
    """Another value of a mapped gain is the same question; one of another gain, or another measure, is not."""
    x, y = axes()
    sheet = made_up.sheet()
    asked = question_of(sheet, x, y, "overshoot")
    assert asked == question_of(made_up.sheet(kp=9.0), x, y, "overshoot")
    assert asked != question_of(sheet, x, y, "")
    assert asked != question_of(sheet, y, x, "overshoot")
    assert asked.limit == 8.0


def test_contours_are_over_the_scales() -> None:
    """The made-up measure is ten times kp: each line is at that share of the length."""
    x, y = axes()
    asked = question_of(made_up.sheet(), x, y, "overshoot")
    answer = drawing_by(Mapping())(MapRequest(3, asked, 33), lambda: False)
    assert (answer.number, answer.map.classes.shape) == (3, (34, 34))
    (limit,) = (contour for contour in answer.contours if contour.is_limit)
    between = x.shares(x.track(33).values)
    place = np.interp(8.0, 10.0 * x.track(33).values, between)
    assert np.allclose(limit.lines[0][:, 0], place)


def test_a_place_is_read_with_both_gains() -> None:
    """An absent value is asked for as 0, which the footing takes for absent."""
    reasons = made_up_footing.Reasons()
    read = reading_by(reasons)
    reading = read(PlaceRequest(1, made_up.sheet(), (("kp", 40.0), ("windup_time", None))), lambda: False)
    assert reasons.asked == [{"kp": 40.0, "windup_time": 0.0}]
    assert (reading.number, reading.grade) == (1, LOST)


@pytest.mark.parametrize("name", [parameter.name for parameter in rulers("parallel")])
def test_a_question_without_a_gain_can_be_computed(name: str) -> None:
    """What is held has a loop whichever gain is left out; the classes do not depend on what it was."""
    document = Document(made_up.sheet())
    other = "kp" if name != "kp" else "ki"
    x, y = (axis_of(document, find(f"controller.{key}")) for key in (name, other))
    asked = question_of(document.sheet, x, y, "")
    found = paint_map(asked.sheet, x.track(3), y.track(3))
    assert found.classes.tolist() == paint_map(document.sheet, x.track(3), y.track(3)).classes.tolist()


def test_an_answer_tells_the_unit_of_its_own_contours() -> None:
    """It is that of the measure that was asked for, not of the one that is wanted by now."""
    x, y = axes()
    asked = question_of(made_up.sheet(), x, y, "settling_time")
    answer = drawing_by(Mapping())(MapRequest(1, asked, 9), lambda: False)
    assert answer.unit == "s"
    assert answer.for_measure("settling_time") is answer
    assert answer.for_measure("overshoot").contours == ()
