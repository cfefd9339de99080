"""Reading curves that were sampled finely: where they cross a level, where they turn, what area they enclose.

Every function takes a whole family at once: `t` of shape (n,) holds evenly spaced times that all curves share, `y` of
shape (m, n) one curve a row, and the result has shape (m,), NaN where a curve has no such point. With h the spacing,
crossings lie within O(h^4) of the smooth curve's (a cubic through four points), heights of peaks within O(h^3) and
their times within O(h^2) (a parabola on either side of the highest point, so that a corner at a sample instant is not
rounded off), areas within O(h^2).
"""

from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Indices = NDArray[np.intp]

_NEWTON_STEPS = 4


class Peaks(NamedTuple):
    """Where curves are highest and how high: time and height, both of shape (m,)."""

    time: Array
    height: Array


def first_reach(t: Array, y: Array, level: float) -> Array:
    """Return when each curve first reaches `level` from below; the first instant when it starts there."""
    reached = y >= level
    index = reached.argmax(axis=1)
    ever = reached[np.arange(len(y)), index]
    times = np.where(index > 0, _crossing(t, y, np.maximum(index - 1, 0), np.full(len(y), level)), t[0])
    return np.where(ever, times, np.nan)


def last_exit(t: Array, y: Array, reach: Array) -> Array:
    """Return after when abs(y) stays within `reach`, of shape (m,): 0 when always, NaN when not at the end."""
    outside = ~(np.abs(y) <= reach[:, None])
    last = y.shape[1] - 1 - outside[:, ::-1].argmax(axis=1)
    rows = np.arange(len(y))
    never = ~outside[rows, last]
    still = outside[:, -1]
    left = np.minimum(last, y.shape[1] - 2)
    upright = y * np.sign(y[rows, left])[:, None]
    times = _crossing(t, upright, left, reach)
    return np.where(never, 0.0, np.where(still, np.nan, times))


def highest(t: Array, y: Array) -> Peaks:
    """Return the highest point of each curve, between its samples."""
    return refined(t, y, y.argmax(axis=1))


def first_maximum(t: Array, y: Array, above: Array) -> Array:
    """Return when each curve first turns down at a height over `above`, of shape (m,)."""
    rises = np.ones(y.shape, dtype=np.bool_)
    rises[:, 1:] = y[:, 1:] > y[:, :-1]
    falls = np.zeros(y.shape, dtype=np.bool_)
    falls[:, :-1] = y[:, 1:] <= y[:, :-1]
    turns = rises & falls & (y > above[:, None])
    index = turns.argmax(axis=1)
    ever = turns[np.arange(len(y)), index]
    return np.where(ever, refined(t, y, index).time, np.nan)


def refined(t: Array, y: Array, index: Indices) -> Peaks:
    """Return the peaks near the highest samples `index`, by a parabola on either side of each."""
    spacing = t[1] - t[0]
    top = y[np.arange(len(y)), index]
    ahead = _one_side(y, index, 1)
    behind = _one_side(y, index, -1)
    later = ahead.height >= behind.height
    shift = np.where(later, ahead.time, -behind.time)
    return Peaks(t[index] + spacing * shift, top + np.where(later, ahead.height, behind.height))


def absolute_area(t: Array, y: Array) -> Array:
    """Return the integral of abs(y): trapezia, exact for straight pieces that change sign within a step."""
    size = np.abs(y)
    here, there = size[:, :-1], size[:, 1:]
    turns = y[:, :-1] * y[:, 1:] < 0.0
    both = here + there
    excess = np.where(turns, here * there / np.where(turns, both, 1.0), 0.0)
    return (0.5 * both - excess) @ np.diff(t)


def _one_side(y: Array, index: Indices, step: int) -> Peaks:
    """Return how far (in samples) and how much higher the parabola through index, +step, +2 step turns; else 0, 0."""
    rows, end = np.arange(len(y)), y.shape[1] - 1
    inside = (index + 2 * step >= 0) & (index + 2 * step <= end)
    here = y[rows, index]
    near = y[rows, np.clip(index + step, 0, end)]
    far = y[rows, np.clip(index + 2 * step, 0, end)]
    slope = -1.5 * here + 2.0 * near - 0.5 * far
    bend = here - 2.0 * near + far
    turns = inside & (slope > 0.0) & (bend < 0.0)
    bend = np.where(turns, bend, -1.0)
    slope = np.where(turns, slope, 0.0)
    return Peaks(np.minimum(-slope / bend, 1.0), -0.5 * slope * slope / bend)


def _crossing(t: Array, y: Array, left: Indices, level: Array) -> Array:
    """Return when the cubic through the four samples around each interval `left`, left + 1 passes `level` in it."""
    if y.shape[1] < 4:
        return _straight_crossing(t, y, left, level)
    first = np.clip(left - 1, 0, y.shape[1] - 4)
    rows = np.arange(len(y))
    p0, p1, p2, p3 = (y[rows, first + k] for k in range(4))
    d1, d2, d3 = p1 - p0, p2 - 2.0 * p1 + p0, p3 - 3.0 * p2 + 3.0 * p1 - p0
    # Newton's form p0 + d1 x + d2 x (x - 1) / 2 + d3 x (x - 1)(x - 2) / 6, written in powers of x.
    c1, c2, c3 = d1 - 0.5 * d2 + d3 / 3.0, 0.5 * (d2 - d3), d3 / 6.0
    low = (left - first).astype(np.float64)
    x = low + _share(y[rows, left], y[rows, left + 1], level)
    for _ in range(_NEWTON_STEPS):
        value = p0 + x * (c1 + x * (c2 + x * c3)) - level
        slope = c1 + x * (2.0 * c2 + 3.0 * c3 * x)
        x = np.clip(x - value / np.where(slope == 0.0, np.inf, slope), low, low + 1.0)
    return t[left] + (x - low) * (t[left + 1] - t[left])


def _straight_crossing(t: Array, y: Array, left: Indices, level: Array) -> Array:
    rows = np.arange(len(y))
    share = _share(y[rows, left], y[rows, left + 1], level)
    return t[left] + share * (t[left + 1] - t[left])


def _share(here: Array, there: Array, level: Array) -> Array:
    """Return where between two heights a straight line passes `level`, 0 to 1."""
    rise = there - here
    return np.clip((level - here) / np.where(rise == 0.0, np.inf, rise), 0.0, 1.0)
