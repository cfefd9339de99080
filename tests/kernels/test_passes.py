"""What passes over the points of a block find is what plain arrays say, for lengths with points left over too."""

import numpy as np
import pytest
from numpy.typing import NDArray

from tuner.kernels import passes
from tuner.kernels.lanes import LANES

LENGTHS = (2, 3, 7, 8, 9, 16, 17, 31, 40, 203)

Array = NDArray[np.float64]


def curves(points: int) -> Array:
    """Return curves that start anywhere, cross each other, touch levels and rest on them, one in a column."""
    rng = np.random.default_rng(points)
    y = np.cumsum(rng.normal(size=(points, LANES)), axis=0) / np.sqrt(points)
    y[:, ::4] = np.round(2.0 * y[:, ::4]) / 2.0
    y[:, 1::8] = np.minimum.accumulate(y[:, 1::8], axis=0)
    out: Array = y
    return out


def found(work: Array, row: int) -> Array:
    """Return one row of what was found."""
    return work[row * LANES : (row + 1) * LANES]


def first(hits: NDArray[np.bool_]) -> NDArray[np.intp]:
    """Return the first row in which each column is hit, -1 for none."""
    return np.where(hits.any(axis=0), hits.argmax(axis=0), -1)


@pytest.fixture(params=LENGTHS, name="y")
def _y(request: pytest.FixtureRequest) -> Array:
    return curves(request.param)


@pytest.fixture(name="work")
def _work() -> Array:
    return np.full(passes.ROWS * LANES, 1e300)


SCALE = np.where(np.arange(LANES) % 3, 1.25, -0.75)


def test_highest_and_lowest(y: Array, work: Array) -> None:
    """Values and the first points at which they are taken."""
    passes.excursions(y.ravel(), len(y), SCALE, work)
    scaled = y * SCALE
    assert (found(work, passes.TOP) == scaled.max(axis=0)).all()
    assert (found(work, passes.BOTTOM) == scaled.min(axis=0)).all()
    assert (found(work, passes.TOP_AT) == scaled.argmax(axis=0)).all()
    assert (found(work, passes.BOTTOM_AT) == scaled.argmin(axis=0)).all()


def test_mean_of_the_last_points(y: Array, work: Array) -> None:
    """From any point on."""
    for begin in {0, len(y) // 3, len(y) - 1}:
        passes.tail_mean(y.ravel(), begin, len(y), work)
        assert found(work, passes.MEAN) == pytest.approx(y[begin:].mean(axis=0), rel=1e-12, abs=1e-12)


@pytest.mark.parametrize("reach", [0.0, 0.4, 1.0, 100.0])
def test_last_point_outside(y: Array, work: Array, reach: float) -> None:
    """A point on the border is inside; -1 where none is outside."""
    centre = y[len(y) // 2] + 0.1
    passes.last_outside(y.ravel(), len(y), centre, np.full(LANES, reach), work)
    outside = np.abs(y - centre) > reach
    assert (found(work, passes.LAST) == np.where(first(outside) < 0, -1, len(y) - 1 - first(outside[::-1]))).all()


def test_first_points_of_a_rise(y: Array, work: Array) -> None:
    """At a tenth and at nine tenths of the scale, the level itself counting."""
    passes.rise(y.ravel(), len(y), SCALE, work)
    assert (found(work, passes.TENTH) == first(y * SCALE >= 0.1)).all()
    assert (found(work, passes.NINE) == first(y * SCALE >= 0.9)).all()


def test_first_turn_above_the_scale(y: Array, work: Array) -> None:
    """A point above 1 that rose to it, or starts there, and does not rise from it."""
    passes.excursions(y.ravel(), len(y), SCALE, work)
    passes.first_turn(y.ravel(), len(y), SCALE, work)
    scaled = y * SCALE
    turns = (scaled[:-1] > 1.0 + passes.NOTHING) & (scaled[1:] <= scaled[:-1])
    turns[1:] &= scaled[1:-1] > scaled[:-2]
    assert (found(work, passes.TURN) == first(turns)).all()


def test_area_between_a_curve_and_a_level(y: Array, work: Array) -> None:
    """Trapezia of distances; and the smaller distance of each piece that crosses the level."""
    passes.enclosed(y.ravel(), len(y), 0.3, work)
    size = np.abs(y - 0.3)
    crosses = ((y[1:] - 0.3) > 0.0) != ((y[:-1] - 0.3) > 0.0)
    cut = np.where(crosses, np.minimum(size[1:], size[:-1]), 0.0).sum(axis=0)
    assert found(work, passes.AREA) == pytest.approx(np.trapezoid(size, axis=0), rel=1e-12, abs=1e-12)
    assert found(work, passes.CUT) == pytest.approx(cut, rel=1e-12, abs=1e-12)


def test_height_between_points() -> None:
    """Of a parabola through three points its top, and of a corner no more than the corner."""
    t = np.arange(5.0)
    y = np.zeros((5, LANES))
    y[:, 3], y[:, 4] = 4.0 - (t - 2.3) ** 2, 4.0 - np.abs(t - 2.0)
    assert passes.height(y.ravel(), 5, 2, 1.0, 3) == pytest.approx(4.0)
    assert passes.height(-y.ravel(), 5, 2, -1.0, 3) == pytest.approx(4.0)
    assert passes.height(y.ravel(), 5, 2, 1.0, 4) == 4.0
