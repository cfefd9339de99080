"""Passes over the points of a block of lanes: what is highest, what is last outside, where a rise begins, an area.

Plain loops over stretches of points, inside of each of which all lanes are looked at with one instruction for several.
Where every lane has been found, a pass ends.

Throughout, `y` of shape (g lanes,) holds the output at the points, `scale`, `centre` and `reach` one number for each
lane, and `work` of shape (ROWS lanes,) takes what is found.
"""

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled, compiled_lanes
from tuner.kernels.lanes import LANES, PLACE, Size

Array = NDArray[np.float64]

ROWS = 11
TOP, BOTTOM, TOP_AT, BOTTOM_AT, LAST, TENTH, NINE, TURN, AREA, CUT, MEAN = range(ROWS)
"""Rows of what is found, one number for each lane."""

NOTHING = 1e-6
"""Excursions below this share of the final value are none; as `measure.trial.NOTHING`."""

_STRETCH, _ONE = (0,) * 8, (0,)
"""Points that are looked at together, so that what is found stays in registers between them; and those left over."""


@compiled
def _whole(begin: int, end: int) -> int:
    """Return where the last whole stretch of a range ends."""
    return end - (end - begin) % len(_STRETCH)


@compiled_lanes
def _add(y: Array, begin: int, end: int, stretch: Size, work: Array) -> None:
    row = MEAN * LANES
    for p in range(begin, end, len(stretch)):
        at = (p * LANES) & PLACE
        for i in range(LANES):
            total = work[row + i]
            for q in range(len(stretch)):
                total += y[at + q * LANES + i]
            work[row + i] = total


@compiled_lanes
def tail_mean(y: Array, first: int, points: int, work: Array) -> None:
    """Write the mean of the last points of every lane."""
    row = MEAN * LANES
    for i in range(LANES):
        work[row + i] = 0.0
    _add(y, first, _whole(first, points), _STRETCH, work)
    _add(y, _whole(first, points), points, _ONE, work)
    for i in range(LANES):
        work[row + i] /= points - first


@compiled_lanes
def _go_out(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    y: Array, begin: int, end: int, stretch: Size, scale: Array, work: Array
) -> None:
    top, top_at, bottom, bottom_at = TOP * LANES, TOP_AT * LANES, BOTTOM * LANES, BOTTOM_AT * LANES
    for p in range(begin, end, len(stretch)):
        at, place = (p * LANES) & PLACE, float(p)
        for i in range(LANES):
            most, most_at, least, least_at = work[top + i], work[top_at + i], work[bottom + i], work[bottom_at + i]
            for q in range(len(stretch)):
                here = y[at + q * LANES + i] * scale[i]
                most_at = place + q if here > most else most_at
                most = max(most, here)
                least_at = place + q if here < least else least_at
                least = min(least, here)
            work[top + i], work[top_at + i], work[bottom + i], work[bottom_at + i] = most, most_at, least, least_at


@compiled_lanes
def excursions(y: Array, points: int, scale: Array, work: Array) -> None:
    """Write the highest and the lowest value of each lane in parts of its scale, and at which points they are first."""
    for i in range(LANES):
        work[TOP * LANES + i] = y[i] * scale[i]
        work[BOTTOM * LANES + i] = y[i] * scale[i]
        work[TOP_AT * LANES + i] = 0.0
        work[BOTTOM_AT * LANES + i] = 0.0
    _go_out(y, 0, _whole(0, points), _STRETCH, scale, work)
    _go_out(y, _whole(0, points), points, _ONE, scale, work)


@compiled
def height(y: Array, points: int, at: int, sign: float, lane: int) -> float:
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
def _look_back(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    y: Array, p: int, stretch: Size, centre: Array, reach: Array, work: Array
) -> int:
    """Look for the last point outside in a stretch from point p; return how many lanes have none yet."""
    row, at, place, left = LAST * LANES, (p * LANES) & PLACE, float(p), 0
    for i in range(LANES):
        last = -1.0
        for q in range(len(stretch)):
            last = place + q if abs(y[at + q * LANES + i] - centre[i]) > reach[i] else last
        found = last if work[row + i] < 0.0 else work[row + i]
        work[row + i] = found
        left += 1 if found < 0.0 else 0
    return left


@compiled_lanes
def last_outside(y: Array, points: int, centre: Array, reach: Array, work: Array) -> None:
    """Write the last point of each lane that is farther from its centre than its reach; -1 for none."""
    for i in range(LANES):
        work[LAST * LANES + i] = -1.0
    whole = _whole(0, points)
    for back in range(points - whole):
        _look_back(y, points - 1 - back, _ONE, centre, reach, work)
    for p in range(whole - len(_STRETCH), -1, -len(_STRETCH)):
        if _look_back(y, p, _STRETCH, centre, reach, work) == 0:
            break


