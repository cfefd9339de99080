"""What a stretch of a rehearsal leaves behind, as arrays."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class Strip:
    """Some samples of a rehearsal, one after the other.

    Parameters
    ----------
    t, r, y, ym, u, d : ndarray, shape (n,)
        Time in time units; reference, output and measurement (engineering units of the controlled signal); effort (of
        the manipulated); disturbance, as a deviation.
    limited, held, manual : ndarray of bool, shape (n,)
        Whether a limit changed the effort; whether it is held since the measurement could not be used; whether it is
        set by hand.
    """

    t: Array
    r: Array
    y: Array
    ym: Array
    u: Array
    d: Array
    limited: NDArray[np.bool_]
    held: NDArray[np.bool_]
    manual: NDArray[np.bool_]

    def __len__(self) -> int:
        """Return how many samples there are."""
        return len(self.t)
