"""The scan for crossings and peaks, on loop gains whose answers are known in closed form."""

import math

import numpy as np
import pytest

from tuner.kernels import crossings

LEVEL = crossings.LEVEL


def scan(  # noqa: PLR0913 - the numbers of one loop
    roots: list[complex], zeros: int, gain: float, *, delay: float = 0.0, step: float = 0.0, points: int = 60
) -> list[float]:
    """Return what is found on a logarithmic grid."""
    top = math.pi / step if step else 1e3
    w = np.geomspace(1e-3, top, points)[None]
    out = np.empty((1, crossings.COLUMNS))
    row = np.array([roots], dtype=complex)
    crossings.scan(w, row, zeros, np.array([gain]), np.array([delay]), step, 1.0, out)
    found: list[float] = out[0].tolist()
    return found


@pytest.mark.parametrize("step", [0.0, 0.3])
def test_a_point_and_its_derivatives(step: float) -> None:
    """L is the product of its factors; its logarithmic derivatives are those of finite differences."""
    roots = np.array([-2.0, 0.5 + 1j, 0.5 - 1j, -0.3], dtype=complex)
    loop = crossings.LoopGain(roots, 1, 2.0, 0.7, step, 1.0)

    def logarithm(w: float) -> complex:
        return complex(np.log(crossings.point(loop, w).gain))

    _, value, slope, curvature = crossings.point(loop, 1.3)
    x = np.exp(1.3j * step) - 1.0 if step else 1.3j
    expected = 2.0 * (x + 2.0) / ((x - 0.5 - 1j) * (x - 0.5 + 1j) * (x + 0.3)) * np.exp(-0.91j)
    h = 1e-4
    low, here, high = (logarithm(1.3 + d) for d in (-h, 0.0, h))
    assert value == pytest.approx(expected, rel=1e-13)
    assert slope == pytest.approx((high - low) / (2.0 * h), rel=1e-6)
    assert curvature == pytest.approx((high - 2.0 * here + low) / h**2, rel=1e-4)


def test_three_equal_lags() -> None:
    """2/(s+1)^3: |L| is a quarter at sqrt 3, PM 67.598 degrees, Ms 5/3, all to rounding on a coarse grid."""
    found = scan([-1.0, -1.0, -1.0], 0, 2.0)
    assert found[crossings.LARGEST_BELOW_ONE] == pytest.approx(0.25, rel=1e-14)
    assert found[crossings.LARGEST_AT] == pytest.approx(math.sqrt(3.0), rel=1e-14)
    assert found[crossings.ANGLE_AT] == pytest.approx(math.sqrt(4.0 ** (1.0 / 3.0) - 1.0), rel=1e-14)
    assert found[crossings.SENSITIVITY_PEAK] == pytest.approx(5.0 / 3.0, rel=1e-14)
    assert found[crossings.SENSITIVITY_AT] == pytest.approx(math.sqrt(1.5), rel=1e-9)


def test_what_is_not_there() -> None:
    """A weak lag crosses nothing: infinity for the smallest, zero for the largest."""
    found = scan([-1.0], 0, 0.2)
    assert (found[crossings.SMALLEST_ANGLE], found[crossings.SMALLEST_DELAY]) == (math.inf, math.inf)
    assert (found[crossings.REACHED_AT], found[crossings.LARGEST_BELOW_ONE]) == (math.inf, 0.0)
    assert found[crossings.SENSITIVITY_PEAK] == 0.0


def test_the_bandwidth() -> None:
    """1/s: |S| reaches the level at level/sqrt(1 - level^2)."""
    assert scan([0.0], 0, 1.0)[crossings.REACHED_AT] == pytest.approx(LEVEL / math.sqrt(1.0 - LEVEL**2), rel=1e-14)


def test_a_sampled_integrator() -> None:
    """h/(z-1) with h = .3: crossover at 2/h asin(h/2), phase margin pi/2 less half a sample's turn."""
    found = scan([0.0], 0, 0.3, step=0.3)
    crossover = 2.0 / 0.3 * math.asin(0.15)
    assert found[crossings.ANGLE_AT] == pytest.approx(crossover, rel=1e-14)
    assert found[crossings.SMALLEST_ANGLE] == pytest.approx(0.5 * math.pi - 0.15 * crossover, rel=1e-14)


@pytest.mark.parametrize("points", [4, 30, 300])
def test_dead_time_between_the_points(points: int) -> None:
    """Between points of exp(-50 s)/2 the phase turns many times: the first crossing is found all the same."""
    found = scan([], 0, 0.5, delay=50.0, points=points)
    assert found[crossings.LARGEST_BELOW_ONE] == pytest.approx(0.5, rel=1e-13)
    assert found[crossings.SENSITIVITY_PEAK] == pytest.approx(2.0, rel=1e-13)


def test_a_touch_between_two_points() -> None:
    """A gain that rises a millionth above one between two points, and falls again, is crossed twice."""
    found = scan([0.0, -1.0, -1.0], 1, 2.0 * (1.0 + 1e-6), points=7)
    assert found[crossings.SMALLEST_ANGLE] == pytest.approx(math.pi, abs=3e-3)
    assert scan([0.0, -1.0, -1.0], 1, 2.0 * (1.0 - 1e-6), points=7)[crossings.SMALLEST_ANGLE] == math.inf


@pytest.mark.parametrize("kind", range(7))
def test_signals_and_their_slopes(kind: int) -> None:
    """The derivative that goes with each signal is that of finite differences."""
    roots = np.array([-2.0, -0.5 + 1j, -0.5 - 1j, -0.3], dtype=complex)
    loop = crossings.LoopGain(roots, 1, 2.0, 0.3, 0.0, 1.0)

    def at(w: float) -> tuple[float, float]:
        return crossings.signal(kind, crossings.point(loop, w))

    h = 1e-5
    assert at(1.1)[1] == pytest.approx((at(1.1 + h)[0] - at(1.1 - h)[0]) / (2.0 * h), rel=1e-6)
