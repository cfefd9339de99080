"""Roots of 1 + L in compiled loops, on polynomials and on the pure dead time."""

import cmath
import math

import numpy as np
import pytest

from tuner.kernels import characteristic
from tuner.kernels.crossings import LoopGain

NONE = np.zeros(0, dtype=complex)
LAGS = np.array([-1.0, -2.0], dtype=complex)


def test_newton_step_at_and_near_a_root() -> None:
    """It vanishes at a root of (s + 1)(s + 2) + 6 exp(-s/10), and near one is what is missing."""
    root = -1.0 + 2.0j
    for _ in range(20):
        root -= characteristic.newton_step(LoopGain(LAGS, 0, 6.0, 0.1, 0.0, 1.0), root)
    assert abs((root + 1.0) * (root + 2.0) + 6.0 * cmath.exp(-0.1 * root)) < 1e-14
    assert characteristic.newton_step(LoopGain(LAGS, 0, 6.0, 0.1, 0.0, 1.0), root + 1e-5) == pytest.approx(
        1e-5, rel=1e-4
    )


def test_newton_step_on_a_pole() -> None:
    """On a pole of L itself there is no step, and nothing that is not a number."""
    assert characteristic.newton_step(LoopGain(LAGS, 0, 6.0, 0.1, 0.0, 1.0), -1.0 + 0j) == 0.0


def test_newton_step_of_a_sampled_loop() -> None:
    """The step in s vanishes at the roots of z - .5 + .7/z."""
    for z in np.roots([1.0, -0.5, 0.7]):
        s = cmath.log(z) / 0.2
        step = characteristic.newton_step(LoopGain(np.array([-0.5 + 0j]), 0, 0.7, 0.2, 0.2, 1.0), s)
        assert abs(step) < 1e-13


def test_all_roots_of_a_polynomial() -> None:
    """From guesses on a circle all six roots of (s + 1)^6 + 64 are found, each once."""
    roots = np.full(6, -1.0 + 0j)
    s = (3.0 * np.exp(1j * (np.arange(6.0) + 0.3))).astype(complex)
    error = np.full(6, np.inf)
    characteristic.aberth(LoopGain(roots, 0, 64.0, 0.0, 0.0, 1.0), s, 60, error)
    expected = -1.0 + 2.0 * np.exp(1j * np.pi * (2.0 * np.arange(6) + 1.0) / 6.0)
    assert np.abs(s[:, None] - expected[None]).min(0) == pytest.approx(np.zeros(6), abs=1e-13)
    assert error.max() < 1e-12


def test_direction_is_that_of_the_sum() -> None:
    """D + N has the angle of (s + 1)(s + 2) + 6 exp(-s), also where N is beyond all numbers."""
    for s in (0.3 + 2.0j, -5.0 + 1.0j):
        plain = (s + 1.0) * (s + 2.0) - 6.0 * cmath.exp(-s)
        found = characteristic.direction(LoopGain(LAGS, 0, -6.0, 1.0, 0.0, 1.0), s)
        assert cmath.phase(found) == pytest.approx(cmath.phase(plain), abs=1e-12)
    far = characteristic.direction(LoopGain(LAGS, 0, 6.0, 1.0, 0.0, 1.0), -2000.0 + 0.5j)
    assert cmath.phase(far) == pytest.approx(-0.5, abs=1e-12)


def test_angle_turned_by_a_dead_time() -> None:
    """1 + 2 exp(-s) on the imaginary axis turns with its dead time, once round each 2 pi."""
    y = np.linspace(0.0, 6.0 * math.pi, 20)
    turned = characteristic.turned(LoopGain(NONE, 0, 2.0, 1.0, 0.0, 1.0), 0.0, y)
    assert turned == pytest.approx(-6.0 * math.pi, rel=1e-12)


def test_angle_of_a_circle() -> None:
    """(z - .5) + .3 has its root inside the unit circle: half a circle turns it by pi."""
    y = np.linspace(0.0, math.pi / 0.1, 9)
    assert characteristic.turned(LoopGain(np.array([-0.5 + 0j]), 0, 0.3, 0.0, 0.1, 1.0), 0.0, y) == pytest.approx(
        math.pi
    )
    assert characteristic.turned(LoopGain(np.array([-0.5 + 0j]), 0, 2.0, 0.0, 0.1, 1.0), 0.0, y) == pytest.approx(
        0.0, abs=1e-12
    )
