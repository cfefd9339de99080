"""The strip chart: reference, output and measurement over the effort, the newest at the right."""

from dataclasses import dataclass, replace
from math import inf, isfinite

import numpy as np
from PySide6.QtCore import QObject, Qt
from PySide6.QtWidgets import QSplitter

from tuner.judge.wording import minus, quantity
from tuner.model.loop import Signal
from tuner.model.sheet import Sheet
from tuner.window.plots import thinning
from tuner.window.plots.extent import Extent, SteadyExtent, of_levels, of_values
from tuner.window.plots.items import Curve
from tuner.window.plots.marks import Area, Marks, Side, Stroke, Words, rectangle
from tuner.window.plots.panel import Panel
from tuner.window.plots.thinning import Array
from tuner.window.rehearsal.ring import Signals
from tuner.window.theme import Theme

_NARROW = 0.35
"""Share of its height that a plot must at least be filled by before it narrows."""

_FAR = 30.0
"""Steps of the trial from rest up to which a plot follows a signal without a range."""

_QUIET = 0.02
"""Height of a plot at the least, as a share of the size of the trial's step."""


@dataclass(frozen=True, slots=True, eq=False)
class Scene:
    """What the chart shows: curves up to `now`, as far back as `span`, of the loop of a sheet, and times of events."""

    sheet: Sheet
    now: float
    span: float
    signals: Signals
    noise: bool = False
    events: tuple[float, ...] = ()


class StripPanel(Panel[Scene]):
    """One plot of the chart; subclasses say what is in it."""

    strong_second = False
    """Whether the second curve lies over the main one and has to cover it."""

    def __init__(self, name: str, theme: Theme) -> None:
        self._steady = SteadyExtent()
        self.main = Curve(strong=True)
        self.second = Curve(strong=self.strong_second, depth=-10.0)
        self.third = Curve(smooth=False, depth=-20.0)
        super().__init__(name, theme)
        for curve in (self.third, self.second, self.main):
            self.view.addItem(curve, ignoreBounds=True)
        self.view.getPlotItem().getViewBox().setMouseEnabled(x=False, y=False)
        self.widget.setMinimumSize(200, 84)
        self.view.setMinimumHeight(48)
        self._missed.hide()

    # What subclasses say ----------------------------------------------------------------------------------------

    def signal(self, scene: Scene) -> Signal:
        """Return the signal of this plot."""
        raise NotImplementedError

    def value(self, scene: Scene) -> Array:
        """Return the curve that is read, shape (n,)."""
        raise NotImplementedError

    def levels(self, scene: Scene) -> tuple[float, ...]:
        """Return the heights that stay in sight."""
        raise NotImplementedError

    def marks_of(self, scene: Scene) -> Marks:
        """Return what is drawn beside the curves."""
        raise NotImplementedError

    def draw_curves(self, scene: Scene, seen: Extent) -> None:
        """Draw the curves."""
        raise NotImplementedError

    def step_size(self, scene: Scene) -> float:
        """Return the size of a step of this signal."""
        raise NotImplementedError

    # Panel ------------------------------------------------------------------------------------------------------

    def draw(self, shown: Scene) -> None:
        """Show the newest samples."""
        if (asked := self.ask()) is not None:
            x, y = asked
            held = self._steady.shown is not None and y.span > _NARROW * self._steady.shown.span
            self.set_ranges(x, self._steady.offer(y, held=held))
        signal = self.signal(shown)
        self.set_words(self.now_in_words(shown) or f"{signal.name or self.name}, {signal.unit or '1'}", "", bad=False)
        self.redraw()

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return the last span in steps of a pixel, and the height of what is in it."""
        if self.shown is None:
            return None
        scene, pixel = self.shown, self.shown.span / self.columns()
        end = np.ceil(scene.now / pixel) * pixel
        asked = of_values(self.value(scene))
        asked = None if asked is None else asked.within(self._reach(scene))
        levels = of_levels(level for level in self.levels(scene) if isfinite(level))
        base = levels if asked is None else asked.hull(levels)
        rest = self.signal(scene).resting
        least = max(_QUIET * abs(self.step_size(scene)), 1e-9)
        return Extent(end - scene.span, end), (base or Extent(rest, rest)).hull(Extent(rest - least, rest + least))

    def _reach(self, scene: Scene) -> Extent:
        """Return how far the plot follows a curve: its range and half of it beyond, or many steps from rest."""
        signal = self.signal(scene)
        if signal.low is not None and signal.high is not None:
            return Extent(signal.low, signal.high).grown(0.5)
        reach = _FAR * max(abs(self.step_size(scene)), 1e-9)
        return Extent(signal.resting - reach, signal.resting + reach)

    def redraw(self) -> None:
        """Draw the curves in the ranges and colours that hold now."""
        if self.shown is None:
            return
        self.draw_curves(self.shown, self.ranges()[1])
        self.divide(self.shown.sheet.loop.time_unit)
        marks = self.marks_of(self.shown)
        self.ground.areas = marks.areas
        events = tuple(Stroke(at, -inf, at, inf, "kept", dashed=True) for at in self.shown.events)
        self.marks.show_marks(replace(marks, strokes=(*marks.strokes, *events)))

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Return the curve at the pointer's time."""
        del y
        if self.shown is None or not len(self.shown.signals.t):
            return None
        t = self.shown.signals.t
        if not t[0] <= x <= t[-1]:
            return None
        value = float(np.interp(x, t, self.value(self.shown)))
        time = quantity(x, self.shown.sheet.loop.time_unit)
        return (x, value), minus(f"at {time}: {quantity(value, self.signal(self.shown).unit)}")

    def step(self, steps: int) -> tuple[float, float] | None:
        """Return the next place in time, hundredths of what is seen away, from the newest on."""
        if self.shown is None:
            return None
        x = self.ranges()[0]
        now = self.marks.pointer[0] if self.marks.pointer else self.shown.now
        return float(np.clip(now + 0.01 * steps * x.span, max(x.low, 0.0), self.shown.now)), 0.0

    def forget(self) -> None:
        """Forget ranges and curves."""
        super().forget()
        self._steady.forget()
        for curve in (self.main, self.second, self.third):
            curve.clear_points()

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()

    def now_in_words(self, scene: Scene) -> str:
        """Say the newest values."""
        raise NotImplementedError

    def line(self, curve: Curve, role: str, t: Array, values: Array, seen: Extent) -> None:
        """Draw one curve in the colour of a role."""
        curve.set_colour(self._theme.colour(role))
        curve.show_points(thinning.single(t, values, seen, self.columns()))

    def tip(self, scene: Scene, values: Array, name: str, role: str, *, below: bool = False) -> Words:
        """Return the name of a curve at its newest point."""
        value = float(np.clip(values[-1], *_ends(self.ranges()[1])))
        return Words(scene.now, value, name, role, "right", "below" if below else "above")


