"""Numbers and units in words."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.judge.invented import LOOP
from tuner.judge.assessment import LimitResult
from tuner.judge.wording import minus, number, quantity, relation, shortfall, told_apart, unit_of
from tuner.model.loop import Loop


@pytest.mark.parametrize(
    ("value", "said"),
    [
        (0.0, "0"),
        (96.0, "96"),
        (1.70049, "1.7"),
        (123456.0, "123500"),
        (0.000123456, "0.0001235"),
        (-3.14159, "-3.142"),
        (float("inf"), "inf"),
        (-float("inf"), "-inf"),
    ],
)
def test_four_digits(value: float, said: str) -> None:
    """Four significant digits, plain as long as that can be read."""
    assert number(value) == said


def test_units_come_from_the_loop() -> None:
    """The placeholders of the table of measures become the units of the loop's signals and time."""
    assert unit_of("iae_reference", LOOP) == "degC min"
    assert unit_of("bandwidth", LOOP) == "rad/min"
    assert unit_of("gain_margin", LOOP) == ""
    assert unit_of("iae_reference", Loop("bare")) == "s"


def test_quantities() -> None:
    """A number has its unit, an infinite or missing one needs none."""
    assert quantity(96.0, "s") == "96 s"
    assert quantity(2.0, "") == "2"
    assert quantity(float("inf"), "s") == "inf"
    assert quantity(None, "s") == "none"


@pytest.mark.parametrize(
    ("measure", "value", "limit", "said"),
    [
        ("settling_time", 96.0, 90.0, "settling time 96 min > 90 min"),
        ("settling_time", 90.0, 90.0, "settling time 90 min = 90 min"),
        ("settling_time", 90.0000012, 90.0, "settling time 90.000001 min > 90 min"),
        ("settling_time", None, 90.0, "no settling time (at most 90 min)"),
        ("gain_margin", 1.5, 2.0, "gain margin 1.5 < 2"),
        ("gain_margin", 2.5, 2.0, "gain margin 2.5 > 2"),
        ("gain_margin", None, 2.0, "no gain margin (at least 2)"),
        ("steady_state_error", -3.0, 2.0, "steady-state error 3 % > 2 %"),
        ("steady_state_error", -1.0, 2.0, "steady-state error 1 % < 2 %"),
    ],
)
def test_how_a_value_stands_to_its_limit(measure: str, value: float | None, limit: float, said: str) -> None:
    """Word for word, both directions, and by size."""
    assert relation(measure, value, limit, LOOP) == said


@given(st.floats(1e-3, 1e3), st.floats(1e-3, 1e3))
def test_different_numbers_read_differently(value: float, limit: float) -> None:
    """A missed limit never reads as "90 > 90"."""
    digits = told_apart(value, limit)

    assert (value == limit) == (number(value, digits) == number(limit, digits))


@pytest.mark.parametrize(
    ("measure", "limit", "value", "met", "beyond"),
    [
        ("overshoot", 10.0, 12.0, False, 0.2),
        ("overshoot", 10.0, 8.0, True, -0.2),
        ("gain_margin", 2.0, 1.5, False, 0.25),
        ("steady_state_error", 2.0, -3.0, False, 0.5),
        ("settling_time", 90.0, None, False, float("inf")),
        ("peak_time", 90.0, None, True, float("-inf")),
    ],
)
def test_how_far_a_value_is_beyond_its_limit(
    measure: str, limit: float, value: float | None, met: bool, beyond: float
) -> None:
    """In parts of the limit, above 0 when it is missed."""
    assert shortfall(LimitResult(measure, limit, value, "nominal", met)) == pytest.approx(beyond)


def test_a_true_minus() -> None:
    """Every hyphen becomes one."""
    assert minus("at -3 dB: -120°") == "at \u22123 dB: \u2212120°"
