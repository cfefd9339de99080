"""A demonstration played: every action at its sample, and what is refused said."""

import numpy as np

from tests.rehearse.loops import LAW, RICH, oven
from tuner.model.demonstration import (
    Action,
    Deed,
    Demonstration,
    SetController,
    SetDisturbance,
    SetEffort,
    SetMode,
    SetNoise,
    SetPlant,
    SetReference,
    Stop,
)
from tuner.rehearse.rehearsal import Rehearsal
from tuner.rehearse.script import Script, do, with_values


def _played(*actions: Action) -> tuple[Rehearsal, Script]:
    rehearsal = Rehearsal(oven())
    return rehearsal, Script(Demonstration("Oven", "oven.toml", actions), rehearsal)


def test_every_deed_does_what_it_says() -> None:
    """Each kind of deed reaches the loop."""
    rehearsal = Rehearsal(oven())
    deeds: list[Deed] = [SetReference(80.0), SetDisturbance(5.0), SetNoise(True), SetPlant((("gain", 1.0),))]
    for deed in [*deeds, SetController((("kp", 4.0),)), SetEffort(45.0)]:
        do(deed, rehearsal)
    assert (rehearsal.reference, rehearsal.disturbance, rehearsal.noise) == (80.0, 5.0, True)
    assert (rehearsal.values["gain"], rehearsal.sheet.controller.gain_1) == (1.0, 4.0)
    assert rehearsal.mode == "manual"
    do(SetMode("automatic"), rehearsal)
    assert rehearsal.mode == "automatic"
    do(SetPlant(()), rehearsal)
    assert rehearsal.values["gain"] == 0.9
    do(SetMode("manual"), rehearsal)
    assert rehearsal.mode == "manual"
    do(Stop(), rehearsal)
    assert rehearsal.disturbance == 0.0


def test_a_ramp_takes_its_time() -> None:
    """The reference is half way after half the time."""
    rehearsal = Rehearsal(oven())
    do(SetReference(82.0, 10.0), rehearsal)
    assert np.allclose(rehearsal.advance(21).r[[0, 10, 20]], [72.0, 77.0, 82.0])


def test_an_action_takes_hold_at_its_own_sample() -> None:
    """However the samples are cut, the reference steps at the first sample at or after its time."""
    rehearsal, script = _played(Action(0.0, None, "Begin."), Action(1.9, SetReference(80.0), "Up."))
    said = [played.say for played in script.play()]
    assert script.room(100) == 4
    strip = rehearsal.advance(script.room(100))
    said += [played.say for played in script.play()]
    assert said == ["Begin.", "Up."]
    assert script.over
    assert script.room(100) == 100
    assert strip.r.tolist() == [72.0] * 4
    assert rehearsal.advance(1).t.tolist() == [2.0]
    assert rehearsal.reference == 80.0


def test_a_refused_action_says_why() -> None:
    """What the loop cannot take changes nothing, and the words say why."""
    rehearsal, script = _played(Action(0.0, SetPlant((("gian", 1.0),)), "Drift."))
    (played,) = script.play()
    assert played.words == "plant: gian 1 was refused: the plant has the parameters gain, delay, lag, found gian"
    assert rehearsal.values["gain"] == 0.9


def test_numbers_of_blocks_are_set_by_dotted_keys() -> None:
    """A key below a block changes the number of that block alone."""
    changed = with_values(RICH, {"notch.depth": 0.4, "kp": 1.0})
    assert changed.notch is not None
    assert (changed.notch.depth, changed.gain_1) == (0.4, 1.0)
    assert with_values(LAW, {}) == LAW
