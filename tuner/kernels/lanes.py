"""The sampled loop, compiled for many tunings of one plant side by side: one tuning in each lane of a block.

Loops over samples are plain for the reason given in `loop`. Inside, every loop runs along the lanes, whose number is a
constant: one instruction then computes several of them, which it can only do because all that changes lies in one flat
array and all that a lane brings in another, so that the compiler sees that they do not overlap.

The states of a plant are taken from sample to sample in one go; what its output is in between is read off the state
at the sample, see `Pace`. The control law is the same text as everywhere.
"""

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled_lanes
from tuner.law.pid import law

Array = NDArray[np.float64]
Integers = NDArray[np.int64]

LANES = 32
"""Tunings in a block."""

CONSTANTS = 19
"""Constants of the law, for each lane."""

SIZES = (1, 2, 3, 4, 5, 6, 8, 10, 12, 16, 24, 32, 48, 64, 96, 128)
"""Numbers of states for which there is a kernel of its own; a plant of another order takes the next larger one."""

TOTALS = 4
LIMITED, TRAVEL, PEAK, AWAY = range(TOTALS)
"""What a run counts along its samples: samples at a limit, movement and size of the effort, whether it ran away."""

LOOKS = 8
"""Samples after which it is looked whether lanes have run away; one that has starts anew, so that it stays finite."""

Size = tuple[int, ...]
"""As many numbers as a plant has states: a compiler knows the length of a tuple, and can then lay out every loop."""

_law = compiled_lanes(law)


def size_for(order: int) -> Size:
    """Return the size of the kernel for plants of an order.

    Raises
    ------
    ValueError
        When no kernel has so many states.
    """
    for size in SIZES:
        if size >= order:
            return (0,) * size
    raise ValueError(f"a plant of order {order} has more states than {SIZES[-1]}")


def rows(size: Size) -> int:
    """Return how many rows of lanes a run needs for its states."""
    return 2 * len(size) + 2 + 7 + 1 + TOTALS


def totals_from(size: Size) -> int:
    """Return at which number of a run's states its totals begin."""
    return (rows(size) - TOTALS) * LANES


@compiled_lanes
def _decide(size: Size, filters: Size, state: Array, constants: Array, asked: Array) -> None:
    """Let the law take its sample in every lane; `asked` holds reference, feedforward, and 1 where it counts."""
    kept = (2 * len(size) + 2) * LANES
    seen, totals = kept + 7 * LANES, kept + 8 * LANES
    for i in range(LANES):
        if len(filters) > 0:
            effort, integral, derivative, weighted, smooth, one, two, _, touched, _ = _law(
                asked[0], state[seen + i], asked[1], 0.0,
                state[kept + i], state[kept + LANES + i], state[kept + 2 * LANES + i], state[kept + 3 * LANES + i],
                state[kept + 4 * LANES + i], state[kept + 5 * LANES + i], state[kept + 6 * LANES + i], 0.0, 0.0, 0.0,
                constants[i], constants[LANES + i], constants[2 * LANES + i], constants[3 * LANES + i],
                constants[4 * LANES + i], constants[5 * LANES + i], constants[6 * LANES + i],
                constants[7 * LANES + i], constants[8 * LANES + i], constants[9 * LANES + i],
                constants[10 * LANES + i], constants[11 * LANES + i], constants[12 * LANES + i],
                constants[13 * LANES + i], constants[14 * LANES + i], constants[15 * LANES + i],
                constants[16 * LANES + i], constants[17 * LANES + i], constants[18 * LANES + i],
            )  # fmt: skip
            state[kept + 4 * LANES + i] = smooth
            state[kept + 5 * LANES + i] = one
            state[kept + 6 * LANES + i] = two
        else:
            effort, integral, derivative, weighted, smooth, one, two, _, touched, _ = _law(
                asked[0], state[seen + i], asked[1], 0.0,
                state[kept + i], state[kept + LANES + i], state[kept + 2 * LANES + i], state[kept + 3 * LANES + i],
                0.0, 0.0, 0.0, 0.0, 0.0, 0.0,
                constants[i], constants[LANES + i], constants[2 * LANES + i], constants[3 * LANES + i],
                constants[4 * LANES + i], constants[5 * LANES + i], constants[6 * LANES + i],
                constants[7 * LANES + i], constants[8 * LANES + i], constants[9 * LANES + i],
                constants[10 * LANES + i], 1.0, 1.0, 0.0, 0.0, 0.0, 0.0,
                constants[17 * LANES], constants[18 * LANES],
            )  # fmt: skip
        state[totals + LIMITED * LANES + i] += touched
        state[totals + TRAVEL * LANES + i] += abs(effort - state[kept + i]) * asked[2]
        state[totals + PEAK * LANES + i] = max(state[totals + PEAK * LANES + i], abs(effort) * asked[2])
        state[kept + i] = effort
        state[kept + LANES + i] = integral
        state[kept + 2 * LANES + i] = derivative
        state[kept + 3 * LANES + i] = weighted


