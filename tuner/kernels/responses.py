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

PEAKS = ("max_sensitivity", "max_complementary")
"""Margins whose lower bound, the largest value at any point, is nearer to them than the upper one."""

GAIN, PHASE, DELAY, SENSITIVITY, COMPLEMENTARY, BANDWIDTH = range(6)

LEVEL = 0.707
"""The sensitivity that ends the bandwidth; as `crossings.LEVEL`."""

_AROUND = 3
"""Pieces to either side of the largest point in which the peak may lie."""

_BULGE = 0.25
"""Bulge of a piece over its length and how far its neighbours turn: twice that of an arc."""

_SLACK = 0.001
"""What is allowed beyond, as a share."""

_SHARE = 0.35
"""What a crossing is allowed to be off the straight line, as a share of the step."""

_LEAST_ANGLE = 0.006
"""What an angle is allowed to be off where it hardly turns, rad."""

_ALMOST = 0.05
"""A curve that turns back this near to where it would cross may cross between two points."""

_BACK = 1.0 - 1e-6
"""A curve has turned back when it is farther away by more than rounding: at the ends of a grid points may coincide."""

_FINAL = 1e-12


@compiled
def lead(x: ComplexArray, numerator: ComplexArray, time: float, out: ComplexArray) -> None:
    """Write what a derivative gain of one makes at each frequency: x / (time x + numerator)."""
    for i in range(x.shape[0]):
        under = time * x[i] + numerator[i]
        square = under.real * under.real + under.imag * under.imag
        over = x[i] * complex(under.real, -under.imag)
        out[i] = complex(over.real / square, over.imag / square)


@compiled
def bound(  # noqa: C901, PLR0913, PLR0917 - one walk along the grid, which finds all of them
    w: Array,
    integral: ComplexArray,
    derivative: ComplexArray,
    chain: ComplexArray,
    gains: Array,
    asked: Flags,
    work: Array,
    low: Array,
    high: Array,
) -> None:
    """Write bounds of the margins of one stable loop.

    Parameters
    ----------
    w, integral, derivative, chain : ndarray, shape (n,)
        Frequencies, rising; what an integral and a derivative gain of one make there; and all else of the loop.
    gains : ndarray, shape (4,)
        kp, ki, kd and the filter time, which `derivative` was made with.
    asked : ndarray of uint8, shape (6,)
        Margins that are asked for; the bounds of others mean nothing.
    work : ndarray, shape (2, n)
        Scratch.
    low, high : ndarray, shape (6,)
        Bounds in the order of `MEASURES`, written to.
    """
    for measure in range(3):
        low[measure] = high[measure] = math.inf
    low[BANDWIDTH] = high[BANDWIDTH] = -math.inf
    crossed = asked[GAIN] + asked[PHASE] + asked[DELAY] > 0
    kp, ki, kd = gains[0], gains[1], gains[2]
    earlier, before = 0j, 0j
    size_earlier, size_before, distance_before = 0.0, 0.0, 0.0
    nearest, largest, place, other = math.inf, math.inf, 0, 0
    for i in range(w.shape[0]):
        law_real = kp + ki * integral[i].real + kd * derivative[i].real
        law_imag = ki * integral[i].imag + kd * derivative[i].imag
        real = law_real * chain[i].real - law_imag * chain[i].imag
        imag = law_real * chain[i].imag + law_imag * chain[i].real
        size = real * real + imag * imag
        distance = size + 2.0 * real + 1.0
        work[0, i], work[1, i] = real, imag
        if distance < nearest:
            nearest, place = distance, i
        if asked[COMPLEMENTARY] and distance < largest * size:
            largest, other = distance / size, i
        if crossed:
            after = complex(real, imag)
            # Most points are far from any crossing, and a call for each would take longer than all else.
            if i > 0 and (before.imag > 0.0) != (imag > 0.0) and min(before.real, real) < 0.0:
                _gain_margin(before, after, low, high)
            if i > 0 and (size_before > 1.0) != (size > 1.0):
                _phase_margin(before, after, size_before, size, w[i - 1], w[i], low, high)
            flat = abs(before.imag) < -_ALMOST * before.real or abs(size_before - 1.0) < _ALMOST
            if i > 1 and flat:
                _touching(earlier, before, after, size_earlier, size_before, size, low)
            earlier, before = before, after
            size_earlier, size_before = size_before, size
        if asked[BANDWIDTH] and high[BANDWIDTH] == -math.inf and i > 0:
            _bandwidth(distance_before, distance, w[i - 1], w[i], low, high)
        distance_before = distance
    if before.real < 0.0 and before.real > -1.0 and abs(before.imag) < 1e-3 * abs(before.real):
        low[GAIN] = min(low[GAIN], 1.0 / abs(before) * (1.0 - 1e-3))
        high[GAIN] = min(high[GAIN], 1.0 / abs(before) * (1.0 + 1e-3))
    if asked[SENSITIVITY]:
        low[SENSITIVITY], high[SENSITIVITY] = _peak(place, work[0], work[1], False)
    if asked[COMPLEMENTARY]:
        low[COMPLEMENTARY], high[COMPLEMENTARY] = _peak(other, work[0], work[1], True)


