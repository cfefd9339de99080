"""Exact equivalents of linear systems under a hold, with a dead time of any fraction of a step."""

import math
from dataclasses import dataclass
from typing import NamedTuple

import numpy as np
from numpy.typing import ArrayLike

from tuner.errors import LoopError
from tuner.kernels.exponential import hold as hold_kernel
from tuner.simulate.algebra import series
from tuner.simulate.linear import Linear, lag
from tuner.simulate.traces import Array, ComplexArray

_WHOLE = 1e-12
"""A dead time this near to a whole number of steps, relatively, is one: 0.3/0.1 is not 3 in floating point."""


class Delay(NamedTuple):
    """A dead time as whole steps and the time that is left, below a step."""

    steps: int
    offset: float


@dataclass(frozen=True, slots=True, eq=False)
class Held:
    """A system behind a hold, at the sample instants, just before each jump of the hold.

    x(k+1) = x(k) + growth x(k) + old u(k - steps - 1) + new u(k - steps), y(k) = c x(k) + d u(k - steps - 1).

    Parameters
    ----------
    growth : ndarray, shape (n, n)
        The transition matrix less the identity: what is left of slow modes when the step is short.
    old, new, c : ndarray, shape (n,)
        The effect of the input before and after the jump that reaches the state within the step; the output row.
    d : float
        Direct term, of the input that still holds when the sample is taken.
    steps : int
        Whole steps of dead time.
    step : float
        Time between samples, time units.
    """

    growth: Array
    old: Array
    new: Array
    c: Array
    d: float
    steps: int
    step: float

    @property
    def transition(self) -> Array:
        """The transition matrix of one step, shape (n, n)."""
        return np.eye(len(self.c)) + self.growth

    def response(self, s: ArrayLike) -> ComplexArray:
        """Return the pulse transfer function at z = exp(s step), delay included: complex, shape of `s`.

        Exact also where z is near 1, for z - 1 and the growth are both kept as such. Infinite at a pole.
        """
        turned = np.multiply(s, self.step, dtype=complex)
        back = np.exp(-turned)
        ahead = np.expm1(turned)
        inner = np.asarray(self.new + self.old * back[..., None], dtype=complex)[..., None]
        matrix = np.asarray(ahead[..., None, None] * np.eye(len(self.c)) - self.growth, dtype=complex)
        state = _solved(matrix, inner)
        with np.errstate(invalid="ignore"):
            value = ((state[..., 0] @ self.c) + self.d * back) * np.exp(-turned * self.steps)
        return np.where(np.isnan(value), complex(math.inf), value)


def split(dead_time: float, step: float) -> Delay:
    """Split a dead time into whole steps and a rest, as Astrom and Wittenmark, Computer-Controlled Systems, do."""
    ratio = dead_time / step
    if not ratio < 2**53:
        raise LoopError(f"a dead time of {dead_time:g} is too long for a step of {step:g}")
    whole = round(ratio)
    if abs(ratio - whole) <= _WHOLE * max(1.0, ratio):
        return Delay(whole, 0.0)
    steps = math.floor(ratio)
    return Delay(steps, min((ratio - steps) * step, math.nextafter(step, 0.0)))


def chain(plant: Linear, actuator_lag: float, sensor_lag: float) -> Linear:
    """Return the way from the held effort to the measurement: actuator, plant, sensor."""
    return series(lag(actuator_lag), plant, lag(sensor_lag))


def hold(system: Linear, step: float, delay_steps: int = 0) -> Held:
    """Return the exact equivalent of a system whose input is held for `step`, after `delay_steps` of computing.

    Raises
    ------
    LoopError
        When the step is not a positive time, or the system grows beyond all numbers within it.
    """
    if not 0.0 < step < math.inf:
        raise LoopError(f"the time between samples must be positive, found {step:g}")
    delay = split(system.dead_time, step)
    held = held_batch(system.a[None], system.b[None, :, None], step, np.array([[delay.offset]]))
    return Held(
        growth=held.growth[0],
        old=held.old[0, :, 0],
        new=held.new[0, :, 0],
        c=system.c,
        d=system.d,
        steps=delay.steps + delay_steps,
        step=step,
    )


class HeldBatch(NamedTuple):
    """Equivalents of k systems with m inputs; shapes (k, n, n), (k, n, m), (k, n, m). See `Held`."""

    growth: Array
    old: Array
    new: Array


def held_batch(a: Array, b: Array, step: float, offset: Array) -> HeldBatch:
    """Return the equivalents of k systems over a step, whose m inputs jump at `offset`, shape (k, m), in it.

    Raises
    ------
    LoopError
        When a system grows beyond all numbers within a step.
    """
    result = HeldBatch(np.empty_like(a), np.empty_like(b), np.empty_like(b))
    hold_kernel(np.ascontiguousarray(a), np.ascontiguousarray(b), float(step), offset, *result)
    if not all(np.isfinite(part).all() for part in result):
        raise LoopError(f"the plant grows beyond all numbers within a step of {step:g}")
    return result


def _solved(matrix: ComplexArray, right: ComplexArray) -> ComplexArray:
    """Solve many small systems; a singular one has infinity as its solution."""
    try:
        return np.asarray(np.linalg.solve(matrix, right), dtype=complex)
    except np.linalg.LinAlgError:
        regular = np.linalg.det(matrix) != 0.0
        out = np.full(right.shape, complex(math.inf))
        out[regular] = np.linalg.solve(matrix[regular], right[regular])
        return out
