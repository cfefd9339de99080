"""Blocks of tunings run with plant after plant until a limit is missed: which are missed for sure, and which in doubt.

One call takes many blocks and lets go of the interpreter's lock; nothing is allocated once it runs. A block is left as
soon as every tuning in it has missed a limit with some plant: most of a ruler is, with the first plants.
"""

import math
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled
from tuner.kernels.lanes import CONSTANTS, LANES, Size, plan, rows, run, totals_from
from tuner.kernels.passes import NOTHING, ROWS
from tuner.kernels.readings import (
    MEASURES,
    REFERENCE_COUNT,
    ROUNDING,
    disturbance_bounds,
    reference_bounds,
)

Array = NDArray[np.float64]
Integers = NDArray[np.int64]
Flags = NDArray[np.uint8]

BEYOND = 0.15
"""Share of the change between two steps that the extrapolation may be off."""

EXTRAPOLATED = 1e-3
"""What the extrapolated curves of the assessment may be off, as a share; in percentage points a tenth."""

PERCENTS = (0, 4, 5)
"""Measures in percent."""


class Speed(NamedTuple):
    """A family at one step of the law.

    Parameters
    ----------
    rows, push, timing : ndarray
        See `simulate.pace.Pace`.
    given : ndarray, shape (2, 2, s)
        For the reference and the disturbance run.
    spacing : float
        Time between points.
    tail : int
        First point of the last tenth of the runs.
    """

    rows: Array
    push: Array
    timing: Integers
    given: Array
    spacing: float
    tail: int


class Course(NamedTuple):
    """What all blocks have in common.

    Parameters
    ----------
    speeds : tuple of Speed
        One for a sampled controller. For a continuous one two, the second at half the step of the first, so that what
        comes of them can be extrapolated to no step at all (Richardson's extrapolation).
    order : ndarray of int, shape (q,)
        Plants to try, in this order.
    wanted : ndarray, shape (2, 5)
        See `lanes.run`, for the reference and the disturbance run.
    band : float
        Settling band, 0 to 1.
    limits : ndarray, shape (13,)
        Largest value of each measure of `readings.MEASURES`; NaN for none.
    watched : int
        Measure whose bounds are kept for every plant, and for whose sake no block is left; -1 for none.
    """

    speeds: tuple[Speed, ...]
    order: Integers
    wanted: Array
    band: float
    limits: Array
    watched: int


class Blocks(NamedTuple):
    """Blocks of tunings, and what is found of them.

    Parameters
    ----------
    constants : ndarray, shape (v, g, 19 lanes)
        See `lanes.run`; for each of v speeds.
    finals : ndarray, shape (2, p, g, lanes)
        Exact final values of both runs; NaN for none.
    active : ndarray of uint8, shape (g, lanes)
        1 for tunings to look at; set to 0 once one has missed a limit for sure.
    misses : ndarray of int, shape (p,)
        Counts with each plant the tunings that missed a limit with it first.
    doubt : ndarray of uint8, shape (g, p, lanes)
        Set to 1 where a measure cannot be told from its limit.
    values : ndarray, shape (2, g, p, lanes), or (2, 0, 0, 0)
        Bounds of the watched measure, written to.
    """

    constants: Array
    finals: Array
    active: Flags
    misses: Integers
    doubt: Flags
    values: Array


class Scratch(NamedTuple):
    """What a block needs while it runs, the same for one block after the other.

    Parameters
    ----------
    y, efforts, state, constants, planned : ndarray
        See `lanes.run`.
    work : ndarray, shape (ROWS lanes,)
    """

    y: Array
    efforts: Array
    state: Array
    constants: Array
    planned: Array
    work: Array


