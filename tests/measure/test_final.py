"""Final values by hand."""

from math import inf, isnan

import pytest

from tuner.measure.final import final_values
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward
from tuner.model.sheet import Trial

TRIAL = Trial(duration=1.0, reference=3.0, disturbance=2.0)


@pytest.mark.parametrize(
    ("controller", "gain", "reference", "disturbance"),
    [
        (Controller(gain_1=2.0, gain_2=0.1), 5.0, 3.0, 0.0),
        (Controller(gain_1=2.0), 5.0, 3.0 * 10.0 / 11.0, 2.0 * 5.0 / 11.0),
        (Controller(gain_1=2.0, b=0.5), 5.0, 1.5 * 10.0 / 11.0, 2.0 * 5.0 / 11.0),
        (Controller(gain_1=2.0, action="direct"), -5.0, 3.0 * 10.0 / 11.0, 2.0 * -5.0 / 11.0),
        (Controller(gain_1=2.0, b=0.5), inf, 1.5, 1.0),
        (Controller(gain_1=2.0, feedforward=Feedforward("static", gain=0.1)), inf, 3.0 + 0.15, 1.0),
        (Controller(gain_1=2.0, feedback=False, feedforward=Feedforward("static", gain=0.1)), 5.0, 1.5, 10.0),
        (Controller(feedback=False, feedforward=Feedforward("inverse", filter_time=1.0)), 5.0, 3.0, 10.0),
        (Controller(gain_3=2.0), 5.0, 0.0, 10.0),
        (Controller(gain_1=2.0, disturbance_feedforward=DisturbanceFeedforward("1")), 5.0, 3.0 * 10.0 / 11.0, 0.0),
    ],
)
def test_final_values(controller: Controller, gain: float, reference: float, disturbance: float) -> None:
    """Integral action, proportional action, either action, integrating plants, open loops with feedforward."""
    found = final_values(controller, TRIAL, gain)

    assert (found.reference, found.disturbance) == pytest.approx((reference, disturbance))


def test_an_open_integrator_ends_nowhere() -> None:
    """Without feedback an integrating plant has no final value."""
    assert isnan(final_values(Controller(feedback=False), TRIAL, inf).reference)
