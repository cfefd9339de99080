"""What a ruler spans, and the exact mapping between a place on it and a value."""

from dataclasses import dataclass, replace
from functools import lru_cache
from math import ceil, floor, isfinite, log10
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from tuner.model.parameters import Parameter
from tuner.model.sheet import Sheet

POSITIONS = 10_000
"""A slider counts from 0 to this."""

OFF_NOTCH = 500
"""Positions at the left end that mean off, where a ruler has an off notch; the scale begins behind them."""

NOTCHES = 64
"""Values along a ruler at which its footing is computed; between them the edges are looked for."""

Step = Literal["fine", "coarse"]

_FACTOR: dict[Step, float] = {"fine": 1.01, "coarse": 1.10}
_INCREMENT: dict[Step, float] = {"fine": 0.01, "coarse": 0.1}
_WEIGHTS = ("b", "c")
_MAY_BE_ABSENT = ("windup_time", "disturbance_feedforward.filter_time")
_WEIGHT_END = 1.5
_SMALLEST, _LARGEST = -300, 300
_DECADES_BELOW, _DECADES_ABOVE = 1, 2


@dataclass(frozen=True, slots=True)
class RulerRange:
    """What one ruler spans.

    Parameters
    ----------
    low, high : float
        Values at the ends of the scale, in the parameter's unit.
    logarithmic : bool
        Whether equal lengths are equal factors; else equal differences.
    has_off : bool
        Whether the left end is an off notch: a gain or time of 0, or an absent one.
    off : float or None
        The value there.
    """

    low: float
    high: float
    logarithmic: bool = True
    has_off: bool = False
    off: float | None = 0.0

    @property
    def start(self) -> int:
        """The position at which the scale begins."""
        return OFF_NOTCH if self.has_off else 0


@dataclass(frozen=True, slots=True)
class Tick:
    """A line of the scale: its position, and whether it is a main one, with its value in words."""

    position: float
    main: bool
    text: str = ""


def range_for(parameter: Parameter, value: float | None, typical: float) -> RulerRange:
    """Return the range of a ruler: whole decades around the value, or around a typical one while it is off.

    `typical` must not be 0, and above 0 for a number that is never negative. The weights b and c get a linear range,
    and so do a number that has two ends and one that may be negative.
    """
    if parameter.key in _WEIGHTS:
        return widened(RulerRange(0.0, _WEIGHT_END, logarithmic=False), value)
    if parameter.maximum is not None:
        return RulerRange(parameter.minimum or 0.0, parameter.maximum, logarithmic=False)
    if parameter.minimum is None:
        return widened(RulerRange(min(2.0 * typical, 0.0), max(2.0 * typical, 0.0), logarithmic=False), value)
    decade = floor(log10(value or abs(typical)))
    has_off = not parameter.above_minimum or parameter.key in _MAY_BE_ABSENT
    off = None if parameter.above_minimum else 0.0
    return RulerRange(_decade(decade - _DECADES_BELOW), _decade(decade + _DECADES_ABOVE), has_off=has_off, off=off)


def widened(span: RulerRange, value: float | None) -> RulerRange:
    """Return the range, made wider to hold a value if it lies outside."""
    if value is None or (value == span.off and span.has_off) or span.low <= value <= span.high:
        return span
    if not span.logarithmic:
        return replace(span, low=min(span.low, floor(2.0 * value) / 2.0), high=max(span.high, ceil(2.0 * value) / 2.0))
    if value < span.low:
        return replace(span, low=_decade(floor(log10(value))))
    return replace(span, high=_decade(ceil(log10(value))))


def typical_value(sheet: Sheet, name: str) -> float:
    """Return a positive number of the order that a parameter might have, to place the ruler of one that is off.

    Times are taken as a twentieth of the trial, gains from the proportional one (common practice, no source).
    """
    time = sheet.trial.duration / 20.0
    gain = sheet.controller.parallel().kp or 1.0
    guess = {"kp": gain, "kc": gain, "ki": gain / time, "kd": gain * time / 4.0, "td": time / 4.0}
    guess |= {"feedforward.gain": _static_effort(sheet), "notch.frequency": 1.0 / time}
    typical = guess.get(name, time / 10.0 if name.endswith("filter_time") or "." in name else time)
    if name == "feedforward.gain":
        return typical
    return typical if isfinite(typical) and typical > 0.0 else 1.0


def position(span: RulerRange, value: float | None) -> int:
    """Return the position of a value, 0 to `POSITIONS`, nearest end for one outside."""
    return round(place(span, value))


def place(span: RulerRange, value: float | None) -> float:
    """Return the place of a value between two positions, for marks and painting."""
    if value is None or (span.has_off and value == span.off):
        return 0.0
    if span.logarithmic and value <= span.low:
        return float(span.start)
    share = _share(span, min(value, span.high))
    return span.start + max(share, 0.0) * (POSITIONS - span.start)


