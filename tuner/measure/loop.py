"""Measures of the loop itself: the smallest damping of its poles."""

from dataclasses import dataclass

import numpy as np

from tuner.simulate.traces import ComplexArray

DOMINANT_SHARE = 3.0
"""A loop with endless poles is judged by those no farther left than this many times its rightmost one."""


@dataclass(frozen=True, slots=True)
class Damping:
    """The smallest damping ratio of a set of poles, and whether only the dominant ones were looked at."""

    value: float
    dominant_only: bool


def damping(poles: ComplexArray, *, endless: bool) -> Damping:
    """Return the smallest damping ratio -Re(s) / abs(s) of closed-loop poles.

    Parameters
    ----------
    poles : ndarray of complex, shape (n,)
        In s, rightmost first. None at all is a deadbeat loop, whose damping ratio is 1.
    endless : bool
        Whether there are infinitely many (a continuous loop with dead time); then only poles with
        Re(s) >= `DOMINANT_SHARE` Re(rightmost) count.
    """
    if not poles.size:
        return Damping(1.0, dominant_only=False)
    right = poles.real.max()
    if endless and right < 0.0:
        poles = poles[poles.real >= DOMINANT_SHARE * right]
    size = np.abs(poles)
    ratios = np.where(size > 0.0, -poles.real / np.where(size > 0.0, size, 1.0), 0.0)
    return Damping(float(ratios.min()) + 0.0, dominant_only=endless)
