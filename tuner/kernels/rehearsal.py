"""The sampled loop going on from where it is, for a loop that people act upon while it runs.

A plain loop for the reason given in `loop`; the law inside is the same compiled text. Unlike there, all that the loop
remembers comes in and goes out again, so that anything may be changed between two calls.
"""

import math

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled
from tuner.kernels.loop import compiled_law

Array = NDArray[np.float64]
Integers = NDArray[np.int64]


@compiled
def _past(ring: Array, sample: int) -> float:
    """Return what was at a sample, nothing before the first."""
    value: float = ring[sample % ring.shape[0]] if sample >= 0 else 0.0
    return value


@compiled
def advance(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    first: int,
    constants: Array,
    growth: Array,
    old: Array,
    new: Array,
    c: Array,
    direct: Array,
    delay: Integers,
    quantum: float,
    ceiling: Array,
    given: Array,
    law: Array,
    x: Array,
    efforts: Array,
    disturbances: Array,
    seen: Array,
) -> int:
    """Take the loop on by some samples; return how many, fewer only where it has run away.

    Parameters
    ----------
    first : int
        How many samples there have been before.
    constants : ndarray, shape (22,)
        Of the law, in the order of its parameters.
    growth, old, new : ndarray, shapes (n, n), (n, 2), (n, 2)
        Equivalent of the plant over one sample, inputs effort and disturbance, see `exponential.hold`.
    c, direct : ndarray, shapes (2, n), (2, 2)
        Rows of the output and of the sensor, and their direct terms from effort and disturbance.
    delay : ndarray of int, shape (2,)
        Whole samples of dead time of the effort, computing included, and of the disturbance.
    quantum : float
        Resolution of the measurement; 0 for none.
    ceiling : ndarray, shape (2,)
        Of the absolute output and effort, beyond which the loop has run away.
    given : ndarray, shape (5, s)
        For each of s samples: reference (engineering units), feedforward, effort by hand (engineering units), noise,
        disturbance.
    law : ndarray, shape (11,)
        State of the law, in the order of its states; written to.
    x : ndarray, shape (n,)
        State of the plant; written to.
    efforts, disturbances : ndarray, shape (e,)
        The last e efforts and disturbances, written to in turns; e is at least two more than either delay.
    seen : ndarray, shape (5, s)
        For each sample: output and measurement as deviations, effort, whether a limit changed it, whether it is held;
        written to.
    """
    rise = np.zeros(x.shape[0])
    samples: int = given.shape[1]
    for k in range(samples):
        at = first + k
        before_u, before_d = _past(efforts, at - 1 - delay[0]), _past(disturbances, at - 1 - delay[1])
        y = direct[0, 0] * before_u + direct[0, 1] * before_d
        measured = direct[1, 0] * before_u + direct[1, 1] * before_d
        for i in range(x.shape[0]):
            y += c[0, i] * x[i]
            measured += c[1, i] * x[i]
        measured += given[3, k]
        measured += constants[20]
        if quantum > 0.0:
            measured = quantum * math.floor(measured / quantum + 0.5)
        state = compiled_law(
            given[0, k], measured, given[1, k], given[2, k],
            law[0], law[1], law[2], law[3], law[4], law[5], law[6], law[7], law[8], law[9], law[10],
            constants[0], constants[1], constants[2], constants[3], constants[4], constants[5], constants[6],
            constants[7], constants[8], constants[9], constants[10], constants[11], constants[12], constants[13],
            constants[14], constants[15], constants[16], constants[17], constants[18], constants[19], constants[20],
            constants[21],
        )  # fmt: skip
        if not abs(y) < ceiling[0] or not abs(state[0]) < ceiling[1]:
            return k
        for i in range(law.shape[0]):
            law[i] = state[i]
        efforts[at % efforts.shape[0]] = state[0]
        disturbances[at % disturbances.shape[0]] = given[4, k]
        seen[0, k], seen[1, k], seen[2, k] = y, measured - constants[20], state[0]
        seen[3, k], seen[4, k] = state[9], state[10]
        after_u, after_d = _past(efforts, at - delay[0]), _past(disturbances, at - delay[1])
        for i in range(x.shape[0]):
            total = old[i, 0] * before_u + new[i, 0] * after_u
            total += old[i, 1] * before_d + new[i, 1] * after_d
            for j in range(x.shape[0]):
                total += growth[i, j] * x[j]
            rise[i] = total
        for i in range(x.shape[0]):
            x[i] += rise[i]
    return samples
