"""What the page says, word for word."""

from dataclasses import replace

from tests.rehearse.loops import LAW, oven
from tuner.model.plant import ExpressionPlant
from tuner.rehearse.pacing import Pacer
from tuner.rehearse.rehearsal import Rehearsal
from tuner.rehearse.script import Played
from tuner.window.rehearsal.words import AT_REST, played_words, progress, stability


def test_how_far_and_how_fast() -> None:
    """At rest, paused, at the speed asked for, and slower than that."""
    rehearsal, pacer = Rehearsal(oven()), Pacer(0.5, 10.0)
    assert progress(rehearsal, pacer, running=False) == AT_REST
    rehearsal.advance(25)
    assert progress(rehearsal, pacer, running=False) == "12.5 s, paused."
    assert progress(rehearsal, pacer, running=True) == "12.5 s, at 10 times real time."
    pacer.due(0.0)
    pacer.took(9, 0.1, 3.0)
    assert progress(rehearsal, pacer, running=True) == (
        "12.5 s, at 1.5 times real time: no more on this computer, which leaves no sample out."
    )


def test_what_is_said_of_stability() -> None:
    """Stable in automatic or by hand, else how it grows, which is bad."""
    rehearsal = Rehearsal(oven())
    assert stability(rehearsal) == ("Stable in automatic, with the plant as it is.", False)
    rehearsal.set_controller(replace(LAW, gain_1=9.0, gain_3=0.0))
    sentence, bad = stability(rehearsal)
    assert bad
    assert sentence.startswith("Unstable: the swing grows by a factor of ")
    rehearsal.to_manual()
    assert stability(rehearsal) == ("Stable by hand, with the plant as it is.", False)


def test_an_integrating_plant_by_hand() -> None:
    """It does not run away, but it does not come back either; in automatic it is as stable as any."""
    tank = replace(oven(), plant=ExpressionPlant("0.05/s"), controller=replace(LAW, gain_1=1.0, gain_3=0.0))
    rehearsal = Rehearsal(tank)
    assert stability(rehearsal) == ("Stable in automatic, with the plant as it is.", False)
    rehearsal.to_manual()
    assert stability(rehearsal) == ("By hand this plant does not come back to rest by itself.", False)


def test_what_was_played() -> None:
    """The time, the sentence, and what was done in brackets."""
    assert played_words(Played(20.0, "reference 80 degC", "Up."), "s") == "20 s: Up.  (reference 80 degC)"
    assert played_words(Played(20.0, "", "Look."), "s") == "20 s: Look."
