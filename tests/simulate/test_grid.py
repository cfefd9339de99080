"""The grid of a trial: dense enough to see, exact at samples, and refused where it would be endless."""

import numpy as np
import pytest

from tuner.errors import LoopError
from tuner.simulate.grid import MOST_POINTS, sampled_grid
from tuner.simulate.linear import Linear, from_zeros_poles

SLOW = from_zeros_poles((), (-1.0,), 1.0)


def _ringing(frequency: float) -> Linear:
    return from_zeros_poles((), (complex(-0.01, frequency), complex(-0.01, -frequency)), 1.0)


def test_few_samples_get_steps_between_them() -> None:
    """Twenty samples still make a thousand points."""
    grid = sampled_grid(10.0, 0.5, SLOW)
    assert (grid.steps, grid.points, grid.samples) == (50, 1001, 21)


def test_many_samples_need_no_steps() -> None:
    """Two thousand samples are points enough."""
    assert sampled_grid(10.0, 0.005, SLOW).steps == 1


def test_a_plant_that_moves_within_a_sample_shows() -> None:
    """A quarter of its time constant is a step, however many samples; what settles within a sample needs no more."""
    for pole, steps in ((0.2, 1), (1.9, 8), (4.0, 16), (1e6, 16)):
        assert sampled_grid(1200.0, 1.0, from_zeros_poles((), (-pole,), 1.0)).steps == steps


def test_a_ringing_plant_shows() -> None:
    """A plant that rings far above the sampling frequency has twenty points in a cycle, as long as there is room."""
    grid = sampled_grid(10.0, 0.01, _ringing(300.0))
    assert grid.step <= 2.0 * np.pi / 300.0 / 20.0
    assert sampled_grid(10.0, 0.01, _ringing(1e7)).points <= MOST_POINTS + 1


@pytest.mark.parametrize(("duration", "sample_time"), [(240.0, 0.3), (1.0, 0.1), (0.7, 0.1), (5.0, 7.0), (1e6, 333.0)])
def test_samples_lie_on_points_and_the_run_ends_in_time(duration: float, sample_time: float) -> None:
    """Sample k is at k sample times exactly, the last point at or within a step before the end."""
    grid = sampled_grid(duration, sample_time, SLOW)
    times = grid.times()
    assert len(times) == grid.points
    assert (times[:: grid.steps] == np.arange(grid.samples) * sample_time).all()
    assert duration - grid.step < times[-1] * (1 + 1e-12)
    assert times[-1] <= duration * (1.0 + 1e-12)


def test_an_endless_trial_is_refused() -> None:
    """Too many samples are refused in one sentence."""
    with pytest.raises(LoopError) as caught:
        sampled_grid(1000.0, 1e-3, SLOW)
    assert str(caught.value) == (
        "the trial would take 1000000 samples, more than 200000: shorten trial.duration or lengthen "
        "controller.sample_time"
    )