def value_at(span: RulerRange, at: int, width: float = 1.0) -> float | None:
    """Return the value at a position: the roundest number within half of `width` positions to either side.

    With the default width `position(span, value_at(span, at)) == at` on the whole scale; a drag passes the positions
    that one pixel covers, so that the hand gets round numbers.
    """
    if span.has_off and at < span.start:
        return span.off
    if at >= POSITIONS:
        return span.high
    if at <= span.start:
        return span.low
    reach = 0.49 * max(width, 1.0)
    return _roundest(_raw(span, at - reach), _raw(span, at), _raw(span, at + reach))


def stepped(span: RulerRange, value: float | None, step: Step, direction: int) -> float | None:
    """Return the value one step of a key up or down: 1 or 10 % on a logarithmic ruler; steps end at the ends."""
    if value is None or (span.has_off and value == span.off):
        return span.low if direction > 0 else value
    if span.has_off and direction < 0 and value <= span.low:
        return span.off
    if span.logarithmic:
        moved = value * _FACTOR[step] ** direction
        moved = _rounded(moved, 4)
    else:
        moved = round(value + direction * _INCREMENT[step], 10)
    return min(max(moved, span.low), span.high)


@lru_cache(maxsize=64)
def values_along(span: RulerRange, count: int) -> NDArray[np.float64]:
    """Return the values at the middles of `count` equal pieces of the whole track; 0 in the off notch.

    Shape (count,), rising, in the parameter's unit, read-only: rulers ask for the same ones again and again.
    """
    places = (np.arange(count) + 0.5) * POSITIONS / count
    values = _scale(span, (places - span.start) / (POSITIONS - span.start))
    values[places < span.start] = 0.0
    values.setflags(write=False)
    return values


@lru_cache(maxsize=64)
def notches(span: RulerRange, count: int = NOTCHES) -> NDArray[np.float64]:
    """Return `count` values from end to end of the scale, and 0 before them where the ruler has an off notch.

    Shape (count,) or (count + 1,), rising, in the parameter's unit, read-only.
    """
    values = _scale(span, np.linspace(0.0, 1.0, count))
    values = np.concatenate(([0.0], values)) if span.has_off else values
    values.setflags(write=False)
    return values


def ticks(span: RulerRange) -> tuple[Tick, ...]:
    """Return the lines of the scale: decades with their value, and 2 to 9 between them; tenths on a linear ruler."""
    if not span.logarithmic:
        step = _decade(floor(log10((span.high - span.low) / _WEIGHT_END)) - 1)
        count = round((span.high - span.low) / step)
        values = [(round(span.low + index * step, 10), index % 5 == 0) for index in range(count + 1)]
    else:
        first, last = round(log10(span.low)), round(log10(span.high))
        values = [(m * _decade(d), m == 1) for d in range(first, last) for m in range(1, 10)] + [(span.high, True)]
    return tuple(Tick(place(span, value), main, f"{value:g}" if main else "") for value, main in values)


def _share(span: RulerRange, value: float) -> float:
    if span.logarithmic:
        return (log10(value) - log10(span.low)) / (log10(span.high) - log10(span.low))
    return (value - span.low) / (span.high - span.low)


def _scale(span: RulerRange, shares: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return the values at shares of the scale, exact at its ends."""
    held = np.clip(shares, 0.0, 1.0)
    if not span.logarithmic:
        return span.low + held * (span.high - span.low)
    low, high = log10(span.low), log10(span.high)
    values: NDArray[np.float64] = np.clip(10.0 ** (low + held * (high - low)), span.low, span.high)
    values[held == 0.0], values[held == 1.0] = span.low, span.high
    return values


def _raw(span: RulerRange, at: float) -> float:
    share = min(max((at - span.start) / (POSITIONS - span.start), 0.0), 1.0)
    if span.logarithmic:
        return float(10.0 ** (log10(span.low) + share * (log10(span.high) - log10(span.low))))
    return span.low + share * (span.high - span.low)


def _roundest(low: float, middle: float, high: float) -> float:
    """Return the number of the fewest digits between two bounds, nearest to the middle."""
    for digits in range(1, 17):
        candidate = _rounded(middle, digits)
        if low <= candidate <= high:
            return candidate
    return middle


def _rounded(value: float, digits: int) -> float:
    return float(f"{value:.{digits - 1}e}")


def _decade(exponent: int) -> float:
    return float(f"1e{min(max(exponent, _SMALLEST), _LARGEST)}")


def _static_effort(sheet: Sheet) -> float:
    """Return about how much effort a unit of reference takes: that of the ranges of both, 1 where one is not known."""
    effort, output = sheet.loop.manipulated, sheet.loop.controlled
    if None in (effort.low, effort.high, output.low, output.high):
        return sheet.controller.sign
    spans = ((effort.high or 0.0) - (effort.low or 0.0), (output.high or 0.0) - (output.low or 0.0))
    return sheet.controller.sign * spans[0] / spans[1]
