"""Sentences and units for the state and the constants."""

from tuner.deliver.words import CONSTANTS, STATE, unit
from tuner.law import pid


def test_every_state_and_constant_has_its_words() -> None:
    """The tables speak of the law as it is, in its order."""
    assert tuple(STATE) == pid.STATE
    assert tuple(CONSTANTS) == pid.PARAMETERS


def test_units_are_those_of_the_loop() -> None:
    """A signal without unit counts as 1."""
    assert unit("{u}/({y} {t})", t="s", y="degC", u="") == "1/(degC s)"