@compiled_lanes
def _look(size: Size, state: Array, y: Array, at: int, ceiling: float) -> bool:
    """Mark lanes that have run away and let them start anew; return whether all have."""
    kept = (2 * len(size) + 2) * LANES
    away = kept + (8 + AWAY) * LANES
    fewest = 1.0
    for i in range(LANES):
        gone = max(abs(y[at + i]), abs(state[kept + i])) > ceiling
        state[away + i] = 1.0 if gone else state[away + i]
        fewest = min(fewest, state[away + i])
    for j in range(len(size) + 2):
        for i in range(LANES):
            state[j * LANES + i] = 0.0 if state[away + i] > 0.0 else state[j * LANES + i]
    return fewest > 0.0


@compiled_lanes
def run(  # noqa: C901, PLR0912, PLR0913, PLR0917 - the whole loop in one place, so that it can be read against the law
    size: Size,
    filters: Size,
    constants: Array,
    pace: Array,
    push: Array,
    timing: Integers,
    wanted: Array,
    feedforward: Array,
    y: Array,
    u: Array,
    state: Array,
) -> None:
    """Run one block from rest.

    Rows are multiplied out in three places rather than in a function of their own: with more than four states the
    compiler would not lay such a function into the loops, and then not along the lanes either.

    Parameters
    ----------
    size, filters : tuple of int
        As long as the plant has states, see `size_for`; and as long as the law has filters on its measurement, 0 or 1:
        without any its text is shorter.
    constants : ndarray, shape (19 lanes,)
        Constants of the law, those of one kind for all lanes together.
    pace, push : ndarray, shapes (1 + m + n, n + 2) and (3, 1 + m + n)
        See `Pace`: rows of the measurement, of the output at the m points of a sample, of the next state.
    timing : ndarray of int, shape (6,)
        Sample in which the disturbance arrives; whole samples from an effort to its effect; points; samples;
        points of a sample; samples whose effort is shown.
    wanted : ndarray, shape (5,)
        Reference and disturbance as deviations, resting measurement, resolution of the measurement (0 for none), and
        the ceiling of the absolute output and effort: a lane that passes it has run away. When all have, the run ends.
    feedforward : ndarray, shape (s,)
    y, u : ndarray, shapes (g lanes,) and (s lanes,)
        Output at the points and effort at the samples, written to.
    state : ndarray, shape (rows(size) lanes,)
        Written to; its last rows hold the totals.
    """
    n = len(size)
    late, now, ahead, kept = n * LANES, (n + 1) * LANES, (n + 2) * LANES, (2 * n + 2) * LANES
    seen = kept + 7 * LANES
    arrival, delay, points, samples, steps, shown = timing
    reference, disturbance, resting, quantum, ceiling = wanted
    asked = np.zeros(3)
    asked[0] = reference + resting
    state[:] = 0.0
    at = 0
    for k in range(samples):
        when = 0 if k < arrival else (1 if k == arrival else 2)
        constant = push[when, 0] * disturbance + resting
        for i in range(LANES):
            total = constant
            for c in range(n + 1):
                total += pace[0, c] * state[c * LANES + i]
            state[seen + i] = total
        if quantum > 0.0:
            for i in range(LANES):
                state[seen + i] = quantum * np.floor(state[seen + i] / quantum + 0.5)
        asked[1] = feedforward[k]
        asked[2] = 1.0 if k < shown else 0.0
        _decide(size, filters, state, constants, asked)
        for i in range(LANES):
            u[k * LANES + i] = state[kept + i]
        if k >= delay:
            for i in range(LANES):
                state[now + i] = u[(k - delay) * LANES + i]
        for j in range(min(steps, points - k * steps)):
            constant = push[when, 1 + j] * disturbance
            for i in range(LANES):
                total = constant
                for c in range(n + 2):
                    total += pace[1 + j, c] * state[c * LANES + i]
                y[at + i] = total
            at += LANES
        for j in range(n):
            constant = push[when, 1 + steps + j] * disturbance
            for i in range(LANES):
                total = constant
                for c in range(n + 2):
                    total += pace[1 + steps + j, c] * state[c * LANES + i]
                state[ahead + j * LANES + i] = total
        for i in range(n * LANES):
            state[i] = state[ahead + i]
        for i in range(LANES):
            state[late + i] = state[now + i]
        if k % LOOKS == LOOKS - 1 and _look(size, state, y, at - LANES, ceiling):
            break
