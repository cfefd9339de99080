"""Measures of the loop itself: its margins, and the smallest damping of its poles."""

from math import inf

import numpy as np

from tuner.measure.family import UNSTABLE, Measured
from tuner.simulate.margins import Margins
from tuner.simulate.poles import Poles
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
ENDLESS = "there are endless poles along a line, with damping ratios down to zero"

DOMINANT_SHARE = 3.0
"""A loop with endless poles is judged by those no farther left than this many times its rightmost one."""


def damping(poles: ComplexArray, known_from: float = -inf) -> float | None:
    """Return the smallest damping ratio -Re(s) / abs(s) of closed-loop poles.

    Parameters
    ----------
    poles : ndarray of complex, shape (n,)
        In s, rightmost first. None at all is a deadbeat loop, whose damping ratio is 1.
    known_from : float
        Poles farther left than this are not among `poles`, though there are infinitely many: a continuous loop with
        dead time. Then those of a stable loop with Re(s) >= `DOMINANT_SHARE` Re(rightmost) count.

    Returns
    -------
    float or None
        None when not all poles that count are known: a loop whose gain does not die away at high frequency has
        endless ones along a line, with damping ratios down to zero.
    """
    if not poles.size:
        return 1.0
    right = float(poles.real.max())
    if known_from > -inf and right < 0.0:
        if known_from > DOMINANT_SHARE * right:
            return None
        poles = poles[poles.real >= DOMINANT_SHARE * right]
    size = np.abs(poles)
    ratios = np.where(size > 0.0, -poles.real / np.where(size > 0.0, size, 1.0), 0.0)
    return float(ratios.min()) + 0.0


def damping_of(poles: Poles) -> float | None:
    """Return the smallest damping ratio of what was found of a loop's poles; see `damping`."""
    return damping(poles.values, -inf if poles.complete else poles.known_from)


def add_damping(measured: Measured, poles: Poles) -> None:
    """Add the damping to the measures of the trial."""
    measured.put("damping", damping_of(poles), ENDLESS)


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
