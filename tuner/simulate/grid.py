"""The grid of a trial: instants fine enough to show what happens between samples."""

import math
from typing import NamedTuple

import numpy as np

from tuner.errors import LoopError
from tuner.simulate.linear import Linear
from tuner.simulate.traces import Array

LEAST_POINTS = 1000
"""Points of a run, at least, however few samples it has."""

MOST_POINTS = 20_000
"""Points that steps between samples may make; more samples than that are still all shown."""

MOST_SAMPLES = 200_000
"""Samples that a run may take."""

_POINTS_A_CYCLE = 20

_STEADY = 0.25
"""Part of its fastest time constant in which a plant moves evenly enough for what is read between points."""

_SETTLED = 4.0
"""Time constants after which a mode has settled; faster ones within a sample need no more steps."""

_OSCILLATING = 0.7
_ROUNDING = 1e-9


class Grid(NamedTuple):
    """Points of a run: `steps` between samples, `points` in all, the first at time 0, none after the duration."""

    sample_time: float
    steps: int
    points: int

    @property
    def step(self) -> float:
        """Time between points."""
        return self.sample_time / self.steps

    @property
    def samples(self) -> int:
        """Samples that fall on points."""
        return (self.points - 1) // self.steps + 1

    def times(self) -> Array:
        """Return the time of every point; sample k is at k sample times exactly."""
        index = np.arange(self.points)
        return np.asarray((index // self.steps) * self.sample_time + (index % self.steps) * self.step, dtype=float)


def sampled_grid(duration: float, sample_time: float, plant: Linear) -> Grid:
    """Choose the steps between samples, so that a run has points enough and all moves of the plant show.

    Raises
    ------
    LoopError
        When the run would take too many samples.
    """
    ratio = duration / sample_time
    if ratio > MOST_SAMPLES:
        raise LoopError(
            f"the trial would take {ratio:.0f} samples, more than {MOST_SAMPLES}: "
            "shorten trial.duration or lengthen controller.sample_time"
        )
    turns = sample_time * _POINTS_A_CYCLE * fastest_oscillation(plant) / (2.0 * math.pi)
    moves = min(sample_time * float(np.abs(plant.poles).max(initial=0.0)), _SETTLED) / _STEADY
    wanted = max(LEAST_POINTS / ratio, turns, moves)
    allowed = max(MOST_POINTS / ratio, 1.0)
    steps = max(1, math.ceil(min(wanted, allowed) - _ROUNDING))
    return Grid(sample_time, steps, math.floor(ratio * steps + _ROUNDING) + 1)


def fastest_oscillation(plant: Linear) -> float:
    """Return the highest frequency of the poles that visibly oscillate, rad per time unit; 0 when none does."""
    oscillating = [abs(pole.imag) for pole in plant.poles if -pole.real < _OSCILLATING * abs(pole)]
    return max(oscillating, default=0.0)
