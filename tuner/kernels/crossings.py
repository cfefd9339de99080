"""Crossings and peaks of a loop gain along a frequency grid, found exactly by Newton's method between grid points.

Plain loops because a crossing is found from a handful of points, one after the other: as array operations each would
cost more in calls than in arithmetic, twenty times over for the plants of a family.
"""

import math
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled

Array = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]

GAIN, PHASE, SENSITIVITY, COMPLEMENTARY, BANDWIDTH, GAIN_TURN, PHASE_TURN = range(7)
"""What is sought: |L| = 1, phase -180 degrees, peaks of |S| and |T|, |S| at its level, turns of gain and phase."""

COLUMNS = 11
(
    LARGEST_BELOW_ONE,
    LARGEST_AT,
    SMALLEST_ANGLE,
    ANGLE_AT,
    SMALLEST_DELAY,
    DELAY_AT,
    SENSITIVITY_PEAK,
    SENSITIVITY_AT,
    COMPLEMENTARY_PEAK,
    COMPLEMENTARY_AT,
    REACHED_AT,
) = range(COLUMNS)
"""What `scan` finds: largest |L| < 1 at -180 degrees; smallest angle from there, rad, and smallest dead time that makes
up for it, where |L| = 1; largest peaks of |S| and |T|; lowest frequency at which |S| rises to its level."""

LEVEL = 0.707
"""The sensitivity that ends the bandwidth."""

_NEAR = 0.5
_ROUNDS = 80
_LONGEST_TURN = 1.0
_PIECES = 4000


class LoopGain(NamedTuple):
    """L = gain * prod(x - zeros)/prod(x - poles) * exp(-delay s).

    Parameters
    ----------
    roots : ndarray of complex, shape (n,)
        Zeros, then poles, in units of `unit`: of s, or of z - 1 when `step` is above 0.
    zeros : int
        How many of the roots are zeros.
    gain, delay, step, unit : float
        Delay and step in time units.
    """

    roots: ComplexArray
    zeros: int
    gain: float
    delay: float
    step: float
    unit: float


class Point(NamedTuple):
    """A frequency, L there, and the first and second derivative of its logarithm with respect to frequency."""

    w: float
    gain: complex
    slope: complex
    curvature: complex


@compiled
def point(loop: LoopGain, w: float) -> Point:
    """Return what L is and how it changes at a frequency, rad per time unit."""
    roots, zeros, gain, delay, step, unit = loop
    if step > 0.0:
        half = math.sin(0.5 * step * w)
        x = complex(-2.0 * half * half, math.sin(step * w)) / unit
        speed = complex(0.0, step) * (x + 1.0 / unit)
    else:
        x = complex(0.0, w / unit)
        speed = complex(0.0, 1.0 / unit)
    over, under = complex(gain, 0.0), complex(1.0, 0.0)
    first, second = complex(0.0, 0.0), complex(0.0, 0.0)
    for i in range(roots.shape[0]):
        factor = x - roots[i]
        square = factor.real * factor.real + factor.imag * factor.imag
        inverse = complex(factor.real / square, -factor.imag / square)
        if i < zeros:
            over *= factor
            first += inverse
            second -= inverse * inverse
        else:
            under *= inverse
            first -= inverse
            second += inverse * inverse
    turn = delay * w
    value = over * under * complex(math.cos(turn), -math.sin(turn))
    first *= speed
    slope = complex(first.real, first.imag - delay)
    return Point(w, value, slope, second * speed * speed + complex(0.0, step) * first)


