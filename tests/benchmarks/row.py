"""One line of the report of speeds, and how a time is taken."""

import statistics
import time
from collections.abc import Callable
from dataclasses import dataclass

MILLI = 1e3


@dataclass(frozen=True, slots=True)
class Row:
    """A figure, beside a yardstick that was measured in the same run, so that the ratio holds on any machine.

    Parameters
    ----------
    name : str
        Key in the JSON.
    what : str
        What is measured, in words.
    unit : str
        Of the figure and, where `against` names no other, of the yardstick.
    goal : str
        What is aimed at.
    value, p99 : float or None
        Median and 99th percentile; None where there is nothing to measure, see `note`.
    yardstick, ratio : float or None
        What the figure is compared with, and the figure over it, or it over the figure where the goal is a speed-up.
    against : str
        What the yardstick is.
    note : str
        What else the reader must know, or why there is no figure.
    """

    name: str
    what: str
    unit: str
    goal: str
    value: float | None = None
    p99: float | None = None
    yardstick: float | None = None
    ratio: float | None = None
    against: str = ""
    note: str = ""


@dataclass(frozen=True, slots=True)
class Times:
    """Median and 99th percentile of repeated measurements, ms; of fewer than a hundred the latter is the largest."""

    median: float
    p99: float


def summed_up(milliseconds: list[float]) -> Times:
    """Return what is told of repeated measurements."""
    ordered = sorted(milliseconds)
    return Times(statistics.median(ordered), ordered[min(len(ordered) - 1, int(0.99 * len(ordered)))])


def timed(action: Callable[[], object], repeats: int, warming: int = 2) -> Times:
    """Return how long an action takes, after a few runs that do not count."""
    for _ in range(warming):
        action()
    found = []
    for _ in range(repeats):
        start = time.perf_counter()
        action()
        found.append(MILLI * (time.perf_counter() - start))
    return summed_up(found)
