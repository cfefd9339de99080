"""Measures of the runs of a block of lanes, each held between two bounds that follow from the points alone.

What the measures of a run are exactly takes cubics and parabolas between the points; where the limit lies outside the
bounds, they need not be laid. Bounds hold for the exact measures of the same points, see `measure.curve`: a crossing
lies between two points, a peak on a parabola through the highest ones, an area within what the pieces that
change sign can differ by. A measure that does not exist is infinite: minus where that is good.

Plain loops over the points, inside of each of which all lanes are looked at with one instruction for several.
"""

import math

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled, compiled_lanes
from tuner.kernels.lanes import AWAY, LANES, LIMITED, PEAK, TRAVEL

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

NOTHING = 1e-6
"""Excursions below this share of the final value are none; as `measure.trial.NOTHING`."""

ROUNDING = 1e-9
"""Two computations of the same measure differ by this share of its natural size at most."""

_ROWS = 12
(_TOP, _BOTTOM, _TOP_AT, _BOTTOM_AT, _LAST, _TENTH, _NINE, _TURN, _AREA, _CUT, _WORK, _MORE) = range(_ROWS)

WORK_ROWS = _ROWS


@compiled_lanes
def _tail_mean(y: Array, first: int, points: int, work: Array) -> None:
    """Write the mean of the last points of every lane."""
    row = _WORK * LANES
    for i in range(LANES):
        work[row + i] = 0.0
    for p in range(first, points):
        for i in range(LANES):
            work[row + i] += y[p * LANES + i]
    for i in range(LANES):
        work[row + i] /= points - first


@compiled_lanes
def _excursions(y: Array, points: int, scale: Array, work: Array) -> None:
    """Write the highest and the lowest value of each lane in parts of its scale, and at which points they are first."""
    top, top_at, bottom, bottom_at = _TOP * LANES, _TOP_AT * LANES, _BOTTOM * LANES, _BOTTOM_AT * LANES
    for i in range(LANES):
        work[top + i] = y[i] * scale[i]
        work[bottom + i] = y[i] * scale[i]
        work[top_at + i] = 0.0
        work[bottom_at + i] = 0.0
    for p in range(1, points):
        at, place = p * LANES, float(p)
        for i in range(LANES):
            here = y[at + i] * scale[i]
            higher, lower = here > work[top + i], here < work[bottom + i]
            work[top + i] = here if higher else work[top + i]
            work[top_at + i] = place if higher else work[top_at + i]
            work[bottom + i] = here if lower else work[bottom + i]
            work[bottom_at + i] = place if lower else work[bottom_at + i]


@compiled
def _height(y: Array, points: int, at: int, sign: float, lane: int) -> float:
    """Return how high a lane goes near one of its points: by a parabola on either side, as `measure.curve.refined`."""
    here: float = sign * y[at * LANES + lane]
    beyond = 0.0
    for side in (-1, 1):
        far = at + 2 * side
        if 0 <= far < points:
            near, end = sign * y[(at + side) * LANES + lane], sign * y[far * LANES + lane]
            slope, bend = -1.5 * here + 2.0 * near - 0.5 * end, here - 2.0 * near + end
            if slope > 0.0 and bend < 0.0:
                beyond = max(beyond, -0.5 * slope * slope / bend)
    return here + beyond


@compiled_lanes
def _last_outside(y: Array, points: int, centre: Array, reach: Array, work: Array) -> None:
    """Write the last point of each lane that is farther from its centre than its reach; -1 for none."""
    row = _LAST * LANES
    for i in range(LANES):
        work[row + i] = -1.0
    for p in range(points):
        at, place = p * LANES, float(p)
        for i in range(LANES):
            work[row + i] = place if abs(y[at + i] - centre[i]) > reach[i] else work[row + i]


@compiled_lanes
def _rise(y: Array, points: int, scale: Array, work: Array) -> None:
    """Write the first points of each lane at a tenth and at nine tenths of its scale; -1 for none."""
    tenth, nine = _TENTH * LANES, _NINE * LANES
    for i in range(LANES):
        work[tenth + i] = -1.0
        work[nine + i] = -1.0
    for back in range(points):
        p = points - 1 - back
        at, place = p * LANES, float(p)
        for i in range(LANES):
            here = y[at + i] * scale[i]
            work[tenth + i] = place if here >= 0.1 else work[tenth + i]
            work[nine + i] = place if here >= 0.9 else work[nine + i]


