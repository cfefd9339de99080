"""Trials of a continuous controller: the sampled law at a step that is halved until the answer no longer depends on it.

Two steps, one half of the other, extrapolate to none at all, for the error of the sampled law is proportional to its
step (Richardson's extrapolation). Two such extrapolations, from three steps, tell how good the better one is.
"""

import math
from collections.abc import Sequence
from dataclasses import replace
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.errors import LoopError
from tuner.model.family import Member
from tuner.model.sheet import Sheet
from tuner.simulate.batch import Runs, simulate
from tuner.simulate.discrete import chain
from tuner.simulate.grid import Grid
from tuner.simulate.traces import Array
from tuner.simulate.wiring import Process, processes

FEWEST, MOST = 500, 64_000
"""Steps of the coarsest run, and of the finest at most."""

WORK = 800_000
"""Steps of the finest run at most, summed over the members of a family."""

CHATTERING = 8_000
"""Steps of the finest run at most with a resolution, whose chatter has no limit to converge to."""

AGREEMENT = 5e-4
"""Extrapolated runs differ by this share of the step at most; the finer one then errs by about a third of it."""

_FAR_AWAY = 100.0
"""A run that has grown to this many times the step is unstable, and its error no longer counts."""


class Extrapolated(NamedTuple):
    """Runs at the points of a grid, and whether their accuracy was reached."""

    runs: Runs
    grid: Grid
    reached: bool


def simulate_continuous(sheet: Sheet, members: Sequence[Member]) -> Extrapolated:
    """Run the trial of a continuous controller for every member.

    Raises
    ------
    LoopError
        When a member cannot be computed, or its loop has no answer.
    """
    family = processes(sheet, members)
    gains, steps_show = [direct_gain(sheet, process) for process in family], _steps_show(sheet, family)
    fewest = _fewest(sheet)
    grid = Grid(sheet.trial.duration / fewest, 1, fewest + 1)
    middle_grid = _halved(grid)
    coarse, middle = _run(sheet, members, grid, gains), _run(sheet, members, middle_grid, gains)
    rough = _extrapolated(sheet, coarse, middle, any(gains))
    while True:
        fine_grid = _halved(middle_grid)
        fine = _run(sheet, members, fine_grid, gains)
        better = _extrapolated(sheet, middle, fine, any(gains))
        reached = _agree(sheet, rough.y, better.y[..., ::2])
        reached = reached and (not steps_show or _agree(sheet, middle.y, fine.y[..., ::2]))
        if reached or 2 * fine_grid.points > _most(sheet, members):
            if not any(gains):
                better.u[:, 0, 0] = _kicked(sheet, better.u[:, 0, 0], fine_grid.sample_time)
            return Extrapolated(better, middle_grid, reached)
        middle, rough, middle_grid = fine, better, fine_grid


def _steps_show(sheet: Sheet, family: Sequence[Process]) -> bool:
    """Return whether the output shows the steps of the effort: two runs that agree may then both be off."""
    return not sheet.actuator.lag and any(one.plant.d and one.plant.dead_time for one in family)


def _fewest(sheet: Sheet) -> int:
    """Return the steps of the coarsest run: some ten for each cycle of the notch, at least."""
    notch = sheet.controller.notch
    wanted = math.ceil(2.0 * sheet.trial.duration * notch.frequency) if notch else 0
    if notch and wanted > MOST // 4:
        raise LoopError(
            f"the notch at {notch.frequency:g} rad per time unit is too fast for a trial of {sheet.trial.duration:g}: "
            "shorten trial.duration"
        )
    return max(FEWEST, wanted)


def _halved(grid: Grid) -> Grid:
    return Grid(grid.sample_time / 2.0, 1, 2 * grid.points - 1)


