"""The pole map: closed-loop poles of the whole family, with the regions that the limits leave them."""

from dataclasses import dataclass
from math import pi

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QColor

from tuner.judge.wording import minus, number, quantity
from tuner.simulate.traces import ComplexArray
from tuner.window.plots.extent import Extent, SteadyExtent
from tuner.window.plots.items import Poles
from tuner.window.plots.lines import drift_words
from tuner.window.plots.marks import Marks, Words, pole_marks
from tuner.window.plots.panel import Panel
from tuner.window.plots.words import missed_words
from tuner.window.shown import Shown
from tuner.window.theme import Theme

_DOMINANT = 6.0
"""Poles up to so many times as fast as the slowest one set the scale; faster ones may lie beyond the edge."""

_REACH = 12.0
"""Pixels within which the pointer means a pole."""


@dataclass(frozen=True, slots=True, eq=False)
class Least:
    """The pair of poles of the family that is damped least, in words, and its plant if another one is looked at."""

    pair: ComplexArray
    words: str
    plant: str


def least_damped(shown: Shown) -> Least | None:
    """Return the pair of poles that has the worst damping of the family; None where none rings."""
    worst = shown.assessment.worst.get("damping")
    members = [member for member in shown.assessment.members if worst is not None and member.name == worst.plant]
    if not members or worst is None or worst.value is None or worst.value >= 1.0:
        return None
    poles = members[0].poles[members[0].poles.imag > 0.0]
    if not poles.size:
        return None
    pole = complex(poles[np.abs(-poles.real / np.abs(poles) - worst.value).argmin()])
    is_seen = members[0] is shown.assessment.nominal
    whose = "" if is_seen else f": {drift_words(members[0])}"
    words = minus(f"least damping {number(worst.value, 3)}{whose}")
    return Least(np.array([pole, pole.conjugate()]), words, "" if is_seen else members[0].name)


