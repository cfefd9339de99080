"""Rightmost poles with dead time against the Lambert W function, which gives every pole of a first-order loop."""

import numpy as np
import pytest
from scipy.special import lambertw

from tests.simulate import drawn
from tuner.model.controller import Controller
from tuner.simulate.delayed import delayed_poles
from tuner.simulate.factors import Stack, stack
from tuner.simulate.linear import from_zeros_poles
from tuner.simulate.loop import loops_around
from tuner.simulate.roots import count_right
from tuner.simulate.traces import ComplexArray


def row(
    zeros: list[complex], poles: list[complex], gain: float, dead_time: float, controller: Controller | None = None
) -> Stack:
    """Return the loop gain of a plant with dead time, under unit gain unless told otherwise."""
    chain = from_zeros_poles(zeros, poles, gain, dead_time)
    return stack([loops_around(controller or Controller(gain_1=1.0), [chain])[0].factors])


def all_poles(pole: float, gain: float, dead_time: float) -> ComplexArray:
    """Return roots of s - p + k exp(-L s): p + W(-k L exp(-p L))/L on every branch of W."""
    branches = np.array([lambertw(-gain * dead_time * np.exp(-pole * dead_time), k) for k in range(-25, 25)])
    values = pole + branches / dead_time
    return values[np.argsort(-values.real)].astype(complex)


CASES = [
    (pole, gain, dead_time)
    for pole in (0.0, -1.0, -0.01, -5.0, 0.3)
    for gain in (0.02, 0.35, 1.0, 4.0)
    for dead_time in (0.1, 1.0, 20.0)
]


@pytest.mark.parametrize(("pole", "gain", "dead_time"), CASES)
def test_every_pole_of_a_first_order_loop(pole: float, gain: float, dead_time: float) -> None:
    """Every pole right of the line is listed (Corless and others, 1996: the Lambert W function)."""
    found = delayed_poles(row([], [pole], gain, dead_time))
    exact = all_poles(pole, gain, dead_time)
    expected = exact[exact.real > found.known_from]
    assert found.known_from < exact[0].real
    assert len(found.values) == len(expected)
    size = np.maximum(np.abs(found.values), 1.0 / dead_time)
    assert np.max(np.abs(found.values[:, None] - expected[None, :]).min(1) / size) < 1e-7
    assert found.count_unstable == int((exact.real > 1e-12).sum())


@pytest.mark.parametrize("seed", range(60))
def test_random_loops_are_confirmed(seed: int) -> None:
    """For random loops the argument principle confirms that nothing is missing, and the unstable ones are counted."""
    loop = stack([drawn.loop(seed, sampled=False, dead_time=True).factors])
    if loop.delay[0] and loop.gain[0]:
        found = delayed_poles(loop)
        assert np.isfinite(found.known_from)
        if np.min(np.abs(found.values.real)) > 1e-6:
            assert found.count_unstable == count_right(loop, 0.0)


def test_a_loop_gain_that_does_not_fall() -> None:
    """With |L| at or above one at infinite frequency it is unstable whatever its poles; below, the chain stays left."""
    neutral = delayed_poles(row([-2.0], [-1.0], 1.2, 0.5))
    assert "the loop gain stays at 1.2" in neutral.reason
    assert neutral.count_unstable >= 1
    calm = delayed_poles(row([-2.0], [-1.0], 0.4, 0.5))
    assert (calm.reason, calm.count_unstable) == ("", 0)
    assert np.log(0.4) / 0.5 < calm.known_from < calm.values[0].real


def test_an_unfiltered_derivative_with_dead_time() -> None:
    """A derivative around a lag and dead time leaves kd/T at infinite frequency: its limit is one (algebra)."""
    for kd, unstable in ((0.9, False), (1.1, True)):
        found = delayed_poles(row([], [-1.0], 1.0, 0.3, Controller(gain_1=0.1, gain_3=kd)))
        assert (found.reason != "") is unstable


def test_a_strong_gain_has_many_unstable_poles() -> None:
    """At k = 1000 in k exp(-s)/(s + 1) a pair has crossed every 2 pi, and all are counted."""
    found = delayed_poles(row([], [-1.0], 1000.0, 1.0))
    w = np.sqrt(1000.0**2 - 1.0)
    crossings = np.floor((w + np.arctan(w) - np.pi) / (2.0 * np.pi)) + 1.0
    assert found.count_unstable == 2 * int(crossings)
