"""How the axes of plots over frequency are divided: decades, and round steps of decibels and degrees."""

from collections.abc import Sequence
from math import ceil, floor, log10

from tuner.window.plots.ticks import Tick, written

_WITHIN = (1, 2, 5)

DECIBELS = (1.0, 2.0, 5.0, 10.0, 20.0, 40.0, 60.0, 80.0, 100.0)
DEGREES = (5.0, 10.0, 15.0, 30.0, 45.0, 90.0, 180.0, 360.0, 720.0, 1440.0, 3600.0, 7200.0)


def decades(low: float, high: float, count: int) -> tuple[Tick, ...]:
    """Return the divisions of a logarithmic axis, given as logarithms: decades, and 2 and 5 where there is room."""
    steps = _WITHIN if (high - low) * len(_WITHIN) <= count else (1,)
    every = max(1, ceil((high - low) / count))
    return tuple(
        Tick(place, f"{step * 10.0**decade:g}")
        for decade in range(floor(low), ceil(high) + 1)
        if decade % every == 0
        for step in steps
        if low <= (place := decade + log10(step)) <= high
    )


def multiples(low: float, high: float, count: int, steps: Sequence[float]) -> tuple[Tick, ...]:
    """Return the divisions at multiples of the smallest of some steps that makes at most `count` pieces."""
    step = next((step for step in steps if high - low <= count * step), steps[-1])
    return tuple(
        Tick(index * step, written(index * step, step)) for index in range(ceil(low / step), floor(high / step) + 1)
    )
