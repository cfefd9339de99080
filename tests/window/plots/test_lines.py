"""Curves as plain numbers: the whole family, its worst plants, and whose they are, in words."""

from dataclasses import replace

import numpy as np
import pytest

from tests.window import made_up
from tests.window.plots.answers import answer, outline
from tuner.judge.assessment import MemberResult
from tuner.window.plots.lines import LARGE, Array, Family, drift_words, family_of_curves, looked_at_words, worst_line
from tuner.window.shown import FamilyView, Request, Shown
from tuner.window.worker import Assessing


def curve(member: MemberResult) -> tuple[Array, Array]:
    """Return the output after the reference step."""
    return member.traces.reference.t, member.traces.reference.y


def test_every_plant_but_the_first_is_in_the_family() -> None:
    """In their order, and it is known which are the worst of some limit."""
    shown = answer(2.2)
    members = shown.assessment.members[1:]
    made = family_of_curves(shown, curve)
    assert np.array_equal(made.values, [member.traces.reference.y for member in members])
    worst = {limit.plant for limit in shown.assessment.limits}
    assert {members[place].name for place in made.worst} == worst


def test_other_times_are_brought_to_those_of_the_first() -> None:
    """A plant that was computed on a finer grid is shown on the same one."""
    shown = answer(2.2)
    nominal, first, second = shown.assessment.members[:3]
    trace = second.traces.reference
    fine = replace(trace, t=trace.t[::2], y=trace.y[::2])
    coarse = replace(second, traces=replace(second.traces, reference=fine))
    made = family_of_curves(
        replace(shown, assessment=replace(shown.assessment, members=(nominal, first, coarse))), curve
    )
    assert made.values.shape == (2, first.traces.reference.t.size)
    assert np.allclose(made.values[1, :-1:2], fine.y[: made.values[1, :-1:2].size])


@pytest.mark.parametrize(
    ("view", "ground", "curves"), [("both", 5, 5), ("band", 5, 0), ("curves", 0, 5), ("none", 0, 0)]
)
def test_a_small_family_is_shown_as_chosen(view: FamilyView, ground: int, curves: int) -> None:
    """Its ground, its curves, both or neither."""
    made = Family(np.arange(3.0), np.zeros((5, 3)), (2,))
    assert (len(made.ground(view)), len(made.curves(view))) == (ground, curves)


def test_of_a_large_family_only_the_worst_have_curves_of_their_own() -> None:
    """The band stands for the rest; where curves alone are wanted the first ones, corners of the spread, come too."""
    made = Family(np.arange(2.0), np.arange(2.0 * (LARGE + 40)).reshape(-1, 2), (3, LARGE + 20))
    assert np.array_equal(made.curves("both"), made.values[[3, LARGE + 20]])
    assert len(made.curves("curves")) == LARGE + 1
    assert len(made.ground("both")) == LARGE + 40


def test_the_worst_plant_of_a_plot_has_its_curve_and_name() -> None:
    """The plant of the limit of this plot that is missed by most; its name says for what, and how far it drifted."""
    shown = answer(3.0)
    found = worst_line(shown, "reference", curve)
    assert found is not None
    worst = shown.assessment.worst["overshoot"].plant
    (member,) = (one for one in shown.assessment.members if one.name == worst)
    assert found.plant == worst
    assert np.array_equal(found.values, member.traces.reference.y)
    assert found.name == "worst overshoot: gain +15 %"


def test_a_plot_without_limits_shows_the_worst_plant_of_all() -> None:
    """It is the same plant, named for the limit that it misses elsewhere."""
    shown = answer(3.0)
    found = worst_line(shown, "effort", curve)
    assert found is not None
    assert found.plant == shown.assessment.limits[0].plant


def test_the_plant_looked_at_has_no_second_curve() -> None:
    """When the worst plant is the one that is looked at, its curve is the main one."""
    shown = _looking_at(answer(3.0).assessment.limits[0].plant)
    assert worst_line(shown, "reference", curve) is None
    assert looked_at_words(shown) == ", gain +15 %"


def test_nothing_is_worst_before_the_family_is_known() -> None:
    """The quick first answer names none, nor does a sheet without limits."""
    assert worst_line(answer(3.0, whole=False), "reference", curve) is None
    assert worst_line(answer(3.0, limits=()), "reference", curve) is None


def test_until_the_verdict_the_last_worst_plant_stays_on_its_new_curve() -> None:
    """By its old name; where only the nominal plant is known its old curve stays."""
    last = worst_line(answer(3.0), "reference", curve)
    assert last is not None
    first, _ = outline(2.5)
    found = worst_line(first, "reference", curve, last)
    assert found is not None
    (member,) = (one for one in first.assessment.members if one.name == last.plant)
    assert np.array_equal(found.values, member.traces.reference.y)
    assert (found.name, found.plant) == (last.name, last.plant)
    assert worst_line(answer(2.5, whole=False), "reference", curve, last) is last


def test_plants_in_words() -> None:
    """By their drift; the nominal one by its name; by values where the drift is not known."""
    nominal, other = answer(2.0).assessment.members[:2]
    assert drift_words(nominal) == "nominal plant"
    assert drift_words(other) == "gain \u221215 %"
    assert drift_words(replace(other, drift="")) == other.name
    assert looked_at_words(answer(2.0)) == ""


def _looking_at(plant: str) -> Shown:
    assessing = Assessing(made_up.sketch, made_up.glance, made_up.draw)
    return assessing.whole(Request(1, made_up.sheet(3.0), looked_at=plant)).as_seen()
