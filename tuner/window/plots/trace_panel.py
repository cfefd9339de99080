"""The plots over time: the reference step, the disturbance, and the effort of both runs."""

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QColor

from tuner.judge.assessment import MemberResult
from tuner.judge.overlay import Plot
from tuner.judge.wording import minus, quantity
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Trace
from tuner.window.plots import thinning
from tuner.window.plots.extent import Extent, SteadyExtent, wanted
from tuner.window.plots.family_picture import FamilyPicture
from tuner.window.plots.items import Curve
from tuner.window.plots.lines import (
    Limited,
    Line,
    Lines,
    effort_corners,
    family_of_curves,
    limited_pieces,
    looked_at_words,
    worst_line,
)
from tuner.window.plots.marks import Marks, Side, Words, trace_marks
from tuner.window.plots.panel import Panel
from tuner.window.plots.words import missed_words
from tuner.window.shown import Shown
from tuner.window.theme import Theme

Array = NDArray[np.float64]

_WORTH_WORDS = 0.05
"""Share of the run at a limit from which it is named; words on a shorter piece would hide it."""
_BEFORE = 0.02
"""Share of the duration that is shown before the step."""


class TracePanel(Panel[Shown]):
    """A plot over time; subclasses say which curves."""

    plot: Plot

    def __init__(self, name: str, theme: Theme) -> None:
        self._lines: Lines | None = None
        self._marks = Marks()
        self._outlined: int | None = None
        self._steady = SteadyExtent()
        self.kept: list[Curve] = []
        self.worst = Curve(depth=-15.0)
        self.second = Curve(depth=-10.0)
        self.nominal = Curve(strong=True, depth=0.0)
        self.limited = Curve(strong=True, depth=10.0)
        super().__init__(name, theme)
        self._family = FamilyPicture(self.view, theme)
        self.band, self.family = self._family.band, self._family.curves
        for curve in (self.worst, self.second, self.nominal, self.limited):
            self.view.addItem(curve, ignoreBounds=True)

    # What subclasses say ----------------------------------------------------------------------------------------

    def lines(self, shown: Shown, worst: Line | None = None) -> Lines:
        """Return the curves of an answer; `worst` is the one of the worst plant drawn last."""
        raise NotImplementedError

    def axis_words(self, sheet: Sheet) -> str:
        """Return what stands on the vertical axis, with its unit."""
        raise NotImplementedError

    def resting(self, sheet: Sheet) -> float:
        """Return the resting point of what is shown, which is added to every number written."""
        raise NotImplementedError

    def unit(self, sheet: Sheet) -> str:
        """Return the unit of what is shown."""
        raise NotImplementedError

    # Panel ------------------------------------------------------------------------------------------------------

    def draw(self, shown: Shown) -> None:
        """Take over the curves; until those of the whole family are known, its last ones stay."""
        before, marks, self._marks = self._lines, self._marks, trace_marks(self.plot, shown.sheet, shown.overlay)
        self._lines = self.lines(shown, before.worst if before is not None else None)
        follows = shown.whole and shown.number == self._outlined
        if before is not None and (follows or not shown.has_family):
            self._lines = replace(self._lines, family=before.family)
        self._outlined = shown.number if shown.outlined else None
        missed, bad = missed_words(shown, (self.plot,))
        self.set_words(self.axis_words(shown.sheet), missed, bad=bad) if shown.whole else None
        ranges = self.ranges()
        if (asked := self.ask()) is not None:
            self.set_ranges(asked[0], self._steady.offer(asked[1], held=self.held or not shown.whole))
        is_there = follows and before is not None and before.says_the_same(self._lines) and marks == self._marks
        if not is_there or self.ranges() != ranges:
            self.redraw()

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return the whole duration, and the height that the curves ask for within reason."""
        if self.shown is None or self._lines is None:
            return None
        duration = self.shown.sheet.trial.duration
        fixed = Extent(0.0, 0.0).hull(self._marks.levels())
        family = self._lines.family.values if self.shown.family_view != "none" else np.empty(0)
        lines = (*self._lines.kept, self._lines.second, self._lines.worst)
        others = [family, *(line.values for line in lines if line is not None)]
        calm = self.shown.assessment.nominal.stable
        return Extent(-_BEFORE * duration, duration), wanted(self._lines.nominal.values, others, fixed, calm=calm)

    def redraw(self) -> None:
        """Draw the curves in the ranges and colours that hold now."""
        if self._lines is None or self.shown is None:
            return
        seen, columns = self.ranges()[1], self.columns()
        self._family.draw(self._lines.family, self.shown.family_view, seen, columns)
        self._draw_kept(self._lines, seen, columns)
        self._draw_line(self.nominal, self._lines.nominal, "nominal", seen, columns)
        self._draw_line(self.second, self._lines.second, "disturbance", seen, columns)
        self._draw_line(self.worst, self._lines.worst, "limit", seen, columns)
        self._draw_limited(self._lines.limited, seen)
        self.ground.areas = self._marks.areas
        sheet = self.shown.sheet
        self.divide(sheet.loop.time_unit, y_offset=self.resting(sheet))
        self.marks.show_marks(self._marks, self._names(self._lines, seen))

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Return the nominal curve at the pointer's time."""
        del y
        if self._lines is None or self.shown is None or not 0.0 <= x <= self.shown.sheet.trial.duration:
            return None
        sheet, line = self.shown.sheet, self._lines.nominal
        value = float(np.interp(x, line.t, line.values))
        time = quantity(x, sheet.loop.time_unit, 3)
        said = quantity(value + self.resting(sheet), self.unit(sheet))
        return (x, value), minus(f"at {time}: {said}")

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
        self._lines = self._outlined = None
        self._steady.forget()

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()

    # Inside -----------------------------------------------------------------------------------------------------

    def _colour(self, role: str) -> QColor:
        return self._theme.colour("kept" if self.stale else role)

    def _draw_kept(self, lines: Lines, seen: Extent, columns: int) -> None:
        while len(self.kept) < len(lines.kept):
            self.kept.append(Curve(depth=-20.0))
            self.view.addItem(self.kept[-1], ignoreBounds=True)
        for index, curve in enumerate(self.kept):
            self._draw_line(curve, lines.kept[index] if index < len(lines.kept) else None, "kept", seen, columns)

    def _draw_line(self, curve: Curve, line: Line | None, role: str, seen: Extent, columns: int) -> None:
        if line is None:
            curve.clear_points()
            return
        curve.set_colour(self._colour(role))
        curve.show_points(thinning.single(line.t, line.values, seen, columns))

    def _draw_limited(self, limited: Limited | None, seen: Extent) -> None:
        if limited is None:
            self.limited.clear_points()
            return
        self.limited.set_colour(self._colour("limit"))
        self.limited.show_points(thinning.Points(limited.t, thinning.clipped(limited.values, seen), limited.connect))

    def _names(self, lines: Lines, seen: Extent) -> list[Words]:
        """Return the names of the curves, each where it runs."""
        named = [(lines.nominal, "nominal_word", 0.55)]
        named += [(lines.second, "disturbance_word", 0.3)] if lines.second is not None else []
        named += [(lines.worst, "limit_word", 0.3)] if lines.worst is not None else []
        named += [(line, "kept_word", 0.12 + 0.06 * index) for index, line in enumerate(lines.kept)]
        names = [name_of(line, role, share, seen) for line, role, share in named if line.name]
        if lines.limited is not None and lines.limited.connect.mean() >= _WORTH_WORDS:
            first = int(lines.limited.connect.argmax())
            names.append(
                name_of(
                    Line(lines.limited.t[first:], lines.limited.values[first:], "at a limit"), "limit_word", 0.0, seen
                )
            )
        return names