@compiled
def signal(kind: int, at: Point) -> tuple[float, float]:  # noqa: PLR0911 - one return for each kind
    """Return the function whose zero is of a kind, and its derivative with respect to frequency."""
    _, value, slope, curvature = at
    if kind == GAIN:
        return math.log(abs(value)), slope.real
    if kind == PHASE:
        return math.atan2(-value.imag, -value.real), slope.imag
    if kind == GAIN_TURN:
        return slope.real, curvature.real
    if kind == PHASE_TURN:
        return slope.imag, curvature.imag
    share = value / (1.0 + value)
    inward = slope * share
    if kind == BANDWIDTH:
        return math.log(abs(1.0 + value) * LEVEL), inward.real
    inward_slope = share * (curvature + slope * slope) - inward * inward
    if kind == SENSITIVITY:
        return inward.real, inward_slope.real
    return (slope / (1.0 + value)).real, (curvature - inward_slope).real


@compiled
def zero(loop: LoopGain, kind: int, low: float, high: float, rising: bool) -> Point:
    """Return where a signal vanishes between two frequencies: Newton's method, or halving when it would leave them."""
    here = 0.5 * (low + high)
    for _ in range(_ROUNDS):
        height, rate = signal(kind, point(loop, here))
        if (height > 0.0) == rising:
            high = here
        else:
            low = here
        there = here - height / rate
        # A step of rounding size may leave the bracket by as much.
        if not (low < there < high or abs(there - here) <= 1e-15 * here):
            there = 0.5 * (low + high)
        moved = abs(there - here)
        here = there
        if moved <= 4e-16 * here:
            break
    return point(loop, here)


@compiled
def _note(kind: int, at: Point, out: Array) -> None:
    """Keep a crossing or a peak when it is the worst of its kind so far."""
    w, value = at.w, at.gain
    size = abs(value)
    if kind == PHASE and size < 1.0 and size > out[LARGEST_BELOW_ONE]:
        out[LARGEST_BELOW_ONE], out[LARGEST_AT] = size, w
    if kind == GAIN:
        angle = math.atan2(-value.imag, -value.real)
        if abs(angle) < out[SMALLEST_ANGLE]:
            out[SMALLEST_ANGLE], out[ANGLE_AT] = abs(angle), w
        extra = (angle if angle >= 0.0 else angle + 2.0 * math.pi) / w
        if extra < out[SMALLEST_DELAY]:
            out[SMALLEST_DELAY], out[DELAY_AT] = extra, w
    if kind == SENSITIVITY and 1.0 / abs(1.0 + value) > out[SENSITIVITY_PEAK]:
        out[SENSITIVITY_PEAK], out[SENSITIVITY_AT] = 1.0 / abs(1.0 + value), w
    if kind == COMPLEMENTARY and size / abs(1.0 + value) > out[COMPLEMENTARY_PEAK]:
        out[COMPLEMENTARY_PEAK], out[COMPLEMENTARY_AT] = size / abs(1.0 + value), w
    if kind == BANDWIDTH and w < out[REACHED_AT]:
        out[REACHED_AT] = w


@compiled
def _present(kind: int, one: Point, two: Point) -> int:
    """Return +1 or -1 when a zero of a kind lies between two points, as its signal rises or falls there; else 0."""
    wanted = 0
    if kind == GAIN:
        left, right = abs(one.gain) > 1.0, abs(two.gain) > 1.0
    elif kind == PHASE:
        left, right = one.gain.imag < 0.0, two.gain.imag < 0.0
        # Through the negative real axis, not the positive: by the shorter way round.
        if ((one.gain * two.gain.conjugate()).imag > 0.0) != left:
            return 0
    elif kind == BANDWIDTH:
        left, right = abs(1.0 + one.gain) * LEVEL > 1.0, abs(1.0 + two.gain) * LEVEL > 1.0
        wanted = -1
    elif kind == SENSITIVITY:
        left = (one.slope * one.gain * (1.0 + one.gain).conjugate()).real > 0.0
        right = (two.slope * two.gain * (1.0 + two.gain).conjugate()).real > 0.0
        wanted = 1
    else:
        left = (one.slope * (1.0 + one.gain).conjugate()).real > 0.0
        right = (two.slope * (1.0 + two.gain).conjugate()).real > 0.0
        wanted = -1
    direction = int(right) - int(left)
    return direction if wanted in (0, direction) else 0