@compiled_lanes
def _look_for_rise(y: Array, p: int, stretch: Size, scale: Array, work: Array) -> int:
    """Look for the first points of a rise in a stretch from point p; return how many lanes are not up yet."""
    tenth, nine, at, left = TENTH * LANES, NINE * LANES, (p * LANES) & PLACE, 0
    for i in range(LANES):
        low, high = -1.0, -1.0
        for back in range(len(stretch)):
            q = len(stretch) - 1 - back
            here = y[at + q * LANES + i] * scale[i]
            low = float(p) + q if here >= 0.1 else low
            high = float(p) + q if here >= 0.9 else high
        work[tenth + i] = low if work[tenth + i] < 0.0 else work[tenth + i]
        found = high if work[nine + i] < 0.0 else work[nine + i]
        work[nine + i] = found
        left += 1 if found < 0.0 else 0
    return left


@compiled_lanes
def rise(y: Array, points: int, scale: Array, work: Array) -> None:
    """Write the first points of each lane at a tenth and at nine tenths of its scale; -1 for none."""
    for i in range(LANES):
        work[TENTH * LANES + i] = -1.0
        work[NINE * LANES + i] = -1.0
    whole = _whole(0, points)
    for p in range(0, whole, len(_STRETCH)):
        if _look_for_rise(y, p, _STRETCH, scale, work) == 0:
            return
    for p in range(whole, points):
        _look_for_rise(y, p, _ONE, scale, work)


@compiled_lanes
def _look_for_turn(y: Array, p: int, stretch: Size, scale: Array, work: Array) -> int:
    """Look for the first turn in a stretch from point p on; return how many lanes above their scale have none yet."""
    row, top, at, left = TURN * LANES, TOP * LANES, (p * LANES) & PLACE, 0
    below, starts = ((p - 1 if p > 0 else 0) * LANES) & PLACE, p == 0
    for i in range(LANES):
        first = -1.0
        for back in range(len(stretch)):
            q = len(stretch) - 1 - back
            here = y[at + q * LANES + i] * scale[i]
            before = y[at + (q - 1) * LANES + i] if q > 0 else y[below + i]
            turns = (here > 1.0 + NOTHING) & (y[at + (q + 1) * LANES + i] * scale[i] <= here)
            turns &= (here > before * scale[i]) | (starts & (q == 0))
            first = float(p) + q if turns else first
        found = first if work[row + i] < 0.0 else work[row + i]
        work[row + i] = found
        left += 1 if (found < 0.0) & (work[top + i] > 1.0 + NOTHING) else 0
    return left


@compiled_lanes
def first_turn(y: Array, points: int, scale: Array, work: Array) -> None:
    """Write the first point of each lane at which it turns down above its scale, -1 for none; after `_excursions`."""
    for i in range(LANES):
        work[TURN * LANES + i] = -1.0
    whole = _whole(0, points - 1)
    for p in range(0, whole, len(_STRETCH)):
        if _look_for_turn(y, p, _STRETCH, scale, work) == 0:
            return
    for p in range(whole, points - 1):
        _look_for_turn(y, p, _ONE, scale, work)


@compiled_lanes
def _enclose(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    y: Array, begin: int, end: int, stretch: Size, centre: float, work: Array
) -> None:
    area, cut = AREA * LANES, CUT * LANES
    for p in range(begin, end, len(stretch)):
        at, below = (p * LANES) & PLACE, ((p - 1 if p > 0 else 0) * LANES) & PLACE
        for i in range(LANES):
            there, total, taken = y[below + i] - centre, work[area + i], work[cut + i]
            for q in range(len(stretch)):
                here = y[at + q * LANES + i] - centre
                total += abs(here)
                taken += min(abs(here), abs(there)) if (here > 0.0) != (there > 0.0) else 0.0
                there = here
            work[area + i], work[cut + i] = total, taken


@compiled_lanes
def enclosed(y: Array, points: int, centre: float, work: Array) -> None:
    """Write the sum of the distances of each lane from a centre, and what pieces that cross it may take away."""
    last = (points - 1) * LANES
    for i in range(LANES):
        work[AREA * LANES + i] = -0.5 * (abs(y[i] - centre) + abs(y[last + i] - centre))
        work[CUT * LANES + i] = 0.0
    _enclose(y, 0, _whole(0, points), _STRETCH, centre, work)
    _enclose(y, _whole(0, points), points, _ONE, centre, work)
