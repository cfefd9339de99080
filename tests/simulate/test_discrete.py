"""Hold equivalents against the handbook, against scipy and python-control, and against a dense solution."""

import math
from itertools import pairwise

import control
import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.integrate import solve_ivp
from scipy.signal import cont2discrete

from tuner.errors import LoopError
from tuner.simulate.discrete import Held, chain, hold, split
from tuner.simulate.linear import Linear, constant, from_state_space, from_zeros_poles


def _first_order(time: float, dead_time: float = 0.0) -> Linear:
    return from_zeros_poles((), (-1.0 / time,), 1.0 / time, dead_time)


def _respond(held: Held, inputs: np.ndarray) -> np.ndarray:
    """Return the output at each sample, just before the jump, by the recursion that the class states."""
    x, y = np.zeros(len(held.c)), []
    late = np.concatenate((np.zeros(held.steps + 1), inputs))
    for k in range(len(inputs)):
        y.append(held.c @ x + held.d * late[k])
        x = x + held.growth @ x + held.old * late[k] + held.new * late[k + 1]
    return np.array(y)


@pytest.mark.parametrize(
    ("plant", "steps", "coefficients"),
    [
        ((1.0, 0.1, 0.0), 0, (0.095162582, 0.0, 0.904837418)),
        ((1.0, 0.5, 0.0), 0, (0.393469340, 0.0, 0.606530660)),
        ((1.0, 0.5, 0.2), 0, (0.259181779, 0.134287561, 0.606530660)),
        ((1.0, 1.0, 0.5), 0, (0.393469340, 0.238651219, 0.367879441)),
        ((10.0, 1.0, 2.3), 2, (0.0676061801, 0.0275564019, 0.904837418)),
        ((1.0, 0.1, 0.25), 2, (0.0487705755, 0.0463920065, 0.904837418)),
    ],
)
def test_first_order_with_fractional_dead_time(
    plant: tuple[float, float, float], steps: int, coefficients: tuple[float, float, float]
) -> None:
    """Astrom and Wittenmark, Computer-Controlled Systems, section 2.3: z^-(d+1) (b0 + b1/z) / (1 - a/z)."""
    (time, step, dead_time), (b0, b1, a) = plant, coefficients
    held = hold(_first_order(time, dead_time), step)
    assert held.steps == steps
    assert held.c @ held.new == pytest.approx(b0, abs=6e-10)
    assert held.c @ held.old == pytest.approx(b1, abs=6e-10)
    assert held.transition[0, 0] == pytest.approx(a, abs=6e-10)


@pytest.mark.parametrize(
    ("poles", "step", "numerator", "denominator"),
    [
        ((0.0, -1.0), 1.0, (0.367879441, 0.264241118), (1.0, -1.367879441, 0.367879441)),
        ((0.0, -1.0), 0.1, (0.004837418, 0.004678840), (1.0, -1.904837418, 0.904837418)),
        ((-1.0, -1.0), 0.5, (0.0902040104, 0.0646141113), (1.0, -1.21306132, 0.367879441)),
        (
            (complex(-0.5, math.sqrt(0.75)), complex(-0.5, -math.sqrt(0.75))),
            0.5,
            (0.104405473, 0.0882813366),
            (1.0, -1.41384385, 0.606530660),
        ),
        ((0.0, 0.0), 0.3, (0.045, 0.045), (1.0, -2.0, 1.0)),
    ],
)
def test_second_order_of_the_handbook(
    poles: tuple[complex, ...], step: float, numerator: tuple[float, ...], denominator: tuple[float, ...]
) -> None:
    """Astrom and Wittenmark, Computer-Controlled Systems, table 2.1, as pulse transfer functions."""
    held = hold(from_zeros_poles((), poles, 1.0), step)
    s = np.array([0.3j, 0.2 + 1j, -0.1 + 2j]) / step
    z = np.exp(s * step)
    assert held.response(s) == pytest.approx(np.polyval(numerator, z) / np.polyval(denominator, z), rel=2e-6)


@pytest.mark.parametrize("seed", range(5))
def test_against_scipy_and_python_control(seed: int) -> None:
    """A random state space under the hold is scipy's and python-control's."""
    random = np.random.default_rng(seed)
    a, b, c = random.normal(size=(4, 4)), random.normal(size=4), random.normal(size=4)
    held = hold(from_state_space(a, b, c), 0.3)
    theirs = cont2discrete((a, b[:, None], c[None], np.zeros((1, 1))), 0.3)
    assert held.transition == pytest.approx(theirs[0], abs=1e-13)
    assert held.new == pytest.approx(theirs[1][:, 0], abs=1e-13)
    other = control.sample_system(control.ss(a, b[:, None], c[None], 0.0), 0.3)
    w = np.array([0.1, 1.0, 5.0])
    assert held.response(1j * w) == pytest.approx(other(np.exp(0.3j * w)), rel=1e-9)