@compiled
def _aligned(count: int) -> Array:
    """Return numbers that begin where a line of the cache does: a wide register that lies across two takes twice."""
    whole = np.empty(count + 7)
    first = -(whole.ctypes.data // 8) % 8
    return whole[first : first + count]


@compiled
def _decide(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    limits: Array, begin: int, end: int, low: Array, high: Array, active: Flags, doubt: Flags, misses: Integers, m: int
) -> bool:
    """Lay the limits over the bounds of a block with plant m; return whether anything is left to look at."""
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
                misses[m] += 1
                break
            if high[measure, i] > limit - near and not (high[measure, i] == 0.0 and limit >= 0.0):
                doubt[i] = 1
        left |= active[i] != 0
    return left


@compiled
def _any(flags: Flags, begin: int, end: int) -> bool:
    """Return whether any flag of a stretch is set."""
    found = False
    for i in range(begin, end):
        found |= bool(flags[i] != 0)
    return found


@compiled
def _extrapolate(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    begin: int, end: int, coarse_low: Array, coarse_high: Array, low: Array, high: Array
) -> None:
    """Lead bounds at two steps, one half of the other, to those at none; they then hold for a good extrapolation too.

    Parameters
    ----------
    coarse_low, coarse_high : ndarray, shape (13, lanes)
        Bounds at the longer step.
    """
    for measure in range(begin, end):
        for i in range(LANES):
            least, most = coarse_low[measure, i], coarse_high[measure, i]
            a, b = 0.5 * (least + most), 0.5 * (low[measure, i] + high[measure, i])
            if math.isfinite(a) and math.isfinite(b):
                wide = 0.5 * (most - least) + (high[measure, i] - low[measure, i])
                wide += BEYOND * abs(b - a) + EXTRAPOLATED * (abs(b) + (100.0 if measure in PERCENTS else 0.0))
                low[measure, i], high[measure, i] = 2.0 * b - a - wide, 2.0 * b - a + wide
            elif not (least == low[measure, i] and most == high[measure, i]):
                low[measure, i], high[measure, i] = -math.inf, math.inf


@compiled
def _doubt_nothing(step: float, ends: Array, low: Array, high: Array) -> None:
    """Leave open what is told in parts of a final value that may come out as nothing once it is extrapolated."""
    for i in range(LANES):
        a, b = ends[0, i], ends[1, i]
        near = (NOTHING + EXTRAPOLATED) * abs(step) + BEYOND * abs(b - a)
        if a != b and abs(2.0 * b - a) <= near:
            for measure in range(REFERENCE_COUNT):
                low[measure, i], high[measure, i] = -math.inf, math.inf


@compiled
def _both(  # noqa: PLR0913, PLR0917 - what a run takes
    size: Size,
    rich: Size,
    course: Course,
    blocks: Blocks,
    which: int,
    g: int,
    m: int,
    asked: Flags,
    scratch: Scratch,
    ends: Array,
    coarse_low: Array,
    coarse_high: Array,
    low: Array,
    high: Array,
) -> None:
    """Run a block with a plant, the reference run or the disturbance run, and bound its measures."""
    y, work = scratch.y, scratch.work
    totals = scratch.state[totals_from(size) :]
    begin, end = (0, REFERENCE_COUNT) if which == 0 else (REFERENCE_COUNT, len(MEASURES))
    for v in range(len(course.speeds)):
        speed = course.speeds[v]
        points, samples = speed.timing[m, 2], speed.timing[m, 3]
        scratch.constants[:] = blocks.constants[v, g]
        run(
            size, rich, scratch.constants, speed.rows[m], speed.push[m], speed.timing[m],
            course.wanted[which], speed.given[which], y, scratch.efforts, scratch.state, scratch.planned,
        )  # fmt: skip
        if which == 0:
            reference_bounds(
                y, points, samples, speed.tail, speed.spacing, totals, blocks.finals[0, m, g],
                course.wanted[0, 0], course.band, asked, ends[v], work, low, high,
            )  # fmt: skip
        else:
            disturbance_bounds(
                y,
                points,
                speed.tail,
                speed.spacing,
                totals,
                blocks.finals[1, m, g],
                course.band,
                asked,
                work,
                low,
                high,
            )
        if v == 0 and len(course.speeds) > 1:
            for measure in range(begin, end):
                for i in range(LANES):
                    coarse_low[measure, i], coarse_high[measure, i] = low[measure, i], high[measure, i]
        if v > 0:
            _extrapolate(begin, end, coarse_low, coarse_high, low, high)
            if which == 0:
                _doubt_nothing(course.wanted[0, 0], ends, low, high)


@compiled
def grade(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    size: Size, rich: Size, course: Course, blocks: Blocks, begin: int, end: int
) -> None:
    """Run blocks `begin` to `end` with the plants of `course.order`.

    Parameters
    ----------
    size, rich : tuple of int
        See `lanes.run`.
    """
    points = course.speeds[-1].timing[0, 2]
    delay = 0
    for v in range(len(course.speeds)):
        delay = max(delay, int(course.speeds[v].timing[:, 1].max()))
    scratch = Scratch(
        _aligned(points * LANES), _aligned((delay + 1) * LANES), _aligned(rows(size) * LANES),
        _aligned(CONSTANTS * LANES), _aligned(plan(size)), _aligned(ROWS * LANES),
    )  # fmt: skip
    low, high = np.zeros((len(MEASURES), LANES)), np.zeros((len(MEASURES), LANES))
    coarse_low, coarse_high = np.zeros((len(MEASURES), LANES)), np.zeros((len(MEASURES), LANES))
    ends = np.zeros((len(course.speeds), LANES))
    asked = np.zeros(len(MEASURES), dtype=np.uint8)
    for measure in range(len(MEASURES)):
        asked[measure] = 1 if not math.isnan(course.limits[measure]) or measure == course.watched else 0
    first, second = _any(asked, 0, REFERENCE_COUNT), _any(asked, REFERENCE_COUNT, len(MEASURES))
    for g in range(begin, end):
        for q in range(course.order.shape[0]):
            m = course.order[q]
            if course.watched < 0 and not _any(blocks.active[g], 0, LANES):
                break
            left = True
            if first:
                _both(size, rich, course, blocks, 0, g, m, asked, scratch, ends, coarse_low, coarse_high, low, high)
                left = _decide(
                    course.limits, 0, REFERENCE_COUNT, low, high, blocks.active[g], blocks.doubt[g, m],
                    blocks.misses, m,
                )  # fmt: skip
            if second and (left or course.watched >= REFERENCE_COUNT):
                _both(size, rich, course, blocks, 1, g, m, asked, scratch, ends, coarse_low, coarse_high, low, high)
                _decide(
                    course.limits, REFERENCE_COUNT, len(MEASURES), low, high, blocks.active[g], blocks.doubt[g, m],
                    blocks.misses, m,
                )  # fmt: skip
            if course.watched >= 0:
                for i in range(LANES):
                    blocks.values[0, g, m, i] = low[course.watched, i]
                    blocks.values[1, g, m, i] = high[course.watched, i]
