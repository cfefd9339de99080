"""Measures of the loop itself: its margins, and the smallest damping of its poles."""

from dataclasses import dataclass

import numpy as np

from tuner.measure.family import UNSTABLE, Measured
from tuner.simulate.margins import Margins
from tuner.simulate.traces import ComplexArray

MARGINS = (
    "gain_margin",
    "phase_margin",
    "delay_margin",
    "max_sensitivity",
    "max_complementary",
    "bandwidth",
)
"""Measures of the frequency response."""

NO_FEEDBACK = "there is no feedback"
NO_BANDWIDTH = "abs(S) does not rise through 0.707"

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


def add_margins(measured: Measured, margins: Margins | None, *, stable: bool) -> None:
    """Add the measures of the frequency response to those of the trial.

    Parameters
    ----------
    margins : Margins or None
        None where the loop is unstable or not closed.
    """
    if margins is None:
        measured.absent(MARGINS, NO_FEEDBACK if stable else UNSTABLE)
        return
    for name in MARGINS:
        measured.put(name, getattr(margins, name), NO_BANDWIDTH)
