"""Both runs of a trial in one batch: the constants of the law, and where a run has run away."""

from dataclasses import replace

import numpy as np
import pytest

from tests.simulate.invented import NOMINAL, heater, sheet
from tuner.law.constants import UNLIMITED
from tuner.model.controller import Controller, Feedforward
from tuner.model.family import family
from tuner.model.sheet import Trial
from tuner.simulate.batch import RUNAWAY, law_constants, nominal, nominal_values, simulate
from tuner.simulate.grid import Grid


def test_constants_are_those_of_the_sheet() -> None:
    """Limits are shifted to the resting point, times become factors of the sample time."""
    constants = law_constants(heater(), 0.5, 0.4)
    assert (constants.low, constants.high, constants.rate_step) == (-40.0, 12.0, 4.0)
    assert constants.integral_gain == pytest.approx(0.04)
    assert constants.windup_gain == pytest.approx(0.5 / 12.0)
    assert constants.filter_gain == pytest.approx(0.5 / 0.9)


def test_without_feedback_the_gains_are_zero() -> None:
    """An open loop keeps its limits and loses its gains."""
    whole = replace(heater(), controller=replace(heater().controller, feedback=False))
    constants = law_constants(whole, 0.5, 0.0)
    assert (constants.proportional_gain, constants.integral_gain, constants.derivative_gain) == (0.0, 0.0, 0.0)
    assert constants.windup_gain == 0.0
    assert constants.high == 12.0


def test_no_limits() -> None:
    """Absent limits are the largest number there is."""
    constants = law_constants(sheet("1/s", Controller(sample_time=1.0), Trial(5.0)), 1.0, 0.0)
    assert (constants.low, constants.high, constants.rate_step) == (-UNLIMITED, UNLIMITED, UNLIMITED)


def test_shapes_of_the_results() -> None:
    """Three plants, two runs, points and samples of the grid."""
    whole = heater()
    runs = simulate(whole, family(whole.plant, 3), Grid(0.5, 4, 41))
    assert runs.y.shape == (3, 2, 41)
    assert runs.u.shape == runs.limited.shape == (3, 2, 11)
    assert runs.limited.dtype == np.bool_


def test_feedforward_is_designed_for_the_nominal_plant() -> None:
    """Every member meets the feedforward of the nominal plant, not one of its own."""
    whole = replace(
        heater(),
        controller=Controller(sample_time=0.5, feedback=False, feedforward=Feedforward("inverse", filter_time=5)),
    )
    runs = simulate(whole, family(whole.plant, 4), Grid(0.5, 1, 50))
    assert (runs.u[:, 0] == runs.u[0, 0]).all()
    assert not np.array_equal(runs.y[1, 0], runs.y[0, 0])


def test_a_runaway_is_held_at_its_ceiling() -> None:
    """The ceiling is so many times the step."""
    wild = sheet("1/(s - 5)", Controller(sample_time=0.1, feedback=False), Trial(50.0, 1.0, 2.0))
    runs = simulate(wild, NOMINAL, Grid(0.1, 1, 501))
    rise = abs(1.0 / complex(-5.0, 2.0 * np.pi / 50.0))
    assert np.abs(runs.y[0, 1]).max() == pytest.approx(RUNAWAY * 2.0 * rise)
    assert (runs.y[0, 0] == 0.0).all()


def test_nominal() -> None:
    """The nominal plant is that of the nominal values."""
    assert nominal_values(heater()) == {"gain": 0.9, "delay": 4.0, "lag": 32.0}
    assert nominal(heater()).plant.static_gain() == pytest.approx(0.9)
    assert nominal(heater()).disturbance_path is None
