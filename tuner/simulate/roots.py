"""Zeros of 1 + L in factored form: all at once by Aberth's iteration, and how many lie right of a line."""

from math import pi

import numpy as np

from tuner.kernels import characteristic
from tuner.kernels.crossings import LoopGain
from tuner.simulate.factors import Stack, to_x
from tuner.simulate.traces import Array, ComplexArray

_MOST_POINTS = 200_000
_WIDE = np.geomspace(1e-6, 1e9, 151)


def newton_steps(loops: Stack, x: ComplexArray) -> ComplexArray:
    """Return what Newton's method would take from roots `x` of D + N, where L = N/D and nothing is cancelled.

    In this form a mode that the loop gain does not show is a root like any other.

    Parameters
    ----------
    loops : Stack
        Whole samples of delay count as factors z; a continuous loop here has no delay.
    x : ndarray of complex, shape (rows, k)
        In the units of the stack.
    """
    with np.errstate(all="ignore"):
        gain, below, above = _parts(loops, x)
        if loops.step:
            z = 1.0 + x * loops.unit
            samples = (loops.delay / loops.step)[:, None]
            gain, above = gain * z**-samples, above - samples * loops.unit / z
    return _step(gain, below, above)


def _parts(loops: Stack, x: ComplexArray) -> tuple[ComplexArray, ComplexArray, ComplexArray]:
    """Return the rational part of L and the logarithmic derivatives of denominator and numerator."""
    difference = x[..., None] - loops.roots[:, None, :]
    inverse = 1.0 / difference
    count = loops.zero_count
    gain = loops.gain[:, None] * difference[..., :count].prod(-1) * inverse[..., count:].prod(-1)
    return gain, inverse[..., count:].sum(-1), inverse[..., :count].sum(-1)


def _step(gain: ComplexArray, below: ComplexArray, above: ComplexArray) -> ComplexArray:
    with np.errstate(all="ignore"):
        small = np.abs(gain) <= 1.0
        back = np.where(small, 1.0, 1.0 / gain)
        forth = np.where(small, gain, 1.0)
        step = (back + forth) / (back * below + forth * above)
    return np.where(np.isfinite(step), step, 0.0)


def together(loop: Stack, start: ComplexArray, rounds: int = 60) -> tuple[ComplexArray, Array]:
    """Find roots of 1 + L together, each kept away from the others.

    Parameters
    ----------
    loop : Stack
        One row, with any delay.
    start : ndarray of complex, shape (k,)
        Guesses in s.

    Returns
    -------
    roots : ndarray of complex, shape (k,)
        In s.
    error : ndarray, shape (k,)
        The last step of each, relative to its root.
    """
    s = start * (1.0 + 1e-12 * np.arange(len(start)))
    error = np.full(len(s), np.inf)
    characteristic.aberth(_numbers(loop), s, rounds, error)
    return s, error


def newton_step_in_s(loop: Stack, s: ComplexArray) -> ComplexArray:
    """Return Newton's steps from points in s, for one row with any delay."""
    return np.array([characteristic.newton_step(_numbers(loop), value) for value in s.tolist()], dtype=complex)


def _numbers(loop: Stack) -> LoopGain:
    return LoopGain(loop.roots[0], loop.zero_count, float(loop.gain[0]), float(loop.delay[0]), loop.step, loop.unit)


def count_right(loop: Stack, line: float) -> int | None:
    """Return how many zeros of 1 + L lie right of Re s = line, by the argument principle; None if it is too long.

    The angle of D (1 + L) = D + N is followed up the line, in steps halved until each turns by less than a radian;
    there are no poles to count, and none to avoid. For a continuous loop it is followed as far as |L| may exceed one;
    from there on it is known. Over the upper half it turns by pi for each root left of the line, and by half of n pi
    in all when there are none right of it; inside a circle of z by pi for each root (Cauchy).

    Parameters
    ----------
    loop : Stack
        One row, with any delay; the loop gain must fall below one at high frequency on the line.
    line : float
        1 per time unit.
    """
    y = _way(loop, line)
    if y is None:
        return None
    end = np.array([line + 1j * y[-1]])
    if not loop.step and not abs(_gain(loop, end)[0]) < 1.0:
        return None
    order = int(loop.roots.shape[1]) - loop.zero_count
    turned = characteristic.turned(_numbers(loop), line, y)
    if loop.step:
        return round(order - turned / pi)
    return round(0.5 * order - (turned + _rest(loop, end)) / pi)


def _way(loop: Stack, line: float) -> Array | None:
    """Return points up the line, from near zero to where all is known."""
    sizes = np.abs(loop.modes[0] - line)
    sizes = sizes[np.isfinite(sizes) & (sizes > 0.0)]
    low = 1e-5 * min(sizes.min(initial=np.inf), 1.0 / loop.delay[0])
    high = pi / loop.step if loop.step else _last(loop, line, sizes.max(initial=1.0 / loop.delay[0]))
    count = high * loop.delay[0] / 0.4
    if count > _MOST_POINTS:
        return None
    resonant = np.abs(loop.modes[0].imag)[:, None] + np.abs(loop.modes[0].real - line)[:, None] * _AROUND
    resonant = resonant[np.isfinite(resonant) & (resonant > low) & (resonant < high)]
    low = min(low, 0.1 * high)
    spread = np.geomspace(low, high, 40 + int(20 * np.log10(high / low)))
    spread[-1] = high
    return np.unique(np.concatenate((spread, np.linspace(low, high, int(count) + 2), resonant)))


_AROUND = np.array((-3.0, -1.0, -0.3, 0.3, 1.0, 3.0))


def _last(loop: Stack, line: float, largest: float) -> float:
    """Return a frequency above which |L| on the line stays below one, as far as a wide logarithmic grid can tell."""
    y = largest * _WIDE
    size = np.abs(_gain(loop, (line + 1j * y).astype(complex)))
    large = np.flatnonzero(size > max(0.95, 0.5 * (1.0 + float(size[-1]))))
    beyond = float(y[min(large[-1] + 1, len(y) - 1)]) if len(large) else float(y[0])
    # Above every pole, the way to each of them turns no further than to straight up.
    return max(beyond, 1.1 * float(np.abs(loop.modes[0].imag).max(initial=0.0)))


def _gain(loop: Stack, s: ComplexArray) -> ComplexArray:
    with np.errstate(all="ignore"):
        x = to_x(s, loop.step) / loop.unit
        value: ComplexArray = _parts(loop, x[None])[0][0] * np.exp(-loop.delay[0] * s)
    return value


def _rest(loop: Stack, s: ComplexArray) -> float:
    """Return by how much D + N turns from one point straight up, where |L| stays below one: 1 + L ends near one."""
    poles = loop.roots[0, loop.zero_count :] * loop.unit
    behind = float((0.5 * pi - np.angle(s - poles)).sum())
    return behind - float(np.angle(1.0 + _gain(loop, s))[0])
