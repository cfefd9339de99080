"""The reference as it moves: at rest on its target, or on a ramp towards it."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Aim:
    """Where the reference goes: in a straight line from `begin`, at the time `start`, to `target`, within `over`.

    All in engineering units and time units; `over` is 0 for a step.
    """

    target: float
    begin: float = 0.0
    start: float = 0.0
    over: float = 0.0

    def at(self, t: Array) -> Array:
        """Return the reference at some times, none before its start; shape of `t`."""
        if self.over <= 0.0:
            return np.full(t.shape, self.target)
        share = np.clip((t - self.start) / self.over, 0.0, 1.0)
        return np.where(share >= 1.0, self.target, self.begin + share * (self.target - self.begin))

    def towards(self, target: float, now: float, over: float = 0.0) -> "Aim":
        """Return where the reference goes from a time on when it is sent to another target."""
        return Aim(target, float(self.at(np.array([now]))[0]), now, over)
