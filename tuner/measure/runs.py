"""The runs of a whole family on one grid, stacked, and where each of them ends."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tuner.measure.curve import Array, Indices
from tuner.simulate.traces import Trace

LAST_SHARE = 0.1
"""Share of a run, at its end, whose mean is the final value when there is no exact one."""


@dataclass(frozen=True, slots=True, eq=False)
class Runs:
    """Runs that share their grid.

    Parameters
    ----------
    members : ndarray of int, shape (m,)
        Which plants of the family they are.
    t : ndarray, shape (n,)
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
    y: Array
    u: Array
    saturated: Array
    final: Array
    astray: NDArray[np.bool_]


def stacked(traces: Sequence[Trace], exact: Sequence[float], stable: Sequence[bool]) -> Iterator[Runs]:
    """Return the runs of the stable plants, those with the same grid together; `exact` holds exact final values."""
    groups: dict[tuple[int, float], list[int]] = {}
    for index, trace in enumerate(traces):
        if stable[index]:
            groups.setdefault((len(trace.t), float(trace.t[-1])), []).append(index)
    for members in groups.values():
        yield _stack(np.array(members), [traces[k] for k in members], np.array([exact[k] for k in members]))


def _stack(members: Indices, traces: Sequence[Trace], exact: Array) -> Runs:
    t = traces[0].t
    y = np.stack([trace.y for trace in traces])
    linear = np.array([trace.linear for trace in traces])
    astray = ~linear & _runs_away(y, np.array([trace.r[-1] for trace in traces]))
    y = np.where(astray[:, None], 0.0, y)
    tail = y[:, t >= t[-1] - LAST_SHARE * (t[-1] - t[0])]
    return Runs(
        members=members,
        t=t,
        y=y,
        u=np.stack([trace.u for trace in traces]),
        saturated=np.array([trace.limited.mean() if trace.limited.size else 0.0 for trace in traces]),
        final=np.where(linear & np.isfinite(exact), exact, tail.mean(axis=1)),
        astray=astray,
    )


def _runs_away(y: Array, reference: Array) -> NDArray[np.bool_]:
    """Return which outputs are not finite, or end farther from the reference than they ever were and still leave."""
    error = np.abs(y - reference[:, None])
    end = error[:, -1]
    with np.errstate(invalid="ignore"):
        leaves: NDArray[np.bool_] = (
            (end > error[:, 0]) & (end >= error.max(axis=1)) & (end > 2.0 * error[:, y.shape[1] // 2])
        )
    broken: NDArray[np.bool_] = np.logical_not(np.isfinite(y).all(axis=1))
    return np.logical_or(broken, leaves)
