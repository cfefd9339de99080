"""The reason at a place is a sentence with value, limit and plant."""

from dataclasses import replace

from tuner.assess import assess
from tuner.files.sheet import read
from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.footing.reason import Reason, reason_at
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


def test_lost_says_how_the_loop_runs_away() -> None:
    """As the assessment says it."""
    found = reason_at(HEATER, {"kp": 20.0})
    changed = replace(HEATER, controller=HEATER.controller.with_value("kp", 20.0))
    instability = assess(changed).instability
    assert instability is not None
    assert found == Reason(LOST, instability.sentence.rstrip("."))


def test_without_limits_it_is_said_that_there_are_none() -> None:
    """Stable is all that is known then."""
    found = reason_at(replace(HEATER, limits=()), {"kp": 1.9})
    assert found == Reason(FIRM, "stable with every plant; the sheet gives no limits")
