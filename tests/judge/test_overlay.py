"""The geometry that the plots draw, from limits and an invented first-order loop (final value 10, rise 10 min)."""

from dataclasses import replace
from math import log

import pytest

from tests.judge.invented import member, sheet
from tuner.judge.overlay import PLOT_OF, Band, Callout, Level, Overlay, callouts, overlay
from tuner.judge.verdict import judge
from tuner.model.measures import MEASURES


def drawn(limits: dict[str, float], **trial: float) -> Overlay:
    """Return the overlay of an invented sheet."""
    asked = sheet(limits, **trial)
    return overlay(asked, judge(asked, [member()]))


def test_every_measure_has_its_plot() -> None:
    """No limit is without a place where it is said."""
    assert set(PLOT_OF) == {measure.name for measure in MEASURES}


def test_settling_band() -> None:
    """Two percent to either side of the final value, from the limit to the end of the run."""
    assert drawn({"settling_time": 90.0}).bands == (
        Band("reference", "settling_time", "±2 % from 90 min", 90.0, 120.0, 9.8, 10.2),
    )


def test_recovery_band() -> None:
    """A share of the peak about the final value of the disturbance run."""
    assert drawn({"disturbance_recovery": 60.0}, settling_band=5.0).bands == (
        Band("disturbance", "disturbance_recovery", "±5 % of the peak from 60 min", 60.0, 120.0, -0.05, 0.05),
    )


def test_error_band() -> None:
    """About the reference, over the last tenth."""
    band = drawn({"steady_state_error": 1.0}).bands[0]

    assert (band.start, band.end, band.low, band.high) == (108.0, 120.0, 9.9, 10.1)


def test_levels() -> None:
    """Ceiling and floor of the reference run, both sides of a disturbance, the range of the valve as deviations."""
    levels = drawn({"overshoot": 8.0, "undershoot": 5.0, "disturbance_peak": 2.0}).levels

    assert levels == (
        Level("reference", "", "reference 10 degC", 10.0, ""),
        Level("reference", "overshoot", "overshoot 8 %", 10.8, "below"),
        Level("reference", "undershoot", "undershoot 5 %", -0.5, "above"),
        Level("disturbance", "disturbance_peak", "disturbance peak 2 degC", 2.0, "below"),
        Level("disturbance", "disturbance_peak", "disturbance peak 2 degC", -2.0, "above"),
        Level("effort", "", "limit 100 %", 60.0, "below"),
        Level("effort", "", "limit 0 %", -40.0, "above"),
    )


def test_a_negative_step_turns_the_levels() -> None:
    """The ceiling of a step down lies below it."""
    asked = sheet({"overshoot": 8.0}, reference=-10.0)
    down = replace(member(), final_reference=-10.0)

    level = overlay(asked, judge(asked, [down])).levels[1]

    assert (level.value, level.keep) == (-10.8, "above")


def test_rise_and_peak_strokes() -> None:
    """The 90 % must be reached a rise time after the 10 %, which comes after 10 ln(10/9) min."""
    rise, peak = drawn({"rise_time": 20.0, "peak_time": 30.0, "overshoot": 8.0}).instants

    assert rise.at == pytest.approx(20.0 + 10.0 * log(10.0 / 9.0), abs=1e-6)
    assert (rise.low, rise.high, rise.label) == (1.0, 9.0, "90 % by 21.05 min")
    assert (peak.at, peak.low, peak.high) == (30.0, 10.0, 10.8)


def test_regions_of_the_pole_map() -> None:
    """Damping 0.5 is 60 degrees; two percent in 90 min asks for ln(50)/90."""
    found = drawn({"damping": 0.5, "settling_time": 90.0})

    assert found.wedge is not None
    assert found.wedge.angle == pytest.approx(60.0)
    assert found.boundary is not None
    assert found.boundary.real == pytest.approx(-log(50.0) / 90.0)
    assert found.boundary.label == "±2 % in 90 min"


def test_an_unstable_loop_has_no_bands_but_its_levels() -> None:
    """Without a final value nothing is drawn in parts of it."""
    asked = sheet({"settling_time": 90.0, "overshoot": 8.0, "rise_time": 9.0})
    lost = replace(member(stable=False), final_reference=None, final_disturbance=None)

    found = overlay(asked, judge(asked, [lost]))

    assert (found.bands, found.instants) == ((), ())
    assert [level.label for level in found.levels] == ["reference 10 degC", "limit 100 %", "limit 0 %"]


def test_missed_limits_are_said_beside_their_plots() -> None:
    """Only the missed ones, in words, with the plant."""
    asked = sheet({"settling_time": 90.0, "overshoot": 8.0, "gain_margin": 2.0})
    family = [member(gain_margin=3.0), member("gain 1.04, delay 6", settling_time=96.0, gain_margin=3.0)]

    assert callouts(asked, judge(asked, family)) == (
        Callout("reference", "settling_time", "settling time 96 min > 90 min at gain 1.04, delay 6"),
    )


def test_a_missed_limit_of_the_nominal_plant() -> None:
    """The nominal plant is called so."""
    asked = sheet({"gain_margin": 2.0})

    assert callouts(asked, judge(asked, [member()])) == (
        Callout("frequency", "gain_margin", "gain margin 1 < 2 at the nominal plant"),
    )


def test_a_missing_measure_says_why_beside_its_plot() -> None:
    """The reason of the plant that is named."""
    asked = sheet({"settling_time": 90.0})
    family = [member(), member("gain 2", stable=False, settling_time=None)]

    assert callouts(asked, judge(asked, family))[0].sentence == (
        "no settling time (at most 90 min) at gain 2: the loop is unstable"
    )
