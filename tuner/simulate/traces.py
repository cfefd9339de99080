"""What a trial leaves behind: two runs of the loop, as arrays."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]


@dataclass(frozen=True, slots=True, eq=False)
class Trace:
    """One run of the loop from rest; signals are deviations from the resting point.

    Parameters
    ----------
    t, r, y, u : ndarray, shape (n,)
        Time in time units; reference, output (engineering units of the controlled signal); effort (of the manipulated).
        `u` at an instant is the effort that holds from then on.
    sample_index : ndarray of int, shape (k,)
        Positions in `t` of the sample instants.
    limited : ndarray of bool, shape (k,)
        Whether a limit changed the effort at each sample.
    linear : bool
        Whether the run stayed linear: no limit touched and no resolution.
    """

    t: Array
    r: Array
    y: Array
    u: Array
    sample_index: NDArray[np.intp]
    limited: NDArray[np.bool_]
    linear: bool


@dataclass(frozen=True, slots=True, eq=False)
class Traces:
    """The two runs of a trial, and what must be said about them, in sentences."""

    reference: Trace
    disturbance: Trace
    notes: tuple[str, ...] = ()
