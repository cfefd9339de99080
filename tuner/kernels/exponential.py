"""Matrix exponentials and hold equivalents, compiled: a family needs a hundred of small ones, where a call costs most.

Plain loops because the matrices have some ten rows: a call of a linear algebra library would cost more than it does.
"""

import math

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled

Array = NDArray[np.float64]

_LARGEST_NORM = 5.371920351148152
"""Up to here the Pade approximant of order 13 is exact to rounding (Higham, SIAM J. Matrix Anal. Appl. 26, 2005)."""

_PADE = (
    64764752532480000.0,
    32382376266240000.0,
    7771770303897600.0,
    1187353796428800.0,
    129060195264000.0,
    10559470521600.0,
    670442572800.0,
    33522128640.0,
    1323241920.0,
    40840800.0,
    960960.0,
    16380.0,
    182.0,
    1.0,
)


@compiled
def _product(left: Array, right: Array) -> Array:
    order = left.shape[0]
    out = np.zeros((order, right.shape[1]))
    for i in range(order):
        for k in range(order):
            factor = left[i, k]
            if factor != 0.0:
                for j in range(right.shape[1]):
                    out[i, j] += factor * right[k, j]
    return out


@compiled
def _pivot(a: Array, b: Array, k: int) -> None:
    """Bring the row with the largest entry in column `k` at or below the diagonal to row `k`."""
    best = k
    for i in range(k + 1, a.shape[0]):
        if abs(a[i, k]) > abs(a[best, k]):
            best = i
    for j in range(a.shape[0]):
        a[k, j], a[best, j] = a[best, j], a[k, j]
        b[k, j], b[best, j] = b[best, j], b[k, j]


@compiled
def _solve(a: Array, b: Array) -> None:
    """Solve a x = b by elimination with partial pivoting; `b` becomes x and `a` is used up."""
    order = a.shape[0]
    for k in range(order):
        _pivot(a, b, k)
        for i in range(k + 1, order):
            factor = a[i, k] / a[k, k]
            for j in range(order):
                a[i, j] -= factor * a[k, j]
                b[i, j] -= factor * b[k, j]
    for k in range(order - 1, -1, -1):
        for j in range(order):
            total = b[k, j]
            for i in range(k + 1, order):
                total -= a[k, i] * b[i, j]
            b[k, j] = total / a[k, k]


@compiled
def _scale(a: Array, factor: float, out: Array) -> None:
    for i in range(a.shape[0]):
        for j in range(a.shape[1]):
            out[i, j] = factor * a[i, j]


@compiled
def _halvings(a: Array) -> int:
    """Return how often `a` must be halved until the approximant holds for it; -1 when it is not finite."""
    norm = 0.0
    for j in range(a.shape[0]):
        total = 0.0
        for i in range(a.shape[0]):
            total += abs(a[i, j])
        if not total < math.inf:
            return -1
        norm = max(norm, total)
    if norm <= _LARGEST_NORM:
        return 0
    return math.ceil(math.log2(norm / _LARGEST_NORM))


@compiled
def _add(out: Array, factors: tuple[float, float, float, float], two: Array, four: Array, six: Array) -> None:
    """Add to `out` a number times one, and each power times its factor, the factors from the highest power down."""
    order = out.shape[0]
    for i in range(order):
        for j in range(order):
            out[i, j] += factors[0] * six[i, j] + factors[1] * four[i, j] + factors[2] * two[i, j]
        out[i, i] += factors[3]


@compiled
def growth(a: Array, factor: float) -> Array:
    """Return exp(factor a) - 1, shape of `a`: Pade approximant of order 13, scaling and squaring.

    Taking the identity off before squaring keeps slow modes beside fast ones: a mode of 1e-12 of the norm would
    otherwise drown in the rounding of one plus its growth. Not finite where `a` is not or the result overflows. Exact
    to rounding of one: where the exponential itself is much smaller than one, only its absolute error is small.
    """
    order = a.shape[0]
    small = np.zeros((order, order))
    _scale(a, factor, small)
    halvings = _halvings(small)
    if halvings < 0:
        small[:, :] = math.nan
        return small
    _scale(a, factor * 0.5**halvings, small)
    two = _product(small, small)
    four = _product(two, two)
    six = _product(four, two)
    high = np.zeros((order, order))
    _add(high, (_PADE[12], _PADE[10], _PADE[8], 0.0), two, four, six)
    even = _product(six, high)
    _add(even, (_PADE[6], _PADE[4], _PADE[2], _PADE[0]), two, four, six)
    high[:, :] = 0.0
    _add(high, (_PADE[13], _PADE[11], _PADE[9], 0.0), two, four, six)
    odd = _product(six, high)
    _add(odd, (_PADE[7], _PADE[5], _PADE[3], _PADE[1]), two, four, six)
    odd = _product(small, odd)
    for i in range(order):
        for j in range(order):
            even[i, j] -= odd[i, j]
            odd[i, j] *= 2.0
    _solve(even, odd)
    for _ in range(halvings):
        squared = _product(odd, odd)
        for i in range(order):
            for j in range(order):
                odd[i, j] = 2.0 * odd[i, j] + squared[i, j]
    return odd


@compiled
def _through(first: Array, rest: Array, column: int, old: Array, new: Array) -> None:
    """Write the effect of one input held over the first part of a step, and then over the rest of it."""
    order = old.shape[0]
    for i in range(order):
        new[i] = rest[i, column]
        total = first[i, column]
        for k in range(order):
            total += rest[i, k] * first[k, column]
        old[i] = total


@compiled
def hold(  # noqa: PLR0913, PLR0917 - kernels take bare arrays
    a: Array, b: Array, step: float, offset: Array, grown: Array, old: Array, new: Array
) -> None:
    """Make the exact equivalents of systems x' = a x + b u over one step, each input constant but for one jump.

    Over a step, x becomes x + grown x + old u_old + new u_new, where an input jumps from u_old to u_new at its
    offset. By exponentials of the block matrix [[a, b], [0, 0]] (Van Loan, IEEE Trans. Automatic Control 23, 1978).

    Parameters
    ----------
    a, b : ndarray, shapes (k, n, n) and (k, n, m)
        For each of k systems.
    step : float
        Time.
    offset : ndarray, shape (k, m)
        Time from the start of a step to the jump of an input, from 0 (new throughout) to below `step`.
    grown, old, new : ndarray, shapes (k, n, n), (k, n, m), (k, n, m)
        The results, written to.
    """
    order, inputs = b.shape[1], b.shape[2]
    block = np.zeros((order + inputs, order + inputs))
    for system in range(a.shape[0]):
        for i in range(order):
            for j in range(order):
                block[i, j] = a[system, i, j]
            for j in range(inputs):
                block[i, order + j] = b[system, i, j]
        whole = growth(block, step)
        for i in range(order):
            for j in range(order):
                grown[system, i, j] = whole[i, j]
        for j in range(inputs):
            before = offset[system, j]
            if before > 0.0:
                first, rest = growth(block, before), growth(block, step - before)
                _through(first, rest, order + j, old[system, :, j], new[system, :, j])
            else:
                _through(np.zeros_like(whole), whole, order + j, old[system, :, j], new[system, :, j])
