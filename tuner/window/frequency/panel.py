"""A plot over frequency: curves of the looked-at plant, the family behind it, and the marks of limits and margins."""

from dataclasses import dataclass
from math import ceil, floor, log10
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QColor

from tuner.judge.assessment import Assessment
from tuner.judge.wording import quantity, unit_of
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet
from tuner.window.plots import thinning
from tuner.window.plots.extent import Extent, SteadyExtent
from tuner.window.plots.items import Curve
from tuner.window.plots.marks import Marks, Words
from tuner.window.plots.panel import Panel
from tuner.window.plots.ticks import Tick, ticks
from tuner.window.shown import Shown
from tuner.window.theme import Theme

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves

Array = NDArray[np.float64]

_FAMILY_BINS = 150
_TICK_WIDTH, _TICK_HEIGHT = 64, 28
_DIVISIONS = (1, 2, 5)


@dataclass(frozen=True, slots=True, eq=False)
class Bundle:
    """Curves of one kind: the plant's own, those of the family, the name where it runs, and the role of its colour.

    Parameters
    ----------
    own : ndarray, shape (n,)
    family : ndarray, shape (m, n)
    name : str
    role : str
    place : float
        Share of the curve at which it is named.
    """

    own: Array
    family: Array
    name: str
    role: str
    place: float = 0.5


class FrequencyPanel(Panel):
    """A plot over the logarithm of frequency; subclasses say which curves and marks."""

    measures: tuple[str, ...] = ()
    """Measures that are read off here."""

    def __init__(self, name: str, theme: Theme, curves: int = 1) -> None:
        self._steady, self._across = SteadyExtent(), SteadyExtent()
        self._curves: FrequencyCurves | None = None
        self._bundles: tuple[Bundle, ...] = ()
        self._family_x = np.empty(0)
        self._marks = Marks()
        self._families = [Curve(smooth=False, depth=-40.0) for _ in range(curves)]
        self._own = [Curve(strong=True, depth=float(-index)) for index in range(curves)]
        super().__init__(name, theme)
        for item in (*self._families, *self._own):
            self.view.addItem(item, ignoreBounds=True)

    # What subclasses say ----------------------------------------------------------------------------------------

    def bundles(self, curves: "FrequencyCurves") -> tuple[Bundle, ...]:
        """Return the curves."""
        raise NotImplementedError

    def frequency_marks(self, shown: Shown, curves: "FrequencyCurves") -> Marks:
        """Return limits and margins."""
        raise NotImplementedError

    def axis_words(self) -> str:
        """Return what stands on the vertical axis, with its unit."""
        raise NotImplementedError

    def height(self) -> Extent:
        """Return the range that is always in sight."""
        raise NotImplementedError

    def said(self, value: float) -> str:
        """Return a value of the vertical axis in words."""
        raise NotImplementedError

    # Panel ------------------------------------------------------------------------------------------------------

    def draw(self, shown: Shown) -> None:
        """Take over the curves; until the whole family is known, its last curves stay."""
        if shown.frequency is None or not shown.frequency.w.size:
            return
        self._curves = shown.frequency
        bundles = self.bundles(shown.frequency)
        if shown.whole or not self._bundles:
            self._family_x = np.log10(shown.frequency.w)
        else:
            before = [one.family for one in self._bundles]
            bundles = tuple(
                Bundle(new.own, old, new.name, new.role, new.place) for new, old in zip(bundles, before, strict=True)
            )
        self._bundles = bundles
        self._marks = self.frequency_marks(shown, shown.frequency)
        if shown.whole:
            missed, bad = missed_of(shown, self.measures)
            self.set_words(f"{self.axis_words()}{worst_words(shown, self.measures)}", missed, bad=bad)
        if (asked := self.ask()) is not None:
            x = self._across.offer(asked[0], held=self.held)
            self.set_ranges(x, self._steady.offer(asked[1], held=self.held))
        self.redraw()

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return the frequencies that are known, and the heights in which something happens."""
        if self._curves is None or not self._curves.w.size:
            return None
        x = np.log10(self._curves.w)
        return Extent(float(x[0]), float(x[-1])), self.height()

    def redraw(self) -> None:
        """Draw the curves in the ranges and colours that hold now."""
        if self._curves is None or self.shown is None:
            return
        (across, seen), columns = self.ranges(), self.columns()
        x = np.log10(self._curves.w)
        for item, own, bundle in zip(self._families, self._own, self._bundles, strict=True):
            item.set_colour(self._theme.colour("family" if bundle.role == "nominal" else "band"))
            bins = min(_FAMILY_BINS, columns // 2)
            item.show_points(thinning.bundle(self._family_x, _finite(bundle.family), seen, bins))
            own.set_colour(self._colour(bundle.role))
            own.show_points(thinning.single(x, _finite(bundle.own), seen, columns))
        self.ground.areas = self._marks.areas
        self._divide(across, seen)
        self.marks.show_marks(self._marks, self._names(x, seen))

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Return the loop at the pointer's frequency: gain, phase, and both sensitivities."""
        del y
        if self._curves is None or self.shown is None or not self._bundles:
            return None
        known = np.log10(self._curves.w)
        if not known[0] <= x <= known[-1]:
            return None
        index = int(np.abs(known - x).argmin())
        value = float(self._bundles[0].own[index])
        return (float(known[index]), value), loop_words(self._curves, index, self.shown.sheet)

    def step(self, steps: int) -> tuple[float, float] | None:
        """Return the next frequency, hundredths of what is seen away."""
        if self._curves is None:
            return None
        x = self.ranges()[0]
        now = self.marks.pointer[0] if self.marks.pointer else x.low
        return float(np.clip(now + 0.01 * steps * x.span, x.low, x.high)), 0.0

    def forget(self) -> None:
        """Forget ranges and curves."""
        super().forget()
        self._curves, self._bundles = None, ()
        self._steady.forget()
        self._across.forget()

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()

    # Inside -----------------------------------------------------------------------------------------------------

    def _colour(self, role: str) -> QColor:
        return self._theme.colour("kept" if self.stale else role)

    def _divide(self, across: Extent, upwards: Extent) -> None:
        unit = f"rad/{self.shown.sheet.loop.time_unit}" if self.shown else ""
        room = max(int(self.columns() / _TICK_WIDTH), 2)
        rows = max(int(self.view.getPlotItem().getViewBox().height() / _TICK_HEIGHT), 2)
        self.set_ticks(decades(across.low, across.high, room), ticks(upwards.low, upwards.high, rows), unit)

    def _names(self, x: Array, seen: Extent) -> list[Words]:
        names = []
        for bundle in self._bundles:
            inside = np.flatnonzero((bundle.own > seen.low) & (bundle.own < seen.high))
            if inside.size:
                at = int(inside[int(bundle.place * (inside.size - 1))])
                names.append(Words(float(x[at]), float(bundle.own[at]), bundle.name, f"{bundle.role}_word", "left"))
        return names