def _most(sheet: Sheet, members: Sequence[Member]) -> int:
    return CHATTERING if sheet.sensor.resolution else min(MOST, WORK // len(members))


def direct_gain(sheet: Sheet, process: Process) -> float:
    """Return the loop gain at infinite frequency when no dead time is in the loop, else 0.

    It is what makes effort and measurement depend on each other in the same instant: a plant with a direct term, or an
    unfiltered derivative on a plant that is a single integrator at high frequency.

    Raises
    ------
    LoopError
        When the loop has no answer: the gain is infinite, or -1 or less.
    """
    if not sheet.controller.feedback or process.plant.dead_time:
        return 0.0
    way = chain(process.plant, sheet.actuator.lag, sheet.sensor.lag)
    filtered = 1 if sheet.controller.measurement_filter else 0
    led = sheet.controller.lead_lag
    lags = way.order - len(way.zeros) + filtered + (1 if led and not led.lead else 0)
    gains, time = sheet.controller.parallel(), sheet.controller.filter_time
    slope = gains.kd if time == 0.0 else 0.0
    if slope and lags == 0:
        raise LoopError(
            "an unfiltered derivative acts on a plant with a direct term, so the effort would be infinite: "
            "expected controller.filter_time above 0"
        )
    if lags > (1 if slope else 0):
        return 0.0
    proportional = gains.kp + (gains.kd / time if time else 0.0)
    gain = (
        sheet.controller.sign * way.gain * (slope or proportional) * (led.lead / led.lag if led and led.lead else 1.0)
    )
    return _checked_gain(gain / sheet.controller.measurement_filter if filtered else gain, filtered > 0)


def _checked_gain(gain: float, filtered: bool) -> float:
    if gain <= -1.0:
        raise LoopError(
            f"effort and measurement depend on each other in the same instant with a loop gain of {gain:g}; "
            "at -1 or less such a loop has no answer"
        )
    if not filtered:
        return gain
    if gain < 1.0:
        return 0.0
    raise LoopError(
        f"an unfiltered derivative acts on a plant with a direct term through the measurement filter, with a loop "
        f"gain of {gain:g} at infinite frequency, which is not simulated from 1 upwards: expected "
        "controller.filter_time above 0"
    )


def _run(sheet: Sheet, members: Sequence[Member], grid: Grid, gains: Sequence[float]) -> Runs:
    """Run at one step.

    Sampling reads the measurement before the effort of the same instant acts. A measurement filter of one direct gain
    times the step makes up for it: a loop of that gain then settles within one sample at the value it has at once.

    A wind-up time below the step would lead the integral beyond where it belongs, and below half the step ever farther
    away: it counts as one step, which takes the integral all the way in one sample.
    """
    windup_time = sheet.controller.windup_time
    if windup_time is not None and windup_time < grid.sample_time:
        sheet = replace(sheet, controller=replace(sheet.controller, windup_time=grid.sample_time))
    if not any(gains):
        return simulate(sheet, members, grid)
    filter_time = sheet.controller.measurement_filter
    return simulate(sheet, members, grid, [filter_time or gain * grid.sample_time for gain in gains])


def _scales(sheet: Sheet, y: Array) -> tuple[Array, Array]:
    """Return the size of each run, shape (p, 2, 1), and at each point the largest so far, shape of `y`.

    The size is the reference step, or else how far the output moved in the first half.
    """
    moved = np.maximum.accumulate(np.abs(y), axis=-1)
    size = moved[..., moved.shape[-1] // 2, None].copy()
    if sheet.trial.reference:
        size[:, 0] = abs(sheet.trial.reference)
    return size, np.maximum(moved, size)


def _agree(sheet: Sheet, coarse: Array, fine: Array) -> bool:
    size, scales = _scales(sheet, fine)
    allowed = np.maximum(AGREEMENT * scales, 2.0 * sheet.sensor.resolution)
    far = scales > _FAR_AWAY * size
    # The size of the disturbance run is not known beforehand; where the reference run is far away, so is this one.
    far[:, 1] |= far[:, 0]
    return bool(((np.abs(fine - coarse) <= allowed) | far).all())


def _extrapolated(sheet: Sheet, coarse: Runs, fine: Runs, algebraic: bool) -> Runs:
    _, scales = _scales(sheet, fine.y[..., ::2])
    y = _beyond(coarse.y, fine.y[..., ::2], scales)
    u = _effort(coarse.u, fine.u[..., ::2], fine.limited)
    if algebraic:
        # A loop of direct gain settles within the first step, so the coarse run knows nothing before its second.
        y[..., 1] = fine.y[..., 2] + (fine.y[..., 4] - coarse.y[..., 2])
        u[..., 0] = _start(coarse.u, fine.u, fine.limited)
    return Runs(y, u, fine.limited[..., ::2])


def _beyond(coarse: Array, fine: Array, scales: Array) -> Array:
    """Extrapolate where both runs are about the same, and take the finer one elsewhere."""
    return np.where(np.abs(fine - coarse) <= 0.1 * scales, 2.0 * fine - coarse, fine)


def _effort(coarse: Array, fine: Array, limited: NDArray[np.bool_]) -> Array:
    """Extrapolate the effort of runs that met no limit; the first value, which may be an impulse, is left."""
    free = ~limited.any(axis=-1, keepdims=True)
    u = np.where(free, 2.0 * fine - coarse, fine)
    u[..., 0] = fine[..., 0]
    return np.asarray(u)


def _kicked(sheet: Sheet, first: Array, step: float) -> Array:
    """Return the effort just after a reference step with all of the kick that a filtered derivative gives.

    That is kd c r / Tf, of which a backward difference over a step h shows kd c r / (Tf + h) alone.
    """
    controller, limits, time = sheet.controller, sheet.loop.manipulated, sheet.controller.filter_time
    if not controller.feedback or not time or limits.rate is not None or controller.reference_filter:
        return first
    whole = controller.sign * controller.parallel().kd * controller.c * sheet.trial.reference / time
    low = -np.inf if limits.low is None else limits.low - limits.resting
    high = np.inf if limits.high is None else limits.high - limits.resting
    return np.clip(first + whole * step / (time + step), low, high)


def _start(coarse: Array, fine: Array, limited: NDArray[np.bool_]) -> Array:
    """Return the effort just after time 0: that of the next steps led back by a parabola, where no limit was met."""

    def led_back(u: Array) -> Array:
        return np.asarray(3.0 * (u[..., 1] - u[..., 2]) + u[..., 3])

    return np.where(limited.any(axis=-1), fine[..., 1], 2.0 * led_back(fine) - led_back(coarse))
