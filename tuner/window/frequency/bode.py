"""The Bode plots of the loop gain, and the plot of both sensitivities."""

from math import log10
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from tuner.judge.wording import quantity
from tuner.window.frequency.panel import Bundle, FrequencyPanel
from tuner.window.plots.extent import Extent
from tuner.window.plots.marks import Area, Marks, Stroke, Words, rectangle
from tuner.window.shown import Shown
from tuner.window.theme import Theme

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves
    from tuner.simulate.margins import Margins

Array = NDArray[np.float64]

_SMALLEST = 1e-12


def decibels(values: NDArray[np.complex128]) -> Array:
    """Return sizes in dB."""
    return np.asarray(20.0 * np.log10(np.maximum(np.abs(values), _SMALLEST)))


def phases(gain: NDArray[np.complex128]) -> Array:
    """Return phases in degrees, without jumps along frequency, shape of `gain`.

    Each curve is on the turn on which its phase is nearest to half a turn where its size is nearest to one, whatever it
    comes from at low frequency.
    """
    found = np.degrees(np.unwrap(np.angle(gain), axis=-1))
    crossover = np.abs(np.log(np.maximum(np.abs(gain), _SMALLEST))).argmin(axis=-1)
    there = np.take_along_axis(found, np.expand_dims(crossover, -1), axis=-1)
    return np.asarray(found - 360.0 * np.round((there + 180.0) / 360.0))


def nyquist_marks(curves: "FrequencyCurves", low: float) -> Marks:
    """Return where the response of a sampled loop ends."""
    if curves.nyquist > 1.1 * curves.w[-1]:
        return Marks()
    at = log10(curves.nyquist)
    stroke = Stroke(at, -np.inf, at, np.inf, "kept", dashed=True)
    return Marks((), (stroke,), (Words(at, low, "half the sampling frequency", "kept_word", "right", "above"),))


class MagnitudePanel(FrequencyPanel):
    """The size of the loop gain over frequency, with the gain margin."""

    measures = ("gain_margin",)

    def bundles(self, curves: "FrequencyCurves") -> tuple[Bundle, ...]:
        """Return the size of L."""
        sizes = decibels(curves.gain)
        return (Bundle(sizes[0], sizes[1:], "loop gain |L|", "nominal", 0.25),)

    def frequency_marks(self, shown: Shown, curves: "FrequencyCurves") -> Marks:
        """Return the line of one, and the gain margin."""
        ends = np.log10(curves.w[[0, -1]])
        strokes = [Stroke(float(ends[0]), 0.0, float(ends[1]), 0.0, "reference", dashed=True)]
        end = nyquist_marks(curves, self.height().low)
        words = list(end.words)
        margins = shown.assessment.nominal.margins
        if margins is not None and margins.gain_margin_at and np.isfinite(margins.gain_margin):
            x, y = log10(margins.gain_margin_at), -20.0 * log10(margins.gain_margin)
            strokes.append(Stroke(x, y, x, 0.0, "nominal"))
            said = f"gain margin {margins.gain_margin:.3g} ({-y:.1f} dB)"
            words.append(Words(x, y, said, "nominal_word", "left", "below"))
        return Marks((), (*strokes, *end.strokes), tuple(words))

    def axis_words(self) -> str:
        """Return what stands on the vertical axis."""
        return "size of the loop gain, dB"

    def height(self) -> Extent:
        """Return the heights around one."""
        return Extent(-40.0, 40.0)