@compiled
def _crossings(loop: LoopGain, one: Point, two: Point, out: Array) -> None:
    """Find and note what lies between two points."""
    for kind in range(5):
        direction = _present(kind, one, two)
        if direction != 0:
            _note(kind, zero(loop, kind, one.w, two.w, direction > 0), out)


@compiled
def _turns(kind: int, one: Point, two: Point) -> bool:
    """Tell whether gain or phase turn round near the critical value: two crossings may hide between two points."""
    if kind == GAIN_TURN:
        left, right = math.log(abs(one.gain)), math.log(abs(two.gain))
        turns = (one.slope.real > 0.0) != (two.slope.real > 0.0)
    else:
        left, right = math.atan2(-one.gain.imag, -one.gain.real), math.atan2(-two.gain.imag, -two.gain.real)
        turns = (one.slope.imag > 0.0) != (two.slope.imag > 0.0)
    return turns and (left > 0.0) == (right > 0.0) and min(abs(left), abs(right)) < _NEAR


@compiled
def _between(loop: LoopGain, one: Point, two: Point, out: Array) -> None:
    """Find what lies between two points, first cutting where gain or phase turn round."""
    for kind in (GAIN_TURN, PHASE_TURN):
        if _turns(kind, one, two):
            rising = two.slope.real > 0.0 if kind == GAIN_TURN else two.slope.imag > 0.0
            middle = zero(loop, kind, one.w, two.w, rising)
            _crossings(loop, one, middle, out)
            one = middle
    _crossings(loop, one, two, out)


@compiled
def _pieces(turn: float, size: float, out: Array) -> int:
    """Return in how many pieces to look at a step in which the dead time turns the phase far.

    One will do when |L| is too small there for a margin less than those found. The grid resolves every root, so |L|
    does not exceed its size at both ends by much.
    """
    if turn <= _LONGEST_TURN:
        return 1
    if size < 1.0:
        peak = 1.0 / (1.0 - size)
        smaller = size <= out[LARGEST_BELOW_ONE] and peak <= out[SENSITIVITY_PEAK]
        if smaller and size * peak <= out[COMPLEMENTARY_PEAK]:
            return 1
    return min(int(2.0 * turn / _LONGEST_TURN) + 1, _PIECES)


@compiled
def _scan(loop: LoopGain, w: Array, out: Array) -> None:
    """Find the worst crossings and peaks of one loop gain along its grid."""
    out[:] = 0.0
    out[SMALLEST_ANGLE], out[SMALLEST_DELAY], out[REACHED_AT] = math.inf, math.inf, math.inf
    here = point(loop, w[0])
    for i in range(1, w.shape[0]):
        if w[i] == here.w:
            continue
        start, end = here.w, point(loop, w[i])
        pieces = _pieces((end.w - start) * loop.delay, max(abs(here.gain), abs(end.gain)), out)
        for piece in range(1, pieces):
            ahead = point(loop, start + (end.w - start) * piece / pieces)
            _between(loop, here, ahead, out)
            here = ahead
        _between(loop, here, end, out)
        here = end


@compiled
def scan(  # noqa: PLR0913, PLR0917 - arrays in, arrays out
    w: Array, roots: ComplexArray, zeros: int, gain: Array, delay: Array, step: float, unit: float, out: Array
) -> None:
    """Find the worst crossings and peaks of several loop gains.

    Parameters
    ----------
    w : ndarray, shape (rows, n)
        Rising frequencies for each loop, dense enough that each root of its gain and of 1 + L is resolved.
    roots : ndarray of complex, shape (rows, m)
        See `LoopGain`, like those that follow.
    gain, delay : ndarray, shape (rows,)
    out : ndarray, shape (rows, COLUMNS)
        Receives what is found: 0 for the largest, infinity for the smallest where there is none.
    """
    for row in range(w.shape[0]):
        _scan(LoopGain(roots[row], zeros, gain[row], delay[row], step, unit), w[row], out[row])
