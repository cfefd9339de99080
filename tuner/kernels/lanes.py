"""The sampled loop, compiled for many tunings of one plant side by side: one tuning in each lane of a block.

Loops over samples are plain for the reason given in `loop`. Inside, every loop runs along the lanes, whose number is a
constant: one instruction then computes several of them, which it can only do because a loop touches few arrays, each
flat, so that the compiler sees (or asks once before the loop) that they do not overlap. No loop only copies: numbers
would go one by one, and the processor waits where it then reads them together.

The states of a plant are taken from sample to sample in one go; what its output is in between is read off the state
at the sample, see `Pace`. The control law is the same text as everywhere.
"""

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled, compiled_lanes
from tuner.law.pid import law

Array = NDArray[np.float64]
Integers = NDArray[np.int64]

LANES = 32
"""Tunings in a block."""

CONSTANTS = 22
"""Constants of the law, for each lane."""

SIZES = (1, 2, 3, 4, 5, 6, 8, 10, 12, 16, 24, 32, 48, 64, 96, 128)
"""Numbers of states for which there is a kernel of its own; a plant of another order takes the next larger one."""

FUSED = 6
"""States up to which a lane takes all its next states in one go; with more of them rows go one by one."""

PLACE = 2**40 - 1
"""A mask that changes no place in an array, and tells the compiler that it is not counted from the end."""

TOTALS = 4
LIMITED, TRAVEL, PEAK, AWAY = range(TOTALS)
"""What a run counts along its samples: samples at a limit, movement and size of the effort, whether it ran away."""

LOOKS = 8
"""Samples after which it is looked whether lanes have run away; one that has starts anew, so that it stays finite."""

KEPT = 8
"""States of the law that a run keeps."""

_ASKED = 5
_CONSTANT, _FEEDFORWARD, _COUNTS, _REFERENCE, _QUANTUM = range(_ASKED)
"""What a sample brings; the row of the measurement follows."""

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


@compiled
def rows(size: Size) -> int:
    """Return how many rows of lanes a run needs: states, next states, the effort that acts, the law, totals."""
    return 2 * len(size) + 1 + KEPT + TOTALS


@compiled
def plan(size: Size) -> int:
    """Return how many numbers a run needs for what a sample brings and for the rows of the plant."""
    n = len(size)
    return _ASKED + n + 1 + n * (n + 3)


@compiled
def totals_from(size: Size) -> int:
    """Return at which number of a run's states its totals begin."""
    return (rows(size) - TOTALS) * LANES


@compiled_lanes
def _decide(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    size: Size, rich: Size, state: Array, constants: Array, asked: Array, efforts: Array, now: int
) -> None:
    """Let every lane measure and its law take a sample; its effort is noted from place `now` on as well."""
    n = len(size)
    acts, kept, totals = 2 * n * LANES, (2 * n + 1) * LANES, (2 * n + 1 + KEPT) * LANES
    for i in range(LANES):
        seen = asked[_CONSTANT] + asked[_ASKED + n] * state[acts + i]
        for c in range(n):
            seen += asked[_ASKED + c] * state[c * LANES + i]
        before = state[kept + i]
        if len(rich) > 0:
            quantum = asked[_QUANTUM] if asked[_QUANTUM] > 0.0 else 1.0
            seen = quantum * np.floor(seen / quantum + 0.5) if asked[_QUANTUM] > 0.0 else seen
            effort, integral, derivative, weighted, smooth, led, one, two, _, touched, _ = _law(
                asked[_REFERENCE], seen, asked[_FEEDFORWARD], 0.0,
                before, state[kept + LANES + i], state[kept + 2 * LANES + i], state[kept + 3 * LANES + i],
                state[kept + 4 * LANES + i], state[kept + 5 * LANES + i], state[kept + 6 * LANES + i],
                state[kept + 7 * LANES + i], 0.0, 0.0, 0.0,
                constants[i], constants[LANES + i], constants[2 * LANES + i], constants[3 * LANES + i],
                constants[4 * LANES + i], constants[5 * LANES + i], constants[6 * LANES + i],
                constants[7 * LANES + i], constants[8 * LANES + i], constants[9 * LANES + i],
                constants[10 * LANES + i], constants[11 * LANES + i], constants[12 * LANES + i],
                constants[13 * LANES + i], constants[14 * LANES + i], constants[15 * LANES + i],
                constants[16 * LANES + i], constants[17 * LANES + i], constants[18 * LANES + i],
                constants[19 * LANES + i], constants[20 * LANES + i], constants[21 * LANES + i],
            )  # fmt: skip
            state[kept + 4 * LANES + i] = smooth
            state[kept + 5 * LANES + i] = led
            state[kept + 6 * LANES + i] = one
            state[kept + 7 * LANES + i] = two
        else:
            effort, integral, derivative, weighted, smooth, led, one, two, _, touched, _ = _law(
                asked[_REFERENCE], seen, asked[_FEEDFORWARD], 0.0,
                before, state[kept + LANES + i], state[kept + 2 * LANES + i], state[kept + 3 * LANES + i],
                0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0,
                constants[i], constants[LANES + i], constants[2 * LANES + i], constants[3 * LANES + i],
                constants[4 * LANES + i], constants[5 * LANES + i], constants[6 * LANES + i],
                constants[7 * LANES + i], constants[8 * LANES + i], constants[9 * LANES + i],
                constants[10 * LANES + i], 1.0, 1.0, 0.0, 0.0, 1.0, 0.0, 0.0, 0.0, 0.0,
                constants[20 * LANES], constants[21 * LANES],
            )  # fmt: skip
        state[totals + LIMITED * LANES + i] += touched
        state[totals + TRAVEL * LANES + i] += abs(effort - before) * asked[_COUNTS]
        state[totals + PEAK * LANES + i] = max(state[totals + PEAK * LANES + i], abs(effort) * asked[_COUNTS])
        state[kept + i] = effort
        state[kept + LANES + i] = integral
        state[kept + 2 * LANES + i] = derivative
        state[kept + 3 * LANES + i] = weighted
        efforts[(now & PLACE) + i] = effort


