"""A plot over frequency: the curve of the plant looked at, those of its family, limits and margins."""

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QColor

from tuner.window.frequency.divisions import decades, multiples
from tuner.window.frequency.words import loop_words, missed_of, worst_name, worst_plant, worst_words
from tuner.window.plots import thinning
from tuner.window.plots.extent import Extent, SteadyExtent
from tuner.window.plots.family_picture import NO_FAMILY, FamilyPicture
from tuner.window.plots.items import Curve
from tuner.window.plots.lines import Family, Line
from tuner.window.plots.marks import Marks, Words
from tuner.window.plots.panel import Panel
from tuner.window.plots.ticks import Tick, ticks
from tuner.window.shown import KeptResult, Shown
from tuner.window.theme import Theme

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves

Array = NDArray[np.float64]

_TICK_WIDTH, _TICK_HEIGHT = 64, 24
_UNIT = 24
"""Pixels from the end of the axis within which no number is written."""
_WORST_PLACE = 0.6
"""Share of the curve of the worst plant at which it is named."""


@dataclass(frozen=True, slots=True, eq=False)
class Bundle:
    """Curves of one kind.

    Parameters
    ----------
    values : ndarray, shape (m, n)
        A row for each plant, the one that is looked at first; may be infinite.
    name : str
        What is written where its curve runs.
    role : str
        Of its colour.
    place : float
        Share of the curve at which it is named.
    """

    values: Array
    name: str
    role: str
    place: float = 0.5


