"""The loop's frequency response: loop gain, sensitivity, complementary sensitivity, and the frequencies to look at."""

from collections.abc import Sequence
from math import inf, pi

import numpy as np

from tuner.simulate.factors import Factors, Stack, stack
from tuner.simulate.loop import Loop
from tuner.simulate.traces import Array, ComplexArray

_PER_DECADE = 9
_AROUND = np.array((-8.0, -2.5, -0.9, -0.2, 0.2, 0.9, 2.5, 8.0))
"""Where to look around a lightly damped root, in units of its decay rate."""
_TURNS = 8.0 * pi
"""The phase of the dead time that is looked at closely from the start, rad."""


def loop_response(loop: Loop, w: Array) -> ComplexArray:
    """Return the loop gain L(jw), or L(exp(jw Ts)) when sampled; exact, dead time included.

    Parameters
    ----------
    loop : Loop
    w : ndarray, shape (n,)
        rad per time unit, zero or more; up to pi/Ts for a sampled loop.

    Returns
    -------
    ndarray of complex, shape (n,)
        Infinite at w = 0 with an integrator.
    """
    w = np.asarray(w, dtype=float)
    value: ComplexArray = stack([loop.factors]).response(w)[0]
    value[w == 0.0] = at_zero(loop.factors)
    return value


def sensitivity(loop: Loop, w: Array) -> ComplexArray:
    """Return S = 1/(1 + L); shapes and units as for `loop_response`."""
    with np.errstate(all="ignore"):
        value: ComplexArray = 1.0 / (1.0 + loop_response(loop, w))
    return np.where(np.isnan(value), 0.0, value)


def complementary(loop: Loop, w: Array) -> ComplexArray:
    """Return T = L/(1 + L); shapes and units as for `loop_response`."""
    value: ComplexArray = 1.0 - sensitivity(loop, w)
    return value


def frequency_grid(loop: Loop, poles: Sequence[complex] | ComplexArray = ()) -> Array:
    """Return frequencies that show everything: wide enough, dense around lightly damped poles and zeros.

    Parameters
    ----------
    loop : Loop
    poles : sequence of complex
        Closed-loop poles in s, when peaks of the closed loop are to be seen too.

    Returns
    -------
    ndarray, shape (n,)
        Rising, rad per time unit, above zero; the last is the Nyquist frequency of a sampled loop.
    """
    return np.unique(grid(stack([loop.factors]), np.array([poles], dtype=complex))[0])


def at_zero(factors: Factors) -> float:
    """Return the loop gain at w -> 0 along positive s: real, infinite with an integrator, 0 with a zero there."""
    zeros, poles = factors.zeros, factors.poles
    vanishing = int((zeros == 0.0).sum()) - int((poles == 0.0).sum())
    rest = np.log(-zeros[zeros != 0.0] + 0j).sum() - np.log(-poles[poles != 0.0] + 0j).sum()
    value = factors.gain * float(np.exp(rest).real)
    if vanishing > 0 or value == 0.0:
        return 0.0
    return float(np.copysign(inf, value)) if vanishing < 0 else value


def at_end(factors: Factors) -> float:
    """Return the loop gain at the highest frequency, dead time left out: real.

    That is z = -1 for a sampled loop, with its whole samples of delay; w -> infinity for a continuous one.
    """
    if factors.step:
        sign = -1.0 if round(factors.delay / factors.step) % 2 else 1.0
        with np.errstate(all="ignore"):
            rational = np.prod(-2.0 - factors.zeros) / np.prod(-2.0 - factors.poles)
        return sign * factors.gain * float(rational.real)
    excess = len(factors.poles) - len(factors.zeros)
    if excess > 0 or factors.gain == 0.0:
        return 0.0
    return factors.gain if excess == 0 else float(np.copysign(inf, factors.gain))


def grid(loops: Stack, closed: ComplexArray) -> Array:
    """Return frequencies for every row of a stack, rising, shape (rows, n); see `frequency_grid`.

    Parameters
    ----------
    loops : Stack
    closed : ndarray of complex, shape (rows, k)
        Closed-loop poles in s; infinite or not a number where a row has fewer.
    """
    roots = np.concatenate((loops.modes, closed), axis=1)
    low, high = _range(loops, roots)
    parts = [_spread(low, high), _resonances(roots)]
    if loops.delay.any():
        parts.append(_turning(loops, high))
    w = np.concatenate(parts, axis=1)
    if loops.step:
        w = np.minimum(w, pi / loops.step)
    w = np.maximum(w, low[:, None])
    w.sort(axis=1)
    return w


def _range(loops: Stack, roots: ComplexArray) -> tuple[Array, Array]:
    """Return the lowest and the highest frequency of each row: two decades beyond all that happens."""
    sizes = np.abs(roots)
    usable = np.isfinite(sizes) & (sizes > 0.0)
    largest = np.where(usable, sizes, 0.0).max(1, initial=0.0)
    usable &= sizes > 1e-9 * largest[:, None]
    smallest = np.where(usable, sizes, inf).min(1, initial=inf)
    with np.errstate(divide="ignore"):
        turn = np.where(loops.delay > 0.0, 1.0 / loops.delay, 0.0)
    end = pi / loops.step if loops.step else 0.0
    largest = np.maximum(largest, np.maximum(turn, end))
    largest = np.where(largest > 0.0, largest, 1.0)
    smallest = np.minimum(smallest, np.where(turn > 0.0, turn, largest))
    if loops.step:
        return 0.00917 * np.minimum(smallest, end), np.full(loops.rows, end)
    return 0.00917 * smallest, 109.1 * np.maximum(largest, _asymptote(loops))


def _asymptote(loops: Stack) -> Array:
    """Return where the high-frequency asymptote of |L| is one, 0 when it is flat."""
    if loops.excess <= 0:
        return np.zeros(loops.rows)
    crossing: Array = np.abs(loops.gain) ** (1.0 / loops.excess) * loops.unit
    return crossing


def _spread(low: Array, high: Array) -> Array:
    """Return a logarithmic grid for every row, of one length."""
    decades = np.log10(high / low)
    share = np.linspace(0.0, 1.0, int(decades.max() * _PER_DECADE) + 2)
    w: Array = low[:, None] * 10.0 ** (decades[:, None] * share)
    w[:, -1] = high
    return w


def _resonances(roots: ComplexArray) -> Array:
    """Return points around every lightly damped root of each row, of one length."""
    rate = np.abs(roots.real)
    light = np.isfinite(roots) & (roots.imag > 0.0) & (rate < 0.5 * roots.imag)
    most = int(light.sum(1).max(initial=0))
    if most == 0:
        return np.zeros((len(roots), 0))
    first = np.argsort(~light, axis=1, kind="stable")[:, :most]
    chosen = np.take_along_axis(np.where(light, roots, 0.0), first, axis=1)
    width = np.maximum(np.abs(chosen.real), 1e-9 * np.abs(chosen))
    w: Array = chosen.imag[..., None] + width[..., None] * _AROUND
    return w.reshape(len(roots), -1)


def _turning(loops: Stack, high: Array) -> Array:
    """Return even steps over the first turns of the dead time's phase."""
    with np.errstate(divide="ignore"):
        end = np.minimum(_TURNS / loops.delay, high)
    share = np.linspace(0.0, 1.0, 49)[1:]
    w: Array = end[:, None] * share
    return w
