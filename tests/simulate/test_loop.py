"""Loops from sheets: what is in the chain, the action's sign, families, and loops that can be evaluated as one."""

import numpy as np
import pytest

from tuner.model.controller import Controller
from tuner.model.family import Member, family
from tuner.model.loop import Loop as LoopTable
from tuner.model.plant import ExpressionPlant, PlantParameter, Spread
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial
from tuner.simulate.frequency import loop_response
from tuner.simulate.linear import from_zeros_poles
from tuner.simulate.loop import ContinuousLoop, SampledLoop, loop_of, loops_around, loops_of, same_shape

PLANT = ExpressionPlant(
    "gain exp(-delay s)/(lag s + 1)",
    (PlantParameter("gain", 2.0, spread=Spread(1.0, 3.0)), PlantParameter("delay", 0.5, spread=Spread(0.2, 1.0)),
     PlantParameter("lag", 4.0)),
)  # fmt: skip
W = np.array([0.01, 0.3, 2.0])


def sheet(controller: Controller) -> Sheet:
    """Return a sheet of our invention with lags at both ends of the plant."""
    return Sheet(LoopTable("invented"), PLANT, controller, Trial(10.0), Actuator(0.3), Sensor(0.7))


def test_the_chain_holds_actuator_plant_and_sensor() -> None:
    """A continuous loop gain is controller times actuator times plant times sensor."""
    loop = loop_of(sheet(Controller(gain_1=3.0)), family(PLANT)[0])
    s = 1j * W
    expected = 3.0 * 2.0 * np.exp(-0.5 * s) / ((4.0 * s + 1.0) * (0.3 * s + 1.0) * (0.7 * s + 1.0))
    assert isinstance(loop, ContinuousLoop)
    assert loop.sample_time == 0.0
    assert loop_response(loop, W) == pytest.approx(expected, rel=1e-12)


def test_a_sampled_loop_holds_its_delays() -> None:
    """Whole samples of dead time and of computing are in the held chain; the rest of a sample is in its inputs."""
    loop = loop_of(sheet(Controller(gain_1=3.0, sample_time=0.2, delay_samples=2)), family(PLANT)[0])
    assert isinstance(loop, SampledLoop)
    assert (loop.sample_time, loop.held.steps, loop.chain.order) == (0.2, 4, 3)
    assert loop_response(loop, W) == pytest.approx(3.0 * loop.held.response(1j * W), rel=1e-10)


@pytest.mark.parametrize("step", [0.0, 0.2])
def test_direct_action_turns_the_sign(step: float) -> None:
    """Under direct action the loop gain has the opposite sign."""
    one, other = (
        loop_of(sheet(Controller(gain_1=1.0, action=action, sample_time=step)), family(PLANT)[0])
        for action in ("reverse", "direct")
    )
    assert loop_response(one, W) == pytest.approx(-loop_response(other, W))


@pytest.mark.parametrize("step", [0.0, 0.2])
def test_an_open_loop_has_no_gain(step: float) -> None:
    """With the feedback off L is zero at every frequency."""
    loop = loop_of(sheet(Controller(gain_1=1.0, feedback=False, sample_time=step)), family(PLANT)[0])
    assert np.all(loop_response(loop, W) == 0.0)


@pytest.mark.parametrize("step", [0.0, 0.2])
def test_a_family_keeps_its_order(step: float) -> None:
    """Loops come back in the order of the members, each as if made alone."""
    made = sheet(Controller(gain_1=1.5, gain_2=0.1, sample_time=step))
    members = family(PLANT, 9)
    for loop, member in zip(loops_of(made, members), members, strict=True):
        assert loop_response(loop, W) == pytest.approx(loop_response(loop_of(made, member), W), rel=1e-12)


def test_the_values_of_a_member_are_used() -> None:
    """The static loop gain follows the member's gain."""
    loop = loop_of(sheet(Controller(gain_1=3.0)), Member("strong", {"gain": 7.0, "delay": 0.0, "lag": 1.0}))
    assert loop_response(loop, np.zeros(1)) == pytest.approx(21.0)


def test_loops_of_one_shape_are_put_together() -> None:
    """Numbers of zeros and poles, the order of the chain, and being closed at all make the shape."""
    chains = [
        from_zeros_poles([], [-1.0], 1.0),
        from_zeros_poles([], [-2.0], 3.0),
        from_zeros_poles([], [-1.0, -2.0], 1.0),
    ]
    loops = loops_around(Controller(gain_1=1.0), chains)
    assert same_shape(loops) == [[0, 1], [2]]
    assert same_shape([loops[0], *loops_around(Controller(), chains[:1])]) == [[0], [1]]
