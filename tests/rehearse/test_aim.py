"""The reference: steps, ramps, and a ramp that is sent elsewhere on its way."""

import numpy as np

from tuner.rehearse.aim import Aim

TIMES = np.array([0.0, 5.0, 10.0, 20.0, 30.0])


def test_a_step_is_there_at_once() -> None:
    """Whatever the time."""
    assert Aim(77.0).at(TIMES).tolist() == [77.0] * 5


def test_a_ramp_arrives_exactly() -> None:
    """In a straight line from where it was, then on its target to the last digit."""
    aim = Aim(72.0).towards(80.0, 5.0, 10.0)
    assert aim.at(TIMES).tolist() == [72.0, 72.0, 76.0, 80.0, 80.0]


def test_a_ramp_is_left_where_it_is() -> None:
    """Sent to another target on its way, it goes from the value it has."""
    aim = Aim(72.0).towards(80.0, 5.0, 10.0).towards(70.0, 10.0, 20.0)
    assert aim.at(TIMES).tolist()[2:] == [76.0, 73.0, 70.0]