class PolePanel(Panel[Shown]):
    """The pole map; each axis has its own scale, so that slow poles are told apart in a wide plot."""

    def __init__(self, name: str, theme: Theme) -> None:
        self._marks = Marks()
        self._across, self._upwards = SteadyExtent(), SteadyExtent()
        self._family: ComplexArray = np.empty(0, dtype=np.complex128)
        self._nominal: ComplexArray = np.empty(0, dtype=np.complex128)
        self._drawn: tuple[ComplexArray, QColor] | None = None
        self.family = Poles(size=7, depth=-10.0)
        self.nominal = Poles(size=10, depth=120.0)
        self.kept = Poles(size=8, depth=100.0)
        self.least = Poles(size=16, depth=121.0, rings=True)
        self._least: Least | None = None
        self._outlined: int | None = None
        super().__init__(name, theme)
        self.view.addItem(self.family, ignoreBounds=True)
        self.view.addItem(self.kept, ignoreBounds=True)
        self.view.addItem(self.nominal, ignoreBounds=True)
        self.view.addItem(self.least, ignoreBounds=True)
        self.family.join(self.view.still)

    def draw(self, shown: Shown) -> None:
        """Take over the poles; until those of the whole family are known, its last ones stay."""
        members = shown.assessment.members
        follows = shown.whole and shown.number == self._outlined
        self._outlined = shown.number if shown.outlined else None
        self._nominal = members[0].poles
        if shown.has_family and not follows:
            others = [member.poles for member in members[1:]] if shown.family_view != "none" else []
            self._family = np.concatenate(others) if others else np.empty(0, dtype=np.complex128)
            self._least = least_damped(shown)
        if shown.whole:
            missed, bad = missed_words(shown, ("poles", "frequency"))
            unit = shown.sheet.loop.time_unit
            self.set_words(f"real part, 1/{unit}; imaginary part, rad/{unit}", missed, bad=bad)
        self._marks = pole_marks(shown.sheet, shown.overlay)
        if (asked := self.ask()) is not None:
            held = self.held or not shown.whole
            across = self._across.offer(asked[0], held=held)
            self.set_ranges(across, self._upwards.offer(asked[1], held=held))
        self.redraw()

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return ranges around the slow poles, the axis and the settling boundary."""
        if self.shown is None:
            return None
        boundary = self.shown.overlay.boundary
        slowest = float(np.abs(self._nominal).min()) if self._nominal.size else 1.0
        reach = _DOMINANT * max(slowest, abs(boundary.real) if boundary else 0.0, 1e-12)
        near = np.concatenate([poles[np.abs(poles) <= reach] for poles in (self._nominal, self._family)])
        left = min(float(near.real.min(initial=0.0)), boundary.real if boundary else 0.0, -0.2 * reach)
        right = max(float(near.real.max(initial=0.0)), 0.12 * abs(left))
        height = max(float(np.abs(near.imag).max(initial=0.0)), 0.2 * (right - left))
        return Extent(left, right), Extent(-height, height)

    def redraw(self) -> None:
        """Draw the poles in the colours that hold now."""
        if self.shown is None:
            return
        colour = self._theme.colour("kept" if self.stale else "family")
        if self._drawn is None or self._drawn[0] is not self._family or self._drawn[1] != colour:
            self._drawn = (self._family, colour)
            _show(self.family, self._family, colour, 1.5)
        _show(self.kept, self._kept(), self._theme.colour("kept"), 1.5)
        _show(self.nominal, self._nominal, self._theme.colour("kept" if self.stale else "nominal"), 2.0)
        ringed = self._least.pair if self._least is not None else np.empty(0, dtype=np.complex128)
        _show(self.least, ringed, self._theme.colour("kept" if self.stale else "limit"), 1.5)
        self.ground.areas = self._marks.areas
        self.divide(f"1/{self.shown.sheet.loop.time_unit}", time=False)
        self.marks.show_marks(self._seen_marks(), self._names())

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Return the nominal pole nearest to the pointer, when one is near."""
        if self.shown is None or not self._nominal.size:
            return None
        (across, upwards), box = self.ranges(), self.view.getPlotItem().getViewBox()
        right = (self._nominal.real - x) / across.span * box.width()
        up = (self._nominal.imag - y) / upwards.span * box.height()
        pixels = np.hypot(right, up)
        if pixels.min() > _REACH:
            return None
        pole = complex(self._nominal[pixels.argmin()])
        return (pole.real, pole.imag), pole_words(pole, self.shown.sheet.loop.time_unit)

    def step(self, steps: int) -> tuple[float, float] | None:
        """Return the next pole, from the slowest to faster ones."""
        if not self._nominal.size:
            return None
        points = [(pole.real, pole.imag) for pole in self._nominal]
        index = points.index(self.marks.pointer) + (1 if steps > 0 else -1) if self.marks.pointer in points else 0
        return points[index % len(points)]

    def forget(self) -> None:
        """Forget ranges and poles."""
        super().forget()
        self._family = np.empty(0, dtype=np.complex128)
        self._least = self._outlined = None
        self._across.forget()
        self._upwards.forget()

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()

    def _kept(self) -> ComplexArray:
        """Return the poles of the tunings to compare with."""
        found = [kept.member.poles for kept in self.shown.kept] if self.shown is not None else []
        return np.concatenate(found) if found else np.empty(0, dtype=np.complex128)

    def _kept_names(self) -> list[Words]:
        """Name each of those tunings at its slowest pole, where that is in sight."""
        across, upwards = self.ranges()
        words = []
        for kept in self.shown.kept if self.shown is not None else ():
            upper = kept.member.poles[kept.member.poles.imag >= 0.0]
            pole = complex(upper[np.abs(upper).argmin()]) if upper.size else complex(across.high + 1.0)
            if across.low < pole.real < across.high and upwards.low < pole.imag < upwards.high:
                words.append(Words(pole.real, pole.imag, kept.name, "kept_word", "left", "above"))
        return words

    def _seen_marks(self) -> Marks:
        """Return the marks with the words of the wedge on its ray, inside what is seen."""
        (x, y), wedge = self.ranges(), self.shown.overlay.wedge if self.shown else None
        if wedge is None:
            return self._marks
        words = tuple(_on_ray(word, x, y) if word.text == wedge.label else word for word in self._marks.words)
        return Marks(self._marks.areas, self._marks.strokes, words)

    def _names(self) -> list[Words]:
        across, upwards = self.ranges()
        beyond = int(np.count_nonzero(self._nominal.real < across.low))
        words = [Words(0.0, upwards.low, "unstable", "lost_word", "left", "above")]
        if beyond:
            count = "one faster pole" if beyond == 1 else f"{beyond} faster poles"
            words.append(Words(across.low, 0.0, f"← {count} further left", "nominal_word", "left", "above"))
        if (least := self._least) is not None:
            at = across.nearest(least.pair[0].real), upwards.nearest(least.pair[0].imag)
            is_seen = at == (least.pair[0].real, least.pair[0].imag)
            said = least.words if is_seen else f"{least.words}, out of sight"
            words.append(Words(*at, said, "limit_word", "left", "above" if is_seen else "below", least.plant))
        return words + self._kept_names()


def _on_ray(word: Words, x: Extent, y: Extent) -> Words:
    """Return the words that stand at (-1, slope) moved along their ray to where it is seen."""
    length = 0.7 * min(abs(x.low), y.high / word.y if word.y > 0.0 else np.inf)
    return Words(-length, word.y * length, word.text, word.role, "right", "above")


def _show(item: Poles, poles: ComplexArray, colour: QColor, width: float) -> None:
    item.show_poles(_part(poles.real), _part(poles.imag), colour, width)


def _part(values: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.ascontiguousarray(values)


def pole_words(pole: complex, unit: str) -> str:
    """Return a pole in words: its parts, its period when it rings, and its damping ratio."""
    damping = -pole.real / abs(pole) if pole else 1.0
    said = f"{pole.real:.3g}"
    if pole.imag:
        said += f" ± {abs(pole.imag):.3g}j"
    period = f", period {quantity(2.0 * pi / abs(pole.imag), unit, 3)}" if pole.imag else ""
    return minus(f"{said} rad/{unit}{period}, damping {damping:.2g}")
