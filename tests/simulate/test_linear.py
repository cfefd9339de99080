"""A linear system: its response, its static gain, and its zeros and poles from a state space."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tuner.errors import LoopError
from tuner.simulate.linear import (
    Linear,
    constant,
    from_state_space,
    from_zeros_poles,
    lag,
    product,
    with_conjugates,
)
from tuner.simulate.traces import ComplexArray

S: ComplexArray = np.asarray(1j * np.logspace(-3, 3, 25), dtype=complex)

_sizes = st.floats(-2.0, 2.0).map(lambda exponent: 10.0**exponent)
_real = st.one_of(_sizes.map(lambda x: [complex(-x)]), st.just([0j]), _sizes.map(lambda x: [complex(x)]))
_pair = st.tuples(st.floats(-3.0, 3.0), _sizes).map(lambda x: [complex(x[0], x[1]), complex(x[0], -x[1])])
_roots = st.lists(st.one_of(_real, _pair), max_size=4).map(lambda groups: [root for group in groups for root in group])


def _by_state_space(system: Linear, s: ComplexArray) -> ComplexArray:
    unit = np.eye(system.order)
    return np.array([system.c @ np.linalg.solve(x * unit - system.a, system.b) + system.d for x in s])


@given(_roots, _roots, st.floats(0.1, 10.0))
def test_state_space_and_factors_are_one_system(zeros: list[complex], poles: list[complex], gain: float) -> None:
    """The cascade of sections responds as the product of factors does, for any zeros and poles."""
    if len(zeros) > len(poles):
        zeros, poles = poles, zeros
    system = from_zeros_poles(zeros, poles, gain)
    places: ComplexArray = S + 0.31719  # away from the axes, where poles of the examples lie
    factors = [gain * np.prod(s - np.array(zeros)) / np.prod(s - np.array(poles, dtype=complex)) for s in places]
    assert np.allclose(system.response(places), factors, rtol=1e-11, atol=0.0)
    assert np.allclose(_by_state_space(system, places), factors, rtol=1e-7, atol=1e-12 * np.abs(factors).max())


def test_dead_time_turns_the_phase() -> None:
    """A dead time multiplies by exp(-dead_time s)."""
    plain, late = from_zeros_poles((), (-1.0,), 2.0), from_zeros_poles((), (-1.0,), 2.0, 0.7)
    assert np.allclose(late.response(S), plain.response(S) * np.exp(-0.7 * S), rtol=1e-14)


def test_high_orders_do_not_overflow() -> None:
    """Fifty lags of 1e-7 and fifty of 1e7 keep a static gain of 3, and a finite response at every frequency."""
    poles = [-1e7] * 50 + [-1e-7] * 50
    system = from_zeros_poles((), poles, 3.0)
    assert system.static_gain() == pytest.approx(3.0, rel=1e-12)
    assert np.isfinite(system.response(1j * np.logspace(-20, 20, 41))).all()
    assert np.isfinite(system.a).all()
    assert np.isfinite(system.c).all()


@pytest.mark.parametrize(
    ("zeros", "poles", "gain", "expected"),
    [
        ((), (-2.0,), 4.0, 2.0),
        ((), (-1.0, 0.0), -1.0, -math.inf),
        ((), (1.0, 0.0), 1.0, -math.inf),
        ((0.0,), (-1.0, -3.0), 5.0, 0.0),
        ((0.0, -2.0), (0.0, -1.0), 5.0, 10.0),
        ((0.0,), (0.0, 0.0, -2.0), 5.0, math.inf),
        ((), (), -3.0, -3.0),
        ((), (0.0,), 0.0, 0.0),
    ],
)
def test_static_gain(zeros: tuple[float, ...], poles: tuple[float, ...], gain: float, expected: float) -> None:
    """An integrator makes it infinite with its sign, a zero at the origin zero, and a pair of both a limit."""
    assert from_zeros_poles(zeros, poles, gain).static_gain() == expected


def test_response_at_a_pole_and_at_a_hidden_pole() -> None:
    """Infinite at a pole, zero at a zero, and the limit where both fall together."""
    system = from_zeros_poles((-1.0, -2.0), (-1.0, -3.0, -4.0), 6.0)
    values = system.response(np.array([-3.0, -2.0, -1.0], dtype=complex))
    assert np.isinf(values[0])
    assert values[1] == 0.0
    assert values[2] == pytest.approx(6.0 * 1.0 / (2.0 * 3.0))


def test_a_state_space_is_kept_as_given() -> None:
    """Matrices stay; zeros, poles and gain are those of the textbook's transfer function."""
    a, b, c = np.array([[0.0, 1.0], [-6.0, -5.0]]), np.array([0.0, 1.0]), np.array([4.0, 2.0])
    system = from_state_space(a, b, c, 0.0, 0.5)
    assert np.array_equal(system.a, a)
    assert np.sort(system.poles.real) == pytest.approx([-3.0, -2.0])
    assert system.zeros == pytest.approx([-2.0])
    assert system.gain == pytest.approx(2.0)
    assert system.dead_time == 0.5