def decades(low: float, high: float, count: int) -> tuple[Tick, ...]:
    """Return the divisions of a logarithmic axis, given as logarithms: decades, and 2 and 5 where there is room."""
    steps = _DIVISIONS if (high - low) * len(_DIVISIONS) <= count else (1,)
    every = max(1, ceil((high - low) / count))
    return tuple(
        Tick(place, f"{step * 10.0**decade:g}")
        for decade in range(floor(low), ceil(high) + 1)
        if decade % every == 0
        for step in steps
        if low <= (place := decade + log10(step)) <= high
    )


def loop_words(curves: "FrequencyCurves", index: int, sheet: Sheet) -> str:
    """Return the loop at one frequency in words."""
    value = complex(curves.gain[0, index])
    phase = float(np.degrees(np.angle(value)))
    phase -= 360.0 * (phase > 0.0)
    s = abs(1.0 / (1.0 + value)) if value != -1.0 else np.inf
    w = quantity(float(curves.w[index]), f"rad/{sheet.loop.time_unit}", 3)
    said = (
        f"at {w}: L {20.0 * log10(max(abs(value), 1e-300)):.1f} dB, {phase:.0f}°; |S| {s:.3g}, |T| {s * abs(value):.3g}"
    )
    return said.replace("-", "\u2212")


def worst_words(shown: Shown, measures: tuple[str, ...]) -> str:
    """Return the worst of some margins over the family, and the plants that have them."""
    said = [found for name in measures if (found := _worst(shown.assessment, name, shown.sheet))]
    return "; ".join(("", *said))


def _worst(assessment: Assessment, name: str, sheet: Sheet) -> str:
    worst = assessment.worst.get(name)
    if worst is None or worst.value is None:
        return ""
    where = "the nominal plant" if worst.plant == "nominal" else worst.plant
    return f"{BY_NAME[name].label} at worst {quantity(worst.value, unit_of(name, sheet.loop), 3)} with {where}"


def missed_of(shown: Shown, measures: tuple[str, ...]) -> tuple[str, bool]:
    """Return the words on the limits of some measures, and whether any is missed."""
    limits = [limit for limit in shown.assessment.limits if limit.measure in measures]
    missed = [one.sentence for one in shown.overlay.callouts if one.measure in measures]
    if missed:
        return "; ".join(missed), True
    if not limits:
        return "nothing here is on the acceptance sheet", False
    return ("the limit here is met" if len(limits) == 1 else f"all {len(limits)} limits here are met"), False


def _finite(values: Array) -> Array:
    return np.nan_to_num(values, nan=0.0, posinf=1e12, neginf=-1e12)
