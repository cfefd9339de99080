"""Frequency responses against an independent library and against first principles."""

import control
import numpy as np
import pytest

from tests.simulate import drawn
from tuner.model.controller import Controller
from tuner.simulate.factors import stack
from tuner.simulate.frequency import (
    at_end,
    at_zero,
    complementary,
    frequency_grid,
    grid,
    loop_response,
    sensitivity,
)
from tuner.simulate.linear import from_zeros_poles
from tuner.simulate.loop import Loop, loops_around


def proportional(
    zeros: list[complex], poles: list[complex], gain: float, dead_time: float = 0.0, step: float = 0.0
) -> Loop:
    """Return a plant under unit gain."""
    return loops_around(Controller(gain_1=1.0, sample_time=step), [from_zeros_poles(zeros, poles, gain, dead_time)])[0]


@pytest.mark.parametrize("seed", range(60))
def test_continuous_loops_against_python_control(seed: int) -> None:
    """L is that of python-control's block algebra, to 1e-8, for random plants and controllers."""
    loop = drawn.loop(seed, sampled=False)
    gains, settings = loop.controller.parallel(), loop.controller
    s = control.tf("s")
    law = gains.kp + gains.kd * s / (settings.filter_time * s + 1) + (gains.ki / s if gains.ki else 0)
    law = law / (settings.measurement_filter * s + 1)
    if settings.lead_lag is not None:
        law = law * (settings.lead_lag.lead * s + 1) / (settings.lead_lag.lag * s + 1)
    if settings.notch is not None:
        w0, depth, width = settings.notch.frequency, settings.notch.depth, settings.notch.width
        law = law * (s**2 + depth * width * w0 * s + w0**2) / (s**2 + width * w0 * s + w0**2)
    plant = control.ss(loop.chain.a, loop.chain.b[:, None], loop.chain.c[None], loop.chain.d)
    w = np.geomspace(1e-2, 1e2, 60)
    expected = law(1j * w) * plant(1j * w)
    assert loop_response(loop, w) == pytest.approx(expected, rel=1e-8)


@pytest.mark.parametrize("seed", range(60))
def test_sampled_plants_against_python_control(seed: int) -> None:
    """Behind a hold L is that of python-control's `sample_system`, to 1e-8 of the largest value."""
    random = np.random.default_rng(seed)
    chain, step = drawn.plant(random, least_excess=1), float(10.0 ** random.uniform(-1.5, 0.3))
    held = control.sample_system(control.ss(chain.a, chain.b[:, None], chain.c[None], chain.d), step, method="zoh")
    (loop,) = loops_around(Controller(gain_1=1.0, sample_time=step), [chain])
    w = np.geomspace(1e-2, 1.0, 50) * np.pi / step
    expected = held(np.exp(1j * w * step))
    assert np.max(np.abs(loop_response(loop, w) - expected)) < 1e-8 * np.max(np.abs(expected))


def test_the_two_sensitivities() -> None:
    """S + T = 1, T/S = L, and at w = 0 with an integral S is 0 and T is 1."""
    loop = proportional([], [0.0, -1.0], 2.0, 0.3)
    w = np.array([0.0, 0.1, 1.0, 10.0])
    s, t = sensitivity(loop, w), complementary(loop, w)
    assert s + t == pytest.approx(np.ones(4))
    assert (t / np.where(s == 0.0, 1.0, s))[1:] == pytest.approx(loop_response(loop, w)[1:])
    assert (s[0], t[0]) == (0.0, 1.0)


def test_dead_time_turns_the_phase() -> None:
    """exp(-2 s) has modulus one and phase -2 w."""
    loop = proportional([], [], 1.0, 2.0)
    assert loop_response(loop, np.array([0.0, 0.25])) == pytest.approx(np.exp([0.0, -0.5j]))


@pytest.mark.parametrize(
    ("loop", "low", "high"),
    [
        (proportional([], [-1.0, -2.0], 6.0), 3.0, 0.0),
        (proportional([], [0.0, -2.0], -6.0), -np.inf, 0.0),
        (proportional([0.0], [-1.0, -2.0], 6.0), 0.0, 0.0),
        (proportional([0.0], [0.0, -2.0], 6.0), 3.0, 0.0),
        (proportional([-2.0], [-1.0], 0.5, 1.0), 1.0, 0.5),
        (proportional([], [-1.0], 3.0, 0.0, 1.0), 3.0, -3.0 * np.tanh(0.5)),
        (proportional([], [-1.0], 3.0, 1.0, 1.0), 3.0, 3.0 * np.tanh(0.5)),
    ],
)
def test_limits_at_the_ends(loop: Loop, low: float, high: float) -> None:
    """At w -> 0 and at the highest frequency L is real and known: gains, integrators, zeros, sampled lags."""
    assert at_zero(loop.factors) == pytest.approx(low)
    assert at_end(loop.factors) == pytest.approx(high)


def test_an_improper_loop_grows_without_end() -> None:
    """An unfiltered derivative around a plant that answers at once."""
    (loop,) = loops_around(Controller(gain_3=2.0), [from_zeros_poles([-1.0], [-3.0], 1.0)])
    assert at_end(loop.factors) == np.inf


@pytest.mark.parametrize("zeta", [1e-2, 1e-4, 1e-7])
def test_the_grid_shows_the_sharpest_resonance(zeta: float) -> None:
    """Some point lies within a fraction of the width of a resonance, however thin, so its height shows."""
    loop = proportional([], [complex(-zeta, np.sqrt(1 - zeta**2)), complex(-zeta, -np.sqrt(1 - zeta**2)), -5.0], 5.0)
    shown = np.abs(loop_response(loop, frequency_grid(loop))).max()
    assert shown == pytest.approx(5.0 / np.sqrt(26.0) / (2.0 * zeta), rel=0.05)


def test_the_grid_shows_closed_loop_poles() -> None:
    """Poles of the closed loop that are given are looked at as well."""
    loop = proportional([], [-1.0], 1.0)
    with_poles = frequency_grid(loop, [complex(-1e-5, 7.0), complex(-1e-5, -7.0)])
    assert np.abs(with_poles - 7.0).min() < 1e-5
    assert np.abs(frequency_grid(loop) - 7.0).min() > 1e-2


def test_the_grid_ends_at_nyquist() -> None:
    """A sampled loop has no higher frequency; a continuous one is followed two decades beyond all that happens."""
    sampled, plain = proportional([], [-1.0], 1.0, step=0.1), proportional([], [-1.0, -30.0], 1.0)
    assert frequency_grid(sampled)[-1] == pytest.approx(10.0 * np.pi, rel=1e-15)
    assert frequency_grid(plain)[0] < 0.02
    assert frequency_grid(plain)[-1] > 2000.0


def test_rows_of_a_stack_have_grids_of_one_length() -> None:
    """Plants of a family differ, yet their frequencies make one array, rising in each row."""
    loops = [proportional([], [complex(-0.1, w), complex(-0.1, -w)], 1.0, w) for w in (0.5, 3.0)]
    w = grid(stack([loop.factors for loop in loops]), np.full((2, 0), 0j))
    assert w.shape[0] == 2
    assert np.all(np.diff(w, axis=1) >= 0.0)
