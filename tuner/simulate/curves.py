"""The frequency response of a whole family on frequencies that all share, as plots show it."""

from collections.abc import Iterator, Sequence
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

_WORTH = 30.0
"""Up to so many times the highest frequency of use, half the sampling frequency is where a plot ends."""

_TURN = 0.25
"""Phase that the dead time may turn between two frequencies, rad."""

_MOST = 4000
_TOGETHER = 100
"""Loops evaluated at once; more would take memory for nothing."""

_SMALLEST = 1e-12
_HIGHEST = 60.0
"""Degrees at which the phase of a plot may begin at most."""


@dataclass(frozen=True, slots=True, eq=False)
class FrequencyCurves:
    """The response over frequency of a family; every array but `w` has one row a loop, in the order asked.

    Parameters
    ----------
    w : ndarray, shape (n,)
        Rising, rad per time unit; empty where there is no loop gain.
    gain : ndarray of complex, shape (m, n)
        L: L(jw), or L(exp(jw Ts)) of a sampled loop.
    nyquist : float
        pi/Ts, where the response of a sampled loop ends; infinite for a continuous one.
    decibels : ndarray, shape (m, n)
        20 log10 abs(L), above -240.
    phase : ndarray, shape (m, n)
        Phase of L in degrees, see `phases`.
    sensitivity, complementary : ndarray, shape (m, n)
        abs(S) and abs(T): abs(1/(1 + L)) and abs(L/(1 + L)), infinite where L = -1.
    plants : tuple of str
        Names of the plants, as they were given.
    """

    w: Array
    gain: ComplexArray
    nyquist: float
    decibels: Array
    phase: Array
    sensitivity: Array
    complementary: Array
    plants: tuple[str, ...] = ()


def frequency_curves(
    loops: Sequence[Loop], poles: ComplexArray, margins: Sequence[Margins | None], plants: tuple[str, ...] = ()
) -> FrequencyCurves:
    """Return the response of every loop on one grid, made for the first of them.

    Parameters
    ----------
    loops : sequence of Loop
        At least one.
    poles : ndarray of complex
        Closed-loop poles of the first loop in s: peaks are looked at closely.
    margins : sequence of Margins or None
        Of all loops that have any: the frequencies of margins and peaks are points of the grid, so that the curves
        show what the margins say.
    plants : tuple of str
        Names of the plants, in the order of the loops.
    """
    first = loops[0]
    nyquist = pi / first.sample_time if first.sample_time else np.inf
    w = _grid(first, poles, margins, nyquist) if first.factors.gain else np.zeros(0)
    gain = np.empty((len(loops), len(w)), dtype=complex)
    for places in _pieces(loops) if len(w) else ():
        gain[places] = stack([loops[i].factors for i in places]).response(w)
    with np.errstate(all="ignore"):
        s = np.abs(1.0 / (1.0 + gain))
        t = np.where(np.isfinite(s), s * np.abs(gain), np.inf)
    return FrequencyCurves(w, gain, nyquist, decibels(gain), phases(gain), s, t, plants)


def decibels(values: ComplexArray) -> Array:
    """Return sizes in dB, 20 log10 abs."""
    return np.asarray(20.0 * np.log10(np.maximum(np.abs(values), _SMALLEST)))


def phases(gain: ComplexArray) -> Array:
    """Return phases in degrees, without jumps along frequency; shapes (m, n).

    The first curve begins above -300 and at most at 60 degrees, so that a phase that only falls is shown as it falls;
    the others begin as near to it as whole turns allow.
    """
    if not gain.shape[-1]:
        return np.zeros(gain.shape)
    found = np.degrees(np.unwrap(np.angle(gain), axis=-1))
    first = found[0, 0] - 360.0 * np.ceil((found[0, 0] - _HIGHEST) / 360.0)
    return np.asarray(found - 360.0 * np.round((found[:, :1] - first) / 360.0))


def _pieces(loops: Sequence[Loop]) -> Iterator[list[int]]:
    """Return the places of loops that are evaluated together."""
    for places in same_shape(loops):
        for start in range(0, len(places), _TOGETHER):
            yield places[start : start + _TOGETHER]


def _grid(loop: Loop, poles: ComplexArray, margins: Sequence[Margins | None], nyquist: float) -> Array:
    known = frequency_grid(loop, poles)
    size = np.abs(loop_response(loop, known))
    useful = known[(size < _LARGE) & (size > _SMALL)]
    low, high = (useful[0], useful[-1]) if len(useful) > 1 else (known[0], known[-1])
    high = nyquist if nyquist < _WORTH * high else high
    count = int(np.log10(high / low) * _PER_DECADE) + 2
    parts = [np.geomspace(low, high, count), known, _places(margins)]
    if loop.factors.delay:
        turns = min(int(high * loop.factors.delay / _TURN), _MOST)
        parts.append(np.linspace(low, high, turns + 2))
    w: Array = np.unique(np.concatenate(parts))
    within: Array = w[(w >= low) & (w <= high)]
    return within


def _places(margins: Sequence[Margins | None]) -> Array:
    """Return the frequencies of all margins and peaks."""
    places = [
        (one.gain_margin_at, one.phase_margin_at, one.delay_margin_at, one.max_sensitivity_at, one.max_complementary_at)
        for one in margins
        if one is not None
    ]
    found = [place for row in places for place in row if place]
    return np.array(found, dtype=float)