def name_of(line: Line, role: str, share: float, seen: Extent) -> Words:
    """Return the name of a curve beside it, at a share of its length, above where it falls and below where it rises."""
    index = int(share * (line.t.size - 1))
    value = float(np.clip(line.values[index], seen.low, seen.high))
    upper = value < seen.low + 0.75 * seen.span
    side: Side = "above" if upper else "below"
    return Words(float(line.t[index]), value, line.name, role, "left", side, line.plant)


class OutputPanel(TracePanel):
    """The output after a step."""

    def lines(self, shown: Shown, worst: Line | None = None) -> Lines:
        """Return the output of the plant looked at, of the family, of its worst plant, and of kept tunings."""
        t, y = self._curve(shown.assessment.nominal)
        return Lines(
            Line(t, y, f"output y{looked_at_words(shown)}"),
            family_of_curves(shown, self._curve),
            tuple(Line(*self._curve(kept.member), kept.name) for kept in shown.kept),
            worst=worst_line(shown, self.plot, self._curve, worst),
        )

    def _curve(self, member: MemberResult) -> tuple[Array, Array]:
        trace = self.trace(member)
        return trace.t, trace.y

    def trace(self, member: MemberResult) -> Trace:
        """Return the run that this plot shows."""
        raise NotImplementedError

    def axis_words(self, sheet: Sheet) -> str:
        """Return the name and the unit of the controlled signal."""
        signal = sheet.loop.controlled
        return f"{signal.name or 'Output'}, {signal.unit or '1'}"

    def resting(self, sheet: Sheet) -> float:
        """Return the resting point of the controlled signal."""
        return sheet.loop.controlled.resting

    def unit(self, sheet: Sheet) -> str:
        """Return the unit of the controlled signal."""
        return sheet.loop.controlled.unit


