"""A controller means the same in every form that can say it."""

from dataclasses import replace

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from tuner.errors import LoopError
from tuner.model.controller import Controller, Form, Gains

gains = st.floats(1e-3, 1e3)
S = 0.3 + 0.7j


def response(controller: Controller, s: complex) -> complex:
    """Compute the controller at s from the definition of its form, independently of the conversions."""
    first, second, third = controller.gain_1, controller.gain_2, controller.gain_3
    if controller.form == "parallel":
        return first + second / s + third * s
    integral = 1 / (second * s) if second else 0.0
    if controller.form == "standard":
        return first * (1 + integral + third * s)
    return first * (1 + integral) * (1 + third * s)


@given(st.sampled_from(["parallel", "standard", "series"]), gains, gains | st.just(0.0), gains | st.just(0.0))
def test_parallel_gains_say_the_same(form: Form, first: float, second: float, third: float) -> None:
    """The parallel gains of any form make the same transfer function."""
    controller = Controller(form=form, gain_1=first, gain_2=second, gain_3=third)
    parallel = controller.parallel()
    assert parallel.kp + parallel.ki / S + parallel.kd * S == pytest.approx(response(controller, S), rel=1e-12)


@given(gains, gains | st.just(0.0), gains | st.just(0.0), st.sampled_from(["parallel", "standard", "series"]))
def test_another_form_says_the_same(first: float, second: float, third: float, form: Form) -> None:
    """A series controller has every form, and each makes the same transfer function; back in series it is itself."""
    assume(not second or third <= second)
    series = Controller(form="series", gain_1=first, gain_2=second, gain_3=third)
    other = series.in_form(form)
    assert other.form == form
    assert response(other, S) == pytest.approx(response(series, S), rel=1e-9)
    back = other.in_form("series")
    assert response(back, S) == pytest.approx(response(series, S), rel=1e-7)


def test_the_series_form_as_in_the_book() -> None:
    """Kc = 2, Ti = 10, Td = 2.5 is the limiting case Ti = 4 Td: both times of the series form are 5, its gain half."""
    series = Controller(form="standard", gain_1=2.0, gain_2=10.0, gain_3=2.5).in_form("series")
    assert (series.gain_1, series.gain_2, series.gain_3) == pytest.approx((1.0, 5.0, 5.0))


@pytest.mark.parametrize(
    ("controller", "form", "said"),
    [
        (
            Controller(gain_1=1.0, gain_2=1.0, gain_3=1.0),
            "series",
            "the series form exists only when the integral time is at least four derivative times: "
            "Ti = 1 is less than 4 Td = 4",
        ),
        (
            Controller(gain_2=1.0),
            "standard",
            "the standard form needs a proportional gain: kp is 0 while ki or kd is not",
        ),
        (
            Controller(gain_3=1.0),
            "series",
            "the series form needs a proportional gain: kp is 0 while ki or kd is not",
        ),
    ],
)
def test_a_form_that_cannot_say_it_is_refused(controller: Controller, form: Form, said: str) -> None:
    """Where a form does not exist the reason is told, with the numbers."""
    with pytest.raises(LoopError) as caught:
        controller.in_form(form)
    assert str(caught.value) == said


def test_a_controller_that_does_nothing_has_every_form() -> None:
    """Without any gain there is nothing that a form could not say."""
    for form in ("parallel", "standard", "series"):
        assert Controller().in_form(form).parallel() == Gains(0.0, 0.0, 0.0)


def test_the_same_form_is_the_same_controller() -> None:
    """No conversion, no rounding."""
    controller = Controller(form="series", gain_1=0.1, gain_2=0.3, gain_3=0.7)
    assert controller.in_form("series") is controller


def test_values_go_by_the_names_of_the_sheet() -> None:
    """A gain has the name of its form; an absent time can be set and taken away."""
    controller = Controller(form="standard", gain_1=2.0, gain_2=9.0)
    assert (controller.value("kc"), controller.value("ti"), controller.value("windup_time")) == (2.0, 9.0, None)
    changed = controller.with_value("td", 1.5).with_value("windup_time", 4.0)
    assert changed == replace(controller, gain_3=1.5, windup_time=4.0)
    assert changed.with_value("windup_time", None).windup_time is None


def test_the_sign_is_that_of_the_action() -> None:
    """Reverse acting counts as plus."""
    assert (Controller().sign, Controller(action="direct").sign) == (1.0, -1.0)
