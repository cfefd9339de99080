"""The sheet as frozen data."""

from dataclasses import FrozenInstanceError, replace

import pytest

from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.plant import CoefficientPlant
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial

SHEET = Sheet(Loop("A"), CoefficientPlant((1.0,), (1.0, 1.0)), Controller(), Trial(10.0))


def test_a_sheet_without_more_has_ideal_blocks_and_no_limits() -> None:
    """Actuator and sensor do nothing, nothing is limited."""
    assert (SHEET.actuator, SHEET.sensor, SHEET.limits) == (Actuator(0.0), Sensor(0.0, 0.0, 0.0), ())


def test_a_sheet_does_not_change() -> None:
    """A change makes a new sheet and leaves the old one; equal sheets are one key, so results can be kept by sheet."""
    with pytest.raises(FrozenInstanceError):
        SHEET.trial = Trial(1.0)  # type: ignore[misc] # just what must not work
    changed = replace(SHEET, trial=Trial(20.0))
    assert (SHEET.trial.duration, changed.trial.duration) == (10.0, 20.0)
    assert hash(SHEET) == hash(replace(changed, trial=Trial(10.0)))
