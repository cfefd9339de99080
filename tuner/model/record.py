"""A record: what was measured on a loop over time."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

MANUAL, AUTOMATIC = "manual", "automatic"
"""How the mode of a controller is written."""


@dataclass(frozen=True, slots=True)
class Units:
    """The units of a record: of its time, of the controlled and of the manipulated signal; '' for a plain number."""

    time: str = "s"
    controlled: str = ""
    manipulated: str = ""


@dataclass(frozen=True, slots=True, eq=False)
class Record:
    """Samples of a loop, one after the other, in engineering units.

    Parameters
    ----------
    units : Units
        Of everything below.
    time, measurement, effort : ndarray, shape (n,)
        Time, which rises; the measurement and the effort at that time.
    reference, disturbance : ndarray, shape (n,), or None
        The reference, and the disturbance as a deviation of the effort; None where the record does not have them.
    manual : ndarray of bool, shape (n,)
        Whether the effort was set by hand.
    events : tuple of str
        What was done at each sample, in words; '' for nothing.
    """

    units: Units
    time: Array
    measurement: Array
    effort: Array
    reference: Array | None
    disturbance: Array | None
    manual: NDArray[np.bool_]
    events: tuple[str, ...]

    def __len__(self) -> int:
        """Return how many samples there are."""
        return len(self.time)
