"""The Nyquist plot of the loop gain, both axes in one scale, with the circle that the sensitivity must stay out of."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from tuner.window.frequency.panel import worst_places
from tuner.window.frequency.words import frequency_words, loop_words, missed_of, worst_name, worst_plant, worst_words
from tuner.window.plots.extent import Extent
from tuner.window.plots.items import Curve, Poles
from tuner.window.plots.lines import Family
from tuner.window.plots.marks import Marks, Stroke, Words
from tuner.window.plots.panel import Panel
from tuner.window.plots.thinning import Points
from tuner.window.shown import FamilyView, Shown
from tuner.window.theme import Theme

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves

ComplexArray = NDArray[np.complex128]

_FAR = 20.0
"""Loop gains are drawn no farther out than this; the picture ends much nearer."""

_LEFT, _RIGHT = -2.4, 1.0
_HALF = 1.5
"""Height above and below the real axis that is always in sight."""

_POINTS = 400
_TURN: ComplexArray = np.asarray(np.exp(2j * np.pi * np.arange(181) / 180.0), dtype=np.complex128)
_REACH = 12.0
"""Pixels within which the pointer means the curve."""

_NONE: ComplexArray = np.empty((0, 0), dtype=np.complex128)
_MEASURES = ("max_sensitivity",)


class NyquistPanel(Panel[Shown]):
    """The loop gain in the complex plane, for frequencies above zero."""

    def __init__(self, name: str, theme: Theme) -> None:
        self._curves: FrequencyCurves | None = None
        self._family = self._drawn = _NONE
        self._worst: tuple[ComplexArray, str, str] | None = None
        self.family, self.own = Curve(smooth=False, depth=-40.0), Curve(strong=True)
        self.one, self.limit, self.touched = Curve(depth=-30.0), Curve(depth=-20.0), Curve(depth=-25.0)
        self.worst, self.kept = Curve(depth=-15.0), Curve(smooth=False, depth=-18.0)
        self.critical = Poles(size=10, depth=120.0)
        super().__init__(name, theme)
        self.view.getPlotItem().getViewBox().setAspectLocked(lock=True, ratio=1.0)
        for item in (
            self.family,
            self.one,
            self.limit,
            self.touched,
            self.kept,
            self.worst,
            self.own,
            self.critical,
        ):
            self.view.addItem(item, ignoreBounds=True)
        for still in (self.family, self.one, self.limit):
            still.join(self.view.still)

    def draw(self, shown: Shown) -> None:
        """Take over the loop gains; until the whole family is known, its last curves stay."""
        curves = shown.frequency
        if curves is None or not curves.w.size:
            return
        self._curves = curves
        if shown.whole:
            self._family = _chosen(shown, curves)
            self._worst = _worst(shown, curves)
            missed, bad = missed_of(shown, _MEASURES)
            self.set_words(f"real and imaginary part, 1{worst_words(shown, _MEASURES)}", missed, bad=bad)
        if (asked := self.ask()) is not None:
            self.set_ranges(*asked)
        self.redraw()

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return the surroundings of the critical point, in one scale across and upwards."""
        if self._curves is None:
            return None
        box = self.view.getPlotItem().getViewBox()
        width, height = max(box.width(), 1.0), max(box.height(), 1.0)
        scale = max((_RIGHT - _LEFT) / width, 2.0 * _HALF / height)
        middle, across, upwards = 0.5 * (_LEFT + _RIGHT), 0.5 * scale * width, 0.5 * scale * height
        return Extent(middle - across, middle + across), Extent(-upwards, upwards)

    def redraw(self) -> None:
        """Draw everything in the colours that hold now."""
        if self._curves is None or self.shown is None:
            return
        self.family.set_colour(self._theme.colour("family"))
        if self._drawn is not self._family:
            self._drawn = self._family
            self.family.show_points(_bundle(self._family))
        self.own.set_colour(self._theme.colour("kept" if self.stale else "nominal"))
        self.own.show_points(_points(_near(self._curves.gain[0])))
        self.kept.set_colour(self._theme.colour("kept"))
        self.kept.show_points(_several([gain for _, gain in self._beside()]))
        self.worst.set_colour(self._theme.colour("kept" if self.stale else "limit"))
        self.worst.show_points(_points(_near(self._worst[0]))) if self._worst else self.worst.clear_points()
        self._draw_circles()
        self.critical.show_poles(np.array([-1.0]), np.array([0.0]), self._theme.colour("lost"), 2.0)
        self.divide("", time=False)
        self.marks.show_marks(Marks((), self._strokes(), self._words()), [])

    def _draw_circles(self) -> None:
        """Draw the circle of gain one, that of the limit around the critical point, and the one that L touches."""
        nearest, limit = self._nearest(), self._limit()
        reach = abs(1.0 + nearest) if nearest is not None else 0.0
        _circle(self.one, 0.0, 1.0)
        _circle(self.limit, -1.0, 1.0 / limit if limit else 0.0)
        _circle(self.touched, -1.0, reach)
        roles = ((self.one, "quiet"), (self.limit, "limit"), (self.touched, "kept" if self.stale else "nominal"))
        for curve, role in roles:
            curve.set_colour(self._theme.colour(role))

    def _beside(self) -> list[tuple[str, ComplexArray]]:
        """Return the loop gains of the tunings to compare with, by their names."""
        kept = self.shown.kept if self.shown is not None else ()
        return [(one.name, one.frequency.gain[0]) for one in kept if one.frequency is not None and one.frequency.w.size]

    def _limit(self) -> float | None:
        return dict(self.shown.sheet.limits).get("max_sensitivity") if self.shown else None

    def _strokes(self) -> tuple[Stroke, ...]:
        """Return the distance from the critical point where the loop comes nearest to it."""
        nearest = self._nearest()
        if nearest is None:
            return ()
        return (Stroke(-1.0, 0.0, nearest.real, nearest.imag, "nominal"),)

    def _nearest(self) -> complex | None:
        if self._curves is None or self.shown is None or self.shown.assessment.nominal.margins is None:
            return None
        gain = self._curves.gain[0]
        return complex(gain[np.abs(1.0 + gain).argmin()])

    def _words(self) -> tuple[Words, ...]:
        words = [
            Words(-1.0, 0.0, "\u22121", "lost_word", "right", "below"),
            Words(0.70, 0.71, "|L| = 1", "quiet", "left", "above"),
        ]
        if most := self._limit():
            words.append(Words(-1.0, 1.0 / most, f"|S| at most {most:g}", "limit_word", "right", "above"))
        if (nearest := self._nearest()) is not None and self._curves is not None and self.shown is not None:
            index = int(np.abs(self._curves.gain[0] - nearest).argmin())
            at = frequency_words(float(self._curves.w[index]), self.shown.sheet)
            said = f"peak of |S| {self._curves.sensitivity[0, index]:.3g} at {at}"
            words.append(Words(nearest.real, nearest.imag, said, "nominal_word", "left", "below"))
        for name, gain in self._beside():
            near = complex(gain[np.abs(1.0 + gain).argmin()])
            words.append(Words(near.real, near.imag, name, "kept_word", "right", "above"))
        if self._worst is not None:
            gain, said, plant = self._worst
            near = complex(gain[np.abs(1.0 + gain).argmin()])
            words.append(Words(near.real, near.imag, said, "limit_word", "left", "below", plant))
        return tuple(words)

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Return the loop at the point of its curve that is nearest to the pointer, when one is near."""
        if self._curves is None or self.shown is None:
            return None
        gain, (across, _) = self._curves.gain[0], self.ranges()
        distance = np.abs(gain - complex(x, y))
        index = int(distance.argmin())
        if distance[index] > _REACH * across.span / self.columns():
            return None
        return (gain[index].real, gain[index].imag), loop_words(self._curves, index, self.shown.sheet)

    def step(self, steps: int) -> tuple[float, float] | None:
        """Return the next point along the curve, towards higher frequencies."""
        if self._curves is None:
            return None
        gain = self._curves.gain[0]
        at = complex(*self.marks.pointer) if self.marks.pointer else complex(gain[np.abs(1.0 + gain).argmin()])
        index = int(np.clip(np.abs(gain - at).argmin() + 3 * steps, 0, len(gain) - 1))
        return float(gain[index].real), float(gain[index].imag)

    def forget(self) -> None:
        """Forget the curves."""
        super().forget()
        self._curves = self._worst = None
        self._family = _NONE

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()


def _chosen(shown: Shown, curves: "FrequencyCurves") -> ComplexArray:
    """Return the loop gains of the family to draw: here its ground is that of its curves."""
    view: FamilyView = "curves" if shown.family_view == "band" else shown.family_view
    places = worst_places(shown, curves)
    parts = [Family(curves.w, part[1:], places).curves(view) for part in (curves.gain.real, curves.gain.imag)]
    return np.asarray(parts[0] + 1j * parts[1])


def _worst(shown: Shown, curves: "FrequencyCurves") -> tuple[ComplexArray, str, str] | None:
    """Return the loop gain of the plant with the largest peak, its words and its name; None where it is looked at."""
    found = worst_plant(shown, _MEASURES)
    if found is None or found[1] not in curves.plants[1:]:
        return None
    return curves.gain[curves.plants.index(found[1])], worst_name(shown, _MEASURES, *found), found[1]


def _circle(curve: Curve, centre: float, radius: float) -> None:
    if radius > 0.0:
        curve.show_points(_points(np.asarray(centre + radius * _TURN, dtype=np.complex128)))
    else:
        curve.clear_points()


def _near(gain: ComplexArray) -> ComplexArray:
    """Return loop gains drawn in to a circle far outside the picture."""
    size = np.maximum(np.abs(gain), 1e-300)
    with np.errstate(invalid="ignore"):
        return np.nan_to_num(np.where(size > _FAR, gain / size * _FAR, gain))


def _points(curve: ComplexArray) -> Points:
    return Points(np.ascontiguousarray(curve.real), np.ascontiguousarray(curve.imag))


def _several(curves: Sequence[ComplexArray]) -> Points:
    """Return curves of different lengths as one."""
    parts = [_bundle(curve[None]) for curve in curves] or [_bundle(_NONE)]
    connect = [part.connect for part in parts if part.connect is not None]
    x, y = np.concatenate([part.x for part in parts]), np.concatenate([part.y for part in parts])
    return Points(x, y, np.concatenate(connect))


def _bundle(family: ComplexArray) -> Points:
    """Return many curves as one, each of a few hundred points."""
    if not family.size:
        return Points(np.empty(0), np.empty(0), np.empty(0, dtype=np.int32))
    every = max(1, family.shape[1] // _POINTS)
    near = _near(family[:, ::every])
    connect = np.ones(near.shape, dtype=np.int32)
    connect[:, -1] = 0
    return Points(near.real.ravel().copy(), near.imag.ravel().copy(), connect.ravel())
