"""Fewer points for the same picture: what a plot a few hundred pixels wide can show of a curve."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tuner.window.plots.extent import Extent

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class Points:
    """The points of a curve, or with `connect` those of several in one: 1 joins a point to the next, 0 does not."""

    x: Array
    y: Array
    connect: NDArray[np.int32] | None = None


def thinned(t: Array, curves: Array, bins: int) -> tuple[Array, Array]:
    """Return the lowest and the highest point of every curve in each of about `bins` pieces, in their order in time.

    Parameters
    ----------
    t : ndarray, shape (n,)
        Times, shared by all curves.
    curves : ndarray, shape (m, n)
        Values; finite.
    bins : int
        Pieces; curves of at most two points a piece come back as they are.

    Returns
    -------
    x, y : ndarray, shape (m, k)
        k is at most 2 (bins + 1).
    """
    count, length = curves.shape
    size = -(-length // max(bins, 1))
    if size <= 2:
        return np.broadcast_to(t, curves.shape), curves
    pieces = -(-length // size)
    padded = np.empty((count, pieces * size))
    padded[:, :length], padded[:, length:] = curves, curves[:, -1:]
    padded = padded.reshape(count, pieces, size)
    lowest, highest = padded.argmin(axis=2), padded.argmax(axis=2)
    within = np.empty((count, pieces, 2), dtype=np.intp)
    np.minimum(lowest, highest, out=within[:, :, 0])
    np.maximum(lowest, highest, out=within[:, :, 1])
    within += size * np.arange(pieces)[:, None]
    index = np.minimum(within.reshape(count, 2 * pieces), length - 1)
    index[:, 0], index[:, -1] = 0, length - 1
    return t.take(index), curves.take(index + length * np.arange(count)[:, None])


def clipped(values: Array, seen: Extent) -> Array:
    """Return values that never leave the picture by more than its own height; what is not a number lies at its top."""
    bounds = seen.grown(1.0)
    if values.size and bounds.low <= values.min() and values.max() <= bounds.high:
        return values
    return np.fmax(np.fmin(values, bounds.high), bounds.low)


def single(t: Array, y: Array, seen: Extent, bins: int) -> Points:
    """Return one curve, clipped and thinned."""
    x, kept = thinned(t, clipped(y, seen)[None, :], bins)
    return Points(x[0], kept[0])


def bundle(t: Array, curves: Array, seen: Extent, bins: int) -> Points:
    """Return many curves, clipped and thinned, as one."""
    if not curves.size:
        return Points(np.empty(0), np.empty(0), np.empty(0, dtype=np.int32))
    x, y = thinned(t, clipped(curves, seen), bins)
    connect = np.ones(x.shape, dtype=np.int32)
    connect[:, -1] = 0
    return Points(np.ascontiguousarray(x).ravel(), np.ascontiguousarray(y).ravel(), connect.ravel())


def envelope(t: Array, curves: Array, seen: Extent, columns: int) -> Points:
    """Return the ground that curves cover, as one vertical stroke for each column of pixels.

    A stroke reaches as low and as high as any curve does up to the next one, so that no peak between two is left out.
    """
    if not curves.size:
        return Points(np.empty(0), np.empty(0))
    at = np.linspace(t[0], t[-1], max(columns, 2))
    low = clipped(np.fmin.reduce(curves, axis=0), seen)
    high = clipped(np.fmax.reduce(curves, axis=0), seen)
    lowest, highest = np.interp(at, t, low), np.interp(at, t, high)
    if t.size > at.size:
        start = np.searchsorted(t, at)
        lowest = np.minimum(lowest, np.minimum.reduceat(low, start))
        highest = np.maximum(highest, np.maximum.reduceat(high, start))
    return Points(np.repeat(at, 2), np.column_stack((lowest, highest)).ravel())


def staircase(t: Array, u: Array, end: float) -> tuple[Array, Array]:
    """Return the corners of values that hold from each instant to the next, the last one until `end`."""
    edges = np.append(t[1:], max(end, float(t[-1])))
    return np.column_stack((t, edges)).ravel(), np.repeat(u, 2)
