"""Compiled exponentials against scipy's, against closed forms, and against many-digit arithmetic."""

import math

import mpmath
import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.linalg import expm

from tuner.kernels.exponential import growth, hold

Array = NDArray[np.float64]


def _cases() -> dict[str, Array]:
    random = np.random.default_rng(3)
    stiff = np.tril(random.normal(size=(6, 6)))
    stiff[np.diag_indices(6)] = [-1e-3, -0.1, -1.0, -30.0, -1e3, -1e4]
    return {
        "zero": np.zeros((3, 3)),
        "one number": np.array([[-0.7]]),
        "nilpotent": np.triu(random.normal(size=(7, 7)), 1),
        "large nilpotent": np.diag([1e6, 2e3, 5.0], 1),
        "turning": np.array([[0.0, 40.0], [-40.0, 0.0]]),
        "stiff": stiff,
        "growing": np.array([[3.0, 1.0], [0.0, 2.0]]),
        "dense": random.normal(size=(9, 9)),
        "small": 1e-9 * random.normal(size=(4, 4)),
    }


@pytest.mark.parametrize(("name", "a"), _cases().items(), ids=_cases().keys())
def test_growth_is_the_exponential_less_one(name: str, a: Array) -> None:
    """Within 1e-13 of scipy's exponential, relative to its norm or one, over stiff and nilpotent matrices."""
    expected = expm(a)
    off = np.abs(growth(a, 1.0) + np.eye(len(a)) - expected).max()
    assert off <= 1e-13 * max(1.0, np.abs(expected).max()), name


def test_growth_against_thirty_digits() -> None:
    """A dense matrix of norm about 20 agrees with the exponential computed with thirty digits."""
    a = np.random.default_rng(5).normal(size=(5, 5)) * 3.0
    with mpmath.workdps(30):
        exact = mpmath.expm(mpmath.matrix(a.tolist()))
        expected = np.array([[float(exact[i, j]) for j in range(5)] for i in range(5)])
    assert np.allclose(growth(a, 1.0) + np.eye(5), expected, rtol=0.0, atol=1e-13 * np.abs(expected).max())


def test_a_slow_mode_survives_beside_a_fast_one() -> None:
    """A decay of 1e-6 beside one of 1e9 is right to 13 digits, where scaling and squaring of 1 + x would lose six."""
    grown = growth(np.array([[-1e9, 0.0], [0.0, -1e-6]]), 1.0)
    assert grown[0, 0] == pytest.approx(-1.0, abs=1e-15)
    assert grown[1, 1] == pytest.approx(math.expm1(-1e-6), rel=1e-13)


def test_what_is_not_finite_is_not_hidden() -> None:
    """A matrix with infinity in it has no growth."""
    assert np.isnan(growth(np.array([[math.inf, 0.0], [0.0, 1.0]]), 1.0)).all()


@pytest.mark.parametrize("offset", [0.0, 0.2, 0.4999])
def test_a_jump_within_the_step(offset: float) -> None:
    """For 1/(s + 1), effects before and after the jump are those of the closed form."""
    a, b = np.full((1, 1, 1), -1.0), np.full((1, 1, 1), 1.0)
    grown, old, new = np.empty_like(a), np.empty_like(b), np.empty_like(b)
    hold(a, b, 0.5, np.array([[offset]]), grown, old, new)
    rest = math.exp(-(0.5 - offset))
    assert new[0, 0, 0] == pytest.approx(1.0 - rest, rel=1e-14)
    assert old[0, 0, 0] == pytest.approx(rest - math.exp(-0.5), rel=1e-12, abs=1e-16)
    assert grown[0, 0, 0] == pytest.approx(math.expm1(-0.5), rel=1e-14)
