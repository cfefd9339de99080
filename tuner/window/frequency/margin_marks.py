"""Margins of the plant that is looked at, marked where they are taken, and the limits that they must keep."""

from math import degrees, inf, log10
from typing import TYPE_CHECKING

import numpy as np

from tuner.judge.wording import minus, quantity
from tuner.window.frequency.words import frequency_words
from tuner.window.plots.marks import Area, Marks, Stroke, Words, rectangle
from tuner.window.shown import Shown

if TYPE_CHECKING:
    # It comes with compiled loops, which the first picture does not wait for.
    from tuner.simulate.curves import FrequencyCurves

_ZONE = 0.025
"""Half the width of the region of a limit, in parts of the axis: the limit holds at one frequency."""

_WORTH = 1.02
"""A largest complementary sensitivity from which on it is named without a limit."""


def joined(*many: Marks) -> Marks:
    """Return the marks of several."""
    return Marks(
        tuple(area for marks in many for area in marks.areas),
        tuple(stroke for marks in many for stroke in marks.strokes),
        tuple(words for marks in many for words in marks.words),
    )


def line_at(curves: "FrequencyCurves", y: float) -> Marks:
    """Return the line from which a margin is taken."""
    left, right = np.log10(curves.w[[0, -1]])
    return Marks((), (Stroke(float(left), y, float(right), y, "reference", dashed=True),))


def end_of_samples(curves: "FrequencyCurves", low: float) -> Marks:
    """Return where the response of a sampled loop ends, if it is within the plot."""
    if curves.nyquist > 1.0001 * curves.w[-1]:
        return Marks()
    at = log10(curves.nyquist)
    stroke = Stroke(at, -inf, at, inf, "kept", dashed=True)
    return Marks((), (stroke,), (Words(at, low, "half the sampling frequency", "kept_word", "right", "above"),))


def gain_margin(shown: Shown, curves: "FrequencyCurves") -> Marks:
    """Return the stroke from the gain at half a turn up to one, and how long it must be at least."""
    margins = shown.assessment.nominal.margins
    if margins is None:
        return Marks()
    if not margins.gain_margin_at or margins.gain_margin == inf:
        left = log10(curves.w[0])
        return Marks((), (), (Words(left, 0.0, "gain margin unbounded", "nominal_word", "left", "below"),))
    x, y = log10(margins.gain_margin_at), -20.0 * log10(margins.gain_margin)
    at = frequency_words(margins.gain_margin_at, shown.sheet)
    said = f"gain margin {margins.gain_margin:.3g} ({-y:.1f} dB) at {at}"
    own = Marks((), (Stroke(x, y, x, 0.0, "nominal"),), (Words(x, y, said, "nominal_word", "left", "below"),))
    least = dict(shown.sheet.limits).get("gain_margin")
    if least is None or least <= 1.0:
        return own
    return joined(_zone(curves, x, 0.0, -20.0 * log10(least), "gain_margin", f"at least {least:g}"), own)


def phase_margin(shown: Shown, curves: "FrequencyCurves") -> Marks:
    """Return the stroke from half a turn to the phase where the gain is one, and how long it must be at least."""
    margins = shown.assessment.nominal.margins
    if margins is None:
        return Marks()
    if not margins.phase_margin_at:
        left = log10(curves.w[0])
        return Marks((), (), (Words(left, -180.0, "phase margin unbounded", "nominal_word", "left", "below"),))
    x, phase, line = _phase_at(curves, margins.phase_margin_at)
    at = frequency_words(margins.phase_margin_at, shown.sheet)
    said = f"phase margin {margins.phase_margin:.3g}° at {at}"
    own = Marks((), (Stroke(x, line, x, phase, "nominal"),), (Words(x, line, said, "nominal_word", "left", "below"),))
    least = dict(shown.sheet.limits).get("phase_margin")
    if not least:
        return own
    zones = [
        _zone(curves, x, line, line + sign * least, "phase_margin", f"at least {least:g}°" if sign > 0 else "")
        for sign in (1.0, -1.0)
    ]
    return joined(*zones, own)


def half_turn(shown: Shown, curves: "FrequencyCurves") -> float:
    """Return the phase, degrees, from which the phase margin is taken: -180, or that with whole turns."""
    margins = shown.assessment.nominal.margins
    return _phase_at(curves, margins.phase_margin_at)[2] if margins and margins.phase_margin_at else -180.0


