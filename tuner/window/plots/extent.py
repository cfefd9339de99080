"""How far an axis reaches: what the curves ask for, within reason, and without jumping while the hand is on."""

from collections.abc import Iterable
from dataclasses import dataclass
from math import ceil, floor

import numpy as np
from numpy.typing import NDArray

from tuner.window.plots.ticks import nice_step

Array = NDArray[np.float64]

_PADDING = 0.06
_FULL = 0.85
"""A range that is filled at least so far stays as it is."""


@dataclass(frozen=True, slots=True)
class Extent:
    """A range of an axis."""

    low: float
    high: float

    @property
    def span(self) -> float:
        """Its length."""
        return self.high - self.low

    def hull(self, other: "Extent | None") -> "Extent":
        """Return the smallest extent around both."""
        return self if other is None else Extent(min(self.low, other.low), max(self.high, other.high))

    def within(self, bounds: "Extent") -> "Extent":
        """Return the part inside `bounds`."""
        clip = np.clip([self.low, self.high], bounds.low, bounds.high)
        return Extent(float(clip[0]), float(clip[1]))

    def nearest(self, value: float) -> float:
        """Return the place inside that is nearest to a value."""
        return min(max(value, self.low), self.high)

    def grown(self, share: float) -> "Extent":
        """Return it with `share` of its length added at both ends."""
        return Extent(self.low - share * self.span, self.high + share * self.span)

    def holds(self, other: "Extent") -> bool:
        """Tell whether another one lies inside."""
        return self.low <= other.low and other.high <= self.high


def of_values(values: Array) -> Extent | None:
    """Return the extent of the finite values of an array, None when it has none."""
    if values.size and np.isfinite(ends := np.array([values.min(), values.max()])).all():
        return Extent(float(ends[0]), float(ends[1]))
    finite = values[np.isfinite(values)]
    return Extent(float(finite.min()), float(finite.max())) if finite.size else None


def of_levels(levels: Iterable[float]) -> Extent | None:
    """Return the extent of a few numbers, None of none."""
    return of_values(np.array(tuple(levels), dtype=np.float64))


def wanted(nominal: Array, others: Iterable[Array], fixed: Extent, *, calm: bool) -> Extent:
    """Return what a plot should span.

    A curve that runs away must not decide what the others look like: the family reaches at most one span beyond the
    nominal curve and the fixed marks; when the nominal loop itself is not `calm`, its curve at most one span beyond
    the marks, or, where there are none, three times its median size.
    """
    base = fixed
    if calm:
        base = base.hull(of_values(nominal))
    elif base.span <= 0.0:
        base = base.hull(_middle(nominal))
    reach = base.grown(1.0)
    for values in (nominal, *others):
        if (asked := of_values(values)) is not None:
            base = base.hull(asked.within(reach))
    return base


def _middle(values: Array) -> Extent | None:
    size = np.abs(values[np.isfinite(values)])
    half = 3.0 * float(np.median(size)) if size.size else 0.0
    return Extent(-half, half) if half > 0.0 else None


@dataclass(slots=True)
class SteadyExtent:
    """The range that an axis shows; it widens at once and narrows only when the hand is off."""

    shown: Extent | None = None

    def offer(self, asked: Extent, *, held: bool) -> Extent:
        """Return the range to show for what is asked; `held` while a hand is on a ruler."""
        padded = rounded(asked)
        now = self.shown
        if now is None:
            self.shown = padded
        elif held:
            self.shown = now if now.holds(asked) else now.hull(padded)
        elif not now.holds(asked) or padded.span < _FULL * now.span:
            self.shown = padded
        return self.shown if self.shown is not None else padded

    def forget(self) -> None:
        """Start again with what is asked next."""
        self.shown = None


def rounded(asked: Extent) -> Extent:
    """Return an extent with some room at both ends, each on a round number, so that small changes change nothing."""
    if asked.span <= 0.0:
        half = max(abs(asked.low), 1.0) * 0.5
        return Extent(asked.low - half, asked.high + half)
    step = nice_step(asked.span, 20)
    padded = asked.grown(_PADDING)
    return Extent(floor(padded.low / step) * step, ceil(padded.high / step) * step)
