"""Margins are marked where they are taken, limits where they apply."""

from dataclasses import replace
from math import degrees, inf, log10

import numpy as np
import pytest

from tests.window.frequency.looked_at import answer, curves_in, limited, sample
from tuner.simulate.margins import Margins
from tuner.window.frequency import margin_marks
from tuner.window.plots.marks import Marks, Stroke
from tuner.window.shown import Shown


def margins_in(shown: Shown) -> Margins:
    """Return the margins of the plant that is looked at."""
    assert shown.assessment.nominal.margins is not None
    return shown.assessment.nominal.margins


def own(marks: Marks) -> Stroke:
    """Return the stroke of the plant's own margin."""
    return next(stroke for stroke in marks.strokes if stroke.role == "nominal")


def limit(marks: Marks) -> Stroke:
    """Return the stroke of the limit."""
    return next(stroke for stroke in marks.strokes if stroke.role == "limit")


def without_margins(shown: Shown) -> Shown:
    """Return an answer on a loop without margins, as one that is unstable."""
    members = shown.assessment.members
    return replace(
        shown, assessment=replace(shown.assessment, members=(replace(members[0], margins=None), *members[1:]))
    )


def test_the_gain_margin_reaches_from_the_curve_to_one() -> None:
    """Its value and its frequency are told."""
    shown = answer()
    margins, curves = margins_in(shown), curves_in(shown)
    marks = margin_marks.gain_margin(shown, curves)
    stroke = own(marks)
    assert margins.gain_margin_at
    assert stroke.x0 == stroke.x1 == pytest.approx(log10(margins.gain_margin_at))
    at = int(np.abs(curves.w - margins.gain_margin_at).argmin())
    assert stroke.y0 == pytest.approx(curves.decibels[0, at], abs=1e-3)
    assert stroke.y1 == 0.0
    said = marks.words[-1].text
    assert said == f"gain margin {margins.gain_margin:.3g} ({-stroke.y0:.1f} dB) at {margins.gain_margin_at:.3g} rad/s"


def test_the_limit_of_the_gain_margin_is_a_region_there() -> None:
    """Down to minus 6.02 dB for a factor of 2, at the frequency of the margin alone."""
    shown = answer(limited(sample(), {"gain_margin": 2.0}))
    marks = margin_marks.gain_margin(shown, curves_in(shown))
    edge = limit(marks)
    assert edge.y0 == edge.y1 == pytest.approx(-20.0 * log10(2.0))
    assert edge.x0 < own(marks).x0 < edge.x1
    assert {corner[1] for corner in marks.areas[0].corners} == {0.0, edge.y0}


def test_the_phase_margin_reaches_from_half_a_turn_to_the_curve() -> None:
    """As long as the margin, with the region of its limit to both sides."""
    shown = answer(limited(sample(), {"phase_margin": 40.0}))
    margins = margins_in(shown)
    marks = margin_marks.phase_margin(shown, curves_in(shown))
    stroke = own(marks)
    assert margins.phase_margin_at
    assert stroke.x0 == pytest.approx(log10(margins.phase_margin_at))
    assert abs(stroke.y1 - stroke.y0) == pytest.approx(margins.phase_margin, abs=0.05)
    assert sorted(one.y0 for one in marks.strokes if one.role == "limit") == [-220.0, -140.0]
    assert any(word.text == "at least 40°" for word in marks.words)


def test_the_delay_margin_is_told_with_its_limit_as_a_turn() -> None:
    """A delay turns the phase by w times the delay."""
    shown = answer(limited(sample(), {"delay_margin": 5.0}))
    margins = margins_in(shown)
    marks = margin_marks.delay_margin(shown, curves_in(shown))
    assert margins.delay_margin_at
    assert limit(marks).y0 == pytest.approx(-180.0 + degrees(5.0 * margins.delay_margin_at))
    assert marks.words[-1].text == (f"delay margin {margins.delay_margin:.3g} s at {margins.delay_margin_at:.3g} rad/s")


def test_peaks_and_bandwidth_are_told_where_they_are() -> None:
    """The peak of T only where it counts."""
    shown = answer(limited(sample(), {"max_complementary": 1.3}))
    margins = margins_in(shown)
    found = {word.text: (word.x, word.y) for word in margin_marks.peaks(shown).words}
    said = f"peak {margins.max_sensitivity:.3g} at {margins.max_sensitivity_at:.3g} rad/s"
    assert found[said] == (log10(margins.max_sensitivity_at), margins.max_sensitivity)
    assert any(said.startswith("bandwidth ") and place[1] == 0.707 for said, place in found.items())


def test_limits_of_the_sensitivities_are_levels_and_a_region() -> None:
    """|S| must be below 0.707 up to the least bandwidth."""
    limits = {"max_sensitivity": 1.8, "max_complementary": 1.3, "bandwidth": 0.03}
    shown = answer(limited(sample(), limits))
    marks = margin_marks.sensitivity_limits(shown, curves_in(shown))
    levels = {stroke.measure: stroke.y0 for stroke in marks.strokes}
    assert levels == {"max_sensitivity": 1.8, "max_complementary": 1.3, "bandwidth": 0.707}
    assert marks.areas[0].corners[0] == (-inf, 0.707)
    assert marks.areas[0].corners[1][0] == pytest.approx(log10(0.03))


def test_the_end_of_a_sampled_loop_is_told() -> None:
    """At half the sampling frequency, where the curves end; a continuous loop has none."""
    curves = curves_in(answer())
    (stroke,) = margin_marks.end_of_samples(curves, 0.0).strokes
    assert stroke.x0 == pytest.approx(log10(np.pi / 0.5))
    assert margin_marks.end_of_samples(replace(curves, nyquist=inf), 0.0) == Marks()


def test_without_margins_nothing_is_marked() -> None:
    """An unstable loop has none, whatever its curves look like."""
    shown = without_margins(answer())
    curves = curves_in(shown)
    for mark in (margin_marks.gain_margin, margin_marks.phase_margin, margin_marks.delay_margin):
        assert mark(shown, curves) == Marks()
    assert margin_marks.peaks(shown) == Marks()
    assert margin_marks.half_turn(shown, curves) == -180.0
