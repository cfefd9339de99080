"""The map over two gains: at every pair of values the class and the worst value are those of the assessment."""

from dataclasses import replace

import numpy as np
import pytest

from tests.footing.random_loops import rich_sheet
from tests.footing.random_loops import sheet as plain
from tests.session.sheets import wash_bath
from tuner.assess import assess
from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN, Overtaken, Track, tuned
from tuner.footing.gain_map import GainMap, paint_map
from tuner.judge.assessment import Assessment
from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.parameters import rulers
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial

GRADES = {"met": FIRM, "missed": SOFT, "unstable": LOST}
SIZE = 5
MEASURES = ("overshoot", "settling_time", "damping")
NEAR_THE_EDGE = 4.0


def judged(sheet: Sheet, found: GainMap, row: int, column: int, size: int = SIZE) -> Assessment:
    """Return the assessment at a point of a map."""
    controller = tuned(sheet.controller, found.x.name, float(found.x.values[column]))
    controller = tuned(controller, found.y.name, float(found.y.values[row]))
    return assess(replace(sheet, controller=controller), size)


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


@pytest.mark.parametrize("seed", range(14))
def test_random_loops_at_random_places(seed: int) -> None:
    """Any two numbers of the controller, rich loops among them."""
    random, sheet = np.random.default_rng(seed), (plain, rich_sheet)[seed % 2](500 + seed)
    names = random.choice([one.name for one in rulers(sheet.controller.form)], 2, replace=False).tolist()
    counts = zip(names, (4, 3), strict=True)
    x, y = (Track(name, np.sort(np.exp(random.uniform(-3.0, 2.0, count)))) for name, count in counts)
    found = paint_map(sheet, x, y, family_size=3)
    for row, column in np.ndindex(found.classes.shape):
        assert found.classes[row, column] == GRADES[judged(sheet, found, row, column, 3).verdict]


def test_where_there_is_no_answer_nothing_is_known() -> None:
    """Neither a class nor a value; the places beside it are painted all the same."""
    plant = ExpressionPlant("(1 - s)/(s + 1)")
    sheet = Sheet(Loop("refused beyond 1"), plant, Controller(gain_1=0.5), Trial(20.0))
    found = paint_map(sheet, Track("kp", np.array([0.5, 2.0])), Track("b", np.array([1.0])), "damping", 1)
    assert found.classes.tolist() == [[FIRM, UNKNOWN]]
    assert np.isnan(found.worst).tolist() == [[False, True]]


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
