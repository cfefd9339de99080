"""Feedforward and reference filter, compiled: a chain of sections run along a signal.

Plain loops for the reason given in `loop`: every sample depends on the one before. The text of a section is that of
the law's room, which is also what is delivered.
"""

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled
from tuner.law.feedforward import scaled, section

Array = NDArray[np.float64]
Integers = NDArray[np.int64]

compiled_scaled = compiled(scaled)
compiled_section = compiled(section)


@compiled
def filtered(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    value: Array,
    resting: float,
    gain: float,
    sections: Array,
    memories: Array,
    late: Array,
    place: Integers,
    out: Array,
) -> None:
    """Run a signal through a filter.

    Parameters
    ----------
    value : ndarray, shape (s,)
        In engineering units.
    resting, gain : float
        See `law.feedforward.scaled`.
    sections : ndarray, shape (n, 5)
        Constants of each section, in the order of `law.feedforward.SECTION`.
    memories : ndarray, shape (n, 2)
        What the sections keep; zero at rest. Written to.
    late : ndarray, shape (d,)
        The last d values, where the filter is d samples late; the resting value at rest. Written to, in turns.
    place : ndarray of int, shape (1,)
        Where the oldest of them is; written to.
    out : ndarray, shape (s,)
        What comes out, as a deviation; written to.
    """
    for k in range(value.shape[0]):
        given = value[k]
        if late.shape[0] > 0:
            given = late[place[0]]
            late[place[0]] = value[k]
            place[0] = (place[0] + 1) % late.shape[0]
        passed = compiled_scaled(given, resting, gain)
        for i in range(sections.shape[0]):
            passed, memories[i, 0], memories[i, 1] = compiled_section(
                passed, memories[i, 0], memories[i, 1],
                sections[i, 0], sections[i, 1], sections[i, 2], sections[i, 3], sections[i, 4],
            )  # fmt: skip
        out[k] = passed
