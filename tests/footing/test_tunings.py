"""Many tunings have the numbers that each of them has alone."""

from dataclasses import astuple
from math import inf

import pytest

from tuner.footing.tunings import Tunings
from tuner.model.controller import Controller, Form
from tuner.model.parameters import GAIN_KEYS

BASE = Controller(gain_1=2.0, gain_2=4.0, gain_3=0.5, filter_time=0.25, b=0.5, windup_time=3.0)


@pytest.mark.parametrize("form", GAIN_KEYS)
def test_numbers_are_those_of_each(form: Form) -> None:
    """Parallel gains whatever the form, times and weights; one number changed, or two."""
    base = Controller(form=form, gain_1=2.0, gain_2=4.0, gain_3=0.5, filter_time=0.25, b=0.5, windup_time=3.0)
    first, second, third = GAIN_KEYS[form]
    changes = [
        (),
        ((first, 7.0),),
        ((second, 0.0),),
        ((third, 0.0), (first, 1.5)),
        (("filter_time", 0.0),),
        (("b", 0.0), ("c", 1.0)),
        (("windup_time", 9.0),),
    ]
    some = Tunings(base, changes)
    for one, row in zip(some, zip(*some.numbers(), strict=True), strict=True):
        assert row == (*astuple(one.parallel()), one.filter_time, one.windup_time, one.b, one.c)


def test_no_windup_time_is_infinite() -> None:
    """Left out on the ruler or absent from the start."""
    found = Tunings(BASE, [(("windup_time", 0.0),), ()])
    assert found[0].windup_time is None
    assert found.numbers().windup_time.tolist() == [inf, 3.0]
    assert Tunings(Controller(gain_1=1.0), [()]).numbers().windup_time.tolist() == [inf]


def test_each_is_made_when_asked_for() -> None:
    """As a sequence has it; the changes come one after the other."""
    some = Tunings(BASE, [(("kp", 1.0),), (("kp", 1.0), ("kp", 5.0))])
    assert len(some) == 2
    assert some[1] == BASE.with_value("kp", 5.0)
    assert list(some[1:]) == [some[1]]


def test_none_at_all() -> None:
    """Have no numbers."""
    assert [len(one) for one in Tunings(BASE, []).numbers()] == [0] * 7
