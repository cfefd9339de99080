"""The trial: a reference step and a disturbance step, each from rest, for every plant of a family at once."""

from collections.abc import Sequence

import numpy as np

from tuner.model.controller import Controller
from tuner.model.family import Member
from tuner.model.sheet import Sheet
from tuner.simulate.algebra import series
from tuner.simulate.batch import Runs, nominal, simulate
from tuner.simulate.continuous import AGREEMENT, simulate_continuous
from tuner.simulate.feedforward import left_out
from tuner.simulate.grid import Grid, sampled_grid
from tuner.simulate.linear import lag
from tuner.simulate.traces import Array, Trace, Traces


def run(sheet: Sheet, members: Sequence[Member]) -> tuple[Traces, ...]:
    """Return both runs of the trial for each member, noise off, in the order of the members.

    All have the same points in time. For a sampled controller the points lie between the samples as densely as it
    takes to see what the plant does there; for a continuous one they are the steps of the computation. At an instant,
    the output is that just before the effort jumps. A run that runs away is held at 1e12 times its natural size.

    Raises
    ------
    LoopError
        When a member cannot be computed, with the reason.
    """
    notes = _left_out(sheet)
    if sheet.controller.sample_time:
        grid = sampled_grid(sheet.trial.duration, sheet.controller.sample_time, nominal(sheet).plant)
        return _traces(sheet, simulate(sheet, members, grid), grid, notes)
    found = simulate_continuous(sheet, members)
    return _traces(sheet, found.runs, found.grid, (*notes, *_notes(sheet, found.reached)))


def _left_out(sheet: Sheet) -> tuple[str, ...]:
    """Say what the feedforwards cannot undo."""
    controller = sheet.controller
    if controller.feedforward is None and controller.disturbance_feedforward is None:
        return ()
    plant, path = nominal(sheet)
    return left_out(controller, series(lag(sheet.actuator.lag), plant), path)


def _traces(sheet: Sheet, runs: Runs, grid: Grid, notes: tuple[str, ...]) -> tuple[Traces, ...]:
    times = grid.times()
    at = np.arange(grid.samples, dtype=np.intp) * grid.steps
    r = np.full(grid.points, sheet.trial.reference), np.zeros(grid.points)
    u = _held(runs.u, grid, sheet.controller.delay_samples if sheet.controller.sample_time else 0)
    linear = np.asarray(~runs.limited.any(axis=-1)) & (sheet.sensor.resolution == 0.0)

    def trace(member: int, which: int) -> Trace:
        limited = runs.limited[member, which]
        return Trace(times, r[which], runs.y[member, which], u[member, which], at, limited, bool(linear[member, which]))

    return tuple(Traces(trace(member, 0), trace(member, 1), notes) for member in range(len(runs.y)))


def _held(u: Array, grid: Grid, delay: int) -> Array:
    """Return the effort that holds from each point on, computing delay included."""
    if delay:
        late = np.zeros_like(u)
        late[..., delay:] = u[..., : max(u.shape[-1] - delay, 0)]
        u = late
    return u if grid.steps == 1 else np.repeat(u, grid.steps, axis=-1)[..., : grid.points]


def kicks(controller: Controller) -> bool:
    """Return whether a reference step makes an impulse of the effort: an unfiltered derivative takes it as it is."""
    derives = controller.feedback and bool(controller.parallel().kd * controller.c)
    return derives and not (controller.sample_time or controller.filter_time or controller.reference_filter)


def _notes(sheet: Sheet, reached: bool) -> tuple[str, ...]:
    """Say what the trial of a continuous controller cannot vouch for."""
    notes = []
    controller = sheet.controller
    if kicks(controller):
        notes.append(
            "The unfiltered derivative of the reference step is an impulse: the first effort shown stands for it "
            "and has no size of its own."
        )
    if not reached:
        notes.append(
            "The curves of the continuous controller still changed in places by more than "
            f"{AGREEMENT:.2%} of the step when the computing step was halved for the last time."
        )
    return tuple(notes)
