"""Sentences and units for the state and the constants."""

import pytest

from tuner.deliver.words import CONSTANTS, STATE, unit
from tuner.law import pid


def test_every_state_and_constant_has_its_words() -> None:
    """The tables speak of the law as it is, in its order."""
    assert tuple(STATE) == pid.STATE
    assert tuple(CONSTANTS) == pid.PARAMETERS


@pytest.mark.parametrize(
    ("text", "y", "u", "expected"),
    [
        ("{u}/({y} {t})", "degC", "%", "%/(degC s)"),
        ("{u}/({y} {t})", "degC", "", "1/(degC s)"),
        ("{u}/({y} {t})", "", "%", "%/s"),
        ("{u}/({y} {t})", "", "", "1/s"),
        ("{u}/{y}", "", "", ""),
        ("{u} {t}/{y}", "", "", "s"),
        ("{u} {t}/{y}", "degC", "", "s/degC"),
        ("{u}", "", "", ""),
        ("rad/{t}", "", "", "rad/s"),
    ],
)
def test_units_are_those_of_the_loop(text: str, y: str, u: str, expected: str) -> None:
    """A signal without a unit counts as 1 and is left out where that reads better."""
    assert unit(text, t="s", y=y, u=u) == expected
