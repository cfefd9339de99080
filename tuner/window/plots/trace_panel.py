"""The plots over time: the reference step, the disturbance, and the effort of both runs."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QColor

from tuner.judge.assessment import MemberResult
from tuner.judge.overlay import PLOT_OF, Plot
from tuner.judge.wording import quantity, shortfall
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Trace
from tuner.window.plots import thinning
from tuner.window.plots.extent import Extent, SteadyExtent, wanted
from tuner.window.plots.items import Curve
from tuner.window.plots.marks import Marks, Words, trace_marks
from tuner.window.plots.panel import Panel
from tuner.window.plots.words import missed_words
from tuner.window.shown import Shown
from tuner.window.theme import Theme

Array = NDArray[np.float64]

_FAMILY_BINS = 150
_WORTH_WORDS = 0.05
"""Share of the run at a limit from which it is named; words on a shorter piece would hide it."""
_BEFORE = 0.02
"""Share of the duration that is shown before the step."""


@dataclass(frozen=True, slots=True, eq=False)
class Line:
    """A curve to draw: its corners, and what it is called where it runs."""

    t: Array
    values: Array
    name: str = ""


@dataclass(frozen=True, slots=True, eq=False)
class Limited:
    """The pieces of the effort that a limit holds: all corners of its curve, and which join the next one."""

    t: Array
    values: Array
    connect: NDArray[np.int32]


@dataclass(frozen=True, slots=True, eq=False)
class Lines:
    """The curves of one plot: the nominal plant's, those of the family over shared times, and of kept tunings."""

    nominal: Line
    family_t: Array
    family: Array
    kept: tuple[Line, ...] = ()
    second: Line | None = None
    limited: Limited | None = None


@dataclass(frozen=True, slots=True, eq=False)
class _Drawn:
    """What a family was drawn from, and for which picture."""

    family: Array
    seen: Extent
    columns: int
    shade: str

    def same_as(self, other: "_Drawn | None") -> bool:
        """Tell whether the picture would be the same."""
        if other is None or other.family is not self.family:
            return False
        return (other.seen, other.columns, other.shade) == (self.seen, self.columns, self.shade)


