"""Both runs of a trial for many plants in one call of the loop kernel."""

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from tuner.errors import LoopError
from tuner.kernels import loop as kernel
from tuner.law.constants import NO_LEAD, NO_NOTCH, Constants, NotchCoefficients, bake, lead_lag, notch
from tuner.model.controller import Controller, Gains
from tuner.model.drifts import parameters_of
from tuner.model.family import Member
from tuner.model.sheet import Sheet
from tuner.simulate.feeding import Fed, fed, feeds_of
from tuner.simulate.grid import Grid
from tuner.simulate.traces import Array
from tuner.simulate.wiring import Process, processes, wire

RUNAWAY = 1e12
"""An output or effort this many times its natural size has run away; it is held from there on."""

_LARGEST = 1e150
"""No ceiling is above this, so that the square of a signal is still a number."""

_NO_NOISE = np.zeros((0, 0))


@dataclass(frozen=True, slots=True, eq=False)
class Runs:
    """What p plants did in two runs each, the reference run first.

    Parameters
    ----------
    y : ndarray, shape (p, 2, g)
        Output at the points of the grid.
    u : ndarray, shape (p, 2, s)
        Effort that the law asks for at each sample, after its limits.
    limited : ndarray of bool, shape (p, 2, s)
        Whether a limit changed it.
    """

    y: Array
    u: Array
    limited: NDArray[np.bool_]


def simulate(
    sheet: Sheet,
    members: Sequence[Member],
    grid: Grid,
    softening: Sequence[float] | None = None,
    *,
    sensed: bool = False,
) -> Runs:
    """Run the trial of every member from rest, noise off.

    Parameters
    ----------
    grid : Grid
        Its sample time is what the law runs at, whatever the sheet's.
    softening : sequence of float, shape (p,), or None
        A measurement filter time for each member, in place of none; may be negative, see `continuous`.
    sensed : bool
        Let `Runs.y` be what the sensor makes of the output, before its resolution, rather than the output.

    Raises
    ------
    LoopError
        When a member cannot be computed, with the reason.
    """
    wired = wire(sheet, members, grid.step)
    count = len(members)
    times = softening or [sheet.controller.measurement_filter] * count
    constants = np.repeat(np.array([law_constants(sheet, grid.sample_time, time) for time in times]), 2, axis=0)
    given = fed_in(sheet, grid)
    feedforward = np.tile(given.effort, (count, 1))
    delay = wired.delay.copy()
    if sheet.controller.sample_time:
        delay[:, 0] += sheet.controller.delay_samples * grid.steps
    y, u = np.empty((2 * count, grid.points)), np.empty((2 * count, grid.samples))
    limited = np.empty_like(u)
    kernel.run(
        constants,
        np.repeat(np.arange(count), 2),
        *wired.held,
        _rows(wired.c, sensed=sensed),
        _rows(wired.direct, sensed=sensed),
        delay,
        grid.steps,
        np.tile(given.asked, (count, 1)),
        np.tile([0.0, float(sheet.trial.disturbance)], count),
        feedforward,
        _NO_NOISE,
        float(sheet.sensor.resolution),
        _ceilings(sheet, processes(sheet, members), constants, feedforward),
        y,
        u,
        limited,
    )
    return Runs(y.reshape(count, 2, -1), u.reshape(count, 2, -1), limited.reshape(count, 2, -1) > 0.0)


def _rows(both: Array, *, sensed: bool) -> Array:
    """Return the rows of output and sensor, or that of the sensor twice."""
    return np.ascontiguousarray(both[:, [1, 1]]) if sensed else both


def law_constants(sheet: Sheet, sample_time: float, measurement_filter: float) -> Constants:
    """Return the constants of the law of a sheet at a sample time; without feedback its gains are zero.

    Raises
    ------
    LoopError
        When the notch lies above half the sampling frequency.
    """
    controller, effort = sheet.controller, sheet.loop.manipulated
    gains = controller.parallel() if controller.feedback else Gains(0.0, 0.0, 0.0)
    return bake(
        sample_time=sample_time,
        kp=gains.kp,
        ki=gains.ki,
        kd=gains.kd,
        filter_time=controller.filter_time,
        windup_time=controller.windup_time if controller.feedback else None,
        b=controller.b,
        c=controller.c,
        action=controller.sign,
        low=effort.low,
        high=effort.high,
        rate=effort.rate,
        measurement_filter_time=measurement_filter,
        lead_section=lead_lag(sample_time, controller.lead_lag.lead, controller.lead_lag.lag)
        if controller.lead_lag
        else NO_LEAD,
        notch_section=_notch(controller, sample_time),
        resting_measurement=sheet.loop.controlled.resting,
        resting_effort=effort.resting,
    )


def nominal_values(sheet: Sheet) -> dict[str, float]:
    """Return the nominal value of every plant parameter."""
    return {parameter.name: parameter.value for parameter in parameters_of(sheet.plant)}


def nominal(sheet: Sheet) -> Process:
    """Return the nominal plant, and the path of a measured disturbance where there is one."""
    return processes(sheet, (Member("nominal", nominal_values(sheet)),))[0]


def _notch(controller: Controller, sample_time: float) -> NotchCoefficients:
    asked = controller.notch
    if asked is None:
        return NO_NOTCH
    if not asked.frequency * sample_time < math.pi:
        raise LoopError(
            f"the notch at {asked.frequency:g} rad per time unit lies above half the sampling frequency, "
            f"{math.pi / sample_time:g}"
        )
    return notch(sample_time, asked.frequency, asked.depth, asked.width)


def fed_in(sheet: Sheet, grid: Grid) -> Fed:
    """Return what the law is given in both runs; the same for all gains of the law, so it is kept.

    Feedforward is designed for the nominal plant, whatever member it then meets.
    """
    controller = sheet.controller
    bare = Controller(
        feedforward=controller.feedforward,
        reference_filter=controller.reference_filter,
        disturbance_feedforward=controller.disturbance_feedforward,
    )
    return _fed(replace(sheet, controller=bare, limits=()), grid.sample_time, grid.samples)


@lru_cache(maxsize=16)
def _fed(sheet: Sheet, sample_time: float, samples: int) -> Fed:
    return fed(sheet, feeds_of(sheet, nominal(sheet), sample_time), samples)


def _ceilings(sheet: Sheet, found: Sequence[Process], constants: Array, feedforward: Array) -> Array:
    """Return where output and effort of each run have run away, shape (2 p, 2), from the sizes of its steps."""
    trial = sheet.trial
    rises = _rises(tuple(found), trial.duration)
    y = np.array([[abs(trial.reference), abs(trial.disturbance) * rise] for rise in rises]).reshape(-1)
    with np.errstate(over="ignore"):
        gain = np.abs(constants[:, [0, 1, 2]]) @ (1.0, feedforward.shape[1], 1.0)
        effort = gain * y + np.abs(feedforward).max(axis=1) + np.tile([0.0, abs(trial.disturbance)], len(found))
        sizes = np.column_stack((y, effort))
        return np.minimum(RUNAWAY * np.where(sizes > 0.0, sizes, 1.0), _LARGEST)


@lru_cache(maxsize=64)
def _rises(found: tuple[Process, ...], duration: float) -> tuple[float, ...]:
    """Return about how far a unit disturbance takes the output in a trial; the same for all gains, so it is kept."""
    frequency = np.array([2j * math.pi / duration])
    paths = [process.disturbance_path or process.plant for process in found]
    return tuple(min(abs(complex(path.response(frequency)[0])), 1e12) for path in paths)
