"""Blocks are left once all have missed a limit, and who missed one first is counted."""

from dataclasses import replace

import numpy as np

from tuner.files.sheet import read
from tuner.footing.grading import Grading
from tuner.footing.ground import ground_of
from tuner.footing.tunings import Tunings
from tuner.model.sheet import Sheet
from tuner.places import sample_plants

HEATER = read(sample_plants() / "heater.toml")


def graded(found: Sheet, count: int) -> Grading:
    """Return the grading of so many tunings around a sheet's, after it was done, doubts left open."""
    ground = ground_of(found, 5)
    tunings = Tunings(found.controller, [(("kp", value),) for value in np.geomspace(1.0, 3.0, count).tolist()])
    grading = Grading(found, ground, tunings)
    none = np.zeros(count, dtype=bool)
    grading.classes(none, none, settle=False)
    return grading


def test_a_limit_that_all_miss_takes_one_plant() -> None:
    """The first plant that is tried decides for all, and is counted for each."""
    hard = graded(replace(HEATER, limits=(("settling_time", 1.0),)), 40)
    assert hard.misses.sum() == 64  # two blocks of 32 lanes, filled up
    assert np.count_nonzero(hard.misses) == 1


def test_a_limit_that_nobody_misses_takes_all() -> None:
    """Nobody is counted."""
    easy = graded(replace(HEATER, limits=(("overshoot", 500.0),)), 40)
    assert easy.misses.sum() == 0
    assert easy.doubts == {}
