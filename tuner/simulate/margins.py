"""Margins of a stable loop: every crossing and peak bracketed on a grid, then found exactly by Newton's method."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import degrees, inf, pi
from typing import NamedTuple

import numpy as np

from tuner.kernels import crossings
from tuner.simulate.factors import stack
from tuner.simulate.frequency import at_end, at_zero, grid
from tuner.simulate.loop import Loop, same_shape
from tuner.simulate.traces import ComplexArray

BANDWIDTH_LEVEL = crossings.LEVEL
"""The sensitivity that ends the bandwidth: 0.707 as the measure is defined, not the square root of one half."""


@dataclass(frozen=True, slots=True)
class Margins:
    """Margins of one loop; frequencies in rad per time unit, None where there is no place.

    Parameters
    ----------
    gain_margin : float
        Smallest factor above 1 that brings the loop gain to -1; infinite when none does.
    phase_margin : float
        Degrees; smallest distance of the phase from -180 degrees where the gain is one; infinite when it never is.
    delay_margin : float
        Time units; smallest extra dead time that brings the loop gain to -1. 0 when the gain of a continuous loop stays
        at or above one at w -> infinity; at most a sample when that of a sampled loop is above one at the Nyquist
        frequency.
    max_sensitivity, max_complementary : float
        Largest abs(S) and abs(T), the limits at w -> 0 and at the highest frequency included (there w is infinite for
        a continuous loop).
    bandwidth : float or None
        Lowest frequency at which abs(S) rises to 0.707; None when it does not (Skogestad and Postlethwaite,
        Multivariable Feedback Control; from memory).
    """

    gain_margin: float
    gain_margin_at: float | None
    phase_margin: float
    phase_margin_at: float | None
    delay_margin: float
    delay_margin_at: float | None
    max_sensitivity: float
    max_sensitivity_at: float
    max_complementary: float
    max_complementary_at: float
    bandwidth: float | None


def margins(loops: Sequence[Loop], poles: Sequence[ComplexArray]) -> tuple[Margins, ...]:
    """Return the margins of stable loops; together they take less time than one by one.

    Parameters
    ----------
    loops : sequence of Loop
        Stable: an unstable loop has no margins, and what is returned for one means nothing.
    poles : sequence of ndarray of complex
        Closed-loop poles of each in s, those that are known: peaks are sought around them.
    """
    found: dict[int, Margins] = {}
    for places in same_shape(loops):
        rows = stack([loops[i].factors for i in places])
        w = grid(rows, _padded([poles[i] for i in places]))
        out = np.empty((rows.rows, crossings.COLUMNS))
        crossings.scan(w, rows.roots, rows.zero_count, rows.gain, rows.delay, rows.step, rows.unit, out)
        for place, row in zip(places, out.tolist(), strict=True):
            found[place] = _margins(loops[place], row)
    return tuple(found[i] for i in range(len(loops)))


def _padded(poles: Sequence[ComplexArray]) -> ComplexArray:
    """Return poles as one array, filled up with infinities."""
    out = np.full((len(poles), max(map(len, poles))), complex(inf))
    for row, some in zip(out, poles, strict=True):
        row[: len(some)] = some
    return out


class _Peak(NamedTuple):
    """A largest value, and the frequency at which it is reached."""

    value: float
    at: float


class _End(NamedTuple):
    """The loop gain at an end of the frequency axis, and whether its phase there takes every value."""

    gain: float
    at: float
    turning: bool


def _margins(loop: Loop, found: list[float]) -> Margins:
    """Choose between what the scan found and the limits at both ends."""
    factors = loop.factors
    end = pi / factors.step if factors.step else inf
    ends = (
        _End(at_zero(factors), 0.0, turning=False),
        _End(at_end(factors), end, turning=factors.delay > 0.0 and not factors.step),
    )
    size, size_at, angle, angle_at, delay, delay_at, top, top_at, widest, widest_at, reached = found
    gain_margin = _gain_margin(size, size_at, ends)
    delay_margin = _delay_margin(delay, delay_at, ends[1], factors.step)
    sensitivity = _largest(_Peak(top, top_at), [_Peak(_sensitivity(end), end.at) for end in ends])
    complementary = _largest(_Peak(widest, widest_at), [_Peak(_complementary(end), end.at) for end in ends])
    return Margins(
        gain_margin=gain_margin[0],
        gain_margin_at=gain_margin[1],
        phase_margin=degrees(angle),
        phase_margin_at=None if angle == inf else angle_at,
        delay_margin=delay_margin[0],
        delay_margin_at=delay_margin[1],
        max_sensitivity=sensitivity.value,
        max_sensitivity_at=sensitivity.at,
        max_complementary=complementary.value,
        max_complementary_at=complementary.at,
        bandwidth=None if reached == inf else reached,
    )


def _gain_margin(size: float, at: float, ends: tuple[_End, _End]) -> tuple[float, float | None]:
    candidates = [(1.0 / size, at)] if size else []
    small = [end for end in ends if 0.0 < abs(end.gain) < 1.0]
    candidates += [(1.0 / abs(end.gain), end.at) for end in small if end.gain < 0.0 or end.turning]
    return min(candidates) if candidates else (inf, None)


def _delay_margin(delay: float, at: float, end: _End, step: float) -> tuple[float, float | None]:
    """Return the smaller of the delay margin at a crossing and what the highest frequency allows.

    At the Nyquist frequency one sample more changes the sign of the loop gain there, and so of 1 + L when |L| > 1.
    """
    candidates = [(delay, at)] if delay < inf else []
    if step and abs(end.gain) > 1.0:
        candidates.append((step, end.at))
    if not step and abs(end.gain) >= 1.0:
        candidates.append((0.0, inf))
    return min(candidates) if candidates else (inf, None)


def _largest(peak: _Peak, ends: list[_Peak]) -> _Peak:
    """Return the largest of a peak and the ends; of equal ones that of the lowest frequency."""
    largest = max(peak.value, *(end.value for end in ends))
    equal = [one for one in (ends[0], peak, ends[1]) if one.value >= largest * (1.0 - 1e-12)]
    return _Peak(largest, equal[0].at)


def _sensitivity(end: _End) -> float:
    """Return abs(S) at an end: infinite gain leaves none."""
    distance = abs(1.0 - abs(end.gain)) if end.turning else abs(1.0 + end.gain)
    return 1.0 / distance if distance else inf


def _complementary(end: _End) -> float:
    """Return abs(T) at an end."""
    return 1.0 if abs(end.gain) == inf else abs(end.gain) * _sensitivity(end)
