"""Damping of sets of poles."""

import numpy as np
import pytest

from tuner.measure.loop import damping

PAIR = np.array([-1.0, -2.0 + 1j, -2.0 - 1j, -0.6 + 0.8j, -0.6 - 0.8j])


def test_the_least_damped_pole_counts() -> None:
    """The pair at distance one with real part -0.6 has damping ratio 0.6."""
    assert damping(PAIR, endless=False).value == pytest.approx(0.6)


def test_only_dominant_poles_count_where_there_is_no_end_of_them() -> None:
    """Of endless poles, those farther left than three times the rightmost are left out, and it is said."""
    found = damping(np.array([-1.0, -2.0 + 2j, -2.0 - 2j, -3.5 + 90j, -3.5 - 90j]), endless=True)

    assert found.value == pytest.approx(np.sqrt(0.5))
    assert found.dominant_only


def test_an_unstable_pole_has_negative_damping_and_one_at_zero_none() -> None:
    """Signs are kept; a pole at the origin does not divide by zero."""
    assert damping(np.array([0.6 + 0.8j, 0.6 - 0.8j]), endless=False).value == pytest.approx(-0.6)
    assert damping(np.array([0.0 + 0j, -1.0]), endless=False).value == 0.0


def test_a_deadbeat_loop_is_fully_damped() -> None:
    """All poles at z = 0 leave none in s."""
    assert damping(np.zeros(0, np.complex128), endless=False).value == 1.0