@given(_roots, _roots, st.floats(0.1, 10.0))
def test_zeros_of_a_state_space_are_found_again(zeros: list[complex], poles: list[complex], gain: float) -> None:
    """As many finite zeros as there were, whatever the relative degree, and the same response."""
    if len(zeros) > len(poles):
        zeros, poles = poles, zeros
    first = from_zeros_poles(zeros, poles, gain)
    again = from_state_space(first.a, first.b, first.c, first.d)
    assert len(again.zeros) == len(zeros)
    off_origin = S[5:-5] + 0.317
    assert np.allclose(again.response(off_origin), first.response(off_origin), rtol=1e-3)


def test_a_hidden_mode_of_a_state_space_is_a_pole_and_a_zero() -> None:
    """A mode that the effort does not reach stays among the poles, beside a zero."""
    system = from_state_space(np.diag([-1.0, 2.0]), np.array([1.0, 0.0]), np.array([1.0, 1.0]))
    assert np.sort(system.poles.real) == pytest.approx([-1.0, 2.0])
    assert system.zeros == pytest.approx([2.0])


def test_an_integrator_of_a_state_space_is_exact() -> None:
    """Eigenvalues that are zero but for rounding are zero, so that the static gain is infinite."""
    turn = np.array([[0.8, -0.6], [0.6, 0.8]])
    system = from_state_space(turn @ np.diag([0.0, -3.0]) @ turn.T, turn @ [1.0, 1.0], turn @ [1.0, 1.0])
    assert 0.0 in system.poles
    assert math.isinf(system.static_gain())


def test_lag_and_constant() -> None:
    """A lag of no time is a gain of one; a constant has no states."""
    assert lag(0.0).order == 0
    assert constant(-2.0).response(S) == pytest.approx(-2.0)
    assert lag(4.0).response(np.array([0.25j])) == pytest.approx(1.0 / (1.0 + 1.0j))


def test_a_product_overflows_only_at_its_end() -> None:
    """Huge and tiny factors in any order make a moderate product; only a huge product is infinite."""
    assert product([1e300, 1e300, 1e-300, 1e-299]) == pytest.approx(10.0)
    assert product([1e300, -1e300]) == -math.inf


def test_conjugates_are_made_exact() -> None:
    """A pair that rounding has bent becomes exact."""
    found = with_conjugates([1.0, complex(-1.0, 2.0), complex(-1.0, -2.0 - 1e-14)], "pole")
    assert found[2] == found[1].conjugate()


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (
            lambda: from_zeros_poles((1.0, 2.0), (3.0,), 1.0),
            "the numerator has degree 2, above the denominator's 1: such a plant would react before it is acted upon",
        ),
        (lambda: from_zeros_poles((), (1 + 2j,), 1.0), "the pole 1+2j lacks its conjugate 1-2j"),
        (lambda: from_zeros_poles((1 - 2j,), (1.0, 2.0), 1.0), "the zero 1-2j lacks its conjugate 1+2j"),
        (lambda: from_zeros_poles((), (math.inf,), 1.0), "every pole must be a finite number, found inf+0j"),
        (lambda: from_zeros_poles((), (-1.0,), math.nan), "the gain must be a finite number, found nan"),
        (lambda: from_zeros_poles((), (-1.0,), 1.0, -2.0), "the dead time must be zero or a positive time, found -2"),
        (lambda: lag(-1.0), "a lag must be zero or a positive time, found -1"),
        (
            lambda: from_state_space(np.eye(2), np.ones(3), np.ones(3)),
            "a state space needs a square a with as many rows as b and c have numbers, "
            "found a of shape (2, 2), b with 3 and c with 3",
        ),
        (
            lambda: from_state_space(np.full((1, 1), math.nan), np.ones(1), np.ones(1)),
            "a state space needs finite numbers in a, b, c and d",
        ),
    ],
)
def test_sentences(call: object, sentence: str) -> None:
    """What cannot be is refused in one sentence."""
    with pytest.raises(LoopError) as caught:
        call()  # type: ignore[operator]  # a call without arguments
    assert str(caught.value) == sentence
