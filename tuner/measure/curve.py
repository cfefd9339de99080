"""Reading curves that were sampled finely: where they cross a level, where they turn, what area they enclose.

Every function takes a whole family at once: `t` of shape (n,) holds evenly spaced times that all curves share, `y` of
shape (m, n) one curve a row, and the result has shape (m,), NaN where a curve has no such point. With h the spacing,
crossings lie within O(h^4) of the smooth curve's (a cubic through four points), heights of peaks within O(h^3) and
their times within O(h^2) (a parabola on either side of the highest point, so that a corner at a sample instant is not
rounded off), areas within O(h^2). A curve has corners where a held effort jumps: `block` is the number of steps
between them, counted from the first instant, and a cubic then keeps to one side; 1 for a curve without corners.
"""

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Indices = NDArray[np.intp]

_NEWTON_STEPS = 3


class Peaks(NamedTuple):
    """Where curves are highest and how high: time and height, both of shape (m,)."""

    time: Array
    height: Array


class _Bracket(NamedTuple):
    """Steps of curves in which levels are passed: row, sample before it, level, and +1 or -1 to turn the curve."""

    row: Indices
    left: Indices
    level: Array
    sign: Array


def first_reach(t: Array, y: Array, levels: Sequence[float], block: int = 1) -> Array:
    """Return when each curve first reaches each level from below, shape (levels, m); at once if it starts there."""
    count = len(y)
    rows = np.arange(count)
    index = np.array([(y >= level).argmax(axis=1) for level in levels])
    level = np.array(levels)[:, None]
    ever = y[rows, index] >= level
    row = np.tile(rows, len(levels))
    left = np.maximum(index.ravel() - 1, 0)
    found = _crossings(t, y, _Bracket(row, left, np.repeat(levels, count), np.ones(len(row))), block)
    times = np.where(index > 0, found.reshape(index.shape), t[0])
    return np.where(ever, times, np.nan)


def last_exit(t: Array, y: Array, reach: Array, block: int = 1) -> Array:
    """Return after when abs(y) stays within `reach`, of shape (m,): 0 when always, NaN when not at the end."""
    inside = np.abs(y) <= reach[:, None]
    rows, end = np.arange(len(y)), y.shape[1] - 1
    last = end - np.ascontiguousarray(inside[:, ::-1]).argmin(axis=1)
    never = inside[rows, last]
    left = np.minimum(last, end - 1)
    times = _crossings(t, y, _Bracket(rows, left, reach, np.sign(y[rows, left])), block)
    return np.where(never, 0.0, np.where(inside[:, -1], times, np.nan))


def highest(t: Array, y: Array) -> Peaks:
    """Return the highest point of each curve, between its samples."""
    return refined(t, y, y.argmax(axis=1), np.ones(len(y)))


def largest(t: Array, y: Array) -> Peaks:
    """Return the point of each curve that is farthest from zero, as a distance, between its samples."""
    index = np.abs(y).argmax(axis=1)
    return refined(t, y, index, np.sign(y[np.arange(len(y)), index]))


def first_maximum(t: Array, y: Array, above: float) -> Array:
    """Return when each curve first turns down at a height over `above`."""
    turns = y > above
    turns[:, 1:] &= y[:, 1:] > y[:, :-1]
    turns[:, :-1] &= y[:, 1:] <= y[:, :-1]
    turns[:, -1] = False
    index = turns.argmax(axis=1)
    ever = turns[np.arange(len(y)), index]
    return np.where(ever, refined(t, y, index, np.ones(len(y))).time, np.nan)


def refined(t: Array, y: Array, index: Indices, sign: Array) -> Peaks:
    """Return the peaks of sign * y near its highest samples `index`, by a parabola on either side of each."""
    top = sign * y[np.arange(len(y)), index]
    ahead = _one_side(y, index, sign, 1)
    behind = _one_side(y, index, sign, -1)
    later = ahead.height >= behind.height
    shift = np.where(later, ahead.time, -behind.time)
    return Peaks(t[index] + (t[1] - t[0]) * shift, top + np.where(later, ahead.height, behind.height))


def absolute_area(t: Array, y: Array) -> Array:
    """Return the integral of abs(y): trapezia, exact for straight pieces that change sign within a step."""
    size = np.abs(y)
    area: Array = size.sum(axis=1) - 0.5 * (size[:, 0] + size[:, -1])
    positive = y > 0.0
    row, step = np.nonzero(positive[:, 1:] != positive[:, :-1])
    here, there = size[row, step], size[row, step + 1]
    # Of a step that crosses zero the trapezium counts too much; one that only touches it is right.
    excess = here * there / np.maximum(here + there, np.finfo(float).tiny)
    area -= np.bincount(row, excess, len(y))
    area *= t[1] - t[0]
    return area


def _one_side(y: Array, index: Indices, sign: Array, step: int) -> Peaks:
    """Return how far (in samples) and how much higher the parabola through index, +step, +2 step turns; else 0, 0."""
    rows, end = np.arange(len(y)), y.shape[1] - 1
    inside = (index + 2 * step >= 0) & (index + 2 * step <= end)
    here = sign * y[rows, index]
    near = sign * y[rows, np.clip(index + step, 0, end)]
    far = sign * y[rows, np.clip(index + 2 * step, 0, end)]
    slope = -1.5 * here + 2.0 * near - 0.5 * far
    bend = here - 2.0 * near + far
    turns = inside & (slope > 0.0) & (bend < 0.0)
    bend = np.where(turns, bend, -1.0)
    slope = np.where(turns, slope, 0.0)
    return Peaks(np.minimum(-slope / bend, 1.0), -0.5 * slope * slope / bend)


def _crossings(t: Array, y: Array, at: _Bracket, block: int) -> Array:
    """Return when the cubic through the four samples around each step passes the level in it."""
    here, there = at.sign * y[at.row, at.left], at.sign * y[at.row, at.left + 1]
    rise = there - here
    share = np.clip((at.level - here) / np.where(rise == 0.0, np.inf, rise), 0.0, 1.0)
    if y.shape[1] >= 4:
        share = _cubic_share(y, at, share, block)
    return t[at.left] + share * (t[at.left + 1] - t[at.left])


def _cubic_share(y: Array, at: _Bracket, share: Array, block: int) -> Array:
    """Improve where in its step each curve passes the level, 0 to 1, from where a straight line does."""
    first = at.left - 1
    if block >= 3:
        start = at.left // block * block
        first = np.clip(first, start, start + block - 3)
    first = np.clip(first, 0, y.shape[1] - 4)
    p0, p1, p2, p3 = at.sign * y[at.row, first + np.arange(4)[:, None]]
    d1, d2, d3 = p1 - p0, p2 - 2.0 * p1 + p0, p3 - 3.0 * p2 + 3.0 * p1 - p0
    # Newton's form p0 + d1 x + d2 x (x - 1) / 2 + d3 x (x - 1)(x - 2) / 6, written in powers of x.
    c0, c1, c2, c3 = p0 - at.level, d1 - 0.5 * d2 + d3 / 3.0, 0.5 * (d2 - d3), d3 / 6.0
    low = (at.left - first).astype(np.float64)
    x = low + share
    for _ in range(_NEWTON_STEPS):
        value = c0 + x * (c1 + x * (c2 + x * c3))
        slope = c1 + x * (2.0 * c2 + 3.0 * c3 * x)
        x = np.clip(x - value / np.where(slope == 0.0, np.inf, slope), low, low + 1.0)
    return np.asarray(x - low)
