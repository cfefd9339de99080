"""What happened in a rehearsal, word for word."""

from dataclasses import replace

import numpy as np

from tests.rehearse.loops import LAW, oven
from tuner.model.demonstration import SetController, SetReference
from tuner.model.plant import ExpressionPlant
from tuner.rehearse.account import Account, Peaks
from tuner.rehearse.rehearsal import Rehearsal
from tuner.rehearse.script import do


def test_a_calm_run() -> None:
    """Stability is said once, then how far output and effort went, and when."""
    rehearsal = Rehearsal(oven())
    account = Account(rehearsal)
    assert account.sentences() == ["The loop was stable all the time."]
    account.follow(rehearsal.advance(20))
    assert account.sentences() == [
        "The loop was stable all the time.",
        "Air temperature went from 72 degC (at 0 s) to 72 degC (at 0 s).",
        "Gas valve went from 40 % (at 0 s) to 40 % (at 0 s).",
    ]


def test_an_unstable_spell_is_told_with_its_growth() -> None:
    """From when to when, and the growth that was measured before a limit held the effort."""
    rehearsal = Rehearsal(oven())
    account = Account(rehearsal)
    account.follow(rehearsal.advance(100))
    do(SetController((("kp", 9.0), ("kd", 0.0))), rehearsal)
    account.look()
    do(SetReference(73.0), rehearsal)
    for _ in range(60):
        account.follow(rehearsal.advance(20))
    (spell, _, effort) = account.sentences()
    assert spell.startswith("Unstable from 50 s on to the end: the swing grows by a factor of ")
    assert "; the pole says " in spell
    assert "a limit held it" in effort
    measured = float(spell.split("a factor of ")[1].split(" ")[0])
    predicted = float(spell.split("the pole says ")[1].rstrip("."))
    assert abs(measured / predicted - 1.0) < 0.05


def test_every_tuning_has_its_own_spell() -> None:
    """A change of gains ends one unstable spell and begins another; a stable one ends the last."""
    rehearsal = Rehearsal(oven())
    account = Account(rehearsal)
    for kp in (9.0, 10.0, 3.0):
        do(SetController((("kp", kp), ("kd", 0.0))), rehearsal)
        account.look()
        account.follow(rehearsal.advance(100))
    first, second, _output, _effort = account.sentences()
    assert first.startswith("Unstable from 0 s to 50 s: ")
    assert second.startswith("Unstable from 50 s to 100 s: ")
    assert first.split("pole")[0] != second.split("pole")[0]


def test_an_integrating_plant_by_hand_is_no_unstable_spell() -> None:
    """That it does not come back by itself is no fault of the loop."""
    tank = replace(oven(), plant=ExpressionPlant("0.05/s"), controller=replace(LAW, gain_1=1.0, gain_3=0.0))
    rehearsal = Rehearsal(tank)
    account = Account(rehearsal)
    rehearsal.to_manual()
    account.follow(rehearsal.advance(20))
    assert account.spells == ()


def test_peaks_keep_their_first_time() -> None:
    """Of equal values the first one counts."""
    peaks = Peaks()
    peaks.follow(np.array([0.0, 1.0, 2.0]), np.array([1.0, 3.0, 0.0]))
    peaks.follow(np.array([3.0, 4.0]), np.array([3.0, 0.0]))
    assert (peaks.low, peaks.high) == ((0.0, 2.0), (3.0, 1.0))
