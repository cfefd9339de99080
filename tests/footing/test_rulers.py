"""A ruler is painted with what the assessment says at every notch, and its edges are where that changes."""

from dataclasses import replace

import numpy as np
import pytest

from tests.footing.random_loops import rich_sheet, sheet
from tuner.assess import assess
from tuner.errors import LoopError
from tuner.files.sheet import read
from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN, Overtaken, Track, tuned
from tuner.footing.rulers import paint_rulers
from tuner.model.controller import Controller
from tuner.model.loop import Loop, Manipulated
from tuner.model.parameters import rulers
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial
from tuner.places import sample_plants

CLASS = {"met": FIRM, "missed": SOFT, "unstable": LOST}
PLANTS = 3


WHEN_OFF = {"ki": 0.3, "kd": 0.2, "ti": 3.0, "td": 0.2, "windup_time": 2.0, "c": 0.5}
"""Values to look around where a number is off."""


def tracks(found: Sheet, notches: int) -> list[Track]:
    """Return a track for every ruler of a sheet, from a tenth to ten times its value."""
    controller = found.controller
    values = {one.name: controller.value(one.name) or WHEN_OFF[one.name] for one in rulers(controller.form)}
    return [Track(name, value * np.geomspace(0.1, 10.0, notches)) for name, value in values.items()]


def judged(found: Sheet, name: str, value: float, size: int = PLANTS) -> int:
    """Return the class that the assessment gives with one number changed."""
    return CLASS[assess(replace(found, controller=tuned(found.controller, name, value)), size).verdict]


def disagreements(found: Sheet, asked: list[Track], size: int = PLANTS) -> list[str]:
    """Return where the paint is not what the assessment says."""
    wrong = []
    for painted in paint_rulers(found, asked, size):
        for value, grade in zip(painted.values.tolist(), painted.classes.tolist(), strict=True):
            expected = judged(found, painted.name, value, size)
            if grade != expected:
                wrong.append(f"{painted.name} = {value!r}: {grade} for {expected}")
    return wrong


@pytest.mark.parametrize("seed", range(60))
def test_every_notch_is_what_the_assessment_says(seed: int) -> None:
    """On random sampled loops, with every kind of plant, controller form and limit."""
    found = sheet(seed)
    assert disagreements(found, tracks(found, 9)) == []


@pytest.mark.parametrize("seed", range(24))
def test_every_notch_of_a_rich_loop_is_what_the_assessment_says(seed: int) -> None:
    """With notch, weights, feedforward, direct action, a direct term, a resolution; each track begins with off."""
    found = rich_sheet(seed)
    asked = [Track(one.name, np.concatenate(([0.0], one.values))) for one in tracks(found, 6)]
    assert disagreements(found, asked) == []


@pytest.mark.parametrize("seed", range(100, 112))
def test_every_notch_of_a_continuous_loop_is_what_the_assessment_says(seed: int) -> None:
    """Also where the trial is extrapolated to no step at all."""
    found = sheet(seed, continuous=True)
    every = tracks(found, 5)
    assert disagreements(found, [every[(seed + more) % len(every)] for more in range(3)]) == []


def test_short_wind_up_times_of_a_continuous_loop() -> None:
    """Far below the step at which the law runs, and as the closed form has it with longer ones."""
    # 1/s with kp = ki = 1 and |u| <= 0.1 overshoots by 3.497 % with 0.5, by 5.463 % with 1; computed.
    limited = Loop("saturates", manipulated=Manipulated(low=-0.1, high=0.1))
    law = Controller(gain_1=1.0, gain_2=1.0, windup_time=1.0)
    found = Sheet(limited, ExpressionPlant("1/s"), law, Trial(60.0), limits=(("overshoot", 4.5),))
    track = Track("windup_time", np.array([0.0, 1e-5, 1e-3, 0.02, 0.1, 0.5, 1.0, 8.0]))
    assert disagreements(found, [track], 1) == []
    (painted,) = paint_rulers(found, [track], 1)
    assert painted.classes.tolist() == [SOFT, FIRM, FIRM, FIRM, FIRM, FIRM, SOFT, SOFT]
    for limit, expected in ((3.4, [SOFT, SOFT]), (3.6, [FIRM, SOFT]), (5.4, [FIRM, SOFT]), (5.6, [FIRM, FIRM])):
        (painted,) = paint_rulers(replace(found, limits=(("overshoot", limit),)), [track], 1)
        assert painted.classes[5:7].tolist() == expected


