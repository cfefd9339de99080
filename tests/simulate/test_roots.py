"""Zeros of 1 + L: Newton's steps, roots found together, and the argument principle."""

import numpy as np
import pytest

from tuner.simulate.factors import Factors, Stack, stack
from tuner.simulate.roots import count_right, newton_step_in_s, newton_steps, together
from tuner.simulate.traces import ComplexArray


def row(poles: list[complex], gain: float, delay: float = 0.0, step: float = 0.0) -> Stack:
    """Return gain over the product of (x - poles)."""
    return stack([Factors(np.zeros(0, dtype=complex), np.array(poles, dtype=complex), gain, delay, step)])


def complex_roots(*coefficients: float) -> ComplexArray:
    """Return the roots of a polynomial, highest power first."""
    return np.roots(coefficients).astype(complex)


def scaled(x: ComplexArray, loop: Stack) -> ComplexArray:
    """Return one row of roots in the units of a stack."""
    return (x[None] / loop.unit).astype(complex)


def test_newton_steps_vanish_at_roots() -> None:
    """At the roots of (x + 1)(x + 2) + 6 there is nothing to take; nearby it is what is missing."""
    loop = row([-1.0, -2.0], 6.0)
    roots = complex_roots(1.0, 3.0, 8.0)
    assert newton_steps(loop, scaled(roots, loop)) == pytest.approx(np.zeros((1, 2)), abs=1e-14)
    near = newton_steps(loop, scaled(roots + 1e-4, loop)) * loop.unit
    assert near == pytest.approx(np.full((1, 2), 1e-4), rel=1e-3)


def test_whole_samples_count_as_factors() -> None:
    """Of z (z - .5) + .3: a sample of delay is a pole at z = 0."""
    loop = row([-0.5], 0.3, delay=0.2, step=0.2)
    roots = complex_roots(1.0, -0.5, 0.3)
    assert newton_steps(loop, scaled(roots - 1.0, loop)) == pytest.approx(np.zeros((1, 2)), abs=1e-14)
    assert newton_step_in_s(loop, (np.log(roots) / 0.2).astype(complex)) == pytest.approx(np.zeros(2), abs=1e-12)


def test_a_hidden_mode_is_a_root() -> None:
    """A factor above and below stays a root, though the loop gain does not show it."""
    loop = stack([Factors(np.array([1.0 + 0j]), np.array([1.0 + 0j, -1.0]), 2.0, 0.0, 0.0)])
    roots, error = together(loop, np.array([1.2 + 0.1j, -2.0 + 0.3j]))
    assert np.sort_complex(roots) == pytest.approx([-3.0, 1.0], rel=1e-12)
    assert np.all(error < 1e-9)


def test_roots_found_together_are_all_different() -> None:
    """From guesses far away, and close to each other, each of five roots is found once."""
    loop = row([-1.0] * 5, 1.0)
    guesses = (0.1 * np.exp(1j * np.arange(5.0)) + 0.3).astype(complex)
    roots, _ = together(loop, guesses)
    expected = -1.0 + np.exp(1j * np.pi * (2 * np.arange(5) + 1) / 5)
    assert np.abs(roots[:, None] - expected[None, :]).min(0) == pytest.approx(np.zeros(5), abs=1e-12)


@pytest.mark.parametrize("line", [-2.5, -1.2, -0.5, 0.0, 0.3])
@pytest.mark.parametrize("gain", [0.01, 3.0, 50.0])
def test_roots_right_of_a_line(line: float, gain: float) -> None:
    """With next to no delay the count is that of the polynomial's roots."""
    polynomial = np.poly([-1.0, -2.0, -0.3])
    polynomial[-1] += gain
    expected = int((np.roots(polynomial).real > line).sum())
    assert count_right(row([-1.0, -2.0, -0.3], gain, delay=1e-9), line) == expected


@pytest.mark.parametrize("gain", [0.1, 0.9, 1.3, 4.0])
def test_roots_outside_a_circle(gain: float) -> None:
    """For a sampled loop the line is a circle: the roots of z^5 (z - .8) + gain .2 outside it."""
    roots = np.roots([1.0, -0.8, 0.0, 0.0, 0.0, 0.0, 0.2 * gain])
    for line in (-2.0, -0.5, 0.0, 0.4):
        expected = int((np.abs(roots) > np.exp(0.1 * line)).sum())
        assert count_right(row([-0.2], 0.2 * gain, delay=0.5, step=0.1), line) == expected


def test_a_line_on_an_integrator() -> None:
    """On the imaginary axis an integrator needs no way round: D + N has no poles there."""
    assert count_right(row([0.0, -1.0], 1.0, delay=0.5), 0.0) == 0
    assert count_right(row([0.0, -1.0], 5.0, delay=0.5), 0.0) == 2
    assert count_right(row([0.0, 0.0], 1.0, delay=0.5), 0.0) == 2
