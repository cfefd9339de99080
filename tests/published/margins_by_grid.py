"""Margins of a loop gain by brute force: a dense grid of frequencies, each crossing and peak then refined by scipy."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from math import inf, pi

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq, minimize_scalar

Array = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]
LoopGain = Callable[[Array], ComplexArray]

LEVEL = 0.707
_GRID = 1500


@dataclass(slots=True)
class GridMargins:
    """Margins by their definitions; `inf` where there is none, None for no bandwidth."""

    gain_margin: float = inf
    phase_margin: float = inf
    delay_margin: float = inf
    max_sensitivity: float = 0.0
    max_complementary: float = 0.0
    bandwidth: float | None = None
    crossovers: list[float] = field(default_factory=list)


def margins_by_grid(
    gain: LoopGain, reach: tuple[float, float], around: Sequence[complex], ends: Sequence[float]
) -> GridMargins:
    """Return the margins of a stable loop.

    Parameters
    ----------
    gain : callable
        L at frequencies, rad per time unit.
    reach : tuple of float
        Lowest and highest frequency of the grid.
    around : sequence of complex
        Closed-loop poles, around which the grid is denser.
    ends : sequence of float
        The real values that L takes in the limit beyond the grid.
    """
    w = _grid(*reach, around)
    value = gain(w)
    found = GridMargins()
    _at_gain_one(gain, w, value, found)
    _at_half_a_turn(gain, w, value, found)
    found.max_sensitivity = _peak(lambda at: 1.0 / np.abs(1.0 + gain(at)), w)
    found.max_complementary = _peak(lambda at: np.abs(gain(at) / (1.0 + gain(at))), w)
    found.bandwidth = _bandwidth(gain, w, value)
    for end in ends:
        _at_an_end(end, found)
    return found


def _at_an_end(gain: float, found: GridMargins) -> None:
    """Let the value of L in a limit count: as a crossing where it is between -1 and 0, and for both peaks."""
    if -1.0 < gain < 0.0:
        found.gain_margin = min(found.gain_margin, -1.0 / gain)
    if abs(gain) == inf:
        found.max_complementary = max(found.max_complementary, 1.0)
    else:
        found.max_sensitivity = max(found.max_sensitivity, 1.0 / abs(1.0 + gain))
        found.max_complementary = max(found.max_complementary, abs(gain / (1.0 + gain)))


def _grid(low: float, high: float, around: Sequence[complex]) -> Array:
    near = [abs(p.imag) + abs(p.real) * np.linspace(-6.0, 6.0, 121) for p in around if p.imag > 0.0]
    w = np.concatenate((np.geomspace(low, high, _GRID), np.linspace(low, high, _GRID), *near))
    return np.unique(w[(w >= low) & (w <= high)])


def _at_gain_one(gain: LoopGain, w: Array, value: ComplexArray, found: GridMargins) -> None:
    """Phase and delay margin: the least over all frequencies where abs(L) is one."""
    for w_c in _roots(lambda at: np.log(np.abs(gain(at))), w, np.log(np.abs(value))):
        there = gain(np.array([w_c]))[0]
        if abs(abs(there) - 1.0) > 1e-6:
            continue
        found.crossovers.append(w_c)
        found.phase_margin = min(found.phase_margin, abs(np.degrees(np.angle(-there))))
        found.delay_margin = min(found.delay_margin, (pi + np.angle(there)) % (2.0 * pi) / w_c)


def _at_half_a_turn(gain: LoopGain, w: Array, value: ComplexArray, found: GridMargins) -> None:
    """Gain margin: the least factor above one over all frequencies where L is real and negative."""
    for w_c in _roots(lambda at: gain(at).imag / np.abs(gain(at)), w, value.imag / np.abs(value)):
        there = gain(np.array([w_c]))[0]
        if -1.0 < there.real < 0.0 and abs(there.imag) < 1e-6 * abs(there):
            found.gain_margin = min(found.gain_margin, -1.0 / there.real)


def _roots(function: Callable[[Array], Array], w: Array, value: Array) -> list[float]:
    places = np.flatnonzero(np.sign(value[1:]) != np.sign(value[:-1]))

    def one(at: float) -> float:
        return float(function(np.array([at]))[0])

    return [float(brentq(one, w[i], w[i + 1], xtol=1e-15, rtol=1e-14)) for i in places if one(w[i]) * one(w[i + 1]) < 0]


def _peak(size: Callable[[Array], Array], w: Array) -> float:
    """Return the largest value: every local maximum of the grid that may be the highest is refined."""
    value = size(w)
    best = float(value.max())
    inner = np.flatnonzero((value[1:-1] >= value[:-2]) & (value[1:-1] >= value[2:]) & (value[1:-1] > 0.8 * best)) + 1
    for i in inner:
        bounds = (w[i - 1], w[i + 1])
        found = minimize_scalar(lambda at: -float(size(np.array([at]))[0]), bounds=bounds, method="bounded",
                                options={"xatol": 1e-9 * w[i]})  # fmt: skip
        best = max(best, -float(found.fun))
    return best


def _bandwidth(gain: LoopGain, w: Array, value: ComplexArray) -> float | None:
    """Return the lowest frequency at which abs(S) rises to 0.707."""
    excess = 1.0 / np.abs(1.0 + value) - LEVEL
    rising = np.flatnonzero((excess[:-1] < 0.0) & (excess[1:] >= 0.0))
    if not rising.size:
        return None
    i = rising[0]
    return float(brentq(lambda at: 1.0 / abs(1.0 + gain(np.array([at]))[0]) - LEVEL, w[i], w[i + 1], rtol=1e-14))
