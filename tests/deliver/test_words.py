"""Sentences and units for the state and the constants."""

from tuner.deliver.words import CONSTANTS, STATE
from tuner.law import pid


def test_every_state_and_constant_has_its_words() -> None:
    """The tables speak of the law as it is, in its order."""
    assert tuple(STATE) == pid.STATE
    assert tuple(CONSTANTS) == pid.PARAMETERS
