"""The way back from instability, on regions of stability that are known."""

from dataclasses import replace
from math import inf, log

import pytest

from tests.judge.invented import sheet
from tuner.judge.cliff import IsStable, Runaway, instability, nearest_edge
from tuner.model.controller import Controller

PID = Controller(gain_1=9.4, gain_2=0.5, gain_3=2.0, filter_time=0.1)
AWAY = Runaway("gain 1.035, delay 6", 1.0 / 1.3, 0.82)


def test_the_smallest_change_wins() -> None:
    """Of a gain that must fall by a quarter and one that must triple, the first is named, with its edge."""
    edge = nearest_edge(PID, lambda c: c.gain_1 < 7.21 or c.gain_3 > 6.0)

    assert edge is not None
    assert edge.gain.name == "kp"
    assert edge.value == pytest.approx(7.21, rel=1e-4)


def test_a_gain_may_have_to_rise() -> None:
    """A plant that needs a certain gain to be held at all."""
    edge = nearest_edge(PID, lambda c: c.gain_1 > 30.0)

    assert edge is not None
    assert edge.gain.name == "kp"
    assert edge.value == pytest.approx(30.0, rel=1e-4)


def test_a_gain_that_must_go() -> None:
    """Where no factor helps, leaving a gain out is found."""
    edge = nearest_edge(PID, lambda c: c.gain_2 == 0.0)

    assert edge is not None
    assert (edge.gain.name, edge.value, edge.factor, edge.distance) == ("ki", 0.0, 0.0, inf)


def test_no_single_gain() -> None:
    """When nothing helps, that is the answer."""
    assert nearest_edge(PID, lambda _: False) is None


def test_gains_of_the_present_form() -> None:
    """In the standard form the integral time is what is named, and a time of zero is not a factor of anything."""
    standard = Controller(form="standard", gain_1=2.0, gain_2=4.0, gain_3=0.0)

    edge = nearest_edge(standard, lambda c: c.gain_2 > 5.0)

    assert edge is not None
    assert edge.gain.name == "ti"
    assert edge.value == pytest.approx(5.0, rel=1e-4)


def test_weights_are_no_way_back() -> None:
    """Only what moves poles is tried."""
    tried: list[Controller] = []

    def never(controller: Controller) -> bool:
        tried.append(controller)
        return False

    nearest_edge(replace(PID, windup_time=3.0), never)

    assert {(one.b, one.c, one.windup_time) for one in tried} == {(1.0, 0.0, 3.0)}


def test_the_sentence() -> None:
    """All of it in words and units, word for word."""
    found = instability(replace(sheet(), controller=PID), AWAY, lambda c: c.gain_1 < 7.21)

    assert found.sentence == (
        "Unstable: grows e-fold every 1.3 min at 0.82 rad/min (doubles every 0.9011 min) with gain 1.035, delay 6; "
        "kp 9.4 %/degC is beyond its edge at 7.21."
    )
    assert found.gain == "kp"
    assert found.edge == pytest.approx(7.21, rel=1e-4)
    assert found.doubling_time == pytest.approx(1.3 * log(2.0))


@pytest.mark.parametrize(
    ("away", "controller", "stable", "said"),
    [
        (
            Runaway("nominal", 0.5, 0.0),
            PID,
            lambda c: c.gain_1 > 20.0,
            "Unstable: grows e-fold every 2 min (doubles every 1.386 min) at the nominal plant; "
            "kp 9.4 %/degC is short of its edge at 20.",
        ),
        (
            Runaway("nominal", 0.0, 1.5),
            PID,
            lambda _: False,
            "Unstable: swings on without end at 1.5 rad/min at the nominal plant; "
            "no single gain, changed up to 1000-fold, brings it back.",
        ),
        (
            Runaway("nominal", 0.0, 0.0),
            replace(PID, feedback=False),
            lambda _: False,
            "Unstable: drifts off without end at the nominal plant; the feedback is off, so no gain holds the plant.",
        ),
        (
            Runaway("nominal", 1.0, 0.0),
            PID,
            lambda c: c.gain_3 == 0.0,
            "Unstable: grows e-fold every 1 min (doubles every 0.6931 min) at the nominal plant; "
            "it holds only without kd, which is 2 % min/degC.",
        ),
    ],
)
def test_other_ways_to_run_away(away: Runaway, controller: Controller, stable: IsStable, said: str) -> None:
    """Without ringing, on the very edge, with the loop open, and where a gain must be left out."""
    assert instability(replace(sheet(), controller=controller), away, stable).sentence == said
