"""What a delivery says, gathered once."""

from dataclasses import replace

import pytest

from tests.deliver.samples import BARE, DYNAMIC, FULL, OPEN, assessment
from tuner import __version__
from tuner.deliver.reference import NO_FEEDS
from tuner.deliver.specification import constants, digest, specify
from tuner.errors import LoopError
from tuner.model.controller import Notch
from tuner.simulate.batch import nominal
from tuner.simulate.feeding import feeds_of


def test_constants_follow_the_sheet() -> None:
    """Without feedback every gain is zero, that of the wind-up too; whole numbers become floating-point ones."""
    made = constants(OPEN)
    assert (made.proportional_gain, made.integral_gain, made.derivative_gain, made.windup_gain) == (0, 0, 0, 0)
    whole = constants(replace(BARE, controller=replace(BARE.controller, gain_1=2)))
    assert all(type(value) is float for value in whole)


def test_a_notch_beyond_half_the_sampling_frequency_is_refused() -> None:
    """What cannot run at the sample time is not delivered."""
    fast = replace(FULL, controller=replace(FULL.controller, notch=Notch(7.0)))
    with pytest.raises(LoopError, match="lies above half the sampling frequency"):
        specify(fast, assessment(), "")


def test_filters_follow_the_sheet() -> None:
    """They are those of the simulation; a controller without feedforward has none, and its disturbance rests at 0."""
    made, bare = specify(DYNAMIC, assessment(), ""), specify(BARE, assessment(), "")
    assert made.feeds == feeds_of(DYNAMIC, nominal(DYNAMIC), 0.5)
    assert all(made.feeds)
    assert made.resting_disturbance == 4.0
    assert bare.feeds == NO_FEEDS
    assert bare.resting_disturbance == 0.0


def test_digest_is_of_what_the_sheet_says() -> None:
    """Equal sheets have equal digests, and every number counts."""
    assert digest(FULL) == digest(replace(FULL))
    assert digest(FULL) != digest(replace(FULL, trial=replace(FULL.trial, disturbance=10.0000001)))
    assert len(digest(BARE)) == 64


def test_specification_carries_version_and_date() -> None:
    """The version is the program's, the date the one passed in."""
    made = specify(BARE, assessment(), "2031-05-04")
    assert (made.version, made.date, made.digest) == (__version__, "2031-05-04", digest(BARE))
