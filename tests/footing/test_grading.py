"""Grading decides what bounds can decide and tells the rest; what it watches is near the truth."""

from dataclasses import replace

import numpy as np
import pytest

from tests.footing.random_loops import sheet
from tuner.assess import assess
from tuner.files.sheet import read
from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN
from tuner.footing.grading import Grading
from tuner.footing.ground import ground_of
from tuner.footing.tunings import Tunings
from tuner.places import sample_plants

HEATER = read(sample_plants() / "heater.toml")


def test_lost_and_unsure_are_taken_over() -> None:
    """What is known to be lost is not looked at; what is unsure is asked, or left unknown."""
    tunings = Tunings(HEATER.controller, [()] * 3)
    lost, unsure = np.array([True, False, False]), np.array([False, True, False])
    open_ended = Grading(HEATER, ground_of(HEATER, 3), tunings)
    assert open_ended.classes(lost, unsure, settle=False).tolist() == [LOST, UNKNOWN, FIRM]
    assert open_ended.doubts == {1: [0, 1, 2]}
    settled = Grading(HEATER, ground_of(HEATER, 3), tunings)
    assert settled.classes(lost, unsure).tolist() == [LOST, FIRM, FIRM]


def test_a_limit_at_the_very_value_is_in_doubt() -> None:
    """And then settled as the assessment has it: a value at its limit keeps it."""
    value = assess(HEATER, 3).worst["settling_time"].value
    assert value is not None
    for limit, expected in ((value, FIRM), (value * (1.0 - 1e-6), SOFT)):
        found = replace(HEATER, limits=(("settling_time", limit),))
        grading = Grading(found, ground_of(found, 3), Tunings(found.controller, [()]))
        none = np.zeros(1, dtype=bool)
        assert grading.classes(none, none).tolist() == [expected]
        assert grading.doubts


@pytest.mark.parametrize("measure", ["overshoot", "settling_time", "iae_disturbance", "max_sensitivity", "gain_margin"])
def test_what_is_watched_is_near_the_worst_value(measure: str) -> None:
    """Within the bounds that points give."""
    grading = Grading(HEATER, ground_of(HEATER, 5), Tunings(HEATER.controller, [()]))
    worst = assess(HEATER, 5).worst[measure].value
    assert grading.watch(measure, np.array([True]))[0] == pytest.approx(worst, rel=0.05)
    assert np.isnan(grading.watch(measure, np.array([False]))[0])


def test_the_order_of_plants_changes_nothing() -> None:
    """Those that missed most come first, the nominal one last at the start."""
    found = sheet(3)
    ground = ground_of(found, 5)
    ground.misses[:] = 0
    assert Grading(found, ground, Tunings(found.controller, [])).order()[-1] == 0
    tunings = Tunings(found.controller, [(("filter_time", value),) for value in (0.01, 0.1, 1.0)])
    none = np.zeros(3, dtype=bool)
    first = Grading(found, ground, tunings).classes(none, none).tolist()
    ground.misses[2] = 1000
    assert Grading(found, ground, tunings).order()[0] == 2
    assert Grading(found, ground, tunings).classes(none, none).tolist() == first