class ReferencePanel(OutputPanel):
    """The output after the reference step."""

    plot = "reference"

    def trace(self, member: MemberResult) -> Trace:
        """Return the reference run."""
        return member.traces.reference


class DisturbancePanel(OutputPanel):
    """The output after the disturbance step."""

    plot = "disturbance"

    def trace(self, member: MemberResult) -> Trace:
        """Return the disturbance run."""
        return member.traces.disturbance

    def axis_words(self, sheet: Sheet) -> str:
        """Say also how large the disturbance is."""
        measured = sheet.controller.disturbance_feedforward
        if measured is None:
            where, unit = "at the plant input", sheet.loop.manipulated.unit
        else:
            where, unit = f"of {measured.name or 'the measured disturbance'}", measured.unit
        return f"{super().axis_words(sheet)}, after {quantity(sheet.trial.disturbance, unit)} {where}"


class EffortPanel(TracePanel):
    """The effort in both runs, and where a limit holds it."""

    plot = "effort"

    def lines(self, shown: Shown, worst: Line | None = None) -> Lines:
        """Return the effort of the reference run with its family, and that of the disturbance run beside it."""
        sheet, traces = shown.sheet, shown.assessment.nominal.traces
        t, u = effort_corners(sheet, traces.disturbance)

        def curve(member: MemberResult) -> tuple[Array, Array]:
            return effort_corners(sheet, member.traces.reference)

        return Lines(
            Line(*effort_corners(sheet, traces.reference), f"reference run{looked_at_words(shown)}"),
            family_of_curves(shown, curve),
            tuple(Line(*curve(kept.member), kept.name) for kept in shown.kept),
            Line(t, u, "disturbance run") if sheet.trial.disturbance else None,
            limited_pieces(sheet, traces.reference),
            worst_line(shown, self.plot, curve, worst),
        )

    def axis_words(self, sheet: Sheet) -> str:
        """Return the name and the unit of the manipulated signal."""
        signal = sheet.loop.manipulated
        return f"{signal.name or 'Effort'}, {signal.unit or '1'}"

    def resting(self, sheet: Sheet) -> float:
        """Return the resting point of the manipulated signal."""
        return sheet.loop.manipulated.resting

    def unit(self, sheet: Sheet) -> str:
        """Return the unit of the manipulated signal."""
        return sheet.loop.manipulated.unit
