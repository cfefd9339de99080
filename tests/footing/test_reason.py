"""The reason at a place is a sentence with value, limit and plant."""

from dataclasses import replace

import numpy as np

from tuner.files.sheet import read
from tuner.footing.classes import FIRM, LOST, SOFT, Track
from tuner.footing.reason import Reason, reason_at
from tuner.footing.rulers import paint_rulers
from tuner.places import sample_plants

HEATER = read(sample_plants() / "heater.toml")


def test_firm_says_what_is_nearest() -> None:
    """The limit that is nearest to being missed, with its plant by its drift."""
    found = reason_at(HEATER, {})
    assert found.grade == FIRM
    assert found.sentence == "all limits met; nearest: max sensitivity 1.661 < 1.8 at gain +15 %, delay +50 %"


def test_soft_says_what_is_missed() -> None:
    """The limit that is missed by most, and how many more are."""
    found = reason_at(HEATER, {"kp": 0.8})
    assert found.grade == SOFT
    assert found.sentence == "no settling time (at most 90 s) at gain \u221215 %, delay +50 %, and 1 more missed"


def test_a_single_limit_with_its_number() -> None:
    """A limit that is missed alone; a plant that does not drift is called nominal."""
    one = replace(HEATER, limits=(("overshoot", 8.0),))
    assert reason_at(one, {"kp": 4.0}) == Reason(SOFT, "overshoot 20.75 % > 8 % at gain +15 %, delay +50 %")
    least = replace(HEATER, limits=(("gain_margin", 2.0),))
    expected = "all limits met; nearest: gain margin 4.442 > 2 with the nominal plant"
    assert reason_at(least, {}, 1) == Reason(FIRM, expected)


def test_lost_says_how_the_loop_runs_away() -> None:
    """How fast, with which plant, and where the edge is: the one that the ruler has."""
    found = reason_at(HEATER, {"kp": 20.0})
    assert found.grade == LOST
    assert found.sentence == (
        "Unstable: grows e-fold every 14.42 s at 0.1776 rad/s (doubles every 9.995 s) with gain 1.035, delay 6; "
        "kp 20 %/degC is beyond its edge at 5.758"
    )
    (painted,) = paint_rulers(HEATER, [Track("kp", np.geomspace(0.5, 50.0, 9))])
    assert [f"{edge.value:.4g}" for edge in painted.edges if edge.above == LOST] == ["5.758"]


def test_without_limits_it_is_said_that_there_are_none() -> None:
    """Stable is all that is known then."""
    found = reason_at(replace(HEATER, limits=()), {"kp": 1.9})
    assert found == Reason(FIRM, "stable with every plant; the sheet gives no limits")
