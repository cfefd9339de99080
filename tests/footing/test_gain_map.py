"""The map over two gains: at every pair of values the class and the worst value are those of the assessment."""

from dataclasses import replace

import numpy as np
import pytest

from tests.session.sheets import wash_bath
from tuner.assess import assess
from tuner.footing.classes import FIRM, LOST, SOFT, Overtaken, Track, tuned
from tuner.footing.gain_map import GainMap, paint_map
from tuner.judge.assessment import Assessment
from tuner.model.sheet import Sheet

GRADES = {"met": FIRM, "missed": SOFT, "unstable": LOST}
SIZE = 5
MEASURES = ("overshoot", "settling_time", "damping")
NEAR_THE_EDGE = 4.0


def judged(sheet: Sheet, found: GainMap, row: int, column: int) -> Assessment:
    """Return the assessment at a point of a map."""
    controller = tuned(sheet.controller, found.x.name, float(found.x.values[column]))
    controller = tuned(controller, found.y.name, float(found.y.values[row]))
    return assess(replace(sheet, controller=controller), SIZE)


@pytest.mark.parametrize(
    ("x", "y"),
    [
        (Track("kp", np.geomspace(0.5, 60.0, 7)), Track("ki", np.array([0.0, 0.01, 0.1, 1.0]))),
        (Track("kd", np.array([0.0, 2.0, 40.0, 300.0])), Track("kp", np.geomspace(0.5, 60.0, 5))),
        (Track("windup_time", np.array([0.0, 2.0, 50.0])), Track("kp", np.geomspace(0.5, 60.0, 5))),
    ],
    ids=lambda track: track.name,
)
def test_classes_are_those_of_the_assessment(x: Track, y: Track) -> None:
    """At every point, off included; a wind-up time of 0 is an absent one."""
    sheet = wash_bath()
    found = paint_map(sheet, x, y, family_size=SIZE)
    assert found.classes.shape == (len(y.values), len(x.values))
    for row, column in np.ndindex(found.classes.shape):
        assert found.classes[row, column] == GRADES[judged(sheet, found, row, column).verdict]


@pytest.mark.parametrize("measure", MEASURES)
def test_the_worst_value_is_that_of_the_assessment(measure: str) -> None:
    """Within a hundredth of it, and not a number where the loop is lost or there is none."""
    sheet = replace(wash_bath(), limits=())
    x, y = Track("kp", np.geomspace(0.5, 60.0, 6)), Track("ki", np.array([0.01, 0.05, 0.2]))
    found = paint_map(sheet, x, y, measure, family_size=SIZE)
    assert found.measure == measure
    for row, column in np.ndindex(found.worst.shape):
        truth = judged(sheet, found, row, column)
        values = [member.measures.get(measure) for member in truth.members]
        known = [value for value in values if value is not None]
        if found.classes[row, column] == LOST or len(known) < len(values):
            assert np.isnan(found.worst[row, column])
        else:
            worst = min(known) if measure == "damping" else max(known)
            assert found.worst[row, column] == pytest.approx(worst, rel=0.01, abs=0.05)


def test_the_peak_of_the_sensitivity_is_known_away_from_the_edge() -> None:
    """Within a twentieth of it up to a peak of 4; nearer to the edge of stability its bounds are wide."""
    sheet = replace(wash_bath(), limits=())
    x, y = Track("kp", np.geomspace(0.5, 60.0, 12)), Track("ki", np.array([0.01, 0.05, 0.2]))
    found = paint_map(sheet, x, y, "max_sensitivity", family_size=SIZE)
    compared = 0
    for row, column in np.ndindex(found.worst.shape):
        peaks = [member.measures["max_sensitivity"] for member in judged(sheet, found, row, column).members]
        worst = max((peak for peak in peaks if peak is not None), default=np.inf)
        if found.classes[row, column] != LOST and worst < NEAR_THE_EDGE:
            compared += 1
            assert found.worst[row, column] == pytest.approx(worst, rel=0.05)
    assert compared >= 15


def test_a_newer_question_ends_it() -> None:
    """It stops in the middle when told to."""
    x, y = Track("kp", np.geomspace(0.5, 60.0, 6)), Track("ki", np.array([0.01, 0.05]))
    with pytest.raises(Overtaken):
        paint_map(wash_bath(), x, y, family_size=SIZE, stop=lambda: True)
