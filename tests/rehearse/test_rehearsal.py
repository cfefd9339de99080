"""A rehearsal: bumpless in every way, growing as its pole says, and all that a person may do to it."""

from dataclasses import replace
from math import exp, inf, nan, pi

import numpy as np
import pytest

from tests.rehearse.loops import LAW, RICH, oven
from tuner.errors import LoopError
from tuner.model.controller import Controller, Notch
from tuner.model.plant import ExpressionPlant
from tuner.rehearse.rehearsal import MOST_SAMPLES, Rehearsal, sampled


def settled(law: Controller = LAW) -> Rehearsal:
    """Return a rehearsal on its way to another reference."""
    rehearsal = Rehearsal(oven(law))
    rehearsal.set_reference(77.0)
    rehearsal.advance(40)
    return rehearsal


@pytest.mark.parametrize("law", [LAW, RICH], ids=["plain", "rich"])
def test_manual_and_automatic_are_bumpless(law: Controller) -> None:
    """The effort stays where it is at both switches, to 1e-12."""
    rehearsal = settled(law)
    before = rehearsal.effort
    rehearsal.to_manual()
    by_hand = rehearsal.advance(30).u
    assert np.abs(by_hand - before).max() <= 1e-12
    assert rehearsal.mode == "manual"
    rehearsal.to_automatic()
    assert abs(rehearsal.advance(1).u[0] - before) <= 1e-12
    assert rehearsal.mode == "automatic"


@pytest.mark.parametrize(
    "law",
    [
        replace(LAW, gain_1=7.0),
        replace(LAW, gain_1=1.0, gain_2=0.4, gain_3=20.0),
        replace(LAW, notch=Notch(1.0)),
        RICH,
        LAW.in_form("standard"),
    ],
)
def test_a_change_while_it_runs_is_bumpless(law: Controller) -> None:
    """Gains, form, blocks and feedforward: the first effort after any change is the last one before, to 1e-12."""
    rehearsal = settled()
    before = rehearsal.effort
    rehearsal.set_controller(law)
    assert abs(rehearsal.advance(1).u[0] - before) <= 1e-12
    assert rehearsal.sheet.controller == law


def test_it_ends_where_the_reference_is() -> None:
    """After manual, other gains and another plant, the integral still drives the error to zero."""
    rehearsal = settled()
    rehearsal.set_manual(55.0)
    rehearsal.advance(100)
    rehearsal.to_automatic()
    rehearsal.set_controller(replace(LAW, gain_1=2.0))
    rehearsal.set_plant({"gain": 1.0})
    rehearsal.set_disturbance(5.0)
    assert rehearsal.advance(4000).y[-1] == pytest.approx(77.0, abs=1e-6)


@pytest.mark.parametrize("gain", [9.0, 12.0])
def test_a_swing_grows_as_the_pole_says(gain: float) -> None:
    """The factor of each cycle that the output shows is exp(2 pi sigma/omega) of the rightmost pole, to 2 %."""
    rehearsal = Rehearsal(oven(limited=False))
    rehearsal.set_controller(replace(LAW, gain_1=gain))
    rehearsal.set_reference(72.5)
    rehearsal.advance(1200)
    pole, growth = rehearsal.poles.values[0], rehearsal.growth()
    assert growth is not None
    assert growth.predicted == pytest.approx(exp(2.0 * pi * pole.real / abs(pole.imag)))
    assert growth.measured == pytest.approx(growth.predicted, rel=0.02)
    assert growth.period == pytest.approx(2.0 * pi / abs(pole.imag))


def test_an_unstable_plant_by_hand_runs_away_as_its_pole_says() -> None:
    """1/(5 s - 1) with the effort in hand doubles every 5 ln 2, and the rehearsal shows and says so."""
    made = replace(oven(limited=False), plant=ExpressionPlant("1/(5 s - 1)"))
    rehearsal = Rehearsal(made)
    rehearsal.set_manual(41.0)
    rehearsal.advance(120)
    growth = rehearsal.growth()
    assert growth is not None
    assert growth.predicted == pytest.approx(exp(0.2))
    assert growth.measured == pytest.approx(exp(0.2), rel=0.01)


def test_limits_hold_a_swing_and_that_is_said() -> None:
    """With the valve at its ends the loop swings on without growing."""
    rehearsal = Rehearsal(oven())
    rehearsal.set_controller(replace(LAW, gain_1=40.0))
    rehearsal.set_reference(80.0)
    rehearsal.advance(2000)
    growth = rehearsal.growth()
    assert growth is not None
    assert growth.measured == pytest.approx(1.0, abs=0.05)
    assert "a limit of the effort holds it now" in growth.sentence


def test_a_stable_loop_does_not_grow() -> None:
    """Nothing is said of it."""
    assert settled().growth() is None
    assert settled().stable


