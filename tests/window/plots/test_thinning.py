"""Thinned curves keep what a plot can show: ends, peaks, order in time; and nothing leaves the picture by far."""

import numpy as np

from tuner.window.plots.extent import Extent
from tuner.window.plots.thinning import bundle, clipped, envelope, single, staircase, thinned

SEEN = Extent(-2.0, 2.0)


def test_every_peak_survives() -> None:
    """A spike of one sample among ten thousand is still there, and the ends are."""
    t = np.linspace(0.0, 1.0, 10_000)
    y = np.zeros((1, t.size))
    y[0, 4321] = 1.0
    x, kept = thinned(t, y, 100)
    assert kept.max() == 1.0
    assert x[0, 0] == 0.0
    assert x[0, -1] == 1.0
    assert x.shape[1] <= 202


def test_points_stay_in_order() -> None:
    """Time never runs backwards, rising or falling."""
    t = np.linspace(0.0, 1.0, 5_000)
    x, _ = thinned(t, np.stack((t, -t, np.sin(300.0 * t))), 60)
    assert (np.diff(x, axis=1) >= 0.0).all()


def test_short_curves_come_back_as_they_are() -> None:
    """With two points a pixel or fewer, nothing is thinned."""
    t = np.linspace(0.0, 1.0, 100)
    x, kept = thinned(t, t[None, :], 50)
    assert np.array_equal(kept[0], t)
    assert np.array_equal(x[0], t)


def test_nothing_leaves_the_picture_by_more_than_its_height() -> None:
    """Diverging, infinite and undefined values end one height beyond the picture."""
    made = clipped(np.array([0.0, 1e300, -np.inf, np.nan, np.inf]), SEEN)
    assert np.array_equal(made, [0.0, 6.0, -6.0, 6.0, 6.0])


def test_a_bundle_is_broken_between_its_curves() -> None:
    """The connect array joins the points of one curve and never one curve to the next."""
    t = np.linspace(0.0, 1.0, 11)
    made = bundle(t, np.stack((t, 2.0 * t)), SEEN, 100)
    assert made.connect is not None
    assert list(np.flatnonzero(made.connect == 0)) == [10, 21]
    assert np.array_equal(made.y[11:], 2.0 * t)


def test_no_curves_make_an_empty_bundle() -> None:
    """A family of one has nothing to draw beside the nominal curve."""
    none = np.empty((0, 0))
    assert bundle(np.empty(0), none, SEEN, 100).x.size == 0
    assert envelope(np.empty(0), none, SEEN, 100).x.size == 0


def test_the_envelope_reaches_from_the_lowest_to_the_highest() -> None:
    """Each stroke spans the family at its time."""
    t = np.linspace(0.0, 1.0, 101)
    made = envelope(t, np.stack((t, -t)), SEEN, 101)
    assert np.allclose(made.y[::2], -made.x[::2])
    assert np.allclose(made.y[1::2], made.x[1::2])


def test_a_single_curve_is_clipped_too() -> None:
    """One curve goes through the same hands."""
    assert single(np.array([0.0, 1.0]), np.array([0.0, 1e9]), SEEN, 10).y[1] == 6.0


def test_a_staircase_holds_each_value_until_the_next() -> None:
    """Values 1, 2 at times 0, 1 with the end at 3 have corners (0,1) (1,1) (1,2) (3,2)."""
    t, u = staircase(np.array([0.0, 1.0]), np.array([1.0, 2.0]), 3.0)
    assert list(t) == [0.0, 1.0, 1.0, 3.0]
    assert list(u) == [1.0, 1.0, 2.0, 2.0]


def test_the_envelope_leaves_out_no_peak() -> None:
    """A peak of one sample among many to a stroke reaches as high as it is."""
    t = np.linspace(0.0, 1.0, 10_001)
    curve = np.zeros(t.size)
    curve[[4321, 8765]] = 1.5, -1.0
    made = envelope(t, curve[None, :], SEEN, 100)
    assert made.x.size == 200
    assert (made.y.min(), made.y.max()) == (-1.0, 1.5)
    assert (made.y[::2] <= made.y[1::2]).all()