@pytest.mark.parametrize(("dead_time", "step"), [(0.3, 0.1), (0.7, 0.1), (1.1 * 3.0, 0.1), (6e-6, 2e-6), (3e6, 1e6)])
def test_whole_dead_times_are_whole(dead_time: float, step: float) -> None:
    """A dead time of whole steps has no rest, although the quotient is not whole in floating point."""
    assert split(dead_time, step) == (round(dead_time / step), 0.0)


def test_a_rest_is_below_the_step() -> None:
    """The rest of a dead time lies within a step."""
    steps, offset = split(1.25, 0.5)
    assert (steps, offset) == (2, 0.25)
    assert split(0.5 * (1.0 - 1e-9), 0.5).offset < 0.5


def test_dead_time_of_a_fraction_against_a_dense_solution() -> None:
    """Random held inputs through a fractional dead time: the samples are those of an integration of each piece."""
    random = np.random.default_rng(2)
    system = from_zeros_poles((-0.7,), (-1.0, -0.5 + 2j, -0.5 - 2j), 3.0, 0.37)
    inputs, step = random.normal(size=25), 0.2
    jumps = np.arange(25) * step + 0.37
    edges = np.unique(np.concatenate((np.arange(25) * step, jumps[jumps < 24 * step])).round(12))
    x, expected = np.zeros(3), [0.0]

    def slope(_: float, state: NDArray[np.float64], effort: float) -> NDArray[np.float64]:
        return np.asarray(system.a @ state + system.b * effort)

    for start, end in pairwise(edges):
        reached = np.searchsorted(jumps, start + 1e-9, side="right") - 1
        effort = inputs[reached] if reached >= 0 else 0.0
        x = solve_ivp(slope, (start, end), x, "DOP853", rtol=1e-11, atol=1e-13, args=(effort,)).y[:, -1]
        if min(end % step, step - end % step) < 1e-9:
            expected.append(float(system.c @ x))
    assert _respond(hold(system, step), inputs) == pytest.approx(np.array(expected), abs=1e-9)


def test_a_direct_term_is_read_before_the_jump() -> None:
    """A gain of two gives at each sample twice the input held until then."""
    inputs = np.array([1.0, 3.0, -1.0])
    assert _respond(hold(constant(2.0), 0.1), inputs) == pytest.approx([0.0, 2.0, 6.0])


def test_computing_delay_adds_whole_steps() -> None:
    """Two samples of computing delay come on top of the dead time."""
    assert hold(_first_order(1.0, 0.25), 0.1, 2).steps == 4


@pytest.mark.parametrize("scale", [1e-6, 1.0, 1e6])
def test_time_may_be_of_any_size(scale: float) -> None:
    """The same plant in microseconds or megaseconds has the same equivalent."""
    poles = np.array([-1.0, -0.3 + 1j, -0.3 - 1j]) / scale
    held = hold(from_zeros_poles((-2.0 / scale,), poles, 1.0 / scale**2, 0.33 * scale), 0.5 * scale)
    plain = hold(from_zeros_poles((-2.0,), (-1.0, -0.3 + 1j, -0.3 - 1j), 1.0, 0.33), 0.5)
    s = np.array([0.3j, 0.2 + 1j])
    assert held.response(s / scale) == pytest.approx(plain.response(s), rel=1e-12)
    assert held.steps == plain.steps


def test_fast_sampling_keeps_slow_modes() -> None:
    """At a millionth of the lag, the response is that of the continuous plant behind the hold, to ten digits."""
    held = hold(_first_order(1.0), 1e-6)
    w = np.array([0.01, 1.0])
    gone = -1j * w * 1e-6
    expected = -np.expm1(gone) / (1j * w * 1e-6) / (1.0 + 1j * w)
    assert held.response(1j * w) == pytest.approx(expected, rel=1e-10, abs=1e-10)


def test_response_at_a_pole_is_infinite() -> None:
    """An integrator has an infinite response at zero frequency, and other frequencies are not disturbed by it."""
    found = hold(from_zeros_poles((), (0.0, -1.0), 1.0), 0.5).response(np.array([0.0, 1j]))
    assert np.isinf(found[0])
    assert found[1] == pytest.approx(hold(from_zeros_poles((), (0.0, -1.0), 1.0), 0.5).response(np.array([1j]))[0])


def test_the_chain_holds_every_lag() -> None:
    """Actuator, plant and sensor are in series."""
    way = chain(_first_order(2.0, 0.5), 0.1, 0.3)
    s = np.array([0.4j])
    expected = np.exp(-0.5 * s) / ((2 * s + 1) * (0.1 * s + 1) * (0.3 * s + 1))
    assert way.response(s) == pytest.approx(expected, rel=1e-13)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: hold(_first_order(1.0), 0.0), "the time between samples must be positive, found 0"),
        (
            lambda: hold(from_zeros_poles((), (1e4,), 1.0), 1.0),
            "the plant grows beyond all numbers within a step of 1",
        ),
        (lambda: split(1e20, 1e-3), "a dead time of 1e+20 is too long for a step of 0.001"),
    ],
)
def test_sentences(call: object, sentence: str) -> None:
    """What cannot be is refused in one sentence."""
    with pytest.raises(LoopError) as caught:
        call()  # type: ignore[operator]  # a call without arguments
    assert str(caught.value) == sentence
