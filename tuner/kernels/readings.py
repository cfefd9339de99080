"""Measures of the runs of a block of lanes, each held between two bounds that follow from the points alone.

What the measures of a run are exactly takes cubics and parabolas between the points; where the limit lies outside the
bounds, they need not be laid. Bounds hold for the exact measures of the same points, see `measure.curve`: a crossing
lies between two points, a peak on a parabola through the highest ones, an area within what the pieces that
change sign can differ by. A measure that does not exist is infinite: minus where that is good.

Plain loops over stretches of points, inside of each of which all lanes are looked at with one instruction for several.
"""

import math

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled
from tuner.kernels.lanes import AWAY, LANES, LIMITED, PEAK, TRAVEL
from tuner.kernels.passes import (
    AREA,
    BOTTOM,
    BOTTOM_AT,
    CUT,
    LAST,
    MEAN,
    NINE,
    NOTHING,
    TENTH,
    TOP,
    TOP_AT,
    TURN,
    enclosed,
    excursions,
    first_turn,
    height,
    last_outside,
    rise,
    tail_mean,
)

Array = NDArray[np.float64]
Flags = NDArray[np.uint8]

MEASURES = (
    "overshoot",
    "peak_time",
    "rise_time",
    "settling_time",
    "steady_state_error",
    "undershoot",
    "iae_reference",
    "peak_effort",
    "effort_travel",
    "saturated_share",
    "iae_disturbance",
    "disturbance_peak",
    "disturbance_recovery",
)
"""In the order in which bounds stand."""

REFERENCE_COUNT = 10
"""So many of them are of the reference run."""

ROUNDING = 1e-9
"""Two computations of the same measure differ by this share of its natural size at most."""


@compiled
def reference_bounds(  # noqa: C901, PLR0912, PLR0913, PLR0917 - every measure of a run in one place, to be read beside `measure`
    y: Array,
    points: int,
    samples: int,
    tail: int,
    spacing: float,
    totals: Array,
    exact: Array,
    step: float,
    band: float,
    asked: Flags,
    final: Array,
    work: Array,
    low: Array,
    high: Array,
) -> None:
    """Write bounds of the measures of a reference run that are asked for.

    Parameters
    ----------
    y : ndarray, shape (g lanes,)
        Output at the points.
    tail : int
        First point of the last tenth of the run.
    spacing : float
        Time between points.
    totals : ndarray, shape (4 lanes,)
        What the run has counted.
    exact : ndarray, shape (lanes,)
        Final value of the output where no limit acts; NaN for none.
    step : float
        Of the reference; not 0.
    band : float
        Settling band, 0 to 1.
    asked : ndarray of uint8, shape (13,)
        Measures to bound.
    final : ndarray, shape (lanes,)
        Where each lane ends, written to.
    work : ndarray, shape (12 lanes,)
        Scratch.
    low, high : ndarray, shape (13, lanes)
        Bounds, written to.
    """
    scale, reach = np.empty(LANES), np.empty(LANES)
    _final_values(y, points, tail, totals, exact, final, work)
    for i in range(LANES):
        usable = abs(final[i]) > NOTHING * abs(step)
        scale[i] = 1.0 / final[i] if usable else 0.0
        reach[i] = band * abs(final[i])
    if asked[0] or asked[1] or asked[5]:
        excursions(y, points, scale, work)
        for i in range(LANES):
            highest = height(y, points, int(work[TOP_AT * LANES + i]), scale[i], i)
            lowest = height(y, points, int(work[BOTTOM_AT * LANES + i]), -scale[i], i)
            low[0, i], high[0, i] = _excess(highest - 1.0)
            low[5, i], high[5, i] = _excess(lowest if work[BOTTOM * LANES + i] < -NOTHING else 0.0)
    if asked[1]:
        first_turn(y, points, scale, work)
        for i in range(LANES):
            low[1, i], high[1, i] = _turn_time(work[TURN * LANES + i], spacing, low[0, i], high[0, i])
    if asked[2]:
        rise(y, points, scale, work)
        for i in range(LANES):
            low[2, i], high[2, i] = _rise_time(work[TENTH * LANES + i], work[NINE * LANES + i], spacing)
    if asked[3]:
        last_outside(y, points, final, reach, work)
        for i in range(LANES):
            low[3, i], high[3, i] = _exit_time(work[LAST * LANES + i], points, spacing)
    if asked[6]:
        enclosed(y, points, step, work)
    shown_scale = 1.0 / samples
    for i in range(LANES):
        error = 100.0 * (step - final[i]) / step
        low[4, i], high[4, i] = abs(error), abs(error)
        area, cut = work[AREA * LANES + i], work[CUT * LANES + i]
        low[6, i], high[6, i] = (area - cut) * spacing, (area - 0.5 * cut) * spacing
        low[7, i] = high[7, i] = totals[PEAK * LANES + i]
        low[8, i] = high[8, i] = totals[TRAVEL * LANES + i]
        low[9, i] = high[9, i] = totals[LIMITED * LANES + i] * shown_scale
        if scale[i] == 0.0:
            for measure in (0, 1, 2, 3, 5):
                low[measure, i] = high[measure, i] = math.inf
        # What is told in parts of a final value may not exist where that comes out next to nothing.
        nowhere = final[i] != exact[i] and abs(abs(final[i]) - NOTHING * abs(step)) <= ROUNDING * abs(step)
        if nowhere or _doubtful(y, points, totals, step, i):
            for measure in range(REFERENCE_COUNT):
                low[measure, i], high[measure, i] = -math.inf, math.inf