def test_stop_goes_to_manual_at_rest() -> None:
    """The effort goes to rest as fast as its rate allows, the disturbance ends, and the loop calms down."""
    rehearsal = Rehearsal(oven())
    rehearsal.set_controller(replace(LAW, gain_1=40.0))
    rehearsal.set_reference(80.0)
    rehearsal.set_disturbance(10.0)
    rehearsal.advance(500)
    rehearsal.stop()
    assert rehearsal.mode == "manual"
    assert rehearsal.stable
    after = rehearsal.advance(2000)
    assert np.abs(np.diff(after.u)).max() <= 8.0 * 0.5 + 1e-9
    assert after.u[-1] == 40.0
    assert after.y[-1] == pytest.approx(72.0, abs=1e-6)
    assert not after.d.any()


def test_one_that_ran_away_stands_still_until_it_is_stopped() -> None:
    """No sample follows, and stop brings it to rest."""
    rehearsal = Rehearsal(oven(replace(LAW, gain_1=4000.0), limited=False))
    rehearsal.set_reference(80.0)
    rehearsal.advance(5000)
    assert rehearsal.ran_away
    assert len(rehearsal.advance(10)) == 0
    rehearsal.stop()
    after = rehearsal.advance(10)
    assert after.y.tolist() == [72.0] * 10


def test_references_step_and_ramp() -> None:
    """In engineering units, from the next sample on."""
    rehearsal = Rehearsal(oven())
    rehearsal.ramp_reference(82.0, 10.0)
    r = rehearsal.advance(30).r
    assert r[:4].tolist() == [72.0, 72.5, 73.0, 73.5]
    assert r[-1] == 82.0
    assert rehearsal.reference == 82.0
    rehearsal.set_reference(70.0)
    assert rehearsal.advance(1).r.tolist() == [70.0]


def test_noise_is_that_of_the_sensor_and_repeats() -> None:
    """Its deviation is the sheet's; the same seed gives the same run; off, there is none."""
    runs = []
    for _ in range(2):
        rehearsal = Rehearsal(oven(replace(LAW, feedback=False)), seed=7)
        assert np.array_equal(rehearsal.advance(5).ym, np.full(5, 72.0))
        rehearsal.set_noise(True)
        runs.append(rehearsal.advance(4000).ym)
    assert np.array_equal(runs[0], runs[1])
    assert runs[0].std() == pytest.approx(0.05, rel=0.1)


def test_without_feedback_there_is_no_way_to_be_bumpless() -> None:
    """Feedforward alone takes its own effort at once when it is switched to automatic."""
    rehearsal = Rehearsal(oven(replace(LAW, feedback=False)))
    rehearsal.set_manual(41.0)
    rehearsal.advance(10)
    rehearsal.to_automatic()
    assert rehearsal.advance(1).u.tolist() == [40.0]


def test_a_continuous_controller_is_stepped_finely() -> None:
    """Its step is short against its fastest pole, and a note says so; its own trial is matched."""
    made = oven(replace(LAW, sample_time=0.0))
    rehearsal = Rehearsal(made)
    assert rehearsal.sample_time < 0.25
    step = sampled(made).controller.sample_time
    assert rehearsal.notes == (f"A continuous controller is rehearsed in steps of {step:.3g} s.",)
    rehearsal.set_controller(replace(LAW, sample_time=0.0, gain_1=2.0))
    assert rehearsal.sheet.controller.sample_time == 0.0


def test_what_cannot_be_is_refused_and_changes_nothing() -> None:
    """Another sample time, a parameter that is not there, an effort that is no number: one sentence each."""
    rehearsal = settled()
    with pytest.raises(LoopError) as caught:
        rehearsal.set_controller(replace(LAW, sample_time=1.0))
    assert str(caught.value) == (
        "the sample time cannot change while a loop runs: expected 0.5, found 1; start the rehearsal anew"
    )
    with pytest.raises(LoopError, match="the plant has the parameters gain, delay, lag, found gian"):
        rehearsal.set_plant({"gian": 1.0})
    with pytest.raises(LoopError, match="lies above half the sampling frequency"):
        rehearsal.set_controller(replace(LAW, notch=Notch(100.0)))
    for spoilt in (nan, inf):
        with pytest.raises(LoopError, match="an effort by hand must be a finite number"):
            rehearsal.set_manual(spoilt)
    assert rehearsal.sheet.controller == LAW
    assert rehearsal.values["gain"] == 0.9
    assert rehearsal.mode == "automatic"


def test_a_call_goes_on_by_so_many_samples_at_most() -> None:
    """A slip of the pen does not hang the program."""
    rehearsal = Rehearsal(oven())
    assert len(rehearsal.advance(10 * MOST_SAMPLES)) == MOST_SAMPLES
    assert len(rehearsal.advance(-3)) == 0
