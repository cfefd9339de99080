"""The sampled loop, compiled: loops x samples x steps between samples, with the control law itself inside.

Plain loops because every sample depends on the one before and the law has limits: there is nothing to vectorise along
time, and a call from Python for each sample would cost a thousand times the arithmetic.
"""

import math

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled
from tuner.law.pid import law

Array = NDArray[np.float64]
Integers = NDArray[np.int64]

compiled_law = compiled(law)


@compiled
def _output(c: Array, x: Array, direct: Array, effort: float, disturbance: float) -> float:
    total: float = direct[0] * effort + direct[1] * disturbance
    for i in range(x.shape[0]):
        total += c[i] * x[i]
    return total


@compiled
def _advance(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    x: Array,
    rise: Array,
    growth: Array,
    old: Array,
    new: Array,
    before: tuple[float, float],
    after: tuple[float, float],
) -> None:
    """Take the state over one step in place; `before` and `after` are effort and disturbance around their jumps."""
    for i in range(x.shape[0]):
        total = old[i, 0] * before[0] + new[i, 0] * after[0]
        total += old[i, 1] * before[1] + new[i, 1] * after[1]
        for j in range(x.shape[0]):
            total += growth[i, j] * x[j]
        rise[i] = total
    for i in range(x.shape[0]):
        x[i] += rise[i]


@compiled
def _hold_still(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    y: Array, u: Array, limited: Array, index: int, sample: int, ceiling: float
) -> None:
    """Fill what is left of a run that ran away with its last values, the output cut at the ceiling."""
    for i in range(index, y.shape[0]):
        y[i] = y[index]
        if not abs(y[i]) < ceiling:
            y[i] = -ceiling if y[i] < 0.0 else ceiling
    for k in range(sample + 1, u.shape[0]):
        u[k] = u[sample]
        limited[k] = limited[sample]


@compiled
def run(  # noqa: C901, PLR0913, PLR0917 - the whole loop in one place, so that it can be read against the law
    constants: Array,
    system: Integers,
    growth: Array,
    old: Array,
    new: Array,
    c: Array,
    direct: Array,
    delay: Integers,
    steps: int,
    reference: Array,
    disturbance: Array,
    feedforward: Array,
    noise: Array,
    quantum: float,
    ceiling: Array,
    y: Array,
    u: Array,
    limited: Array,
) -> None:
    """Run a batch of loops from rest; the disturbance steps at sample 0.

    A sample reads the measurement just before its own effort takes hold. A run whose output or effort passes its
    ceiling has run away: from there on it is held, so that no infinite number leaves this function.

    Parameters
    ----------
    constants : ndarray, shape (l, 22)
        For each of l loops, the constants of the law in the order of its parameters.
    system : ndarray of int, shape (l,)
        Which of the p systems each loop has.
    growth, old, new : ndarray, shapes (p, n, n), (p, n, 2), (p, n, 2)
        Equivalents over one step, inputs effort and disturbance, see `exponential.hold`.
    c, direct : ndarray, shapes (p, 2, n), (p, 2, 2)
        Rows of the output y and of the sensor, and their direct terms from effort and disturbance.
    delay : ndarray of int, shape (p, 2)
        Whole steps of dead time of the effort, computing included, and of the disturbance.
    steps : int
        Steps between samples.
    reference : ndarray, shape (l, s)
        What the law is asked for at each of s samples, as a deviation.
    disturbance : ndarray, shape (l,)
        Step sizes.
    feedforward : ndarray, shape (l, s)
        Effort added at each sample.
    noise : ndarray, shape (l, s), or (0, 0) for none
        Added to the sensor.
    quantum : float
        Resolution of the measurement; 0 for none.
    ceiling : ndarray, shape (l, 2)
        Of the absolute output and effort.
    y : ndarray, shape (l, g), g <= (s - 1) steps + 1
        Output at the grid points, written to.
    u, limited : ndarray, shape (l, s)
        Effort of each sample, as a deviation, and 1.0 where a limit changed it, written to.
    """
    samples, points = u.shape[1], y.shape[1]
    x = np.zeros(growth.shape[1])
    rise = np.zeros(growth.shape[1])
    for loop in range(system.shape[0]):
        p = constants[loop]
        which = system[loop]
        g, before, after = growth[which], old[which], new[which]
        seen, shown, seen_direct, shown_direct = c[which, 1], c[which, 0], direct[which, 1], direct[which, 0]
        late_u, late_d = delay[which, 0], delay[which, 1]
        x[:] = 0.0
        effort = integral = derivative = weighted_error = filtered = lead_memory = 0.0
        notch_1 = notch_2 = mode = touched = fault = 0.0
        old_u = old_d = 0.0
        # The effort that reaches the system is that of sample `source`; `phase` counts the steps since its jump.
        source = -late_u // steps
        phase = -late_u - source * steps
        index = 0
        for k in range(samples):
            measured = _output(seen, x, seen_direct, old_u, old_d)
            if noise.shape[0] > 0:
                measured += noise[loop, k]
            measured += p[20]
            if quantum > 0.0:
                measured = quantum * math.floor(measured / quantum + 0.5)
            (
                effort, integral, derivative, weighted_error, filtered, lead_memory,
                notch_1, notch_2, mode, touched, fault,
            ) = compiled_law(
                reference[loop, k] + p[20], measured, feedforward[loop, k], 0.0,
                effort, integral, derivative, weighted_error, filtered, lead_memory,
                notch_1, notch_2, mode, touched, fault,
                p[0], p[1], p[2], p[3], p[4], p[5], p[6], p[7], p[8], p[9], p[10],
                p[11], p[12], p[13], p[14], p[15], p[16], p[17], p[18], p[19], p[20], p[21],
            )  # fmt: skip
            u[loop, k] = effort
            limited[loop, k] = touched
            ran_away = not abs(effort) < ceiling[loop, 1]
            if ran_away:
                u[loop, k] = -ceiling[loop, 1] if effort < 0.0 else ceiling[loop, 1]
            for _ in range(steps):
                if index >= points:
                    break
                y[loop, index] = _output(shown, x, shown_direct, old_u, old_d)
                if ran_away or not abs(y[loop, index]) < ceiling[loop, 0]:
                    ran_away = True
                    break
                new_u = u[loop, source] if source >= 0 else 0.0
                new_d = disturbance[loop] if index >= late_d else 0.0
                _advance(x, rise, g, before, after, (old_u, old_d), (new_u, new_d))
                old_u, old_d = new_u, new_d
                index += 1
                phase += 1
                if phase == steps:
                    phase, source = 0, source + 1
            if ran_away:
                _hold_still(y[loop], u[loop], limited[loop], index, k, ceiling[loop, 0])
                break