@compiled
def _bandwidth(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    before: float, after: float, w_before: float, w: float, low: Array, high: Array
) -> None:
    """Take the place where the sensitivity first rises to its level into the bounds of the bandwidth."""
    level = 1.0 / (LEVEL * LEVEL)
    if before > level >= after:
        one, other = 1.0 / math.sqrt(before), 1.0 / math.sqrt(max(after, 1e-300))
        share, step = (LEVEL - one) / (other - one), w - w_before
        low[BANDWIDTH] = w_before + step * max(share - _SHARE, 0.0)
        high[BANDWIDTH] = w_before + step * min(share + _SHARE, 1.0)


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
    over, under = math.log(max(size_before, 1e-300)), math.log(max(size, 1e-300))
    share = over / (over - under)
    # The angle turns by less than half a turn from point to point.
    start = math.atan2(-before.imag, -before.real)
    turn = after * complex(before.real, -before.imag)
    step = math.atan2(turn.imag, turn.real)
    angle, slack = start + share * step, _SHARE * abs(step) + _LEAST_ANGLE
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
def _peak(at: int, real: Array, imag: Array, complementary: bool) -> tuple[float, float]:
    """Return bounds of the peak of |S| or |T| next to the point of the grid at which it is largest.

    Between two points the curve is a straight line and a bulge, which is known from how the line turns on either side:
    the distance from the critical point is at least that of the line, less the bulge.
    """
    low = _size(real[at], imag[at], complementary)
    high = low
    for i in range(max(at - _AROUND, 0), min(at + _AROUND, real.shape[0] - 1)):
        length = math.hypot(real[i + 1] - real[i], imag[i + 1] - imag[i])
        turn = max(_turn(i, real, imag), _turn(i + 1, real, imag))
        bulge = _BULGE * length * turn + _SLACK * length
        nearest = _from_line(real[i], imag[i], real[i + 1], imag[i + 1]) - bulge
        if nearest <= 0.0:
            return low * (1.0 - _FINAL), math.inf
        largest = max(math.hypot(real[i], imag[i]), math.hypot(real[i + 1], imag[i + 1])) + bulge
        high = max(high, (largest if complementary else 1.0) / nearest)
    return low * (1.0 - _FINAL), high * (1.0 + _SLACK)


@compiled
def _size(real: float, imag: float, complementary: bool) -> float:
    """Return |S| or |T| for a loop gain."""
    distance = max(math.hypot(1.0 + real, imag), 1e-150)
    return (math.hypot(real, imag) if complementary else 1.0) / distance


@compiled
def _turn(i: int, real: Array, imag: Array) -> float:
    """Return by how much the line through the points turns at one of them, rad."""
    if i < 1 or i + 1 >= real.shape[0]:
        return 0.0
    before = complex(real[i] - real[i - 1], imag[i] - imag[i - 1])
    after = complex(real[i + 1] - real[i], imag[i + 1] - imag[i])
    turned = after * complex(before.real, -before.imag)
    return abs(math.atan2(turned.imag, turned.real)) if turned != 0j else 0.0


@compiled
def _from_line(x0: float, y0: float, x1: float, y1: float) -> float:
    """Return the distance of the critical point from a piece of a straight line."""
    across, up = x1 - x0, y1 - y0
    square = across * across + up * up
    share = min(max(((-1.0 - x0) * across - y0 * up) / square, 0.0), 1.0) if square > 0.0 else 0.0
    return math.hypot(x0 + share * across + 1.0, y0 + share * up)


@compiled
def _keeps(limits: Array, low: Array, high: Array, doubt: Flags, member: int) -> bool:
    """Return whether a loop misses no limit for sure, and note where it is in doubt."""
    for measure in range(6):
        limit = limits[measure]
        if math.isnan(limit):
            continue
        least = measure < SENSITIVITY or measure == BANDWIDTH
        if (high[measure] < limit) if least else (low[measure] > limit):
            return False
        if not ((low[measure] >= limit) if least else (high[measure] <= limit)):
            doubt[member] = 1
    return True


@compiled
def decide(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    w: Array,
    x: ComplexArray,
    integral: ComplexArray,
    numerator: ComplexArray,
    chain: ComplexArray,
    members: Integers,
    gains: Array,
    limits: Array,
    active: Flags,
    misses: Integers,
    doubt: Flags,
    watched: int,
    values: Array,
    begin: int,
    end: int,
) -> None:
    """Lay limits on margins over many tunings, with plant after plant.

    Parameters
    ----------
    w, x, integral, numerator, chain : ndarray, shape (p, n)
        See `bound` and `lead`.
    members : ndarray of int, shape (p,)
        Places of the plants in `doubt` and `values`.
    gains : ndarray, shape (t, 4)
        Of each of t tunings.
    limits : ndarray, shape (6,)
        In the order of `MEASURES`, the first three and the last at least, the others at most; NaN for none.
    active, misses : ndarray
        Shapes (t,) and (m,), see `grades.Blocks`.
    doubt : ndarray of uint8, shape (t, m)
    watched : int
        Measure whose bounds are kept; -1 for none.
    values : ndarray, shape (2, t, m), or (2, 0, 0)
    begin, end : int
        Tunings to look at.
    """
    work, derivative = np.empty((2, w.shape[1])), np.empty(w.shape[1], dtype=np.complex128)
    low, high = np.empty(6), np.empty(6)
    asked = np.zeros(6, dtype=np.uint8)
    for measure in range(6):
        asked[measure] = 1 if not math.isnan(limits[measure]) or measure == watched else 0
    for row in range(members.shape[0]):
        made_with = -1.0
        for tuning in range(begin, end):
            if active[tuning] == 0 and watched < 0:
                continue
            if gains[tuning, 3] != made_with:
                made_with = gains[tuning, 3]
                lead(x[row], numerator[row], made_with, derivative)
            bound(w[row], integral[row], derivative, chain[row], gains[tuning], asked, work, low, high)
            if watched >= 0:
                values[0, tuning, members[row]] = low[watched]
                values[1, tuning, members[row]] = high[watched]
            if not _keeps(limits, low, high, doubt[tuning], members[row]):
                active[tuning] = 0
                misses[members[row]] += 1
