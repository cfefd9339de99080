"""Damping of sets of poles."""

import numpy as np
import pytest

from tuner.measure.family import Measured
from tuner.measure.loop import add_damping, damping
from tuner.model.controller import Controller
from tuner.simulate.linear import from_zeros_poles
from tuner.simulate.loop import loops_around
from tuner.simulate.poles import closed_loop_poles

PAIR = np.array([-1.0, -2.0 + 1j, -2.0 - 1j, -0.6 + 0.8j, -0.6 - 0.8j])
MANY = np.array([-1.0, -2.0 + 2j, -2.0 - 2j, -3.5 + 90j, -3.5 - 90j])


def test_the_least_damped_pole_counts() -> None:
    """The pair at distance one with real part -0.6 has damping ratio 0.6."""
    assert damping(PAIR) == pytest.approx(0.6)


def test_only_dominant_poles_count_where_there_is_no_end_of_them() -> None:
    """Of endless poles, those farther left than three times the rightmost are left out."""
    assert damping(MANY, known_from=-4.0) == pytest.approx(np.sqrt(0.5))


def test_poles_that_are_not_known_leave_no_damping() -> None:
    """Where poles that would count are not among those known, no number is vouched for."""
    assert damping(MANY, known_from=-2.9) is None
    assert damping(MANY, known_from=-3.0) is not None


def test_an_unstable_pole_has_negative_damping_and_one_at_zero_none() -> None:
    """Signs are kept; a pole at the origin does not divide by zero."""
    assert damping(np.array([0.6 + 0.8j, 0.6 - 0.8j])) == pytest.approx(-0.6)
    assert damping(np.array([0.0 + 0j, -1.0])) == 0.0
    assert damping(np.array([0.5 + 0j]), known_from=0.1) == pytest.approx(-1.0)


def test_a_deadbeat_loop_is_fully_damped() -> None:
    """All poles at z = 0 leave none in s."""
    assert damping(np.zeros(0, np.complex128)) == 1.0


def test_a_pure_dead_time_under_proportional_control_has_no_smallest_damping() -> None:
    """Its endless poles lie near one line, so no damping is told, with the reason."""
    pipe = from_zeros_poles(np.zeros(0), np.zeros(0), 1.0, dead_time=1.0)
    poles = closed_loop_poles(loops_around(Controller(gain_1=0.5, gain_2=0.5), [pipe])[0])
    measured = Measured()

    add_damping(measured, poles)

    assert poles.stable
    assert measured.values == {"damping": None}
    assert measured.reasons == {"damping": "there are endless poles along a line, with damping ratios down to zero"}