def _ends(extent: Extent) -> tuple[float, float]:
    return extent.low, extent.high


class OutputStrip(StripPanel):
    """Reference, output, and the measurement while it is noisy."""

    def signal(self, scene: Scene) -> Signal:
        """Return the controlled signal."""
        return scene.sheet.loop.controlled

    def value(self, scene: Scene) -> Array:
        """Return the output."""
        return scene.signals.y

    def levels(self, scene: Scene) -> tuple[float, ...]:
        """Return the ends of the reference in sight, and of the measurement."""
        shown = (scene.signals.r, scene.signals.ym) if scene.noise else (scene.signals.r,)
        return tuple(float(end(values)) for values in shown if len(values) for end in (np.min, np.max))

    def step_size(self, scene: Scene) -> float:
        """Return the reference step of the trial."""
        return scene.sheet.trial.reference

    def draw_curves(self, scene: Scene, seen: Extent) -> None:
        """Draw the three."""
        t, r, y, ym, _, _ = scene.signals
        if not len(t):
            return
        self.line(self.main, "nominal", t, y, seen)
        self.line(self.second, "reference", t, r, seen)
        if scene.noise:
            self.line(self.third, "kept", t, ym, seen)
        else:
            self.third.clear_points()

    def marks_of(self, scene: Scene) -> Marks:
        """Return the names of the curves."""
        if not len(scene.signals.t):
            return Marks()
        r, y = scene.signals.r, scene.signals.y
        output = self.tip(scene, y, "output y", "nominal_word", below=bool(y[-1] < r[-1]))
        return Marks((), (), (output, self.tip(scene, r, "reference r", "quiet", below=bool(y[-1] >= r[-1]))))

    def now_in_words(self, scene: Scene) -> str:
        """Say output and reference, and which curve is the measurement."""
        if not len(scene.signals.t):
            return ""
        signal = scene.sheet.loop.controlled
        said = f"{_named(signal, 'output', scene.signals.y[-1])}, reference {_said(scene.signals.r[-1])}"
        return minus(f"{said}, measurement {_said(scene.signals.ym[-1])} (grey)" if scene.noise else said)