def delay_margin(shown: Shown, curves: "FrequencyCurves") -> Marks:
    """Return the delay margin in words where it is taken, and the turn that its limit would add there."""
    margins = shown.assessment.nominal.margins
    if margins is None or not margins.delay_margin_at or margins.delay_margin_at == inf:
        return Marks()
    w, unit = margins.delay_margin_at, shown.sheet.loop.time_unit
    x, phase, line = _phase_at(curves, w)
    said = f"delay margin {quantity(margins.delay_margin, unit, 3)} at {frequency_words(w, shown.sheet)}"
    own = Marks((), (Stroke(x, line, x, phase, "nominal"),), (Words(x, line, said, "nominal_word", "left", "below"),))
    least = dict(shown.sheet.limits).get("delay_margin")
    if not least or (turn := degrees(least * w)) >= 360.0:
        return own
    return joined(_zone(curves, x, line, line + turn, "delay_margin", f"at least {quantity(least, unit)}"), own)


def peaks(shown: Shown) -> Marks:
    """Return the peaks of both sensitivities, and the bandwidth, in words where they are."""
    margins, limits = shown.assessment.nominal.margins, dict(shown.sheet.limits)
    if margins is None:
        return Marks()
    found = [("max_sensitivity", margins.max_sensitivity, margins.max_sensitivity_at, "nominal_word")]
    if margins.max_complementary > _WORTH or "max_complementary" in limits:
        at = margins.max_complementary_at
        found.append(("max_complementary", margins.max_complementary, at, "disturbance_word"))
    words = [
        Words(log10(at), value, f"peak {value:.3g} at {frequency_words(at, shown.sheet)}", role, "left", "above")
        for _, value, at, role in found
        if 0.0 < at < inf
    ]
    if margins.bandwidth:
        at = margins.bandwidth
        said = f"bandwidth {frequency_words(at, shown.sheet)}"
        words.append(Words(log10(at), 0.707, said, "nominal_word", "right", "above"))
    return Marks((), (), tuple(words))


def sensitivity_limits(shown: Shown, curves: "FrequencyCurves") -> Marks:
    """Return the most that both sensitivities may be, and where the bandwidth must not end."""
    left, right = (float(end) for end in np.log10(curves.w[[0, -1]]))
    limits = dict(shown.sheet.limits)
    areas, strokes, words = [], [], []
    for name, label in (("max_sensitivity", "|S|"), ("max_complementary", "|T|")):
        if (most := limits.get(name)) is not None:
            strokes.append(Stroke(left, most, right, most, "limit", measure=name))
            words.append(Words(left, most, f"{label} at most {most:g}", "limit_word", "left", "above"))
    if (least := limits.get("bandwidth")) is not None and least > 0.0:
        at = log10(least)
        areas.append(Area(rectangle(-inf, at, 0.707, inf), "limit_zone"))
        strokes.append(Stroke(at, 0.707, at, inf, "limit", measure="bandwidth"))
        said = f"|S| below 0.707 up to {frequency_words(least, shown.sheet)}"
        words.append(Words(at, 0.707, said, "limit_word", "right", "below"))
    return Marks(tuple(areas), tuple(strokes), tuple(words))


def _phase_at(curves: "FrequencyCurves", w: float) -> tuple[float, float, float]:
    """Return the place of a frequency, the phase of the first loop there, and the half turn that is nearest to it."""
    x = log10(w)
    phase = float(np.interp(x, np.log10(curves.w), curves.phase[0]))
    return x, phase, -180.0 + 360.0 * round((phase + 180.0) / 360.0)


def _zone(curves: "FrequencyCurves", x: float, start: float, end: float, measure: str, said: str) -> Marks:  # noqa: PLR0913, PLR0917 - where it is, and what it says
    """Return the region that a curve must not be in at one frequency, and its end."""
    half = _ZONE * log10(curves.w[-1] / curves.w[0])
    area = Area(rectangle(x - half, x + half, min(start, end), max(start, end)), "limit_zone")
    edge = Stroke(x - half, end, x + half, end, "limit", measure=measure)
    words = (Words(x - half, end, minus(said), "limit_word", "right", "middle"),) if said else ()
    return Marks((area,), (edge,), words)
