"""How far an axis reaches: within reason, on round numbers, and without jumping under the hand."""

import numpy as np
import pytest

from tuner.window.plots.extent import Extent, SteadyExtent, of_levels, of_values, rounded, wanted


def test_extent_of_values_leaves_out_what_is_not_finite() -> None:
    """Infinity and what is not a number do not stretch a range; of nothing there is none."""
    assert of_values(np.array([1.0, np.nan, np.inf, -2.0])) == Extent(-2.0, 1.0)
    assert of_values(np.array([np.nan])) is None
    assert of_levels([]) is None


def test_a_calm_curve_is_shown_whole() -> None:
    """The nominal curve of a stable loop is never cut."""
    assert wanted(np.array([0.0, 7.0, 5.0]), [], Extent(0.0, 5.0), calm=True) == Extent(0.0, 7.0)


def test_a_wild_member_is_cut_one_span_beyond() -> None:
    """A family member that runs away stretches the range by one span at most, to either side."""
    made = wanted(np.array([0.0, 5.0]), [np.array([-1e9, 1e9])], Extent(0.0, 5.0), calm=True)
    assert made == Extent(-5.0, 10.0)


def test_a_runaway_nominal_curve_is_cut_by_the_marks() -> None:
    """When the nominal loop itself runs away, the marks decide what is seen."""
    assert wanted(np.array([0.0, 1e12]), [], Extent(0.0, 5.0), calm=False) == Extent(0.0, 10.0)


def test_a_runaway_curve_without_marks_is_cut_by_its_median() -> None:
    """Without any mark, three times the median size is shown, and one span more at most."""
    made = wanted(np.array([0.0, 1.0, 2.0, 4.0, 1e12]), [], Extent(0.0, 0.0), calm=False)
    assert made == Extent(-6.0, 18.0)


def test_a_range_widens_under_the_hand_and_narrows_when_it_is_off() -> None:
    """While held it only widens; let go, it narrows to what is asked."""
    steady = SteadyExtent()
    first = steady.offer(Extent(0.0, 10.0), held=True)
    wide = steady.offer(Extent(0.0, 20.0), held=True)
    assert wide.holds(Extent(0.0, 20.0))
    assert steady.offer(Extent(0.0, 2.0), held=True) == wide
    narrow = steady.offer(Extent(0.0, 2.0), held=False)
    assert narrow.span < first.span


def test_small_changes_change_nothing() -> None:
    """A curve that grows by a thousandth leaves the axis where it is, held or not."""
    steady = SteadyExtent()
    before = steady.offer(Extent(0.0, 10.0), held=False)
    assert steady.offer(Extent(0.0, 10.01), held=False) == before
    assert steady.offer(Extent(0.0, 9.0), held=False) == before


def test_a_range_that_is_not_full_narrows_without_a_hand() -> None:
    """Also when what is asked still fills most of it."""
    steady = SteadyExtent()
    steady.offer(Extent(0.0, 10.0), held=False)
    assert steady.offer(Extent(0.0, 7.5), held=False) == rounded(Extent(0.0, 7.5))


def test_the_nearest_place_in_a_range() -> None:
    """A value outside goes to the nearer end."""
    assert [Extent(-1.0, 2.0).nearest(value) for value in (-5.0, 0.5, 7.0)] == [-1.0, 0.5, 2.0]


def test_forgotten_ranges_start_anew() -> None:
    """After `forget` the next range counts for itself."""
    steady = SteadyExtent()
    steady.offer(Extent(0.0, 100.0), held=False)
    steady.forget()
    assert steady.offer(Extent(0.0, 1.0), held=True).high < 2.0


@pytest.mark.parametrize("low", [0.0, 72.0, -5.0])
def test_a_flat_line_gets_a_range(low: float) -> None:
    """A curve that never moves is shown in the middle of a range that is not empty."""
    made = rounded(Extent(low, low))
    assert made.low < low < made.high
