"""Zeros of 1 + L in factored form: found together by Aberth's iteration, and counted along a line.

Plain loops because both go point by point: a few roots with a few factors each, and angles added up along a way that is
halved where it turns too fast.
"""

import cmath
import math

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled
from tuner.kernels.crossings import LoopGain

Array = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]

_LONGEST_ANGLE = 0.8
_HALVINGS = 40


@compiled
def _expm1(z: complex) -> complex:
    half = math.sin(0.5 * z.imag)
    grown = math.expm1(z.real)
    return complex(grown - 2.0 * (grown + 1.0) * half * half, (grown + 1.0) * math.sin(z.imag))


@compiled
def newton_step(loop: LoopGain, s: complex) -> complex:
    """Return Newton's step from `s` for D + N, where L = N/D and nothing is cancelled; 0 where it has none.

    In this form a mode that the loop gain does not show is a root like any other.
    """
    roots, zeros, gain, delay, step, unit = loop
    if step > 0.0:
        x = _expm1(s * step) / unit
        speed = step * (x + 1.0 / unit)
    else:
        x = s / unit
        speed = complex(1.0 / unit, 0.0)
    value = complex(gain, 0.0)
    above, below = complex(0.0, 0.0), complex(0.0, 0.0)
    for i in range(roots.shape[0]):
        factor = x - roots[i]
        if factor == 0.0:
            return complex(0.0, 0.0)
        inverse = 1.0 / factor
        if i < zeros:
            value *= factor
            above += inverse
        else:
            value *= inverse
            below += inverse
    value *= cmath.exp(-delay * s)
    above, below = above * speed - delay, below * speed
    if abs(value) <= 1.0:
        moved = (1.0 + value) / (below + value * above)
    else:
        moved = (1.0 + 1.0 / value) / (below / value + above)
    return moved if math.isfinite(moved.real) and math.isfinite(moved.imag) else complex(0.0, 0.0)


@compiled
def aberth(
    loop: LoopGain,
    s: ComplexArray,
    rounds: int,
    error: Array,
) -> None:
    """Improve all of `s` at once, each kept away from the others (Aberth, Math. Comp. 27, 1973; from memory).

    Parameters
    ----------
    loop : LoopGain
    s : ndarray of complex, shape (k,)
        Guesses; receives the roots.
    error : ndarray, shape (k,)
        Receives the last step of each, relative to its root.
    """
    count = s.shape[0]
    moves = np.zeros(count, dtype=np.complex128)
    for _ in range(rounds):
        largest = 0.0
        for i in range(count):
            moved = newton_step(loop, s[i])
            repulsion = complex(0.0, 0.0)
            for j in range(count):
                if s[i] != s[j]:
                    repulsion += 1.0 / (s[i] - s[j])
            away = moved / (1.0 - moved * repulsion)
            moves[i] = away if math.isfinite(away.real) and math.isfinite(away.imag) else complex(0.0, 0.0)
        for i in range(count):
            s[i] -= moves[i]
            error[i] = abs(moves[i]) / max(abs(s[i]), 1e-300)
            largest = max(largest, error[i])
        if largest < 1e-14:
            break


@compiled
def direction(loop: LoopGain, s: complex) -> complex:
    """Return D + N at `s` without the size of D or of N, whichever is larger: its angle is what counts."""
    roots, zeros, gain, delay, step, unit = loop
    x = _expm1(s * step) / unit if step > 0.0 else s / unit
    size = math.log(abs(gain)) - delay * s.real
    turn = -delay * s.imag + (math.pi if gain < 0.0 else 0.0)
    poles = 0.0
    for i in range(roots.shape[0]):
        factor = x - roots[i]
        length = math.log(max(abs(factor), 1e-300))
        angle = math.atan2(factor.imag, factor.real)
        if i < zeros:
            size, turn = size + length, turn + angle
        else:
            size, turn, poles = size - length, turn - angle, poles + angle
    if size <= 0.0:
        whole = 1.0 + math.exp(size) * cmath.exp(complex(0.0, turn))
    else:
        whole = math.exp(-size) + cmath.exp(complex(0.0, turn))
    return whole * cmath.exp(complex(0.0, poles))


@compiled
def turned(
    loop: LoopGain,
    line: float,
    y: Array,
) -> float:
    """Return by what angle D + N turns up the line Re s = line, rad, from the first of `y` to the last.

    Steps are halved until each turns by less than a radian. `y` must be dense enough that none turns by more than half
    a turn unseen.
    """
    total = 0.0
    here, value = y[0], direction(loop, complex(line, y[0]))
    for i in range(1, y.shape[0]):
        while here < y[i]:
            end = y[i]
            for _ in range(_HALVINGS):
                ahead = direction(loop, complex(line, end))
                quotient = ahead * value.conjugate()
                angle = math.atan2(quotient.imag, quotient.real)
                if abs(angle) < _LONGEST_ANGLE:
                    break
                end = 0.5 * (here + end)
            total += angle
            here, value = max(end, math.nextafter(here, y[i])), ahead
    return total
