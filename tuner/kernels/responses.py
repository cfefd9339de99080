"""Margins of many tunings read off a frequency grid that all share, each held between two bounds.

Where a margin is exactly takes Newton's method between the points (`crossings`); where its limit lies outside the
bounds that the points give, that need not be done. Peaks are at least as high as at any point, crossings lie between
two points; how far beyond is told from how much the points next to them differ.

Plain loops because each point is a handful of operations on numbers that a tuning changes; as arrays over tunings,
plants and frequencies they would not fit the cache.
"""

import math

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled

Array = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]
Flags = NDArray[np.uint8]
Integers = NDArray[np.int64]

MEASURES = ("gain_margin", "phase_margin", "delay_margin", "max_sensitivity", "max_complementary", "bandwidth")
"""In the order in which bounds stand."""

GAIN, PHASE, DELAY, SENSITIVITY, COMPLEMENTARY, BANDWIDTH = range(6)

LEVEL = 0.707
"""The sensitivity that ends the bandwidth; as `crossings.LEVEL`."""

_SLACK = 0.004
"""What a peak between points is allowed beyond what a parabola says, as a share."""

_SHARE = 0.35
"""What a crossing is allowed to be off the straight line, as a share of the step."""

_ALMOST = 0.05
"""A curve that turns back this near to where it would cross may cross between two points."""

_BACK = 1.0 - 1e-6
"""A curve has turned back when it is farther away by more than rounding: at the ends of a grid points may coincide."""

_FINAL = 1e-12


@compiled
def bound(  # noqa: PLR0913, PLR0917 - one walk along the grid, which finds all of them
    w: Array,
    x: ComplexArray,
    integral: ComplexArray,
    lead: ComplexArray,
    inverse: ComplexArray,
    gains: Array,
    work: Array,
    low: Array,
    high: Array,
) -> None:
    """Write bounds of the margins of one stable loop.

    Parameters
    ----------
    w, x, integral, lead, inverse : ndarray, shape (n,)
        Frequencies, rising, and the law's blocks and 1/G there, see `footing.chains.Chains`.
    gains : ndarray, shape (4,)
        kp, ki, kd and the filter time.
    work : ndarray, shape (2, n)
        Scratch.
    low, high : ndarray, shape (6,)
        Bounds in the order of `MEASURES`, written to.
    """
    count = w.shape[0]
    kp, ki, kd, time = gains
    for measure in range(3):
        low[measure] = high[measure] = math.inf
    low[BANDWIDTH] = high[BANDWIDTH] = -math.inf
    earlier, before = 0j, 0j
    size_earlier, size_before, s_before = 0.0, 0.0, 0.0
    for i in range(count):
        law = kp + ki * integral[i]
        if kd != 0.0:
            law += kd * x[i] / (time * x[i] + lead[i])
        under = inverse[i].real * inverse[i].real + inverse[i].imag * inverse[i].imag
        turn = law * complex(inverse[i].real, -inverse[i].imag)
        loop = complex(turn.real / under, turn.imag / under)
        size = loop.real * loop.real + loop.imag * loop.imag
        distance = (1.0 + loop.real) * (1.0 + loop.real) + loop.imag * loop.imag
        s = 1.0 / max(distance, 1e-300)
        work[0, i] = s
        work[1, i] = size * s
        if i > 0:
            _gain_margin(before, loop, low, high)
            _phase_margin(before, loop, size_before, size, w[i - 1], w[i], low, high)
            if high[BANDWIDTH] == -math.inf and s >= LEVEL * LEVEL > s_before:
                share = (LEVEL - math.sqrt(s_before)) / (math.sqrt(s) - math.sqrt(s_before))
                step = w[i] - w[i - 1]
                low[BANDWIDTH] = w[i - 1] + step * max(share - _SHARE, 0.0)
                high[BANDWIDTH] = w[i - 1] + step * min(share + _SHARE, 1.0)
        if i > 1:
            _touching(earlier, before, loop, size_earlier, size_before, size, low)
        earlier, before, s_before = before, loop, s
        size_earlier, size_before = size_before, size
    if before.real < 0.0 and before.real > -1.0 and abs(before.imag) < 1e-3 * abs(before.real):
        low[GAIN] = min(low[GAIN], 1.0 / abs(before) * (1.0 - 1e-3))
        high[GAIN] = min(high[GAIN], 1.0 / abs(before) * (1.0 + 1e-3))
    low[SENSITIVITY], high[SENSITIVITY] = _peak(work[0])
    low[COMPLEMENTARY], high[COMPLEMENTARY] = _peak(work[1])


@compiled
def _touching(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    earlier: complex, before: complex, after: complex, size_earlier: float, size_before: float, size: float, low: Array
) -> None:
    """Leave open whether a curve that turns back just before it would cross does cross between the points."""
    if before.real < 0.0 and before.real > -1.0 and (earlier.imag > 0.0) == (before.imag > 0.0) == (after.imag > 0.0):
        near = abs(before.imag / before.real)
        if near < _ALMOST and near < _BACK * min(abs(earlier.imag / earlier.real), abs(after.imag / after.real)):
            low[GAIN] = min(low[GAIN], 1.0)
    over = 1.0 < size_before < min(1.0 + _ALMOST, _BACK * size_earlier, _BACK * size)
    under = max(1.0 - _ALMOST, size_earlier / _BACK, size / _BACK) < size_before < 1.0
    if over or under:
        low[PHASE], low[DELAY] = 0.0, 0.0