class EffortStrip(StripPanel):
    """The effort between its limits."""

    strong_second = True

    def signal(self, scene: Scene) -> Signal:
        """Return the manipulated signal."""
        return scene.sheet.loop.manipulated

    def value(self, scene: Scene) -> Array:
        """Return the effort."""
        return scene.signals.u

    def levels(self, scene: Scene) -> tuple[float, ...]:
        """Return the limits where there are any, so that the way to them is always seen."""
        signal = scene.sheet.loop.manipulated
        return tuple(level for level in (signal.low, signal.high) if level is not None)

    def step_size(self, scene: Scene) -> float:
        """Return the disturbance step of the trial."""
        return scene.sheet.trial.disturbance

    def draw_curves(self, scene: Scene, seen: Extent) -> None:
        """Draw the effort, and over it the pieces that a limit changed."""
        signals = scene.signals
        if not len(signals.t):
            return
        self.line(self.main, "nominal", signals.t, signals.u, seen)
        if signals.limited.any():
            self.second.setZValue(10.0)
            self.second.set_colour(self._theme.colour("limit"))
            points = thinning.clipped(signals.u, seen)
            self.second.show_points(thinning.Points(signals.t, points, (signals.limited > 0.0).astype(np.int32)))
        else:
            self.second.clear_points()

    def marks_of(self, scene: Scene) -> Marks:
        """Return both limits with the ground beyond them."""
        signal = scene.sheet.loop.manipulated
        sides = [(signal.low, -inf, "low"), (signal.high, inf, "high")]
        there = [(level, beyond, name) for level, beyond, name in sides if level is not None]
        return Marks(
            tuple(
                Area(rectangle(-inf, inf, *sorted((level, beyond))), "limit", hatched=True)
                for level, beyond, _ in there
            ),
            tuple(Stroke(-inf, level, inf, level, "limit") for level, _, _ in there),
            tuple(
                Words(-inf, level, f"{name} {quantity(level, signal.unit)}", "limit_word", "left", _inside(name))
                for level, _, name in there
            ),
        )

    def now_in_words(self, scene: Scene) -> str:
        """Say the effort, and that a limit holds it."""
        if not len(scene.signals.t):
            return ""
        said = _named(scene.sheet.loop.manipulated, "effort", scene.signals.u[-1])
        return minus(f"{said}, held by a limit" if scene.signals.limited[-1] else said)


def _inside(name: str) -> Side:
    return "above" if name == "low" else "below"


def _named(signal: Signal, name: str, value: float) -> str:
    return f"{signal.name or name} {_said(value)} {signal.unit}".rstrip()


def _said(value: float) -> str:
    """Return a number of steady length, so that the words beside it stay where they are."""
    return f"{value:.2f}" if abs(value) < 1e4 else f"{value:.3g}"


class Chart(QObject):
    """Both plots, one above the other."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self.output, self.effort = OutputStrip("Output", theme), EffortStrip("Effort", theme)
        self.panels = (self.output, self.effort)
        self.widget = QSplitter(Qt.Orientation.Vertical)
        self.widget.setChildrenCollapsible(False)
        self.widget.setHandleWidth(4)
        for panel in self.panels:
            self.widget.addWidget(panel.widget)
        self.widget.setSizes([600, 400])
        theme.changed.connect(self._dress)

    def show(self, scene: Scene) -> None:
        """Show the newest samples in both."""
        for panel in self.panels:
            panel.show(scene)

    def forget(self) -> None:
        """Forget what is shown."""
        for panel in self.panels:
            panel.forget()

    def say_empty(self, sentence: str) -> None:
        """Say why there is nothing to show; once, in the upper plot."""
        for panel, words in zip(self.panels, (sentence, ""), strict=True):
            panel.show_empty(words)

    def _dress(self) -> None:
        for panel in self.panels:
            panel.dress()