@compiled_lanes
def _first_turn(y: Array, points: int, scale: Array, work: Array) -> None:
    """Write the first point of each lane at which it turns down above its scale; -1 for none."""
    row = _TURN * LANES
    for i in range(LANES):
        work[row + i] = -1.0
    for back in range(points - 1):
        p = points - 2 - back
        before, at, after, place = (p - 1 if p > 0 else 0) * LANES, p * LANES, (p + 1) * LANES, float(p)
        rises = 1.0 if p > 0 else 0.0
        for i in range(LANES):
            here = y[at + i] * scale[i]
            turns = (here > 1.0 + NOTHING) & (y[after + i] * scale[i] <= here)
            turns &= (here > y[before + i] * scale[i]) | (rises == 0.0)
            work[row + i] = place if turns else work[row + i]


@compiled_lanes
def _area(y: Array, points: int, centre: float, work: Array) -> None:
    """Write the sum of the distances of each lane from a centre, and what pieces that cross it may take away."""
    area, cut = _AREA * LANES, _CUT * LANES
    last = (points - 1) * LANES
    for i in range(LANES):
        work[area + i] = -0.5 * (abs(y[i] - centre) + abs(y[last + i] - centre))
        work[cut + i] = 0.0
    for p in range(points):
        at, before = p * LANES, (p - 1 if p > 0 else 0) * LANES
        for i in range(LANES):
            here, there = y[at + i] - centre, y[before + i] - centre
            size = abs(here)
            work[area + i] += size
            work[cut + i] += min(size, abs(there)) if (here > 0.0) != (there > 0.0) else 0.0


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
        _excursions(y, points, scale, work)
        for i in range(LANES):
            highest = _height(y, points, int(work[_TOP_AT * LANES + i]), scale[i], i)
            lowest = _height(y, points, int(work[_BOTTOM_AT * LANES + i]), -scale[i], i)
            low[0, i], high[0, i] = _excess(highest - 1.0)
            low[5, i], high[5, i] = _excess(lowest if work[_BOTTOM * LANES + i] < -NOTHING else 0.0)
    if asked[1]:
        _first_turn(y, points, scale, work)
        for i in range(LANES):
            low[1, i], high[1, i] = _turn_time(work[_TURN * LANES + i], spacing, low[0, i], high[0, i])
    if asked[2]:
        _rise(y, points, scale, work)
        for i in range(LANES):
            low[2, i], high[2, i] = _rise_time(work[_TENTH * LANES + i], work[_NINE * LANES + i], spacing)
    if asked[3]:
        _last_outside(y, points, final, reach, work)
        for i in range(LANES):
            low[3, i], high[3, i] = _exit_time(work[_LAST * LANES + i], points, spacing)
    if asked[6]:
        _area(y, points, step, work)
    shown_scale = 1.0 / samples
    for i in range(LANES):
        error = 100.0 * (step - final[i]) / step
        low[4, i], high[4, i] = abs(error), abs(error)
        area, cut = work[_AREA * LANES + i], work[_CUT * LANES + i]
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
    _excursions(y, points, one, work)
    peak = np.empty(LANES)
    for i in range(LANES):
        up = work[_TOP * LANES + i] >= -work[_BOTTOM * LANES + i]
        at = int(work[(_TOP_AT if up else _BOTTOM_AT) * LANES + i])
        peak[i] = _height(y, points, at, 1.0 if up else -1.0, i)
        low[11, i] = high[11, i] = peak[i]
    if asked[10]:
        _area(y, points, 0.0, work)
        for i in range(LANES):
            area, cut = work[_AREA * LANES + i], work[_CUT * LANES + i]
            low[10, i], high[10, i] = (area - cut) * spacing, (area - 0.5 * cut) * spacing
    if asked[12]:
        for i in range(LANES):
            reach[i] = band * peak[i]
        _last_outside(y, points, final, reach, work)
        for i in range(LANES):
            low[12, i], high[12, i] = _exit_time(work[_LAST * LANES + i], points, spacing)
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
        _tail_mean(y, tail, points, work)
    for i in range(LANES):
        free = totals[LIMITED * LANES + i] == 0.0 and math.isfinite(exact[i])
        final[i] = exact[i] if free else work[_WORK * LANES + i]


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
