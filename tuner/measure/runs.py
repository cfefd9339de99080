"""The runs of a whole family on one grid, stacked, and where each of them ends."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tuner.measure.curve import Array, Indices
from tuner.simulate.traces import Trace

LAST_SHARE = 0.1
"""Share of a run, at its end, whose mean is the final value when there is no exact one."""

FAR_AWAY = 1e9
"""An output so many times the reference step has run away, wherever it is held then."""


@dataclass(frozen=True, slots=True, eq=False)
class Runs:
    """Runs that share their grid.

    Parameters
    ----------
    members : ndarray of int, shape (m,)
        Which plants of the family they are.
    t : ndarray, shape (n,)
    block : int
        Steps of `t` between samples, where a held effort jumps; 1 for a continuous controller.
    y, u : ndarray, shape (m, n)
        Output and effort, deviations.
    saturated : ndarray, shape (m,)
        Share of the samples at a limit.
    final : ndarray, shape (m,)
        Final value of the output: exact where the run is linear, else the mean of the last tenth.
    astray : ndarray of bool, shape (m,)
        Whether limits hold the effort while the output runs away.
    """

    members: Indices
    t: Array
    block: int
    y: Array
    u: Array
    saturated: Array
    final: Array
    astray: NDArray[np.bool_]


def stacked(
    traces: Sequence[Trace], exact: Sequence[float], stable: Sequence[bool], size: float, bounded: Sequence[bool]
) -> Iterator[Runs]:
    """Return the runs of the stable plants, those with the same grid together.

    Parameters
    ----------
    exact : sequence of float
        Exact final values, NaN where there is none.
    size : float
        What an output is like in size, to tell a large one from one that has run away.
    bounded : sequence of bool
        Whether limits of the effort bound each plant's output: it may still rise at the end, but cannot run away.
    """
    groups: dict[tuple[int, float], list[int]] = {}
    for index, trace in enumerate(traces):
        if stable[index]:
            groups.setdefault((len(trace.t), float(trace.t[-1])), []).append(index)
    for members in groups.values():
        free = np.array([not bounded[k] for k in members])
        yield _stack(np.array(members), [traces[k] for k in members], np.array([exact[k] for k in members]), size, free)


def _stack(members: Indices, traces: Sequence[Trace], exact: Array, size: float, free: NDArray[np.bool_]) -> Runs:
    t, at = traces[0].t, traces[0].sample_index
    y = np.stack([trace.y for trace in traces])
    linear = np.array([trace.linear for trace in traces])
    astray = free & np.logical_not(linear) & _runs_away(y, np.array([trace.r[-1] for trace in traces]), size)
    if astray.any():
        y[astray] = 0.0
    tail = y[:, int(np.searchsorted(t, t[-1] - LAST_SHARE * (t[-1] - t[0]))) :]
    return Runs(
        members=members,
        t=t,
        block=int(at[1] - at[0]) if len(at) > 1 else 1,
        y=y,
        u=np.stack([trace.u for trace in traces]),
        saturated=np.array([np.count_nonzero(trace.limited) / max(trace.limited.size, 1) for trace in traces]),
        final=np.where(linear & np.isfinite(exact), exact, tail.mean(axis=1)),
        astray=astray,
    )


def _runs_away(y: Array, reference: Array, size: float) -> NDArray[np.bool_]:
    """Return which outputs are far out of bounds, or end farther from the reference than ever and still leave it."""
    end = np.abs(y[:, -1] - reference)
    away: NDArray[np.bool_] = np.logical_not(end <= FAR_AWAY * size)
    leaving = (end > np.abs(y[:, 0] - reference)) & (end > 2.0 * np.abs(y[:, y.shape[1] // 2] - reference))
    for row in np.flatnonzero(leaving):
        away[row] |= end[row] >= np.abs(y[row] - reference[row]).max()
    return away
