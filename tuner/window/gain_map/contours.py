"""Lines along which a measure has one value: which round values, and where the lines run."""

from dataclasses import dataclass
from math import ceil, floor, log10

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

_WISHED, _MOST = 7, 10
_WIDE = 20.0
"""Ratio of the largest to the smallest value from which levels rise by factors instead of steps."""

_EVEN = 33
"""Evenly spaced places of each scale whose values decide the levels; where a grid is closer it has no more weight."""

_NEAR = 0.03
"""A level this near to the limit, as a share of it, gives way to the limit's own line."""


@dataclass(frozen=True, slots=True, eq=False)
class Contour:
    """The lines of one value.

    Parameters
    ----------
    level : float
        In the measure's unit.
    is_limit : bool
        Whether it is the value that the sheet allows.
    lines : tuple of ndarray, shape (k, 2) each
        Points, in the coordinates of the grid.
    """

    level: float
    is_limit: bool
    lines: tuple[Array, ...]


def contours(worst: Array, x: Array, y: Array, limit: float | None) -> tuple[Contour, ...]:
    """Return the lines of round values, and that of the limit last.

    Parameters
    ----------
    worst : ndarray, shape (ny, nx)
        Values at the points of the grid; not a number where there is none, and no line runs there.
    x, y : ndarray, shape (nx,) and (ny,)
        Coordinates of the points.
    limit : float or None
        What the sheet allows.
    """
    if not np.isfinite(worst).any() or min(worst.shape) < 2:
        return ()
    from contourpy import LineType, contour_generator

    known = np.ma.masked_invalid(worst)
    evenly = worst[np.ix_(_evenly(y), _evenly(x))]
    generator = contour_generator(x, y, known, name="serial", corner_mask=True, line_type=LineType.Separate)
    wanted = [(level, False) for level in levels(evenly, limit)] + ([] if limit is None else [(limit, True)])
    found = (Contour(level, is_limit, _lines(generator.lines(level))) for level, is_limit in wanted)
    return tuple(contour for contour in found if contour.lines)


def levels(worst: Array, limit: float | None = None) -> tuple[float, ...]:
    """Return round values within those of a grid, rising, none of them next to the limit."""
    values = worst[np.isfinite(worst)]
    if not values.size:
        return ()
    low, high = (float(value) for value in np.percentile(values, (3.0, 97.0)))
    if high - low <= 1e-9 * max(abs(low), abs(high)):
        return ()
    wide = low > 0.0 and high / low > _WIDE
    candidates = _by_factors(low, high) if wide else _by_steps(low, high)
    shown = [level for level in candidates if level > values.min()]  # no line around a plain of the least value
    return tuple(level for level in shown if limit is None or abs(level - limit) > _NEAR * abs(limit))


def _evenly(places: Array) -> NDArray[np.intp]:
    """Return the indices of the places that are nearest to evenly spaced ones, shape (`_EVEN`,)."""
    wished = np.linspace(places[0], places[-1], _EVEN)
    nearest: NDArray[np.intp] = np.abs(places[:, np.newaxis] - wished).argmin(axis=0)
    return nearest


def _lines(found: object) -> tuple[Array, ...]:
    lines = found if isinstance(found, list) else []
    return tuple(np.asarray(line) for line in lines if len(line) > 1)


def _by_steps(low: float, high: float) -> list[float]:
    step = _round_step((high - low) / _WISHED)
    first, last = ceil(low / step), floor(high / step)
    return [float(f"{count * step:.12g}") for count in range(first, last + 1)]


def _by_factors(low: float, high: float) -> list[float]:
    decades = range(floor(log10(low)), ceil(log10(high)) + 1)
    for digits in ((1, 2, 5), (1, 3), (1,)):
        found = [float(f"{digit}e{decade}") for decade in decades for digit in digits]
        within = [level for level in found if low <= level <= high]
        if len(within) <= _MOST:
            break
    return within[:: ceil(len(within) / _MOST) or 1]


def _round_step(step: float) -> float:
    decade = 10.0 ** floor(log10(step))
    return next(digit * decade for digit in (1.0, 2.0, 5.0, 10.0) if digit * decade >= 0.7 * step)
