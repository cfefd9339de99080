"""Blocks of tunings run with plant after plant until a limit is missed: which are missed for sure, and which in doubt.

One call takes many blocks and lets go of the interpreter's lock; nothing is allocated once it runs. A block is left as
soon as every tuning in it has missed a limit with some plant: most of a ruler is, with the first plants.
"""

import math
from collections.abc import Callable
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled
from tuner.kernels.lanes import LANES, Size, run
from tuner.kernels.readings import MEASURES, REFERENCE_COUNT, ROUNDING, WORK_ROWS, disturbance_bounds, reference_bounds

Array = NDArray[np.float64]
Integers = NDArray[np.int64]
Flags = NDArray[np.uint8]
Compiled = Callable[..., object]


class Course(NamedTuple):
    """What all blocks have in common.

    Parameters
    ----------
    rows, push, timing : ndarray
        The family, see `simulate.pace.Pace`.
    order : ndarray of int, shape (q,)
        Plants to try, in this order.
    wanted : ndarray, shape (2, 5)
        See `lanes.run`, for the reference and the disturbance run.
    feedforward : ndarray, shape (2, s)
    spacing, band : float
        Time between points; settling band, 0 to 1.
    tail : int
        First point of the last tenth of the runs.
    limits : ndarray, shape (13,)
        Largest value of each measure of `readings.MEASURES`; NaN for none.
    watched : int
        Measure whose bounds are kept for every plant, and for whose sake no block is left; -1 for none.
    """

    rows: Array
    push: Array
    timing: Integers
    order: Integers
    wanted: Array
    feedforward: Array
    spacing: float
    band: float
    tail: int
    limits: Array
    watched: int


class Blocks(NamedTuple):
    """Blocks of tunings, and what is found of them.

    Parameters
    ----------
    constants : ndarray, shape (g, 19 lanes)
        See `lanes.run`.
    finals : ndarray, shape (2, p, g, lanes)
        Exact final values of both runs; NaN for none.
    active : ndarray of uint8, shape (g, lanes)
        1 for tunings to look at; set to 0 once one has missed a limit for sure.
    doubt : ndarray of uint8, shape (g, p, lanes)
        Set to 1 where a measure cannot be told from its limit.
    values : ndarray, shape (2, g, p, lanes), or (2, 0, 0, 0)
        Bounds of the watched measure, written to.
    """

    constants: Array
    finals: Array
    active: Flags
    doubt: Flags
    values: Array


@compiled
def _asked(limits: Array, watched: int, begin: int, end: int) -> bool:
    """Return whether any measure of a run is asked for."""
    found = begin <= watched < end
    for measure in range(begin, end):
        found |= not math.isnan(limits[measure])
    return found


@compiled
def _decide(limits: Array, begin: int, end: int, low: Array, high: Array, active: Flags, doubt: Flags) -> bool:
    """Lay the limits over the bounds of a block; return whether anything is left to look at."""
    left = False
    for i in range(LANES):
        if active[i] == 0:
            continue
        for measure in range(begin, end):
            limit = limits[measure]
            if math.isnan(limit):
                continue
            near = ROUNDING * (abs(limit) + 1e-3 * abs(low[measure, i])) if math.isfinite(low[measure, i]) else 0.0
            if low[measure, i] > limit + near:
                active[i] = 0
                break
            if high[measure, i] > limit - near and not (high[measure, i] == 0.0 and limit >= 0.0):
                doubt[i] = 1
        left |= active[i] != 0
    return left


@compiled
def grade(size: Size, filters: Size, course: Course, blocks: Blocks, begin: int, end: int) -> None:
    """Run blocks `begin` to `end` with the plants of `course.order`.

    Parameters
    ----------
    size, filters : tuple of int
        See `lanes.run`.
    """
    points, samples = course.timing[0, 2], course.timing[0, 3]
    y, u = np.empty(points * LANES), np.empty(samples * LANES)
    state = np.empty((2 * len(size) + 2 + 12) * LANES)
    totals = state[(2 * len(size) + 2 + 8) * LANES :]
    work = np.empty(WORK_ROWS * LANES)
    low, high = np.zeros((len(MEASURES), LANES)), np.zeros((len(MEASURES), LANES))
    asked = ~np.isnan(course.limits)
    if course.watched >= 0:
        asked[course.watched] = True
    first = _asked(course.limits, course.watched, 0, REFERENCE_COUNT)
    second = _asked(course.limits, course.watched, REFERENCE_COUNT, len(MEASURES))
    for g in range(begin, end):
        for q in range(course.order.shape[0]):
            m = course.order[q]
            left = course.watched >= 0
            for i in range(LANES):
                left |= blocks.active[g, i] != 0
            if not left:
                break
            if first:
                run(
                    size, filters, blocks.constants[g], course.rows[m], course.push[m], course.timing[m],
                    course.wanted[0], course.feedforward[0], y, u, state,
                )  # fmt: skip
                reference_bounds(
                    y, points, samples, course.tail, course.spacing, totals, blocks.finals[0, m, g],
                    course.wanted[0, 0], course.band, asked, work, low, high,
                )  # fmt: skip
                left = _decide(
                    course.limits, 0, REFERENCE_COUNT, low, high, blocks.active[g], blocks.doubt[g, m]
                ) or (course.watched >= REFERENCE_COUNT)
            if second and left:
                run(
                    size, filters, blocks.constants[g], course.rows[m], course.push[m], course.timing[m],
                    course.wanted[1], course.feedforward[1], y, u, state,
                )  # fmt: skip
                disturbance_bounds(
                    y, points, course.tail, course.spacing, totals, blocks.finals[1, m, g], course.band, asked, work,
                    low, high,
                )  # fmt: skip
                _decide(
                    course.limits, REFERENCE_COUNT, len(MEASURES), low, high, blocks.active[g], blocks.doubt[g, m]
                )
            if course.watched >= 0:
                for i in range(LANES):
                    blocks.values[0, g, m, i] = low[course.watched, i]
                    blocks.values[1, g, m, i] = high[course.watched, i]
