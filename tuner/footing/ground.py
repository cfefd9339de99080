"""What grading needs of a sheet and that no gain changes, kept from frame to frame."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from tuner.footing.chains import Chains, chains_of
from tuner.kernels import grades, lanes
from tuner.measure.runs import LAST_SHARE
from tuner.model.controller import Controller
from tuner.model.family import Member, family_of
from tuner.model.sheet import Sheet
from tuner.simulate.batch import fed_in, nominal
from tuner.simulate.grid import Grid, sampled_grid
from tuner.simulate.pace import paced
from tuner.simulate.traces import Array
from tuner.simulate.wiring import processes, wire

_CONTINUOUS = 1000
"""Steps of the coarser of two runs of a continuous controller."""


@dataclass(frozen=True, slots=True, eq=False)
class Ground:
    """What grading needs of a sheet and that no gain changes.

    Parameters
    ----------
    members : tuple of Member
    misses : ndarray of int, shape (p,)
        With each plant, how many tunings missed a limit with it first, lately: those that miss most are tried first,
        which changes how long grading takes and nothing else.
    speeds : tuple of Speed
    steps : tuple of float
        At which the law runs, for each speed.
    size : tuple of int
        See `lanes.size_for`.
    chains : tuple of Chains
    bounded : bool
        Whether bounds can be had at all: not where effort and measurement depend on each other in the same instant.
    """

    members: tuple[Member, ...]
    misses: NDArray[np.int64]
    speeds: tuple[grades.Speed, ...]
    steps: tuple[float, ...]
    size: lanes.Size
    chains: tuple[Chains, ...]
    bounded: bool


def ground_of(sheet: Sheet, size: int) -> Ground:
    """Return the ground of a sheet; the same for all gains, so it is kept.

    Raises
    ------
    LoopError
        When a plant of the family cannot be computed.
    """
    controller = sheet.controller
    bare = Controller(
        sample_time=controller.sample_time,
        delay_samples=controller.delay_samples,
        action=controller.action,
        measurement_filter=controller.measurement_filter,
        lead_lag=controller.lead_lag,
        notch=controller.notch,
        feedforward=controller.feedforward,
        reference_filter=controller.reference_filter,
        disturbance_feedforward=controller.disturbance_feedforward,
        gain_1=1.0,
    )
    return _ground(replace(sheet, controller=bare, limits=()), size)


@lru_cache(maxsize=8)
def _ground(sheet: Sheet, size: int) -> Ground:
    members = family_of(sheet, size)
    grids = _grids(sheet)
    order = wire(sheet, members, grids[0].step).c.shape[2]
    kernel = lanes.size_for(order)
    speeds = tuple(_speed(sheet, members, grid, len(kernel)) for grid in grids)
    bounded = bool(sheet.controller.sample_time) or not any(one.plant.d for one in processes(sheet, members))
    steps = tuple(grid.sample_time for grid in grids)
    misses = np.zeros(len(members), dtype=np.int64)
    return Ground(members, misses, speeds, steps, kernel, chains_of(sheet, size), bounded)


def _grids(sheet: Sheet) -> tuple[Grid, ...]:
    """Return the grid of the trial; two, the second twice as fine, for a continuous controller."""
    duration, step = sheet.trial.duration, sheet.controller.sample_time
    if step:
        return (sampled_grid(duration, step, nominal(sheet).plant),)
    return tuple(Grid(duration / count, 1, count + 1) for count in (_CONTINUOUS, 2 * _CONTINUOUS))


def _speed(sheet: Sheet, members: Sequence[Member], grid: Grid, size: int) -> grades.Speed:
    delay = sheet.controller.delay_samples if sheet.controller.sample_time else 0
    times = grid.times()
    tail = int(np.searchsorted(times, times[-1] - LAST_SHARE * (times[-1] - times[0])))
    pace = paced(wire(sheet, members, grid.step), grid, delay, size)
    return grades.Speed(*pace, _given(sheet, grid), grid.step, tail)


def _given(sheet: Sheet, grid: Grid) -> Array:
    """Return what the law is given in either run, see `lanes.run`; shape (2, 2, s)."""
    found = fed_in(sheet, grid)
    shares = found.asked / (sheet.trial.reference or 1.0)
    return np.ascontiguousarray(np.stack((found.effort, shares), axis=1))