def test_a_kick_that_no_step_shows() -> None:
    """A limit on the effort is laid on the kick itself: u(0) = r (kp b + kd c / Tf)."""
    law = Controller(gain_1=1.0, gain_3=0.4, filter_time=0.01, b=1.0, c=0.5)
    found = Sheet(
        Loop("kicked"), ExpressionPlant("1/((s + 1)(s + 2))"), law, Trial(20.0), limits=(("peak_effort", 21.0),)
    )
    track = Track("c", np.array([0.0, 0.4, 0.495, 0.505, 1.0]))
    assert disagreements(found, [track], 1) == []
    (painted,) = paint_rulers(found, [track], 1)
    assert painted.classes.tolist() == [FIRM, FIRM, FIRM, SOFT, SOFT]


def test_a_final_value_of_nothing() -> None:
    """Measures told in parts of it do not exist, though at any step of the law it is not quite 0."""
    # An impulse of the derivative, cut off by a limit, leads the integral to where the output ends at 0.
    law = Controller(gain_1=1.6, gain_3=0.32, c=1.0, b=1.0, windup_time=0.2)
    limited = Loop("kicked", manipulated=Manipulated(low=-3.0, high=3.0))
    plant = ExpressionPlant("exp(-0.1 s)/((s + 1)(0.1 s + 1))")
    found = Sheet(limited, plant, law, Trial(25.0), limits=(("settling_time", 15.0),))
    assert judged(found, "windup_time", 0.2, 1) == SOFT
    assert disagreements(found, [Track("windup_time", np.array([0.1, 0.2, 0.4]))], 1) == []


def test_derivative_without_a_filter_of_a_continuous_loop() -> None:
    """Around a plant of excess one the gain then never falls: its edge is found by asking, also where kd is off now."""
    found = replace(sheet(6, continuous=True), limits=())
    law = replace(found.controller, form="parallel", gain_1=0.5, gain_2=0.0, gain_3=0.0, filter_time=0.0)
    found = replace(found, controller=law)
    track = Track("kd", np.geomspace(0.01, 10.0, 9))
    assert disagreements(found, [track]) == []
    (painted,) = paint_rulers(found, [track], PLANTS)
    (edge,) = painted.edges
    assert judged(found, "kd", 0.995 * edge.value) == FIRM
    assert judged(found, "kd", 1.005 * edge.value) == LOST


def test_where_there_is_no_answer_nothing_is_known() -> None:
    """A loop that the assessment refuses does not keep the others from being painted."""
    bare = ExpressionPlant("(1 - s)/(s + 1)")
    found = Sheet(Loop("refused beyond 1"), bare, Controller(gain_1=0.5), Trial(20.0), limits=(("rise_time", 9.0),))
    (painted,) = paint_rulers(found, [Track("kp", np.array([0.25, 0.5, 2.0, 4.0]))], 1)
    with pytest.raises(LoopError, match="depend on each other in the same instant"):
        judged(found, "kp", 2.0)
    assert painted.classes.tolist() == [judged(found, "kp", 0.25), judged(found, "kp", 0.5), UNKNOWN, UNKNOWN]
    assert painted.class_at(np.array([0.6, 3.0])).tolist() == [painted.classes[1], UNKNOWN]


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


def test_the_present_value_has_its_class_between_notches() -> None:
    """A firm stretch narrower than a notch is found where the gain is now, with its edges."""
    found = read(sample_plants() / "heater.toml")
    (painted,) = paint_rulers(found, [Track("kp", np.geomspace(0.02, 200.0, 64))])
    assert FIRM not in painted.classes
    assert painted.class_at(np.array([found.controller.gain_1])).tolist() == [FIRM]
    assert judged(found, "kp", found.controller.gain_1, 25) == FIRM
    for edge in painted.edges[:2]:
        assert judged(found, "kp", 0.995 * edge.value, 25) == edge.below
        assert judged(found, "kp", 1.005 * edge.value, 25) == edge.above


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
