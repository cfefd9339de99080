"""Edges of stability on a ruler against ultimate gains that are known in closed form or from tables."""

from math import cos, pi, sqrt

import control
import numpy as np
import pytest
from scipy.optimize import brentq

from tuner.footing.classes import LOST, SOFT, Track
from tuner.footing.rulers import paint_rulers
from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial


def edge(expression: str, controller: Controller, name: str, low: float, high: float) -> float:
    """Return where a track first becomes lost."""
    found = Sheet(Loop("known"), ExpressionPlant(expression), controller, Trial(20.0), limits=(("overshoot", 0.1),))
    (painted,) = paint_rulers(found, [Track(name, np.geomspace(low, high, 17))], 1)
    return next(one.value for one in painted.edges if one.above == LOST)


@pytest.mark.parametrize(("order", "ultimate"), [(3, 8.0), (4, 4.0), (5, (1.0 / cos(pi / 5.0)) ** 5)])
def test_equal_lags(order: int, ultimate: float) -> None:
    """1/(s + 1)^n: (1/cos(pi/n))^n, as Ziegler and Nichols' test finds it (Trans. ASME 64, 1942; from memory)."""
    assert edge(f"1/(s + 1)^{order}", Controller(gain_1=1.0), "kp", 0.5, 50.0) == pytest.approx(ultimate, rel=1e-9)


@pytest.mark.parametrize("ratio", [0.1, 0.3, 1.0, 3.0])
def test_a_lag_with_dead_time(ratio: float) -> None:
    """exp(-L s)/(s + 1): K = sqrt(1 + w^2), where w L + atan(w) = pi (any textbook; solved independently by scipy)."""
    w = brentq(lambda x: ratio * x + np.arctan(x) - pi, 1e-6, 100.0)
    expected = sqrt(1.0 + w * w)
    found = edge(f"exp(-{ratio} s)/(s + 1)", Controller(gain_1=0.5), "kp", 0.1, 200.0)
    assert found == pytest.approx(expected, rel=1e-9)


def test_an_integrator_with_dead_time() -> None:
    """exp(-L s)/s: K = pi/(2 L) (any textbook)."""
    assert edge("exp(-0.7 s)/s", Controller(gain_1=0.5), "kp", 0.1, 50.0) == pytest.approx(pi / 1.4, rel=1e-9)


def test_a_sampled_integrator() -> None:
    """Under the hold 1/s is Ts/(z - 1): a gain of 2/Ts puts the pole at z = -1."""
    assert edge("1/s", Controller(sample_time=0.2, gain_1=1.0), "kp", 0.1, 100.0) == pytest.approx(10.0, rel=1e-6)


def test_a_sampled_lag_against_python_control() -> None:
    """The gain at which the sampled response, by an independent library, is -1 over it."""
    s = control.tf("s")
    sampled = control.sample_system(1.0 / ((s + 1.0) * (0.5 * s + 1.0) * (0.2 * s + 1.0)), 0.1, method="zoh")
    crossing = brentq(lambda w: sampled(np.exp(0.1j * w)).imag, 2.0, 10.0)
    expected = -1.0 / sampled(np.exp(0.1j * crossing)).real
    found = edge("1/((s + 1)(0.5 s + 1)(0.2 s + 1))", Controller(sample_time=0.1, gain_1=1.0), "kp", 0.5, 100.0)
    assert found == pytest.approx(expected, rel=1e-6)


def test_a_pi_controller_around_two_lags_and_an_integrator() -> None:
    """s^4 + 3 s^3 + 2 s^2 + kp s + ki is stable where kp (6 - kp) > 9 ki, by Routh's criterion: for kp = 3, ki < 1."""
    found = edge("1/(s (s + 1)(s + 2))", Controller(gain_1=3.0, gain_2=0.5), "ki", 0.01, 10.0)
    assert found == pytest.approx(1.0, rel=1e-9)
    assert SOFT < LOST
