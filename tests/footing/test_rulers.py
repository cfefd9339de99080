"""A ruler is painted with what the assessment says at every notch, and its edges are where that changes."""

from dataclasses import replace

import numpy as np
import pytest

from tests.footing.random_loops import sheet
from tuner.assess import assess
from tuner.errors import LoopError
from tuner.files.sheet import read
from tuner.footing.classes import FIRM, LOST, SOFT, Overtaken, Track
from tuner.footing.rulers import paint_rulers
from tuner.model.parameters import rulers
from tuner.model.sheet import Sheet
from tuner.places import sample_plants

CLASS = {"met": FIRM, "missed": SOFT, "unstable": LOST}
PLANTS = 3


def tracks(found: Sheet, notches: int) -> list[Track]:
    """Return a track for every ruler of a sheet, those that are off left out, from a tenth to ten times its value."""
    controller = found.controller
    values = {one.name: controller.value(one.name) for one in rulers(controller.form)}
    return [Track(name, value * np.geomspace(0.1, 10.0, notches)) for name, value in values.items() if value]


def judged(found: Sheet, name: str, value: float, size: int = PLANTS) -> int:
    """Return the class that the assessment gives with one number changed."""
    return CLASS[assess(replace(found, controller=found.controller.with_value(name, value)), size).verdict]


@pytest.mark.parametrize("seed", range(60))
def test_every_notch_is_what_the_assessment_says(seed: int) -> None:
    """On random sampled loops, with every kind of plant, controller form and limit."""
    found = sheet(seed)
    for painted in paint_rulers(found, tracks(found, 9), PLANTS):
        expected = [judged(found, painted.name, value) for value in painted.values.tolist()]
        assert painted.classes.tolist() == expected, painted.name


@pytest.mark.parametrize("seed", range(100, 112))
def test_every_notch_of_a_continuous_loop_is_what_the_assessment_says(seed: int) -> None:
    """Also where the trial is extrapolated to no step at all."""
    found = sheet(seed, continuous=True)
    try:
        assess(found, PLANTS)
    except LoopError:
        pytest.skip("there is no such loop")
    for painted in paint_rulers(found, tracks(found, 5)[:3], PLANTS):
        expected = [judged(found, painted.name, value) for value in painted.values.tolist()]
        assert painted.classes.tolist() == expected, painted.name


@pytest.mark.parametrize("name", ["kp", "ki", "kd", "filter_time", "b"])
def test_edges_are_within_half_a_percent(name: str) -> None:
    """Of the place that bisecting the assessment itself finds."""
    found = read(sample_plants() / "heater.toml")
    value = found.controller.value(name)
    assert value is not None
    (painted,) = paint_rulers(found, [Track(name, value * np.geomspace(0.2, 8.0, 17))], 5)
    assert painted.edges
    for edge in painted.edges:
        low, high = 0.99 * edge.value, 1.01 * edge.value
        assert judged(found, name, low, 5) == edge.below
        assert judged(found, name, high, 5) == edge.above
        for _ in range(6):
            middle = 0.5 * (low + high)
            low, high = (middle, high) if judged(found, name, middle, 5) == edge.below else (low, middle)
        assert edge.value == pytest.approx(0.5 * (low + high), rel=0.005)


def test_no_cliff_hides_between_notches() -> None:
    """Edges of stability are exact with notches as far apart as a factor of four."""
    found = read(sample_plants() / "heater.toml")
    coarse, fine = (
        paint_rulers(found, [Track("kp", np.geomspace(0.05, 50.0, count))], PLANTS)[0] for count in (6, 200)
    )
    cliff = [[edge.value for edge in painted.edges if edge.above == LOST] for painted in (coarse, fine)]
    assert cliff[0] == pytest.approx(cliff[1], rel=1e-9)


def test_class_at_follows_the_edges() -> None:
    """Between notches the class changes at the edge, beyond the ends it stays."""
    found = read(sample_plants() / "heater.toml")
    (painted,) = paint_rulers(found, [Track("kp", np.geomspace(0.5, 20.0, 9))], PLANTS)
    edge = painted.edges[-1]
    around = painted.class_at(np.array([0.01, 0.999 * edge.value, 1.001 * edge.value, 1e6]))
    assert around.tolist() == [painted.edges[0].below, edge.below, edge.above, edge.above]
    assert painted.class_at(painted.values).tolist() == painted.classes.tolist()


def test_off_is_graded_too() -> None:
    """A track may begin with 0, where a gain is left out."""
    found = read(sample_plants() / "heater.toml")
    (painted,) = paint_rulers(found, [Track("ki", np.array([0.0, 0.01, 0.05]))], PLANTS)
    assert painted.classes.tolist() == [judged(found, "ki", value) for value in (0.0, 0.01, 0.05)]


def test_without_limits_only_stability_counts() -> None:
    """Stable is firm then."""
    found = replace(read(sample_plants() / "heater.toml"), limits=())
    (painted,) = paint_rulers(found, [Track("kp", np.geomspace(0.5, 50.0, 9))], PLANTS)
    assert set(painted.classes.tolist()) == {FIRM, LOST}


@pytest.mark.parametrize("change", ["open", "no disturbance", "resolution"])
def test_loops_out_of_the_ordinary(change: str) -> None:
    """Without feedback, with a limit on a run that has no step, with a quantised measurement."""
    found = read(sample_plants() / "heater.toml")
    if change == "open":
        found = replace(found, controller=replace(found.controller, feedback=False))
    if change == "no disturbance":
        found = replace(found, trial=replace(found.trial, disturbance=0.0), limits=(("disturbance_peak", 3.0),))
    if change == "resolution":
        found = replace(found, sensor=replace(found.sensor, resolution=0.2))
    (painted,) = paint_rulers(found, [Track("kp", np.geomspace(0.5, 20.0, 7))], PLANTS)
    assert painted.classes.tolist() == [judged(found, "kp", value) for value in painted.values.tolist()]


def test_a_newer_question_ends_an_older_one() -> None:
    """As soon as it is asked whether it should stop."""
    found = read(sample_plants() / "heater.toml")
    with pytest.raises(Overtaken):
        paint_rulers(found, [Track("kp", np.geomspace(0.5, 20.0, 7))], PLANTS, lambda: True)


def test_coarse_paint_has_the_same_classes() -> None:
    """Without the search between notches, edges other than of stability lie half-way."""
    found = read(sample_plants() / "heater.toml")
    track = Track("kd", np.geomspace(1.0, 60.0, 17))
    (fine,), (coarse,) = (paint_rulers(found, [track], PLANTS, fine=fine) for fine in (True, False))
    assert coarse.classes.tolist() == fine.classes.tolist()
    assert [edge.above for edge in coarse.edges] == [edge.above for edge in fine.edges]