@compiled_lanes
def _show(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    size: Size, row: Array, constant: float, state: Array, efforts: Array, due: int, y: Array, at: int
) -> None:
    """Write the output of every lane at one point of a sample; the effort at place `due` begins to act in it."""
    n = len(size)
    acts = 2 * n * LANES
    for i in range(LANES):
        total = constant + row[n] * state[acts + i] + row[n + 1] * efforts[(due & PLACE) + i]
        for c in range(n):
            total += row[c] * state[c * LANES + i]
        y[(at & PLACE) + i] = total


@compiled_lanes
def _advance(size: Size, pace: Array, state: Array, efforts: Array, due: int) -> None:
    """Take the states of every lane to the next sample, all of a lane in one go.

    Parameters
    ----------
    pace : ndarray, shape (n (n + 3),)
        For each state, what it takes of the states, of the effort that acted and of that which begins to act, and what
        the disturbance adds.
    """
    n = len(size)
    ahead, acts = n * LANES, 2 * n * LANES
    for i in range(LANES):
        begins = efforts[(due & PLACE) + i]
        for j in range(n):
            row = j * (n + 3)
            total = pace[row + n + 2] + pace[row + n] * state[acts + i] + pace[row + n + 1] * begins
            for c in range(n):
                total += pace[row + c] * state[c * LANES + i]
            state[ahead + j * LANES + i] = total
        for j in range(n):
            state[j * LANES + i] = state[ahead + j * LANES + i]
        state[acts + i] = begins


@compiled_lanes
def _advance_by_rows(size: Size, pace: Array, state: Array, efforts: Array, due: int) -> None:
    """Do as `_advance`, one state of all lanes after the other: so many in one go do not fit into a loop."""
    n = len(size)
    ahead, acts = n * LANES, 2 * n * LANES
    for j in range(n):
        row = j * (n + 3)
        for i in range(LANES):
            total = pace[row + n + 2] + pace[row + n] * state[acts + i]
            total += pace[row + n + 1] * efforts[(due & PLACE) + i]
            for c in range(n):
                total += pace[row + c] * state[c * LANES + i]
            state[ahead + j * LANES + i] = total
    for i in range(n * LANES):
        state[i] = state[ahead + i]
    for i in range(LANES):
        state[acts + i] = efforts[(due & PLACE) + i]


@compiled_lanes
def _some_away(size: Size, state: Array, y: Array, at: int, ceiling: float) -> bool:
    """Return whether any lane has run away."""
    kept = (2 * len(size) + 1) * LANES
    count = 0
    for i in range(LANES):
        count += 1 if max(abs(y[(at & PLACE) + i]), abs(state[kept + i])) > ceiling else 0
    return count > 0


