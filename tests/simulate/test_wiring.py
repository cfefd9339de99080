"""The family as state spaces: blocks put together as the diagram shows."""

from dataclasses import replace

import numpy as np
import pytest

from tests.simulate.invented import NOMINAL, heater, sheet
from tuner.model.controller import Controller, DisturbanceFeedforward
from tuner.model.family import family
from tuner.model.sheet import Actuator, Sensor, Trial
from tuner.simulate.wiring import Wired, processes, wire

S = np.array([0.3j, 1.0 + 2.0j])


def _pulse(wired: Wired, row: int, column: int) -> np.ndarray:
    """Return the pulse response of the first member from one input to one output at S, steps of 1e-5."""
    matrices = np.expm1(S * 1e-5)[:, None, None] * np.eye(wired.c.shape[-1]) - wired.held.growth[0]
    state = np.linalg.solve(matrices, wired.held.new[0, :, column].astype(complex))
    return np.asarray(state @ wired.c[0, row] + wired.direct[0, row, column])


@pytest.mark.parametrize("actuator", [0.0, 0.4])
@pytest.mark.parametrize("sensor", [0.0, 0.2])
@pytest.mark.parametrize("path", [None, DisturbanceFeedforward("(2 s + 1)/(5 s + 1)")])
def test_every_way_through_the_blocks(actuator: float, sensor: float, path: DisturbanceFeedforward | None) -> None:
    """At a whole number of steps, each pulse response is that of the blocks in series, behind one hold."""
    whole = sheet("(s + 3)/(s + 1)", Controller(sample_time=0.1, disturbance_feedforward=path), Trial(1.0))
    whole = replace(whole, actuator=Actuator(actuator), sensor=Sensor(sensor))
    wired = wire(whole, NOMINAL, 1e-5)
    plant, lags = (S + 3) / (S + 1), (1 / (actuator * S + 1), 1 / (sensor * S + 1))
    upset = (2 * S + 1) / (5 * S + 1) if path else plant
    expected = [[plant * lags[0], upset], [plant * lags[0] * lags[1], upset * lags[1]]]
    for row in range(2):
        for column in range(2):
            assert _pulse(wired, row, column) == pytest.approx(expected[row][column], rel=1e-4)


def test_dead_times_of_the_inputs() -> None:
    """The disturbance has the plant's dead time, or that of its own path."""
    whole = sheet("exp(-0.7 s)/(s + 1)", Controller(sample_time=0.1), Trial(1.0))
    assert wire(whole, NOMINAL, 0.1).delay.tolist() == [[7, 7]]
    own = replace(whole.controller, disturbance_feedforward=DisturbanceFeedforward("exp(-0.25 s)/(s + 1)"))
    assert wire(replace(whole, controller=own), NOMINAL, 0.1).delay.tolist() == [[7, 2]]


def test_gains_do_not_wire_anew() -> None:
    """A change of gains finds the family as it was, a change of a lag does not."""
    whole = heater()
    members = family(whole.plant, 3)
    again = replace(whole, controller=whole.controller.with_value("kp", 9.0))
    assert wire(again, members, 0.1) is wire(whole, members, 0.1)
    assert processes(again, members) is processes(whole, members)
    assert wire(replace(whole, actuator=Actuator(9.0)), members, 0.1) is not wire(whole, members, 0.1)
