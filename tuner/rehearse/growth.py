"""How an unstable loop grows: what its rightmost pole says beforehand, and what the rehearsal then shows."""

from collections import deque
from dataclasses import dataclass
from itertools import pairwise
from math import exp, inf, isfinite, isnan, log, nan, pi
from statistics import median

from tuner.rehearse.strip import Array

_RETREAT = 0.1
"""Share of the last swing by which a signal must come back before its turn counts."""

_TURNS = 9
"""Turns of a signal that are remembered."""

_MOST_SWINGS = 50.0
"""A pole that turns this many times while it grows by e rings; a slower turn is not seen as one."""


@dataclass(frozen=True, slots=True)
class Growth:
    """How a loop grows.

    Parameters
    ----------
    predicted : float
        Factor for each cycle, or for each time unit where it does not ring, by the rightmost pole.
    measured : float or None
        The same as the output shows; None until it has swung often enough.
    period : float
        Time of a cycle by the pole, time units; infinite where it does not ring.
    sentence : str
        All of it in words.
    """

    predicted: float
    measured: float | None
    period: float
    sentence: str


class Turns:
    """Follows a signal and remembers where it turned, whatever it swings about."""

    def __init__(self) -> None:
        self._turns: deque[tuple[float, float]] = deque(maxlen=_TURNS)
        self._best: tuple[float, float] | None = None
        self._last, self._before, self._after = nan, nan, nan
        self._rising = True

    def clear(self) -> None:
        """Forget everything: something else has been asked of the loop."""
        self._turns.clear()
        self._best = None

    def follow(self, t: Array, y: Array) -> None:
        """Take in further points, shape (n,) each."""
        for time, value in zip(t.tolist(), y.tolist(), strict=True):
            self._follow(time, value)

    def _follow(self, time: float, value: float) -> None:
        if self._best is None:
            self._best, self._rising = (time, value), True
        elif (value > self._best[1]) == self._rising and value != self._best[1]:
            self._best, self._before, self._after = (time, value), self._last, nan
        else:
            self._after = value if isnan(self._after) else self._after
            if abs(value - self._best[1]) > _RETREAT * self._swing():
                self._turns.append((self._best[0], self._top(self._best[1])))
                self._best, self._before, self._after = (time, value), self._last, nan
                self._rising = not self._rising
        self._last = value

    def _top(self, value: float) -> float:
        """Return how high a turn really is: the top of the parabola through its highest point and those beside it."""
        fall = 2.0 * value - self._before - self._after
        slope = self._after - self._before
        return value if isnan(fall) or fall == 0.0 else value + slope * slope / (8.0 * fall)

    def _swing(self) -> float:
        """Return the size of the last swing, 0 before there was one."""
        return abs(self._best[1] - self._turns[-1][1]) if self._turns and self._best else 0.0

    def factor(self) -> float | None:
        """Return by what factor the swings grow in a cycle, two of them; None before there are enough."""
        values = [value for _, value in self._turns]
        swings = [abs(after - before) for before, after in pairwise(values)]
        # The first turns still show how the signal got there.
        ratios = [after / before for before, after in zip(swings[1:], swings[3:], strict=False) if before]
        return median(ratios) if ratios else None

    def period(self) -> float | None:
        """Return the time of a cycle, from turn to turn of the same kind; None before there are enough."""
        times = [time for time, _ in self._turns]
        cycles = [after - before for before, after in zip(times[1:], times[3:], strict=False)]
        return median(cycles) if cycles else None


class Slopes:
    """Follows a signal that runs away without ringing: its slope, at times a while apart."""

    def __init__(self) -> None:
        self._points: deque[tuple[float, float]] = deque(maxlen=3)

    def clear(self) -> None:
        """Forget everything."""
        self._points.clear()

    def follow(self, time: float, value: float) -> None:
        """Take in a further point, as far from the last one as that was from the one before."""
        self._points.append((time, value))

    def rate(self) -> float | None:
        """Return the rate of growth, 1 per time unit, of what moves away from rest; None when it does not."""
        if len(self._points) < 3:
            return None
        (a, first), (b, second), (c, third) = self._points
        before, after = (second - first) / (b - a), (third - second) / (c - b)
        return 2.0 * log(after / before) / (c - a) if before * after > 0.0 else None


def grown(pole: complex, turns: Turns, slopes: Slopes, time_unit: str, *, limited: bool) -> Growth:
    """Say how a loop with an unstable rightmost pole grows.

    Parameters
    ----------
    pole : complex
        Rad per time unit, in s; its real part is not below zero.
    limited : bool
        Whether a limit held the effort in the last cycle.
    """
    turning = abs(pole.imag)
    rings = turning > 0.0 and pole.real * 2.0 * pi / turning < log(_MOST_SWINGS)
    if rings:
        period = 2.0 * pi / turning
        predicted, measured = exp(pole.real * period), turns.factor()
        told = _rings(predicted, measured, period, time_unit)
    else:
        period, rate = inf, slopes.rate()
        predicted = exp(pole.real) if pole.real < 700.0 else inf
        measured = None if rate is None or rate > 700.0 else exp(rate)
        told = _runs(pole.real, rate, time_unit)
    return Growth(predicted, measured, period, f"Unstable: {told}{_HELD if limited else ''}.")


_HELD = "; a limit of the effort holds it now, so that it no longer grows as the pole says"


def _rings(predicted: float, measured: float | None, period: float, unit: str) -> str:
    cycle = f"each cycle of {period:.3g} {unit}"
    if measured is None:
        return f"the swing grows by a factor of {predicted:.3g} {cycle}, the pole says"
    return f"the swing grows by a factor of {measured:.3g} {cycle}; the pole says {predicted:.3g}"


def _runs(growth: float, rate: float | None, unit: str) -> str:
    said = f"the pole says every {log(2.0) / growth:.3g} {unit}" if growth > 0.0 else "the pole lies on the very edge"
    if rate is None or rate <= 0.0 or not isfinite(rate):
        return f"it runs away and doubles; {said}"
    return f"it doubles every {log(2.0) / rate:.3g} {unit}; {said}"
