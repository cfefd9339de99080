"""Pulse transfer functions as factors, against the state space that they come from."""

import numpy as np
import pytest

from tests.simulate import drawn
from tuner.model.controller import Controller
from tuner.simulate.discrete import hold
from tuner.simulate.factors import stack
from tuner.simulate.linear import Linear, constant, from_zeros_poles
from tuner.simulate.loop import SampledLoop, loops_around


def worst(chain: Linear, step: float) -> float:
    """Return the largest difference, relative to the response or to a millionth of its largest."""
    w = np.geomspace(1e-3, 1.0, 80) * np.pi / step
    (loop,) = loops_around(Controller(gain_1=1.0, sample_time=step), [chain])
    expected = hold(chain, step).response(1j * w)
    found = stack([loop.factors]).response(w)[0]
    return float(np.max(np.abs(found - expected) / np.maximum(np.abs(expected), 1e-6 * np.abs(expected).max())))


@pytest.mark.parametrize("seed", range(150))
def test_factors_are_the_state_space(seed: int) -> None:
    """The product of factors is the pulse transfer function to 1e-9, with dead time of any fraction."""
    random = np.random.default_rng(seed)
    step = 10.0 ** random.uniform(-2.0, 0.5)
    dead_time = float(random.choice([0.0, random.uniform(0.0, 3.0), 7.0 * step, 1e-4 * step, 0.9999 * step]))
    assert worst(drawn.plant(random, dead_time), step) < 1e-9


@pytest.mark.parametrize("order", [2, 4, 8])
@pytest.mark.parametrize("step", [1e-4, 1e-2, 1.0])
def test_equal_lags_sampled_fast(order: int, step: float) -> None:
    """Poles that crowd at z = 1 lose no digits, though there are eight of them."""
    assert worst(from_zeros_poles([], [-1.0] * order, 1.0, 0.3), step) < 1e-7


def test_exact_poles() -> None:
    """Equal lags stay equal: their poles are exp(p Ts), not eigenvalues of a defective matrix."""
    (loop,) = loops_around(Controller(gain_1=1.0, sample_time=0.1), [from_zeros_poles([], [-1.0] * 6, 1.0)])
    assert set(loop.factors.poles.tolist()) == {complex(np.expm1(-0.1)), -1.0 + 0j}


def test_a_static_chain() -> None:
    """A pure gain is read one sample late: the measurement precedes the effort."""
    (loop,) = loops_around(Controller(gain_1=1.0, sample_time=1.0), [constant(3.0)])
    assert isinstance(loop, SampledLoop)
    assert stack([loop.factors]).response(np.array([0.5]))[0] == pytest.approx([3.0 * np.exp(-0.5j)], rel=1e-14)


def test_sampling_zeros_of_integrators() -> None:
    """Two integrators have a zero at z = -1, three at -2 +- sqrt 3 (Astrom, Hagander and Sternby; from memory)."""
    for order, expected in ((2, [-1.0]), (3, [-2.0 - np.sqrt(3.0), -2.0 + np.sqrt(3.0)])):
        (loop,) = loops_around(Controller(gain_1=1.0, sample_time=0.5), [from_zeros_poles([], [0.0] * order, 1.0)])
        zeros = sorted((1.0 + loop.factors.zeros).real.tolist())
        assert [zero for zero in zeros if abs(zero) > 1e-12] == pytest.approx(expected, rel=1e-9)