class FrequencyPanel(Panel[Shown]):
    """A plot over the logarithm of frequency; subclasses say which curves and marks."""

    measures: tuple[str, ...] = ()
    """Measures that are read off here, the first of them the one whose worst plant is drawn."""
    steps: tuple[float, ...] = ()
    """Steps of the vertical axis; none for round numbers."""

    def __init__(self, name: str, theme: Theme, kinds: int = 1) -> None:
        self._steady, self._across = SteadyExtent(), SteadyExtent()
        self._curves: FrequencyCurves | None = None
        self._bundles: tuple[Bundle, ...] = ()
        self._families: tuple[Family, ...] = (NO_FAMILY,) * kinds
        self._worst: Line | None = None
        self._beside: tuple[Line, ...] = ()
        self._marks = Marks()
        super().__init__(name, theme)
        self.pictures = [FamilyPicture(self.view, theme, second=index > 0) for index in range(kinds)]
        self.worst = Curve(depth=-15.0)
        self.kept: list[Curve] = []
        self.own = [Curve(strong=True, depth=float(-index)) for index in range(kinds)]
        for item in (self.worst, *self.own):
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

    # Panel ------------------------------------------------------------------------------------------------------

    def draw(self, shown: Shown) -> None:
        """Take over the curves; until the whole family is known, its last curves stay."""
        curves = shown.frequency
        if curves is None or not curves.w.size:
            return
        self._curves, self._bundles = curves, self.bundles(curves)
        self._beside = tuple(self._line_beside(kept) for kept in shown.kept if kept.frequency is not None)
        self._marks = self.frequency_marks(shown, curves)
        if shown.whole:
            self._take_family(shown, curves)
            missed, bad = missed_of(shown, self.measures)
            self.set_words(f"{self.axis_words()}{worst_words(shown, self.measures)}", missed, bad=bad)
        if (asked := self.ask()) is not None:
            held = self.held or not shown.whole
            x = self._across.offer(asked[0], held=held)
            self.set_ranges(x, self._steady.offer(asked[1], held=held))
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
        for picture, family in zip(self.pictures, self._families, strict=True):
            picture.draw(family, self.shown.family_view, seen, columns)
        for item, bundle in zip(self.own, self._bundles, strict=True):
            item.set_colour(self._colour(bundle.role))
            item.show_points(thinning.single(x, _finite(bundle.values[0]), seen, columns))
        self._draw_worst(seen, columns)
        self._draw_beside(seen, columns)
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
        value = float(self._bundles[0].values[0, index])
        return (float(known[index]), value), loop_words(self._curves, index, self.shown.sheet)

    def step(self, steps: int) -> tuple[float, float] | None:
        """Return the next frequency, hundredths of what is seen away."""
        if self._curves is None:
            return None
        x, known = self.ranges()[0], np.log10(self._curves.w[[0, -1]])
        now = self.marks.pointer[0] if self.marks.pointer else max(x.low, float(known[0])) - 0.01 * steps * x.span
        return float(np.clip(now + 0.01 * steps * x.span, *known)), 0.0

    def forget(self) -> None:
        """Forget ranges and curves."""
        super().forget()
        self._curves, self._bundles, self._worst, self._beside = None, (), None, ()
        self._families = (NO_FAMILY,) * len(self._families)
        self._steady.forget()
        self._across.forget()

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()

    # Inside -----------------------------------------------------------------------------------------------------

    def _take_family(self, shown: Shown, curves: "FrequencyCurves") -> None:
        """Take over the curves of the whole family, and of its worst plant unless that is the one looked at."""
        x = np.log10(curves.w)
        places = worst_places(shown, curves)
        self._families = tuple(Family(x, _finite(bundle.values[1:]), places) for bundle in self._bundles)
        self._worst = None
        found = worst_plant(shown, self.measures)
        if found is not None and found[1] in curves.plants[1:]:
            measure, plant = found
            row = self._bundles[self.worst_kind(measure)].values[curves.plants.index(plant)]
            self._worst = Line(x, _finite(row), worst_name(shown, self.measures, measure, plant), plant)

    def worst_kind(self, measure: str) -> int:
        """Return which of the kinds of curves shows a measure."""
        del measure
        return 0

    def _draw_worst(self, seen: Extent, columns: int) -> None:
        if self._worst is None:
            self.worst.clear_points()
            return
        self.worst.set_colour(self._colour("limit"))
        self.worst.show_points(thinning.single(self._worst.t, self._worst.values, seen, columns))

    def _line_beside(self, kept: KeptResult) -> Line:
        """Return the curve of a tuning to compare with; of several kinds the first."""
        assert kept.frequency is not None  # noqa: S101 - whoever calls has looked
        first = self.bundles(kept.frequency)[0]
        return Line(np.log10(kept.frequency.w), _finite(first.values[0]), kept.name)

    def _draw_beside(self, seen: Extent, columns: int) -> None:
        while len(self.kept) < len(self._beside):
            self.kept.append(Curve(depth=-20.0))
            self.view.addItem(self.kept[-1], ignoreBounds=True)
        for curve in self.kept:
            curve.clear_points()
        for curve, line in zip(self.kept, self._beside, strict=False):
            curve.set_colour(self._theme.colour("kept"))
            curve.show_points(thinning.single(line.t, line.values, seen, columns))

    def _colour(self, role: str) -> QColor:
        return self._theme.colour("kept" if self.stale else role)

    def _divide(self, across: Extent, upwards: Extent) -> None:
        unit = f"rad/{self.shown.sheet.loop.time_unit}" if self.shown else ""
        room = max(int(self.columns() / _TICK_WIDTH), 2)
        rows = max(int(self.view.getPlotItem().getViewBox().height() / _TICK_HEIGHT), 2)
        # The last number has the unit behind it, for which there is no room at the very end.
        end = across.high - _UNIT * across.span / self.columns()
        self.set_ticks(decades(across.low, end, room), self._rows(upwards, rows), unit)

    def _rows(self, upwards: Extent, count: int) -> tuple[Tick, ...]:
        if self.steps:
            return multiples(upwards.low, upwards.high, count, self.steps)
        return ticks(upwards.low, upwards.high, count)

    def _names(self, x: Array, seen: Extent) -> list[Words]:
        """Return the names of the curves, each where it runs."""
        named = [(x, one.values[0], one.place, one.name, f"{one.role}_word", "") for one in self._bundles]
        for index, line in enumerate(self._beside):
            named.append((line.t, line.values, 0.4 + 0.06 * index, line.name, "kept_word", ""))
        if self._worst is not None:
            line = self._worst
            named.append((line.t, line.values, _WORST_PLACE, line.name, "limit_word", line.plant))
        names = []
        for at, values, place, name, role, plant in named:
            inside = np.flatnonzero((values > seen.low) & (values < seen.high))
            if inside.size:
                index = int(inside[int(place * (inside.size - 1))])
                names.append(Words(float(at[index]), float(values[index]), name, role, "left", "above", plant))
        return names


def worst_places(shown: Shown, curves: "FrequencyCurves") -> tuple[int, ...]:
    """Return the rows of the plants behind the first that are the worst of some limit."""
    plants = {limit.plant for limit in shown.assessment.limits}
    return tuple(place for place, name in enumerate(curves.plants[1:]) if name in plants)


def _finite(values: Array) -> Array:
    return np.nan_to_num(values, nan=0.0, posinf=1e12, neginf=-1e12)
