"""The plots of the page: one curve for each structure over the ground that its family covers."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QColor

from tuner.judge.assessment import Assessment, MemberResult
from tuner.judge.overlay import Plot
from tuner.judge.wording import minus, quantity
from tuner.model.loop import Signal
from tuner.model.sheet import Sheet
from tuner.window.plots import thinning
from tuner.window.plots.extent import Extent, SteadyExtent, wanted
from tuner.window.plots.items import Curve, Ground
from tuner.window.plots.lines import Line, effort_corners
from tuner.window.plots.marks import Marks, Words, trace_marks
from tuner.window.plots.panel import Panel
from tuner.window.plots.trace_panel import name_of
from tuner.window.structures.compared import Compared
from tuner.window.theme import Theme

if TYPE_CHECKING:
    from tuner.compare.comparison import Comparison

Array = NDArray[np.float64]
Points = tuple[Array, Array]

ROLES = {"feedforward": "feedforward", "feedback": "feedback", "both": "nominal"}
"""The colour of each structure; that of its words has "_word" behind."""

_PLACES = {"feedforward": 0.8, "feedback": 0.5, "both": 0.22}
"""Where along its curve each has its name, in shares of the duration."""

_BEFORE = 0.02
"""Share of the duration that is shown before the step."""
_GROUND = 0.16
"""How much shows of the colour of a ground."""
_GREYED = 0.45


@dataclass(frozen=True, slots=True, eq=False)
class Drawn:
    """One structure in one plot: its curve, and those of its family over shared times, shape (m, n)."""

    kind: str
    line: Line
    t: Array
    family: Array
    calm: bool


class OverlaidPanel(Panel[Compared]):
    """A plot over time with all structures in it.

    Parameters
    ----------
    plot : str
        Which one, by the names of `judge.overlay.Plot`.
    curve : callable
        Takes a plant's result to times and values.
    """

    def __init__(self, name: str, theme: Theme, plot: Plot, curve: Callable[[Sheet, MemberResult], Points]) -> None:
        self.plot, self._curve = plot, curve
        self.drawn: dict[str, Drawn] = {}
        self._marks = Marks()
        self._steady = SteadyExtent()
        self.grounds: dict[str, Ground] = {}
        self.curves: dict[str, Curve] = {}
        super().__init__(name, theme)
        self.widget.setMinimumSize(152, 96)
        self._missed.setVisible(False)  # limits belong to one tuning, not to a comparison
        for kind in ROLES:
            self.grounds[kind], self.curves[kind] = Ground(depth=-50.0), Curve(strong=True)
            for item in (self.grounds[kind], self.curves[kind]):
                self.view.addItem(item, ignoreBounds=True)
            self.grounds[kind].join(self.view.still)

    def draw(self, shown: Compared) -> None:
        """Take over the curves of all structures."""
        self.drawn = {one.structure.kind: self._taken(shown.sheet, one, found) for one, found in shown.judged}
        self._marks = trace_marks(self.plot, shown.sheet, shown.overlay)
        self.set_words(self._axis_words(shown.sheet), "", bad=False)
        if (asked := self.ask()) is not None:
            self.set_ranges(asked[0], self._steady.offer(asked[1], held=self.held))
        self.redraw()

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return the whole duration, and the height of the curves that do not run away."""
        if self.shown is None:
            return None
        duration, fixed = self.shown.sheet.trial.duration, Extent(0.0, 0.0)
        if self.plot != "effort":  # its range may be far away, and would flatten what is to be compared
            fixed = fixed.hull(self._marks.levels())
        calm = [one.line.values for one in self.drawn.values() if one.calm]
        others = [one.line.values for one in self.drawn.values() if not one.calm]
        families = [one.family for one in self.drawn.values()]
        middle = np.concatenate(calm or others or [np.zeros(1)])
        return Extent(-_BEFORE * duration, duration), wanted(middle, [*others, *families], fixed, calm=bool(calm))

    def redraw(self) -> None:
        """Draw in the ranges and colours that hold now."""
        if self.shown is None:
            return
        seen, columns = self.ranges()[1], self.columns()
        for kind, role in ROLES.items():
            self._draw(kind, self.drawn.get(kind), self._theme.colour(role), seen, columns)
        self.ground.areas = self._marks.areas
        self.divide(self.shown.sheet.loop.time_unit, y_offset=self._signal(self.shown.sheet).resting)
        names = [name_of(one.line, f"{ROLES[one.kind]}_word", _PLACES[one.kind], seen) for one in self.drawn.values()]
        self.marks.show_marks(replace(self._marks, words=_seen(self._marks.words, seen)), names)

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Return the values of all structures at the pointer's time, and the one nearest to it."""
        if self.shown is None or not self.drawn or not 0.0 <= x <= self.shown.sheet.trial.duration:
            return None
        signal = self._signal(self.shown.sheet)
        values = [float(np.interp(x, one.line.t, one.line.values)) for one in self.drawn.values()]
        said = [
            f"{one.line.name} {quantity(value + signal.resting, signal.unit)}"
            for one, value in zip(self.drawn.values(), values, strict=True)
        ]
        time = quantity(x, self.shown.sheet.loop.time_unit, 3)
        return (x, min(values, key=lambda value: abs(value - y))), minus(f"at {time}: {', '.join(said)}")

    def step(self, steps: int) -> tuple[float, float] | None:
        """Return the next place in time, hundredths of what is seen away, from the step on."""
        if self.shown is None:
            return None
        x = self.ranges()[0]
        now = self.marks.pointer[0] if self.marks.pointer else max(x.low, 0.0) - 0.01 * steps * x.span
        return float(np.clip(now + 0.01 * steps * x.span, 0.0, self.shown.sheet.trial.duration)), 0.0

    def forget(self) -> None:
        """Forget ranges and curves."""
        super().forget()
        self.drawn = {}
        self._steady.forget()

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()

    # Inside -----------------------------------------------------------------------------------------------------

    def _taken(self, sheet: Sheet, one: "Comparison", found: Assessment) -> Drawn:
        t, values = self._curve(sheet, found.nominal)
        curves = [self._curve(sheet, member) for member in found.members]
        same = all(times is t or np.array_equal(times, t) for times, _ in curves)
        family = np.stack([own if same else np.interp(t, times, own) for times, own in curves])
        return Drawn(one.structure.kind, Line(t, values, one.name), t, family, found.verdict != "unstable")

    def _draw(self, kind: str, one: Drawn | None, colour: QColor, seen: Extent, columns: int) -> None:
        ground = QColor(colour)
        ground.setAlphaF(_GROUND * (_GREYED if self.stale else 1.0))
        if self.stale:
            colour.setAlphaF(_GREYED)
        if one is None:
            self.curves[kind].clear_points()
            self.grounds[kind].show_pairs(thinning.Points(np.empty(0), np.empty(0)), ground)
            return
        self.curves[kind].set_colour(colour)
        self.curves[kind].show_points(thinning.single(one.line.t, one.line.values, seen, columns))
        family = one.family if len(one.family) > 1 else one.family[:0]
        self.grounds[kind].show_pairs(thinning.envelope(one.t, family, seen, columns), ground)

    def _signal(self, sheet: Sheet) -> Signal:
        return sheet.loop.manipulated if self.plot == "effort" else sheet.loop.controlled

    def _axis_words(self, sheet: Sheet) -> str:
        signal = self._signal(sheet)
        return f"{signal.name or ('Effort' if self.plot == 'effort' else 'Output')}, {signal.unit or '1'}"


def _seen(words: tuple[Words, ...], seen: Extent) -> tuple[Words, ...]:
    """Return the words whose line is in sight."""
    return tuple(one for one in words if seen.low <= one.y <= seen.high)


def overlaid_panels(theme: Theme) -> tuple[OverlaidPanel, ...]:
    """Return the plots of the page: reference step, disturbance, and the effort of the reference step."""
    return (
        OverlaidPanel("Reference step", theme, "reference", _of_reference),
        OverlaidPanel("Disturbance", theme, "disturbance", _of_disturbance),
        OverlaidPanel("Effort", theme, "effort", _of_effort),
    )


def _of_reference(_sheet: Sheet, member: MemberResult) -> Points:
    trace = member.traces.reference
    return trace.t, trace.y


def _of_disturbance(_sheet: Sheet, member: MemberResult) -> Points:
    trace = member.traces.disturbance
    return trace.t, trace.y


def _of_effort(sheet: Sheet, member: MemberResult) -> Points:
    return effort_corners(sheet, member.traces.reference)