@compiled
def _gain_margin(before: complex, after: complex, low: Array, high: Array) -> None:
    """Take a crossing of -180 degrees between two points into the bounds of the gain margin."""
    if (before.imag > 0.0) == (after.imag > 0.0):
        return
    share = before.imag / (before.imag - after.imag)
    step = after.real - before.real
    place, slack = before.real + share * step, _SHARE * abs(step)
    if place - slack >= 0.0:
        return
    nearest, farthest = min(place + slack, -1e-12), place - slack
    if farthest <= -1.0 + 1e-12:
        if nearest > -1.0:
            low[GAIN] = min(low[GAIN], 1.0)
        return
    low[GAIN] = min(low[GAIN], -1.0 / farthest)
    high[GAIN] = min(high[GAIN], -1.0 / nearest if place + slack < 0.0 else math.inf)


@compiled
def _phase_margin(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    before: complex,
    after: complex,
    size_before: float,
    size: float,
    w_before: float,
    w: float,
    low: Array,
    high: Array,
) -> None:
    """Take a crossing of one between two points into the bounds of phase and delay margin."""
    if (size_before > 1.0) == (size > 1.0):
        return
    over, under = math.log(max(size_before, 1e-300)), math.log(max(size, 1e-300))
    share = over / (over - under)
    # The angle turns by less than half a turn from point to point.
    start = math.atan2(-before.imag, -before.real)
    turn = after * complex(before.real, -before.imag)
    step = math.atan2(turn.imag, turn.real)
    angle, slack = start + share * step, _SHARE * abs(step)
    place, wide = w_before + share * (w - w_before), _SHARE * (w - w_before)
    nearest, farthest = max(abs(angle) - slack, 0.0), abs(angle) + slack
    low[PHASE] = min(low[PHASE], math.degrees(nearest))
    high[PHASE] = min(high[PHASE], math.degrees(farthest))
    full = 2.0 * math.pi
    if abs(angle) <= slack or abs(angle) + slack >= math.pi:
        low[DELAY] = 0.0
    else:
        low[DELAY] = min(low[DELAY], ((angle - slack) % full) / (place + wide))
    high[DELAY] = min(high[DELAY], ((angle + slack) % full) / max(place - wide, 1e-300))


@compiled
def _peak(square: Array) -> tuple[float, float]:
    """Return bounds of the largest root of a curve of squares."""
    top = 0
    for i in range(square.shape[0]):
        if square[i] > square[top]:
            top = i
    here = math.sqrt(square[top])
    beyond = 0.0
    if 0 < top < square.shape[0] - 1:
        left, right = math.sqrt(square[top - 1]), math.sqrt(square[top + 1])
        bend = left - 2.0 * here + right
        slope = 0.5 * (right - left)
        if bend < 0.0:
            beyond = -0.5 * slope * slope / bend
        beyond += 0.1 * (here - min(left, right))
    return here * (1.0 - _FINAL), (here + beyond) * (1.0 + _SLACK)


@compiled
def decide(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    w: Array,
    x: ComplexArray,
    integral: ComplexArray,
    lead: ComplexArray,
    inverse: ComplexArray,
    members: Integers,
    gains: Array,
    limits: Array,
    active: Flags,
    doubt: Flags,
    watched: int,
    values: Array,
    begin: int,
    end: int,
) -> None:
    """Lay limits on margins over many tunings, with plant after plant.

    Parameters
    ----------
    w, x, integral, lead, inverse : ndarray, shape (p, n)
        See `bound`.
    members : ndarray of int, shape (p,)
        Places of the plants in `doubt` and `values`.
    gains : ndarray, shape (t, 4)
        Of each of t tunings.
    limits : ndarray, shape (6,)
        In the order of `MEASURES`, the first three and the last at least, the others at most; NaN for none.
    active : ndarray of uint8, shape (t,)
        See `grades.Blocks`.
    doubt : ndarray of uint8, shape (t, m)
    watched : int
        Measure whose bounds are kept; -1 for none.
    values : ndarray, shape (2, t, m), or (2, 0, 0)
    begin, end : int
        Tunings to look at.
    """
    work = np.empty((2, w.shape[1]))
    low, high = np.empty(6), np.empty(6)
    for tuning in range(begin, end):
        for row in range(members.shape[0]):
            if active[tuning] == 0 and watched < 0:
                break
            bound(w[row], x[row], integral[row], lead[row], inverse[row], gains[tuning], work, low, high)
            if watched >= 0:
                values[0, tuning, members[row]] = low[watched]
                values[1, tuning, members[row]] = high[watched]
            for measure in range(6):
                limit = limits[measure]
                if math.isnan(limit):
                    continue
                least = measure < SENSITIVITY or measure == BANDWIDTH
                if (high[measure] < limit) if least else (low[measure] > limit):
                    active[tuning] = 0
                elif not ((low[measure] >= limit) if least else (high[measure] <= limit)):
                    doubt[tuning, members[row]] = 1