@compiled
def disturbance_bounds(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    y: Array,
    points: int,
    tail: int,
    spacing: float,
    totals: Array,
    exact: Array,
    band: float,
    asked: Flags,
    work: Array,
    low: Array,
    high: Array,
) -> None:
    """Write bounds of the measures of a disturbance run that are asked for; see `reference_bounds`."""
    final, one, reach = np.empty(LANES), np.ones(LANES), np.empty(LANES)
    _final_values(y, points, tail, totals, exact, final, work)
    excursions(y, points, one, work)
    peak = np.empty(LANES)
    for i in range(LANES):
        up = work[TOP * LANES + i] >= -work[BOTTOM * LANES + i]
        at = int(work[(TOP_AT if up else BOTTOM_AT) * LANES + i])
        peak[i] = height(y, points, at, 1.0 if up else -1.0, i)
        low[11, i] = high[11, i] = peak[i]
    if asked[10]:
        enclosed(y, points, 0.0, work)
        for i in range(LANES):
            area, cut = work[AREA * LANES + i], work[CUT * LANES + i]
            low[10, i], high[10, i] = (area - cut) * spacing, (area - 0.5 * cut) * spacing
    if asked[12]:
        for i in range(LANES):
            reach[i] = band * peak[i]
        last_outside(y, points, final, reach, work)
        for i in range(LANES):
            low[12, i], high[12, i] = _exit_time(work[LAST * LANES + i], points, spacing)
    for i in range(LANES):
        if _doubtful(y, points, totals, 0.0, i):
            for measure in range(REFERENCE_COUNT, len(MEASURES)):
                low[measure, i], high[measure, i] = -math.inf, math.inf


@compiled
def _final_values(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    y: Array, points: int, tail: int, totals: Array, exact: Array, final: Array, work: Array
) -> None:
    """Write where each lane ends: exactly where no limit acted, else the mean of its last tenth."""
    mean = False
    for i in range(LANES):
        mean |= totals[LIMITED * LANES + i] > 0.0 or not math.isfinite(exact[i])
    if mean:
        tail_mean(y, tail, points, work)
    for i in range(LANES):
        free = totals[LIMITED * LANES + i] == 0.0 and math.isfinite(exact[i])
        final[i] = exact[i] if free else work[MEAN * LANES + i]


@compiled
def _excess(height: float) -> tuple[float, float]:
    """Return bounds of an excursion in percent, exactly 0 for none."""
    least, most = height - ROUNDING, height + ROUNDING
    return (100.0 * least if least > NOTHING else 0.0), (100.0 * most if most > NOTHING else 0.0)


@compiled
def _turn_time(place: float, spacing: float, low: float, high: float) -> tuple[float, float]:
    if high == 0.0:
        return -math.inf, -math.inf
    if low == 0.0:
        return -math.inf, math.inf
    if place < 0.0:
        return math.inf, math.inf
    return (place - 1.0) * spacing, (place + 1.0) * spacing


@compiled
def _rise_time(tenth: float, nine: float, spacing: float) -> tuple[float, float]:
    if nine < 0.0:
        return math.inf, math.inf
    started, arrived = max(tenth - 1.0, 0.0), max(nine - 1.0, 0.0)
    return max(arrived - tenth, 0.0) * spacing, (nine - started) * spacing


@compiled
def _exit_time(last: float, points: int, spacing: float) -> tuple[float, float]:
    if last < 0.0:
        return 0.0, 0.0
    if last >= points - 1:
        return math.inf, math.inf
    return last * spacing, (last + 1.0) * spacing


@compiled
def _doubtful(y: Array, points: int, totals: Array, target: float, lane: int) -> bool:
    """Return whether a lane has run away, or may be found to under a limit."""
    if totals[AWAY * LANES + lane] > 0.0:
        return True
    if totals[LIMITED * LANES + lane] == 0.0:
        return False
    end = abs(y[(points - 1) * LANES + lane] - target)
    middle = abs(y[points // 2 * LANES + lane] - target)
    leaves: bool = end > abs(y[lane] - target) and end > 2.0 * middle
    return leaves
