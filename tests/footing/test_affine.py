"""Along one gain the characteristic function is a part that holds and a part that goes with it."""

import numpy as np
import pytest

from tuner.footing.affine import contour, coordinate, pair
from tuner.model.controller import Controller
from tuner.simulate.frequency import loop_response
from tuner.simulate.linear import from_zeros_poles
from tuner.simulate.loop import loops_around
from tuner.simulate.traces import ComplexArray

CHAIN = from_zeros_poles(np.array([]), np.array([-1.0 + 0j, -3.0 + 0j]), 3.0)
W = np.geomspace(0.01, 10.0, 40)


def points(step: float) -> ComplexArray:
    """Return the border at the frequencies."""
    s: ComplexArray = np.asarray(1j * W, dtype=np.complex128)
    return np.expm1(s * step) if step else s


def loop_gain(controller: Controller) -> ComplexArray:
    """Return 1 + L by the loop's own response."""
    return 1.0 + loop_response(loops_around(controller, [CHAIN])[0], W)


@pytest.mark.parametrize("step", [0.0, 0.1])
@pytest.mark.parametrize(
    ("form", "name"),
    [("parallel", n) for n in ("kp", "ki", "kd")]
    + [(f, n) for f in ("standard", "series") for n in ("kc", "ti", "td")],
)
def test_the_parts_add_up(form: str, name: str, step: float) -> None:
    """(held + q moving) G is 1 + L at any value of the gain."""
    controller = Controller(form=form, sample_time=step, gain_1=1.3, gain_2=0.9, gain_3=0.2, filter_time=0.15)  # type: ignore[arg-type] # a form
    at = contour(points(step), step)
    unit = Controller(sample_time=step, gain_1=1.0)
    inverse: ComplexArray = 1.0 / (loop_gain(unit) - 1.0)
    held, moving = pair(controller, name, inverse, at)
    for value in (0.3, 2.5):
        q = coordinate(name, np.array([value]))[0]
        assert (held + q * moving) / inverse == pytest.approx(loop_gain(controller.with_value(name, value)), rel=1e-9)


@pytest.mark.parametrize("step", [0.0, 0.1])
def test_the_filter_time_enters_after_multiplying_out(step: float) -> None:
    """The function has the same zeros as 1 + L, times what the derivative has below."""
    controller = Controller(sample_time=step, gain_1=1.3, gain_2=0.9, gain_3=0.2, filter_time=0.15)
    x = points(step)
    at = contour(x, step)
    inverse: ComplexArray = 1.0 / (loop_gain(Controller(sample_time=step, gain_1=1.0)) - 1.0)
    held, moving = pair(controller, "filter_time", inverse, at)
    for value in (0.05, 1.5):
        below = value * x + at.lead
        expected = loop_gain(controller.with_value("filter_time", value)) * below
        assert (held + value * moving) / inverse == pytest.approx(expected, rel=1e-9)
