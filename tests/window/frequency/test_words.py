"""What is said beside plots over frequency."""

import re
from math import degrees

import numpy as np
import pytest

from tests.window.frequency.looked_at import answer, curves_in, limited, sample, with_feedback
from tuner.window.frequency.words import OFF, loop_words, missed_of, worst_name, worst_plant, worst_words


def test_the_loop_at_one_frequency() -> None:
    """Size, phase and both sensitivities, each with its unit, are those of the loop gain there."""
    curves = curves_in(answer())
    index = int(np.abs(curves.w - 0.1).argmin())
    gain = complex(curves.gain[0, index])
    said = loop_words(curves, index, sample()).replace("\u2212", "-")
    found = re.fullmatch(r"(.+) rad/s: \|L\| (.+) dB, (.+)°, \|S\| (.+), \|T\| (.+)", said)
    assert found is not None
    w, size, phase, s, t = (float(word) for word in found.groups())
    assert w == pytest.approx(curves.w[index], rel=1e-2)
    assert size == pytest.approx(20.0 * np.log10(abs(gain)), abs=0.06)
    assert phase == pytest.approx(degrees(np.angle(gain)), abs=0.6)
    assert s == pytest.approx(abs(1.0 / (1.0 + gain)), rel=6e-3)
    assert t == pytest.approx(abs(gain / (1.0 + gain)), rel=6e-3)


def test_the_worst_margin_is_told_with_its_plant() -> None:
    """In words with the value, and how far the plant has drifted."""
    shown = answer()
    worst = shown.assessment.worst["gain_margin"]
    drift = shown.assessment.drift_of(worst.plant)
    assert worst_words(shown, ("gain_margin",)) == f"; worst gain margin {worst.value:.3g} at {drift}"


def test_the_plant_to_draw_is_that_of_the_limit_missed_by_most() -> None:
    """Of the measures of a plot; without limits that of the first measure."""
    shown = answer(limited(sample(), {"max_sensitivity": 1.8, "bandwidth": 1.0}))
    measures = ("max_sensitivity", "max_complementary", "bandwidth")
    assert worst_plant(shown, measures) == ("bandwidth", shown.assessment.worst["bandwidth"].plant)
    assert worst_plant(answer(), ("phase_margin",)) == (
        "phase_margin",
        answer().assessment.worst["phase_margin"].plant,
    )


def test_the_name_of_the_worst_curve_says_which_measure_is_meant() -> None:
    """Where a plot shows several."""
    shown = answer()
    plant = shown.assessment.worst["gain_margin"].plant
    assert worst_name(shown, ("gain_margin",), "gain_margin", plant) == f"worst: {shown.assessment.drift_of(plant)}"
    assert worst_name(shown, ("a", "b"), "gain_margin", plant).startswith("worst gain margin: ")


@pytest.mark.parametrize(
    ("measures", "said"),
    [
        (("gain_margin",), "the limit here is met"),
        (("gain_margin", "max_sensitivity"), "both limits here are met"),
        (("phase_margin",), "nothing here is on the acceptance sheet"),
    ],
)
def test_limits_here_are_counted(measures: tuple[str, ...], said: str) -> None:
    """Those of the measures of this plot."""
    assert missed_of(answer(), measures) == (said, False)


def test_a_missed_limit_is_told() -> None:
    """With value, limit and plant."""
    shown = answer(limited(sample(), {"gain_margin": 10.0}))
    said, bad = missed_of(shown, ("gain_margin",))
    assert bad
    assert said.startswith("gain margin 2.9")
    assert "< 10 at" in said


def test_why_there_are_no_margins() -> None:
    """Unstable plants are counted; a loop that is open says so."""
    shown = answer(limited(sample("chiller"), {}))
    unstable = sum(not member.stable for member in shown.assessment.members)
    assert 0 < unstable < 25
    assert missed_of(shown, ("gain_margin",)) == (
        f"no margins where the loop is unstable: {unstable} of 25 plants",
        True,
    )
    off = answer(limited(with_feedback(sample(), on=False), {}))
    assert missed_of(off, ("gain_margin",)) == (OFF, False)
