"""Curves whose crossings, peaks and areas are known in closed form."""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tuner.measure.curve import Array, absolute_area, first_maximum, first_reach, highest, last_exit

Curve = Callable[[Array], Array]
T = np.linspace(0.0, 10.0, 1001)


def rows(*curves: Curve | Array) -> Array:
    """Stack curves into a family."""
    return np.array([curve(T) if callable(curve) else curve for curve in curves])


def test_a_level_is_reached_between_samples() -> None:
    """A first-order rise reaches 90 % at ln 10, to far better than a sample."""
    found = first_reach(T, rows(lambda t: 1.0 - np.exp(-t)), (0.9,))[0]

    assert found[0] == pytest.approx(np.log(10.0), abs=1e-9)


def test_a_level_that_is_never_reached_has_no_time() -> None:
    """A curve below the level gives NaN, its neighbour above the level from the start gives the first instant."""
    found = first_reach(T, rows(lambda t: 0.5 * t / 10.0, lambda t: 1.0 + t), (0.9,))[0]

    assert np.isnan(found[0])
    assert found[1] == 0.0


def test_a_crossing_beside_a_corner() -> None:
    """Where a held effort jumps, the curve turns a corner; a crossing just before it is found on its own side."""
    corner = np.minimum(T, 5.0)

    assert first_reach(T, rows(corner), (4.993,), block=100)[0][0] == pytest.approx(4.993, abs=1e-12)
    assert last_exit(T, rows(corner - 5.0), np.array([0.003]), block=100)[0] == pytest.approx(4.997, abs=1e-12)
    assert abs(first_reach(T, rows(corner), (4.993,))[0][0] - 4.993) > 1e-5


def test_the_highest_point_lies_between_samples() -> None:
    """The first peak of a sine shifted off the grid is found in height and time."""
    peak = highest(T, rows(lambda t: np.sin(0.3 * t - 0.00123)))

    assert peak.height[0] == pytest.approx(1.0, abs=1e-9)
    assert peak.time[0] == pytest.approx((np.pi / 2.0 + 0.00123) / 0.3, abs=1e-4)


def test_a_corner_at_a_sample_is_not_rounded_off() -> None:
    """A kinked peak, steep before and flat after, keeps the height and the time of its corner."""
    corner = np.where(T <= 5.0, T, 5.0 - 0.2 * (T - 5.0))

    peak = highest(T, rows(corner))

    assert peak.height[0] == 5.0
    assert peak.time[0] == 5.0


def test_a_peak_at_either_end_stays_there() -> None:
    """Curves that only fall or only rise are highest at an end of the run."""
    peak = highest(T, rows(lambda t: -t, lambda t: t))

    assert peak.time.tolist() == [0.0, 10.0]
    assert peak.height.tolist() == [0.0, 10.0]


def test_the_first_maximum_is_not_the_highest() -> None:
    """Of two humps above the level the first is taken although the second is higher."""
    found = first_maximum(T, rows(lambda t: 2.0 + np.sin(t) * np.exp(0.1 * t)), 2.0)

    assert found[0] == pytest.approx(np.pi / 2.0 + np.arctan(0.1), abs=1e-4)


def test_a_curve_that_still_rises_has_no_maximum() -> None:
    """A rise that lasts to the end of the run turns nowhere."""
    assert np.isnan(first_maximum(T, rows(lambda t: t), 0.5)[0])


def test_the_last_exit_is_the_last_one() -> None:
    """A decaying swing leaves a band for good where its envelope says, from above or below."""
    curve = np.exp(-T) * np.cos(5.0 * T)
    fine = np.linspace(0.0, 10.0, 2_000_001)
    outside = np.abs(np.exp(-fine) * np.cos(5.0 * fine)) > 0.1

    found = last_exit(T, rows(curve, -curve), np.array([0.1, 0.1]))

    assert found == pytest.approx(fine[outside][-1], abs=1e-5)


def test_a_curve_inside_the_band_never_left_it() -> None:
    """Zero when it was never outside, NaN when it is outside at the end."""
    found = last_exit(T, rows(lambda t: 0.0 * t, lambda t: t), np.array([0.1, 0.1]))

    assert found[0] == 0.0
    assert np.isnan(found[1])


def test_the_area_counts_both_signs() -> None:
    """The integral of abs(sin) over a whole number of half turns is two for each."""
    t = np.linspace(0.0, 4.0 * np.pi, 4001)

    assert absolute_area(t, np.sin(t)[None])[0] == pytest.approx(8.0, rel=1e-5)


def test_the_area_of_straight_lines_is_exact() -> None:
    """A line through zero within a step encloses its two triangles."""
    t = np.array([0.0, 1.0])

    assert absolute_area(t, np.array([[-1.0, 3.0]]))[0] == pytest.approx(0.125 + 1.125, rel=1e-15)


@given(st.floats(0.05, 3.0), st.floats(-5.0, 5.0), st.floats(0.1, 10.0))
def test_readings_scale_with_the_curve(rate: float, level: float, scale: float) -> None:
    """Stretching a curve upwards stretches heights and areas and leaves times alone."""
    curve = np.exp(-0.3 * T) * np.sin(rate * T + level)
    one, other = highest(T, rows(curve)), highest(T, rows(scale * curve))

    assert other.height[0] == pytest.approx(scale * one.height[0], rel=1e-9)
    assert other.time[0] == pytest.approx(one.time[0], abs=1e-6)
    assert absolute_area(T, rows(scale * curve))[0] == pytest.approx(scale * absolute_area(T, rows(curve))[0], rel=1e-9)


@given(st.lists(st.floats(-2.0, 2.0), min_size=4, max_size=40))
def test_readings_stay_within_the_run(values: list[float]) -> None:
    """Whatever the samples, a time is NaN or within the run and a peak no lower than the highest sample."""
    y = np.array([values])
    t = np.arange(len(values), dtype=float)
    times = [first_reach(t, y, (0.7,))[0][0], last_exit(t, y, np.array([0.5]))[0], highest(t, y).time[0]]

    assert all(np.isnan(time) or 0.0 <= time <= t[-1] for time in times)
    assert highest(t, y).height[0] >= max(values)
