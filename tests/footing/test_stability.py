"""Stretches of a track are lost exactly where poles say so, and their edges are the known ultimate gains."""

from dataclasses import replace

import numpy as np
import pytest

from tests.footing.random_loops import sheet
from tuner.footing.classes import Track
from tuner.footing.stability import Stretches, counts, lost_when_off, stretches
from tuner.model.family import family_of
from tuner.model.sheet import Sheet


def tracks(found: Sheet) -> list[Track]:
    """Return tracks along the gains and the filter time that are not off."""
    controller = found.controller
    names = [*{"parallel": ("kp", "ki", "kd")}.get(controller.form, ("kc", "ti", "td")), "filter_time"]
    return [Track(name, value * np.geomspace(0.05, 20.0, 13)) for name in names if (value := controller.value(name))]


@pytest.mark.parametrize("continuous", [False, True])
def test_a_hundred_random_loops(continuous: bool) -> None:
    """At every notch of every gain, what the poles of all plants say; the reciprocal gains of the other forms too."""
    looked_at = 0
    for seed in range(200, 230 if continuous else 300):
        found = sheet(seed, continuous=continuous)
        members = family_of(found, 3)
        for track in tracks(found):
            known = stretches(found, members, track, 3, counts(found, members))
            if known is None:
                continue
            looked_at += 1
            moved = [
                replace(found, controller=found.controller.with_value(track.name, v)) for v in track.values.tolist()
            ]
            assert known.at(track.values).tolist() == [bool(counts(one, members).any()) for one in moved], (seed, track)
    assert looked_at > (60 if continuous else 250)


def test_values_right_at_an_edge_are_unsure() -> None:
    """Within a millionth; the poles themselves are asked there."""
    known = Stretches(np.array([2.0]), np.array([False, True]))
    assert known.unsure(np.array([1.0, 2.0 + 1e-9, 2.1])).tolist() == [False, True, False]
    assert known.at(np.array([1.0, 3.0])).tolist() == [False, True]


def test_weights_and_wind_up_move_no_pole() -> None:
    """Their whole track is what the loop is now."""
    found = sheet(0)
    members = family_of(found, 3)
    known = stretches(found, members, Track("b", np.linspace(0.1, 1.5, 5)), 3, None)
    assert known is not None
    assert known.edges.size == 0
    assert known.lost.tolist() == [bool(counts(found, members).any())]


def test_numbers_that_are_off() -> None:
    """What the poles say of each alone, on both sides; an integrating plant without a proportional gain is lost."""
    seen = set()
    for seed in range(40):
        found = sheet(seed)
        members = family_of(found, 3)
        names = [track.name for track in tracks(found)]
        for name, lost in lost_when_off(found, members, names).items():
            off = replace(found, controller=found.controller.with_value(name, 0.0))
            assert lost == bool(counts(off, members).any()), (seed, name)
            seen.add((name, lost))
    assert {name for name, _ in seen} >= {"kp", "ki", "kd", "ti", "td", "filter_time"}
    assert {lost for _, lost in seen} == {False, True}


def test_where_off_is_not_told() -> None:
    """Of a continuous controller, of an open loop, and where nothing is left."""
    found = sheet(0)
    members = family_of(found, 2)
    law = replace(found.controller, form="parallel", gain_1=1.0, gain_2=0.0, gain_3=0.0)
    assert set(lost_when_off(replace(found, controller=law), members, ["kp", "ki"])) == {"ki"}
    for silent in (replace(law, sample_time=0.0), replace(law, feedback=False)):
        assert lost_when_off(replace(found, controller=silent), members, ["ki"]) == {}
