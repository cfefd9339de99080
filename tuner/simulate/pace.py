"""A family taken from sample to sample in one go: what `kernels.lanes` multiplies the states with."""

from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.simulate.grid import Grid
from tuner.simulate.traces import Array
from tuner.simulate.wiring import Wired


class Pace(NamedTuple):
    """A family of p plants over one sample of m points, n states.

    During sample k the effort that acts is a = u[k - q - 1] up to some point and b = u[k - q] from there on, q being
    the whole samples of dead time. All that happens until the next sample is a combination of the state at the sample,
    of a and b, and of what the disturbance adds.

    Parameters
    ----------
    rows : ndarray, shape (p, 1 + m + n, n + 2)
        Rows of the measurement, of the output at each point, of the next state; columns: states, a, b.
    push : ndarray, shape (p, 3, 1 + m + n)
        What a unit disturbance adds to each row: in the samples before it arrives, when it arrives, and after.
    timing : ndarray of int, shape (p, 6)
        Sample in which the disturbance arrives, q, points of the run, its samples, points of a sample, and the samples
        whose effort is shown.
    """

    rows: Array
    push: Array
    timing: NDArray[np.int64]


def paced(wired: Wired, grid: Grid, delay_samples: int, size: int) -> Pace:
    """Return a family over whole samples, its states filled up to `size` with ones that stay zero.

    Parameters
    ----------
    wired : Wired
        Discretised over `grid.step`.
    delay_samples : int
        Computing delay.
    size : int
        At least the number of states.
    """
    count, order = wired.c.shape[0], wired.c.shape[2]
    late = wired.delay[:, 0] + delay_samples * grid.steps
    whole, first_new = np.divmod(late, grid.steps)
    arrival, arrives = np.divmod(wired.delay[:, 1], grid.steps)
    own, push = _composed(wired, grid.steps, first_new, arrives)
    rows = np.zeros((count, 1 + grid.steps + size, size + 2))
    filled = np.zeros((count, 3, 1 + grid.steps + size))
    used = 1 + grid.steps + order
    rows[:, :used, :order], rows[:, :used, size:] = own[..., :order], own[..., order:]
    filled[..., :used] = push
    same = np.ones(count, dtype=np.int64)
    shown = max(grid.samples - delay_samples, 0)
    timing = np.stack(
        (arrival, whole, same * grid.points, same * grid.samples, same * grid.steps, same * shown), axis=1
    )
    return Pace(rows, filled, timing)


def _composed(
    wired: Wired, steps: int, first_new: NDArray[np.int64], arrives: NDArray[np.int64]
) -> tuple[Array, Array]:
    """Return the rows, shape (p, 1 + m + n, n + 2), and what the disturbance adds, shape (p, 3, 1 + m + n)."""
    count, order = wired.c.shape[0], wired.c.shape[2]
    a, b = np.zeros((count, order + 5)), np.zeros((count, order + 5))
    a[:, order], b[:, order + 1] = 1.0, 1.0
    # Columns: states, a, b, and the disturbance before, in, and after the sample in which it arrives.
    state = np.zeros((count, order, order + 5))
    state[:, np.arange(order), np.arange(order)] = 1.0
    old_u, old_d = a, _disturbance(a.shape, order, arrives, -1)
    out = [_output(wired, 1, state, old_u, old_d)]
    for j in range(steps):
        out.append(_output(wired, 0, state, old_u, old_d))
        new_u = np.where((j >= first_new)[:, None], b, a)
        new_d = _disturbance(a.shape, order, arrives, j)
        held = wired.held
        change = held.growth @ state + held.old[..., :1] * old_u[:, None] + held.new[..., :1] * new_u[:, None]
        change += held.old[..., 1:] * old_d[:, None] + held.new[..., 1:] * new_d[:, None]
        state = state + change
        old_u, old_d = new_u, new_d
    rows = np.concatenate((np.stack(out, axis=1), state), axis=1)
    return rows[..., : order + 2], np.moveaxis(rows[..., order + 2 :], -1, 1)


def _disturbance(shape: tuple[int, ...], order: int, arrives: NDArray[np.int64], step: int) -> Array:
    """Return the unit disturbance that acts from a step of the sample on, as a row; -1 is the step before it."""
    row = np.zeros(shape)
    row[:, order + 3] = step >= arrives
    row[:, order + 4] = 1.0
    return row


def _output(wired: Wired, which: int, state: Array, effort: Array, disturbance: Array) -> Array:
    """Return the output or the measurement as a row, just before the inputs jump."""
    row: Array = (wired.c[:, which, None] @ state)[:, 0]
    return row + wired.direct[:, which, :1] * effort + wired.direct[:, which, 1:] * disturbance
