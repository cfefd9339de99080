"""Where an axis is divided, and how its numbers are written."""

from dataclasses import dataclass
from math import ceil, floor, isfinite, log10

from tuner.judge.wording import minus

_STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)
_TIME_STEPS = (10.0, 20.0, 30.0, 60.0, 120.0, 300.0, 600.0, 1200.0, 1800.0, 3600.0)
"""Steps that suit clocks; finer and coarser ones are as on any axis."""


@dataclass(frozen=True, slots=True)
class Tick:
    """One division: its place in the coordinates of the plot, and its number in words."""

    at: float
    text: str


def nice_step(span: float, count: int, *, time: bool = False) -> float:
    """Return the round step that divides a span into at most about `count` pieces; time likes sixties."""
    if not (isfinite(span) and span > 0.0):
        return 1.0
    raw = span / max(count, 1) * (1.0 - 1e-9)
    if time and _TIME_STEPS[0] / 2.0 < raw <= _TIME_STEPS[-1]:
        return next(step for step in _TIME_STEPS if step >= raw)
    decade = 10.0 ** floor(log10(raw))
    return next(step for step in (*_STEPS, 20.0) if step * decade >= raw) * decade


def ticks(low: float, high: float, count: int, *, offset: float = 0.0, time: bool = False) -> tuple[Tick, ...]:
    """Return the divisions of an axis from `low` to `high`.

    Parameters
    ----------
    low, high : float
        Ends, in the coordinates of the plot.
    count : int
        How many there is room for.
    offset : float
        What is added to a coordinate to write it: the resting point, so that the numbers written are round.
    time : bool
        Whether steps of 30 and 60 are better than of 25 and 50.
    """
    step = nice_step(high - low, count, time=time)
    slack = 1e-6 * step
    first, last = ceil((low + offset - slack) / step), floor((high + offset + slack) / step)
    return tuple(Tick(index * step - offset, written(index * step, step)) for index in range(first, last + 1))


def written(value: float, step: float) -> str:
    """Return a number with the decimals that tell it from its neighbours, and a true minus sign."""
    far = not 1e-3 <= max(abs(value), step) < 1e6
    text = "0" if value == 0.0 else f"{value:.3g}" if far else f"{value:.{decimals(step)}f}"
    return minus(text)


def decimals(step: float) -> int:
    """Return how many decimals a step has, at most 6."""
    return next((count for count in range(6) if abs(round(step, count) - step) < 1e-6 * step), 6)
