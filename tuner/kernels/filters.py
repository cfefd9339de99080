"""Feedforward and reference filter, compiled: a chain of sections run along a signal.

Plain loops for the reason given in `loop`: every sample depends on the one before. The text of a section is that of
the law's room, which is also what is delivered.
"""

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.compiled import compiled
from tuner.law.feedforward import scaled, section

Array = NDArray[np.float64]

compiled_scaled = compiled(scaled)
compiled_section = compiled(section)


@compiled
def filtered(  # noqa: PLR0913, PLR0917 - kernels take bare numbers and arrays
    value: Array, resting: float, gain: float, sections: Array, delay: int, out: Array
) -> None:
    """Run a signal through a filter that was at rest before.

    Parameters
    ----------
    value : ndarray, shape (s,)
        In engineering units.
    resting, gain : float
        See `law.feedforward.scaled`.
    sections : ndarray, shape (n, 5)
        Constants of each section, in the order of `law.feedforward.SECTION`.
    delay : int
        Whole samples that the signal is late.
    out : ndarray, shape (s,)
        What comes out, as a deviation; written to.
    """
    memories = np.zeros((sections.shape[0], 2))
    for k in range(value.shape[0]):
        passed = compiled_scaled(value[k - delay] if k >= delay else resting, resting, gain)
        for i in range(sections.shape[0]):
            passed, memories[i, 0], memories[i, 1] = compiled_section(
                passed, memories[i, 0], memories[i, 1],
                sections[i, 0], sections[i, 1], sections[i, 2], sections[i, 3], sections[i, 4],
            )  # fmt: skip
        out[k] = passed