class PhasePanel(FrequencyPanel):
    """The phase of the loop gain over frequency, with the phase margin."""

    measures = ("phase_margin", "delay_margin")

    def bundles(self, curves: "FrequencyCurves") -> tuple[Bundle, ...]:
        """Return the phase of L."""
        found = phases(curves.gain)
        return (Bundle(found[0], found[1:], "phase of L", "nominal", 0.25),)

    def frequency_marks(self, shown: Shown, curves: "FrequencyCurves") -> Marks:
        """Return the line of half a turn, and the phase margin."""
        ends = np.log10(curves.w[[0, -1]])
        strokes = [Stroke(float(ends[0]), -180.0, float(ends[1]), -180.0, "reference", dashed=True)]
        end = nyquist_marks(curves, self.height().low)
        words = list(end.words)
        margins = shown.assessment.nominal.margins
        if margins is not None and margins.phase_margin_at:
            mark, said = self._margin(margins, curves, shown)
            strokes.append(mark)
            words.append(said)
        return Marks((), (*strokes, *end.strokes), tuple(words))

    @staticmethod
    def _margin(margins: "Margins", curves: "FrequencyCurves", shown: Shown) -> tuple[Stroke, Words]:
        at = margins.phase_margin_at or 1.0
        phase = float(np.interp(log10(at), np.log10(curves.w), phases(curves.gain[:1])[0]))
        line = -180.0 + 360.0 * round((phase + 180.0) / 360.0)
        delay = quantity(margins.delay_margin, shown.sheet.loop.time_unit, 3)
        said = f"phase margin {margins.phase_margin:.3g}°, delay margin {delay}"
        stroke = Stroke(log10(at), line, log10(at), phase, "nominal")
        return stroke, Words(log10(at), line, said, "nominal_word", "left", "below")

    def axis_words(self) -> str:
        """Return what stands on the vertical axis."""
        return "phase of the loop gain, °"

    def height(self) -> Extent:
        """Return the phases around half a turn."""
        return Extent(-360.0, 0.0)


class SensitivityPanel(FrequencyPanel):
    """Sensitivity and complementary sensitivity over frequency, with their limits."""

    measures = ("max_sensitivity", "max_complementary", "bandwidth")

    def __init__(self, name: str, theme: Theme) -> None:
        self._top = 2.0
        super().__init__(name, theme, curves=2)

    def bundles(self, curves: "FrequencyCurves") -> tuple[Bundle, ...]:
        """Return the sizes of S and T."""
        s = curves.sensitivity()
        size, other = np.abs(s), np.abs(1.0 - s)
        return (
            Bundle(size[0], size[1:], "sensitivity |S|", "nominal", 0.75),
            Bundle(other[0], other[1:], "complementary |T|", "disturbance", 0.15),
        )

    def frequency_marks(self, shown: Shown, curves: "FrequencyCurves") -> Marks:
        """Return the limits of both peaks and of the bandwidth, and the peak of S."""
        ends = np.log10(curves.w[[0, -1]])
        left, right = float(ends[0]), float(ends[1])
        limits, unit = dict(shown.sheet.limits), f"rad/{shown.sheet.loop.time_unit}"
        end = nyquist_marks(curves, 0.0)
        areas, strokes, words = [], list(end.strokes), list(end.words)
        for name, label in (("max_sensitivity", "|S|"), ("max_complementary", "|T|")):
            if (most := limits.get(name)) is not None:
                strokes.append(Stroke(left, most, right, most, "limit", measure=name))
                words.append(Words(left, most, f"{label} at most {most:g}", "limit_word", "left", "above"))
        if (least := limits.get("bandwidth")) is not None and least > 0.0:
            at = log10(least)
            areas.append(Area(rectangle(-np.inf, at, 0.707, np.inf), "limit_zone"))
            strokes.append(Stroke(at, 0.0, at, np.inf, "limit", measure="bandwidth"))
            words.append(Words(at, 0.0, f"bandwidth at least {quantity(least, unit, 3)}", "limit_word", "left"))
        margins = shown.assessment.nominal.margins
        if margins is not None and 0.0 < margins.max_sensitivity_at < np.inf:
            x, peak = log10(margins.max_sensitivity_at), margins.max_sensitivity
            words.append(Words(x, peak, f"peak {peak:.3g}", "nominal_word", "left", "above"))
        self._top = max(2.0, 1.15 * max(limits.get("max_sensitivity", 0.0), limits.get("max_complementary", 0.0)))
        if margins is not None:
            self._top = max(self._top, min(1.15 * margins.max_sensitivity, 6.0))
        return Marks(tuple(areas), tuple(strokes), tuple(words))

    def axis_words(self) -> str:
        """Return what stands on the vertical axis."""
        return "sizes of both sensitivities"

    def height(self) -> Extent:
        """Return the heights up to the limits and the peak."""
        return Extent(0.0, self._top)
