"""Tunings side by side go where each goes alone, and one that runs away leaves the others alone."""

from dataclasses import replace

import numpy as np
import pytest

from tests.footing.random_loops import rich_sheet, sheet
from tuner.footing.grading import Grading
from tuner.footing.ground import ground_of
from tuner.footing.tunings import Tunings
from tuner.kernels import lanes, readings
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet
from tuner.simulate.batch import RUNAWAY, nominal, simulate
from tuner.simulate.grid import sampled_grid

LOOPS = [*map(sheet, range(12)), *map(rich_sheet, range(14))]
FACTORS = np.geomspace(0.3, 1.5, lanes.LANES)


def tunings(found: Sheet, factors: np.ndarray = FACTORS) -> Tunings:
    """Return a block of tunings: the proportional gain of a sheet times some factors."""
    name = "kp" if found.controller.form == "parallel" else "kc"
    value = found.controller.value(name) or 1.0
    return Tunings(found.controller, [((name, value * factor),) for factor in factors.tolist()])


def run(
    found: Sheet, which: int, factors: np.ndarray = FACTORS
) -> tuple[np.ndarray, np.ndarray, np.ndarray, list[Sheet]]:
    """Return outputs, efforts and totals of a block of tunings of a sheet, and the tunings."""
    some, ground = tunings(found, factors), ground_of(found, 1)
    tuned = [replace(found, controller=one) for one in some]
    grading = Grading(found, ground, some)
    speed, size = ground.speeds[0], ground.size
    constants = np.ascontiguousarray(grading._constants(np.arange(lanes.LANES), ground.steps[0]).T).ravel()
    delay, points, samples = speed.timing[0, 1:4]
    y, u = np.zeros((points, lanes.LANES)), np.zeros((samples + delay + 1, lanes.LANES))
    state, planned = np.zeros(lanes.rows(size) * lanes.LANES), np.zeros(lanes.plan(size))
    course = grading._course([0], grading._limits(readings.MEASURES))
    lanes.run(
        size, grading.rich(), constants, speed.rows[0], speed.push[0], speed.timing[0], course.wanted[which],
        speed.given[which], y.reshape(-1), u.reshape(-1), state, planned,
    )  # fmt: skip
    return y, u[:samples], state[lanes.totals_from(size) :].reshape(-1, lanes.LANES), tuned


@pytest.mark.parametrize("which", [0, 1])
@pytest.mark.parametrize("made", LOOPS)
def test_every_lane_agrees_with_the_exact_kernel(made: Sheet, which: int) -> None:
    """To 1e-9 of the step; a lane is marked where the exact run passes the ceiling, and nowhere else."""
    y, u, totals, tuned = run(made, which)
    grid = sampled_grid(made.trial.duration, made.controller.sample_time, nominal(made).plant)
    compared = 0
    for lane in (0, 11, 22, 31):
        exact = simulate(tuned[lane], ground_of(made, 1).members, grid)
        largest = float(max(np.abs(exact.y[0, which]).max(), np.abs(exact.u[0, which]).max()))
        assert (totals[lanes.AWAY, lane] > 0.0) == (largest > RUNAWAY)
        if totals[lanes.AWAY, lane]:
            continue
        compared += 1
        assert np.abs(y[:, lane] - exact.y[0, which]).max() <= 1e-9 * max(1.0, largest)
        assert np.abs(u[:, lane] - exact.u[0, which]).max() <= 1e-9 * max(1.0, largest)
        assert totals[lanes.LIMITED, lane] == exact.limited[0, which].sum()
    assert compared


def test_what_was_compared_has_every_feature() -> None:
    """So that no kind of loop is left out unseen."""
    laws = [one.controller for one in LOOPS]
    assert any(one.loop.manipulated.low is not None and one.loop.manipulated.rate is not None for one in LOOPS)
    assert any(one.windup_time for one in laws)
    assert any(one.windup_time is None for one in laws)
    assert any(one.notch for one in laws)
    assert any(one.lead_lag for one in laws)
    assert any(one.reference_filter for one in laws)
    assert any(one.measurement_filter for one in laws)
    assert {one.action for one in laws} == {"reverse", "direct"}
    assert {one.feedforward.kind for one in laws if one.feedforward} == {"static", "inverse"}
    assert any(one.disturbance_feedforward for one in laws)
    assert {one.delay_samples for one in laws} == {0, 1, 2, 3}
    assert any("(0.3 s + 1) exp" in one.plant.expression for one in LOOPS if isinstance(one.plant, ExpressionPlant))
    assert {int(ground_of(one, 1).speeds[0].timing[0, 4]) for one in LOOPS} >= {2, 4}


def test_a_resolution_acts_in_every_lane() -> None:
    """The measurement is rounded as in the exact kernel."""
    found = sheet(1)
    found = replace(found, sensor=replace(found.sensor, resolution=0.05))
    y, _, _, tuned = run(found, 0)
    grid = sampled_grid(found.trial.duration, found.controller.sample_time, nominal(found).plant)
    exact = simulate(tuned[3], ground_of(found, 1).members, grid)
    assert np.abs(y[:, 3] - exact.y[0, 0]).max() <= 1e-9


def test_one_that_runs_away_is_marked_and_the_others_are_right() -> None:
    """A lane far beyond its edge does not spoil the lane beside it."""
    found = sheet(6)
    found = replace(found, loop=replace(found.loop, manipulated=type(found.loop.manipulated)()))
    factors = FACTORS.copy()
    factors[5] = 1e6
    y, _, totals, tuned = run(found, 0, factors)
    assert totals[lanes.AWAY, 5] == 1.0
    assert totals[lanes.AWAY, 4] == 0.0
    grid = sampled_grid(found.trial.duration, found.controller.sample_time, nominal(found).plant)
    exact = simulate(tuned[4], ground_of(found, 1).members, grid)
    assert np.abs(y[:, 4] - exact.y[0, 0]).max() <= 1e-9
    assert np.isfinite(y).all()


def test_sizes() -> None:
    """The next larger one is taken; none is large enough for every plant."""
    assert len(lanes.size_for(5)) == 5
    assert len(lanes.size_for(7)) == 8
    with pytest.raises(ValueError, match="order 1000"):
        lanes.size_for(1000)
