"""Bounds of measures hold what the measures of the same points are, also where there is none."""

import numpy as np
import pytest

from tests.footing.random_loops import rich_sheet, sheet
from tests.kernels.test_lanes import run, tunings
from tuner.assess import results_of
from tuner.footing.grading import Grading
from tuner.footing.ground import ground_of
from tuner.kernels import lanes, passes, readings
from tuner.measure.trial import NO_OVERSHOOT
from tuner.model.family import family_of
from tuner.model.sheet import Sheet
from tuner.simulate.loop import loops_of
from tuner.simulate.poles import closed_loop_poles


def is_stable(found: Sheet) -> bool:
    """Return whether the nominal loop is stable: nothing else has measures to compare."""
    return closed_loop_poles(loops_of(found, family_of(found, 1))[0]).stable


LOOPS = [one for one in (*map(sheet, range(36)), *map(rich_sheet, range(18))) if is_stable(one)]


@pytest.mark.parametrize("found", LOOPS)
def test_bounds_hold_the_measures(found: Sheet) -> None:
    """Every measure of both runs, for every lane that is stable; none is infinite, minus where that is good."""
    ground = ground_of(found, 1)
    low, high = np.zeros((13, lanes.LANES)), np.zeros((13, lanes.LANES))
    asked, work = np.ones(13, dtype=np.uint8), np.zeros(passes.ROWS * lanes.LANES)
    speed, band = ground.speeds[0], found.trial.settling_band / 100.0
    points, samples = speed.timing[0, 2:4]
    for which in (0, 1):
        y, _, totals, tuned = run(found, which)
        grading = Grading(found, ground, tunings(found))
        exact = grading._finals(np.arange(lanes.LANES))[which, 0].copy()
        if which == 0:
            readings.reference_bounds(
                y.ravel(), points, samples, speed.tail, speed.spacing, totals.ravel(), exact, found.trial.reference,
                band, asked, np.zeros(lanes.LANES), work, low, high,
            )  # fmt: skip
        else:
            readings.disturbance_bounds(
                y.ravel(), points, speed.tail, speed.spacing, totals.ravel(), exact, band, asked, work, low, high
            )
    compared = 0
    for lane in range(0, lanes.LANES, 5):
        (result,) = results_of(tuned[lane], ground.members)
        if not result.stable:
            continue
        for index, name in enumerate(readings.MEASURES):
            value = result.measures[name]
            if value is None:
                value = -np.inf if result.reasons[name] == NO_OVERSHOOT else np.inf
            value = abs(value) if name == "steady_state_error" else value
            compared += 1
            slack = 1e-7 * max(1.0, abs(value)) if np.isfinite(value) else 0.0
            assert low[index, lane] - slack <= value <= high[index, lane] + slack, (name, lane)
    assert compared
