"""The simulated trial as the controller saw it."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings

from tests.deliver.samples import BARE, DYNAMIC, FULL, OPEN, assessment, controllers, specification
from tuner.deliver.reference import Flags
from tuner.deliver.specification import specify
from tuner.deliver.trial import trial
from tuner.model.family import Member
from tuner.model.plant import CoefficientPlant
from tuner.model.sheet import Sensor, Sheet
from tuner.simulate.batch import nominal_values
from tuner.simulate.trial import run

COARSE = replace(FULL, sensor=Sensor(lag=0.4, resolution=0.1), controller=replace(FULL.controller, delay_samples=2))
RUNAWAY = replace(
    BARE, plant=CoefficientPlant((1.0,), (1.0, -3.0)), trial=replace(BARE.trial, duration=60.0, disturbance=1.0)
)


@pytest.mark.parametrize(
    "sheet", [FULL, BARE, OPEN, COARSE, DYNAMIC], ids=["full", "bare", "open", "coarse", "dynamic"]
)
def test_recorded_efforts_are_those_of_the_trial(sheet: Sheet) -> None:
    """The efforts and limits are, bit for bit, those of the traces that everybody is shown."""
    traces = run(sheet, (Member("nominal", nominal_values(sheet)),))[0]
    recorded = trial(specification(sheet)).outcomes
    delay, rest = sheet.controller.delay_samples, sheet.loop.manipulated.resting
    count = len(traces.reference.sample_index)
    for trace, outcomes in ((traces.reference, recorded[:count]), (traces.disturbance, recorded[count:])):
        shown = trace.u[trace.sample_index]
        efforts = [outcome.effort for outcome in outcomes]
        assert [float(effort) + rest for effort in shown[delay:]] == efforts[: len(efforts) - delay]
        assert [bool(outcome.flags & Flags.LIMITED) for outcome in outcomes] == list(trace.limited)


@pytest.mark.parametrize(
    "sheet", [FULL, BARE, OPEN, COARSE, DYNAMIC], ids=["full", "bare", "open", "coarse", "dynamic"]
)
def test_the_law_repeats_the_trial_bit_for_bit(sheet: Sheet) -> None:
    """Plain Python on what the controller read gives what the compiled simulation gave."""
    recorded = trial(specification(sheet))
    assert specification(sheet).reference().run(recorded.samples) == recorded.outcomes


@given(sheet=controllers())
@settings(max_examples=40)
def test_every_combination_repeats_the_trial_bit_for_bit(sheet: Sheet) -> None:
    """Whatever the controller has, stable or not, up to where the simulation holds a run that has run away."""
    made = specify(sheet, assessment("unstable", stable=False), "")
    recorded = trial(made)
    assert made.reference().run(recorded.samples) == recorded.outcomes


def test_a_run_that_ran_away_is_repeated_up_to_there() -> None:
    """What the simulation held afterwards is no answer of the law."""
    made = specify(RUNAWAY, assessment("unstable", stable=False), "")
    recorded = trial(made)
    assert 50 < len(recorded.samples) < 2 * 300
    assert np.all(np.isfinite([outcome.effort for outcome in recorded.outcomes]))
    assert made.reference().run(recorded.samples) == recorded.outcomes
