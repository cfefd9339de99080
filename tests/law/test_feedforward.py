"""Feedforward and filters sample by sample, against the same formulas in scipy."""

from math import inf, nan

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import signal

from tuner.law.feedforward import SECTION, scaled, section

SMALL = st.floats(-0.5, 0.5)


def test_effort_is_the_gain_times_the_distance_from_rest() -> None:
    """The effort is a deviation: zero at the resting point, and proportional to the distance from it."""
    assert scaled(72.0, 72.0, 0.4) == 0.0
    assert scaled(77.0, 72.0, 0.4) == 2.0


@given(st.tuples(st.floats(-3.0, 3.0), SMALL, SMALL), st.floats(0.05, 1.2), st.floats(0.01, 0.3))
def test_a_section_is_its_transfer_function(over: tuple[float, float, float], a1: float, a2: float) -> None:
    """In x = z - 1 it is (b0 x^2 + b1 x + b2)/(x^2 + a1 x + a2), as a filter of scipy in z computes it."""
    signals = np.sin(np.arange(60.0)) + np.arange(60.0) / 20.0
    shift = np.array([[1.0, -2.0, 1.0], [0.0, 1.0, -1.0], [0.0, 0.0, 1.0]])
    expected = signal.lfilter(np.array(over) @ shift, np.array([1.0, a1, a2]) @ shift, signals)
    memories, found = (0.0, 0.0), []
    for value in signals.tolist():
        out, *kept = section(value, *memories, *over, a1, a2)
        memories = (kept[0], kept[1])
        found.append(out)
    assert found == pytest.approx(expected, rel=1e-9, abs=1e-9 * np.abs(expected).max() + 1e-12)


def test_the_static_gain_of_a_slow_section_is_exact() -> None:
    """A lag of a million samples ends where its coefficients say, to the last digits."""
    decay, memories, out = 1e-6, (3.0, 0.0), 0.0
    for _ in range(1000):
        out, *kept = section(3.0, *memories, 0.0, decay, 0.0, decay, 0.0)
        memories = (kept[0], kept[1])
    assert out == pytest.approx(3.0, rel=1e-15)


@pytest.mark.parametrize("spoilt", [nan, inf, -inf])
def test_what_is_not_finite_passes_and_leaves_no_trace(spoilt: float) -> None:
    """The value comes out as it is, so that the law holds its effort; the memories stay."""
    out, *kept = section(spoilt, 0.3, -0.2, 1.0, 0.5, 0.1, 0.4, 0.1)
    assert out == spoilt or (out != out and spoilt != spoilt)  # noqa: PLR0124 - a NaN differs from itself
    assert kept == [0.3, -0.2]


def test_the_constants_are_named_in_their_order() -> None:
    """Exporters and kernels hand them over in this order."""
    assert section.__code__.co_varnames[3:8] == SECTION
