"""The Nyquist plot of the loop gain, both axes in one scale, with the circle that the sensitivity must stay out of."""

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from tuner.window.frequency.panel import loop_words, missed_of, worst_words
from tuner.window.plots.extent import Extent
from tuner.window.plots.items import Curve, Poles
from tuner.window.plots.marks import Marks, Stroke, Words
from tuner.window.plots.panel import Panel
from tuner.window.plots.thinning import Points
from tuner.window.shown import Shown
from tuner.window.theme import Theme

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves

Array = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]

_FAR = 20.0
"""Loop gains are drawn no farther out than this; the picture ends much nearer."""

_LEFT, _RIGHT = -2.4, 1.0
_HALF = 1.5
"""Height above and below the real axis that is always in sight."""

_POINTS = 400
_TURN = np.exp(2j * np.pi * np.arange(181) / 180.0)
_REACH = 0.15


class NyquistPanel(Panel):
    """The loop gain in the complex plane, for frequencies above zero."""

    def __init__(self, name: str, theme: Theme) -> None:
        self._curves: FrequencyCurves | None = None
        self._family: ComplexArray = np.empty((0, 0), dtype=np.complex128)
        self.family, self.own = Curve(smooth=False, depth=-40.0), Curve(strong=True)
        self.one, self.limit = Curve(depth=-30.0), Curve(depth=-20.0)
        self.critical = Poles(size=10, depth=120.0)
        super().__init__(name, theme)
        for item in (self.family, self.one, self.limit, self.own, self.critical):
            self.view.addItem(item, ignoreBounds=True)

    def draw(self, shown: Shown) -> None:
        """Take over the loop gains; until the whole family is known, its last curves stay."""
        if shown.frequency is None or not shown.frequency.w.size:
            return
        self._curves = shown.frequency
        if shown.whole:
            self._family = shown.frequency.gain[1:]
            missed, bad = missed_of(shown, ("max_sensitivity",))
            self.set_words(f"real and imaginary part{worst_words(shown, ('max_sensitivity',))}", missed, bad=bad)
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
        self.family.show_points(_bundle(self._family))
        self.own.set_colour(self._theme.colour("kept" if self.stale else "nominal"))
        self.own.show_points(_points(_near(self._curves.gain[0])))
        self.one.set_colour(self._theme.colour("quiet"))
        self.one.show_points(_points(_TURN))
        self._draw_limit(dict(self.shown.sheet.limits).get("max_sensitivity"))
        self.critical.show_poles(np.array([-1.0]), np.array([0.0]), self._theme.colour("lost"), 2.0)
        self.divide("", time=False)
        self.marks.show_marks(Marks((), self._strokes(), self._words()), [])

    def _draw_limit(self, most: float | None) -> None:
        if most is None or most <= 0.0:
            self.limit.clear_points()
            return
        self.limit.set_colour(self._theme.colour("limit"))
        self.limit.show_points(_points(-1.0 + _TURN / most))

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
        most = dict(self.shown.sheet.limits).get("max_sensitivity") if self.shown else None
        if most:
            words.append(Words(-1.0, 1.0 / most, f"max sensitivity {most:g}", "limit_word", "centre", "above"))
        if (nearest := self._nearest()) is not None:
            peak = 1.0 / max(abs(1.0 + nearest), 1e-12)
            words.append(Words(nearest.real, nearest.imag, f"1/{peak:.3g}", "nominal_word", "left", "below"))
        return tuple(words)

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Return the loop at the point of its curve that is nearest to the pointer, when one is near."""
        if self._curves is None or self.shown is None:
            return None
        gain = self._curves.gain[0]
        distance = np.abs(gain - complex(x, y))
        index = int(distance.argmin())
        if distance[index] > _REACH:
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
        self._curves = None
        self._family = np.empty((0, 0), dtype=np.complex128)

    def dress(self) -> None:
        """Take over the colours."""
        super().dress()
        self.redraw()


def _near(gain: ComplexArray) -> ComplexArray:
    """Return loop gains drawn in to a circle far outside the picture."""
    size = np.maximum(np.abs(gain), 1e-300)
    return np.asarray(np.where(size > _FAR, gain / size * _FAR, gain))


def _points(curve: ComplexArray) -> Points:
    return Points(np.ascontiguousarray(curve.real), np.ascontiguousarray(curve.imag))


def _bundle(family: ComplexArray) -> Points:
    """Return many curves as one, each of a few hundred points."""
    if not family.size:
        return Points(np.empty(0), np.empty(0), np.empty(0, dtype=np.int32))
    every = max(1, family.shape[1] // _POINTS)
    near = _near(family[:, ::every])
    connect = np.ones(near.shape, dtype=np.int32)
    connect[:, -1] = 0
    return Points(near.real.ravel().copy(), near.imag.ravel().copy(), connect.ravel())
