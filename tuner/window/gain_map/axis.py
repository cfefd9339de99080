"""An axis of the map: one gain along the span of its ruler, its places told as shares of the whole length."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tuner.footing.classes import Track
from tuner.model.parameters import Parameter
from tuner.model.units import unit_in
from tuner.session import typed
from tuner.session.document import Document
from tuner.session.ruler_range import POSITIONS, RulerRange, Step, Tick, notches, place, stepped, ticks, value_at

Array = NDArray[np.float64]

_CLOSE = 1.35
"""Factor to either side of a value within which places close around it are."""

_CLOSE_COUNT = 17


@dataclass(frozen=True, slots=True)
class Axis:
    """One gain along its ruler.

    Parameters
    ----------
    name : str
        Key of the sheet.
    span : RulerRange
        What its ruler spans.
    unit : str
        Of its values, in the units of the loop.
    """

    name: str
    span: RulerRange
    unit: str = ""

    @property
    def start(self) -> float:
        """The share of the length at which the scale begins; before it the gain is off."""
        return self.span.start / POSITIONS

    @property
    def title(self) -> str:
        """What stands at the axis."""
        return f"{self.name}, {self.unit}" if self.unit else self.name

    def track(self, count: int, near: float | None = None) -> Track:
        """Return what there is to find out along the axis: at off, at `count` places, and close around a value."""
        values = notches(self.span, count)
        if near is not None and self.span.low <= near <= self.span.high:
            values = np.union1d(values, self._close_to(near))
        return Track(self.name, values)

    def is_close(self, value: float | None, near: float | None) -> bool:
        """Tell whether a value is well among the places close around another."""
        if value is None or near is None or value < self.span.low or near < self.span.low:
            return value == near
        low, high = self._ends(near)
        reach = 0.6 * max(self.share(high) - self.share(near), self.share(near) - self.share(low))
        return abs(self.share(value) - self.share(near)) <= reach

    def share(self, value: float | None) -> float:
        """Return the share of the length, 0 to 1, at which a value stands."""
        return place(self.span, value) / POSITIONS

    def value(self, share: float, pixels: int) -> float | None:
        """Return the roundest value at a share of a length of so many pixels."""
        at = round(min(max(share, 0.0), 1.0) * POSITIONS)
        return value_at(self.span, at, POSITIONS / max(pixels, 1))

    def step(self, value: float | None, pace: Step, direction: int) -> float | None:
        """Return the value one step up or down."""
        return stepped(self.span, value, pace, direction)

    def ticks(self) -> tuple[Tick, ...]:
        """Return the lines of the scale; a position over `POSITIONS` is its share."""
        return ticks(self.span)

    def in_words(self, value: float | None) -> str:
        """Return the name, a value and its unit: "kp 4.2 %/degC"."""
        if value is None:
            return f"{self.name} off"
        return " ".join(filter(None, (self.name, typed.shown(value), self.unit)))

    def shares(self, values: Array) -> Array:
        """Return the shares of the length of some values, shape (n,)."""
        return np.array([self.share(value) for value in values.tolist()])

    def indices(self, pixels: int, values: Array) -> Array:
        """Return where the middle of every pixel lies among the values of a track, shape (pixels,).

        Between two values it is a fraction; in the off notch it is 0.
        """
        middles = (np.arange(pixels) + 0.5) / pixels
        along = np.interp(middles, self.shares(values), np.arange(len(values)))
        return np.where(middles < self.start, 0.0, np.maximum(along, 1.0)) if self.span.has_off else along

    def _ends(self, near: float) -> tuple[float, float]:
        """Return the ends of the places close around a value."""
        low, high = self.span.low, self.span.high
        apart = 0.1 * (high - low)
        ends = (near / _CLOSE, near * _CLOSE) if self.span.logarithmic else (near - apart, near + apart)
        return max(ends[0], low), min(ends[1], high)

    def _close_to(self, near: float) -> Array:
        spaced = np.geomspace if self.span.logarithmic else np.linspace
        values: Array = spaced(*self._ends(near), _CLOSE_COUNT)
        return np.clip(values, *self._ends(near))


def axis_of(document: Document, parameter: Parameter) -> Axis:
    """Return the axis of a gain of the open sheet."""
    unit = unit_in(parameter.unit, document.sheet.loop)
    return Axis(parameter.name, document.range_of(parameter), unit)
