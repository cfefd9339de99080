"""Running by the clock: as many samples as time has gone by, what is done on the way, and the record."""

import numpy as np
import pytest

from tests.window import made_up
from tests.window.rehearsal.conftest import Clock, Hours
from tuner.files.demonstrations import Staged
from tuner.model.demonstration import Action, Demonstration, SetPlant, SetReference
from tuner.places import sample_plants
from tuner.rehearse import recording
from tuner.rehearse.rehearsal import RAN_AWAY, Rehearsal
from tuner.rehearse.script import Played
from tuner.rehearse.strip import Strip
from tuner.window.rehearsal import runner as module
from tuner.window.rehearsal.runner import Runner


def staged(*actions: Action, speed: float = 10.0) -> Staged:
    """Return a demonstration on the made-up loop."""
    return Staged(Demonstration("Show", "a.toml", actions, speed), made_up.sheet(), sample_plants() / "a.toml")


def test_it_runs_as_time_goes_by(runner: Runner, hours: Hours) -> None:
    """Ten seconds at ten times real time are 200 samples of half a second, each of them once."""
    strips: list[Strip] = []
    runner.advanced.connect(strips.append)
    runner.begin(Rehearsal(made_up.sheet()))
    runner.set_speed(10.0)
    runner.tick()
    assert runner.rehearsal is not None
    hours.pass_by(10.0)
    assert runner.rehearsal.time == pytest.approx(100.0, abs=0.5)
    t = np.concatenate([strip.t for strip in strips])
    assert np.array_equal(t, 0.5 * np.arange(len(t)))


def test_run_and_pause(runner: Runner) -> None:
    """Time goes by only while it runs; without a loop there is nothing to run."""
    runner.run()
    assert not runner.running
    runner.begin(Rehearsal(made_up.sheet()))
    runner.run()
    assert runner.running
    runner.pause()
    assert not runner.running


def test_a_slice_ends_in_time(runner: Runner, clock: Clock, monkeypatch: pytest.MonkeyPatch) -> None:
    """What does not fit in a slice is not skipped: the loop is slower, and every sample still follows the last."""
    monkeypatch.setattr(module, "SLICE", 0.0)
    strips: list[Strip] = []
    runner.advanced.connect(strips.append)
    runner.begin(Rehearsal(made_up.sheet()))
    runner.set_speed(100.0)
    runner.tick()
    for _ in range(4):
        clock.now += 10.0
        runner.tick()
    assert runner.rehearsal is not None
    t = np.concatenate([strip.t for strip in strips])
    assert len(t) == 4 * module._CHUNK
    assert np.array_equal(t, 0.5 * np.arange(len(t)))
    assert runner.pacer.behind
    assert runner.pacer.achieved == pytest.approx(10.0)


def test_a_demonstration_is_played_at_its_times(runner: Runner, hours: Hours) -> None:
    """At its own speed, each action at its own sample, told as it comes."""
    played: list[Played] = []
    runner.happened.connect(played.append)
    actions = Action(0.0, None, "Begin."), Action(20.0, SetReference(75.0), "Up.")
    show = staged(*actions)
    runner.begin(Rehearsal(show.sheet), show)
    assert runner.pacer.speed == 10.0
    assert runner.playing
    runner.tick()
    hours.pass_by(4.0)
    assert [(one.time, one.words, one.say) for one in played] == [
        (0.0, "", "Begin."),
        (20.0, "reference 75 degC", "Up."),
    ]
    assert not runner.playing


def test_a_record_keeps_samples_and_events(runner: Runner, hours: Hours) -> None:
    """From the moment it begins until it ends; a new one begins empty."""
    runner.begin(Rehearsal(made_up.sheet()))
    runner.tick()
    hours.pass_by(2.0)
    runner.record(True)
    runner.act(SetReference(75.0))
    hours.pass_by(5.0)
    runner.record(False)
    hours.pass_by(2.0)
    assert runner.recorder is not None
    assert runner.recorder.samples == 10
    (piece,) = runner.recorder.pieces()
    assert [event.words for event in piece.events] == ["reference 75 degC"]
    runner.record(True)
    assert runner.recorder.samples == 0


def test_a_record_outlives_its_loop(runner: Runner, hours: Hours) -> None:
    """One that has samples ends with its loop and can still be saved; one without goes on with the next."""
    runner.begin(Rehearsal(made_up.sheet()))
    runner.record(True)
    runner.begin(Rehearsal(made_up.sheet()))
    assert runner.recording
    runner.tick()
    hours.pass_by(2.0)
    runner.begin(Rehearsal(made_up.sheet()))
    assert not runner.recording
    runner.forget()
    assert runner.recorder is not None
    assert runner.recorder.samples == 4
    assert runner.recorded == made_up.sheet().loop


def test_a_full_record_ends(runner: Runner, hours: Hours, monkeypatch: pytest.MonkeyPatch) -> None:
    """The page is told, and the loop goes on."""
    monkeypatch.setattr(recording, "MOST_SAMPLES", 5)
    said: list[str] = []
    runner.refused.connect(said.append)
    runner.begin(Rehearsal(made_up.sheet()))
    runner.record(True)
    runner.tick()
    hours.pass_by(5.0)
    assert said == ["The record has ended: it holds 5,000,000 samples, as many as it can."]
    assert not runner.recording
    assert runner.rehearsal is not None
    assert runner.rehearsal.time == pytest.approx(5.0)


def test_a_refusal_is_told(runner: Runner) -> None:
    """What the loop cannot do is said, and said no more once something else is done."""
    said: list[str] = []
    runner.refused.connect(said.append)
    runner.act(SetReference(1.0))
    runner.begin(Rehearsal(made_up.sheet()))
    runner.act(SetPlant((("gian", 1.0),)))
    runner.act(SetReference(75.0))
    assert said == ["the plant has the parameters gain, lag, found gian", ""]


def test_new_gains_take_hold_while_it_runs(runner: Runner, hours: Hours) -> None:
    """The effort goes on from where it is."""
    strips: list[Strip] = []
    runner.begin(Rehearsal(made_up.sheet()))
    runner.act(SetReference(75.0))
    runner.tick()
    hours.pass_by(5.0)
    runner.advanced.connect(strips.append)
    assert runner.rehearsal is not None
    before = runner.rehearsal.effort
    runner.retune(made_up.sheet(3.0).controller)
    hours.pass_by(0.5)
    assert runner.rehearsal.sheet.controller.gain_1 == 3.0
    assert strips[0].u[0] == pytest.approx(before, abs=1.0)


def test_a_loop_beyond_all_numbers_stands_still(runner: Runner, monkeypatch: pytest.MonkeyPatch, clock: Clock) -> None:
    """It says so and pauses."""
    said: list[str] = []
    runner.refused.connect(said.append)
    rehearsal = Rehearsal(made_up.sheet())
    empty = rehearsal.advance(0)
    monkeypatch.setattr(rehearsal, "advance", lambda _samples: empty)
    runner.begin(rehearsal)
    runner.run()
    runner.tick()
    clock.now += 1.0
    runner.tick()
    assert said == [RAN_AWAY]
    assert not runner.running