@compiled_lanes
def _mark(size: Size, state: Array, y: Array, at: int, ceiling: float) -> bool:
    """Mark lanes that have run away and let them start anew; return whether all have."""
    kept = (2 * len(size) + 1) * LANES
    away = kept + (KEPT + AWAY) * LANES
    fewest = 1.0
    for i in range(LANES):
        gone = max(abs(y[(at & PLACE) + i]), abs(state[kept + i])) > ceiling
        state[away + i] = 1.0 if gone else state[away + i]
        fewest = min(fewest, state[away + i])
    for j in range(2 * len(size) + 1 + KEPT):
        for i in range(LANES):
            state[j * LANES + i] = 0.0 if state[away + i] > 0.0 else state[j * LANES + i]
    return fewest > 0.0


@compiled_lanes
def run(  # noqa: PLR0913, PLR0917 - the whole loop in one place, so that it can be read against the law
    size: Size,
    rich: Size,
    constants: Array,
    pace: Array,
    push: Array,
    timing: Integers,
    wanted: Array,
    given: Array,
    y: Array,
    efforts: Array,
    state: Array,
    planned: Array,
) -> None:
    """Run one block from rest.

    Parameters
    ----------
    size, rich : tuple of int
        As long as the plant has states, see `size_for`; and as long as the measurement has a filter, a lead-lag, a
        notch or a resolution, 0 or 1: without any the text is shorter.
    constants : ndarray, shape (22 lanes,)
        Constants of the law, those of one kind for all lanes together.
    pace, push : ndarray, shapes (1 + m + n, n + 2) and (3, 1 + m + n)
        See `Pace`: rows of the measurement, of the output at the m points of a sample, of the next state.
    timing : ndarray of int, shape (6,)
        Sample in which the disturbance arrives; whole samples from an effort to its effect; points; samples;
        points of a sample; samples whose effort is shown.
    wanted : ndarray, shape (5,)
        Reference and disturbance as deviations, resting measurement, resolution of the measurement (0 for none), and
        the ceiling of the absolute output and effort: a lane that passes it has run away. When all have, the run ends.
    given : ndarray, shape (2, s)
        What the law is given at each sample: the effort of the feedforward, and the share of the reference that it is
        asked for by then.
    y : ndarray, shape (g lanes,)
        Output at the points, written to.
    efforts : ndarray, shape (e lanes,)
        The last e efforts, written to in turns; e is greater than the whole samples from an effort to its effect.
    state : ndarray, shape (rows(size) lanes,)
        Written to; its last rows hold the totals.
    planned : ndarray, shape (plan(size),)
        Scratch.
    """
    n = len(size)
    arrival, delay, points, samples, steps, shown = timing
    reference, disturbance, resting, quantum, ceiling = wanted
    asked, ahead = planned[: _ASKED + n + 1], planned[_ASKED + n + 1 :]
    asked[_QUANTUM] = quantum
    for c in range(n + 1):
        asked[_ASKED + c] = pace[0, c]
    for j in range(n):
        for c in range(n + 2):
            ahead[j * (n + 3) + c] = pace[1 + steps + j, c]
    state[:] = 0.0
    efforts[:] = 0.0
    held = efforts.shape[0] // LANES
    now, due, at, before = 0, (held - delay) % held, 0, -1
    for k in range(samples):
        when = 0 if k < arrival else (1 if k == arrival else 2)
        if when != before:
            for j in range(n):
                ahead[j * (n + 3) + n + 2] = push[when, 1 + steps + j] * disturbance
            before = when
        asked[_CONSTANT] = push[when, 0] * disturbance + resting
        asked[_FEEDFORWARD], asked[_COUNTS] = given[0, k], 1.0 if k < shown else 0.0
        asked[_REFERENCE] = given[1, k] * reference + resting
        _decide(size, rich, state, constants, asked, efforts, now * LANES)
        for j in range(min(steps, points - k * steps)):
            _show(size, pace[1 + j], push[when, 1 + j] * disturbance, state, efforts, due * LANES, y, at)
            at += LANES
        if n <= FUSED:
            _advance(size, ahead, state, efforts, due * LANES)
        else:
            _advance_by_rows(size, ahead, state, efforts, due * LANES)
        looks = k % LOOKS == LOOKS - 1 and _some_away(size, state, y, at - LANES, ceiling)
        if looks and _mark(size, state, y, at - LANES, ceiling):
            break
        now = now + 1 if now + 1 < held else 0
        due = due + 1 if due + 1 < held else 0
