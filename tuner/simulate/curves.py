"""The frequency response of a whole family on frequencies that all share, as plots show it."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import pi

import numpy as np

from tuner.simulate.factors import stack
from tuner.simulate.frequency import frequency_grid, loop_response
from tuner.simulate.loop import Loop, same_shape
from tuner.simulate.margins import Margins
from tuner.simulate.traces import Array, ComplexArray

_PER_DECADE = 120
_LARGE, _SMALL = 300.0, 1e-3
"""Loop gains between which a plot is of use."""

_TURN = 0.25
"""Phase that the dead time may turn between two frequencies, rad."""

_MOST = 4000


@dataclass(frozen=True, slots=True, eq=False)
class FrequencyCurves:
    """Loop gains of a family.

    Parameters
    ----------
    w : ndarray, shape (n,)
        Rising, rad per time unit; empty where the loop is open.
    gain : ndarray of complex, shape (m, n)
        L of each member, in the order asked: L(jw), or L(exp(jw Ts)) of a sampled loop.
    nyquist : float
        pi/Ts, where the response of a sampled loop ends; infinite for a continuous one.
    """

    w: Array
    gain: ComplexArray
    nyquist: float

    def sensitivity(self) -> ComplexArray:
        """Return S = 1/(1 + L), shape (m, n)."""
        with np.errstate(all="ignore"):
            value: ComplexArray = 1.0 / (1.0 + self.gain)
        return value


def frequency_curves(loops: Sequence[Loop], poles: ComplexArray, margins: Margins | None) -> FrequencyCurves:
    """Return the loop gain of every loop on one grid, made for the first of them.

    Parameters
    ----------
    poles : ndarray of complex
        Closed-loop poles of the first loop in s: peaks are looked at closely.
    margins : Margins or None
        Of the first loop: the frequencies of its margins are points of the grid.
    """
    first = loops[0]
    nyquist = pi / first.sample_time if first.sample_time else np.inf
    if first.factors.gain == 0.0:
        return FrequencyCurves(np.zeros(0), np.zeros((len(loops), 0), dtype=complex), nyquist)
    w = _grid(first, poles, margins)
    gain = np.empty((len(loops), len(w)), dtype=complex)
    for places in same_shape(loops):
        gain[places] = stack([loops[i].factors for i in places]).response(w)
    return FrequencyCurves(w, gain, nyquist)


def _grid(loop: Loop, poles: ComplexArray, margins: Margins | None) -> Array:
    known = frequency_grid(loop, poles)
    size = np.abs(loop_response(loop, known))
    useful = known[(size < _LARGE) & (size > _SMALL)]
    low, high = (useful[0], useful[-1]) if len(useful) > 1 else (known[0], known[-1])
    count = int(np.log10(high / low) * _PER_DECADE) + 2
    parts = [np.geomspace(low, high, count), known[(known >= low) & (known <= high)], _at(margins, low, high)]
    if loop.factors.delay:
        turns = min(int(high * loop.factors.delay / _TURN), _MOST)
        parts.append(np.linspace(low, high, turns + 2))
    return np.unique(np.concatenate(parts))


def _at(margins: Margins | None, low: float, high: float) -> Array:
    if margins is None:
        return np.zeros(0)
    places = (margins.gain_margin_at, margins.phase_margin_at, margins.max_sensitivity_at, margins.max_complementary_at)
    return np.array([place for place in places if place is not None and low < place < high])