class TracePanel(Panel):
    """A plot over time; subclasses say which curves."""

    plot: Plot
    second_role = "disturbance"
    """Role of the colour of the second curve."""

    def __init__(self, name: str, theme: Theme) -> None:
        self._lines: Lines | None = None
        self._marks = Marks()
        self._steady = SteadyExtent()
        self._drawn: _Drawn | None = None
        self.band = Curve(smooth=False, depth=-50.0)
        self.family = Curve(smooth=False, depth=-40.0)
        self.kept: list[Curve] = []
        self.second = Curve(depth=-10.0)
        self.nominal = Curve(strong=True, depth=0.0)
        self.limited = Curve(strong=True, depth=10.0)
        super().__init__(name, theme)
        for curve in (self.band, self.family, self.second, self.nominal, self.limited):
            self.view.addItem(curve, ignoreBounds=True)

    # What subclasses say ----------------------------------------------------------------------------------------

    def lines(self, shown: Shown) -> Lines:
        """Return the curves of an answer."""
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
        """Take over the curves; until the whole family is known, its last curves stay."""
        previous, self._lines = self._lines, self.lines(shown)
        if not shown.whole and previous is not None:
            self._lines = Lines(
                self._lines.nominal,
                previous.family_t,
                previous.family,
                self._lines.kept,
                self._lines.second,
                self._lines.limited,
            )
        self._marks = trace_marks(self.plot, shown.sheet, shown.overlay)
        missed, bad = missed_words(shown, (self.plot,))
        self.set_words(self.axis_words(shown.sheet), missed, bad=bad) if shown.whole else None
        if (asked := self.ask()) is not None:
            self.set_ranges(asked[0], self._steady.offer(asked[1], held=self.held))
        self.redraw()

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return the whole duration, and the height that the curves ask for within reason."""
        if self.shown is None or self._lines is None:
            return None
        duration = self.shown.sheet.trial.duration
        fixed = Extent(0.0, 0.0).hull(self._marks.levels())
        others = [self._lines.family, *(line.values for line in self._lines.kept)]
        if self._lines.second is not None:
            others.append(self._lines.second.values)
        calm = self.shown.assessment.nominal.stable
        return Extent(-_BEFORE * duration, duration), wanted(self._lines.nominal.values, others, fixed, calm=calm)

    def redraw(self) -> None:
        """Draw the curves in the ranges and colours that hold now."""
        if self._lines is None or self.shown is None:
            return
        seen, columns = self.ranges()[1], self.columns()
        self._draw_family(self._lines, seen, columns)
        self._draw_kept(self._lines, seen, columns)
        self._draw_line(self.nominal, self._lines.nominal, "nominal", seen, columns)
        self._draw_line(self.second, self._lines.second, self.second_role, seen, columns)
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
        return (x, value), f"at {time}: {said}".replace("-", "\u2212")

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
        self._lines = None
        self._steady.forget()

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()

    # Inside -----------------------------------------------------------------------------------------------------

    def _colour(self, role: str) -> QColor:
        return self._theme.colour("kept" if self.stale else role)

    def _draw_family(self, lines: Lines, seen: Extent, columns: int) -> None:
        """Draw the family, unless it is drawn already: a first answer leaves it as it was."""
        drawn = _Drawn(lines.family, seen, columns, self._theme.palette.shade)
        if drawn.same_as(self._drawn):
            return
        self._drawn = drawn
        self.band.set_colour(self._theme.colour("band"))
        self.family.set_colour(self._theme.colour("family"))
        self.band.show_pairs(thinning.envelope(lines.family_t, lines.family, seen, columns * 3 // 2))
        self.family.show_points(thinning.bundle(lines.family_t, lines.family, seen, min(_FAMILY_BINS, columns // 2)))

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
        named += [(lines.second, f"{self.second_role}_word", 0.3)] if lines.second is not None else []
        named += [(line, "kept_word", 0.12 + 0.06 * index) for index, line in enumerate(lines.kept)]
        names = [_name(line, role, share, seen) for line, role, share in named if line.name]
        if lines.limited is not None and lines.limited.connect.mean() >= _WORTH_WORDS:
            first = int(lines.limited.connect.argmax())
            names.append(
                _name(
                    Line(lines.limited.t[first:], lines.limited.values[first:], "at a limit"), "limit_word", 0.0, seen
                )
            )
        return names


def _name(line: Line, role: str, share: float, seen: Extent) -> Words:
    """Return the name of a curve beside it, at a share of its length, above where it falls and below where it rises."""
    index = int(share * (line.t.size - 1))
    value = float(np.clip(line.values[index], seen.low, seen.high))
    upper = value < seen.low + 0.75 * seen.span
    return Words(float(line.t[index]), value, line.name, role, "left", "above" if upper else "below")


class OutputPanel(TracePanel):
    """The output after a step; its second curve is that of the worst plant."""

    second_role = "limit"

    def lines(self, shown: Shown) -> Lines:
        """Return the output of the nominal plant, of the family and of kept tunings."""
        members = shown.assessment.members
        traces = [self.trace(member) for member in members]
        t, family = _family([(trace.t, trace.y) for trace in traces[1:]])
        kept = tuple(
            Line(trace.t, trace.y, f"{kept.name}")
            for kept, trace in ((kept, self.trace(kept.member)) for kept in shown.kept)
        )
        return Lines(Line(traces[0].t, traces[0].y, "output y"), t, family, kept, self._worst(shown))

    def _worst(self, shown: Shown) -> Line | None:
        """Return the output of the plant that misses a limit of this plot by most, or comes nearest to missing one."""
        limits = [limit for limit in shown.assessment.limits if PLOT_OF[limit.measure] == self.plot]
        plant = max(limits, key=shortfall).plant if limits and shown.whole else ""
        found = [member for member in shown.assessment.members[1:] if member.name == plant]
        if not found:
            return None
        trace = self.trace(found[0])
        return Line(trace.t, trace.y, f"worst: {found[0].drift or plant}")

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
        size = quantity(sheet.trial.disturbance, sheet.loop.manipulated.unit)
        return f"{super().axis_words(sheet)}, after {size} at the plant input"


class EffortPanel(TracePanel):
    """The effort in both runs, and where a limit holds it."""

    plot = "effort"

    def lines(self, shown: Shown) -> Lines:
        """Return the effort of the reference run with its family, and that of the disturbance run beside it."""
        sheet, members = shown.sheet, shown.assessment.members
        nominal = members[0].traces
        t, family = _family([_effort(sheet, member.traces.reference) for member in members[1:]])
        kept = tuple(Line(*_effort(sheet, kept.member.traces.reference), kept.name) for kept in shown.kept)
        second = Line(*_effort(sheet, nominal.disturbance), "disturbance run") if sheet.trial.disturbance else None
        main = Line(*_effort(sheet, nominal.reference), "reference run")
        return Lines(main, t, family, kept, second, _limited(sheet, nominal.reference))

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


def _effort(sheet: Sheet, trace: Trace) -> tuple[Array, Array]:
    """Return the corners of the effort: it holds from sample to sample, unless the controller is continuous."""
    if sheet.controller.sample_time <= 0.0:
        return trace.t, trace.u
    at = trace.sample_index
    return thinning.staircase(trace.t[at], trace.u[at], float(trace.t[-1]))


def _limited(sheet: Sheet, trace: Trace) -> Limited | None:
    """Return where a limit holds the effort, along the corners of its curve; None where none does."""
    held = np.append(trace.limited, np.zeros(trace.sample_index.size - trace.limited.size, dtype=bool))
    if not held.any():
        return None
    t, u = _effort(sheet, trace)
    following = np.append(held[1:], False)
    if sheet.controller.sample_time > 0.0:
        joined = np.column_stack((held, held & following)).ravel()
    else:
        joined = np.interp(t, trace.t[trace.sample_index], held.astype(float)) > 0.5
    return Limited(t, u, joined.astype(np.int32))


def _family(curves: list[tuple[Array, Array]]) -> tuple[Array, Array]:
    """Return curves over shared times: those of the first, to which the others are brought if theirs differ."""
    if not curves:
        return np.empty(0), np.empty((0, 0))
    t = curves[0][0]
    same = all(other is t or np.array_equal(other, t) for other, _ in curves[1:])
    return t, np.stack([y if same else np.interp(t, times, y) for times, y in curves])
