"""Final values by hand."""

from math import inf, isnan

import pytest

from tuner.measure.final import StaticGains, family_ends, final_values
from tuner.model.controller import Controller
from tuner.model.family import NOMINAL, Member
from tuner.model.loop import Loop, Manipulated
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial

TRIAL = Trial(duration=1.0, reference=3.0, disturbance=2.0)


@pytest.mark.parametrize(
    ("controller", "static", "reference", "disturbance"),
    [
        (Controller(gain_1=2.0, gain_2=0.1), StaticGains(5.0), 3.0, 0.0),
        (Controller(gain_1=2.0), StaticGains(5.0), 3.0 * 10.0 / 11.0, 2.0 * 5.0 / 11.0),
        (Controller(gain_1=2.0, b=0.5), StaticGains(5.0), 1.5 * 10.0 / 11.0, 2.0 * 5.0 / 11.0),
        (Controller(gain_1=2.0, action="direct"), StaticGains(-5.0), 3.0 * 10.0 / 11.0, 2.0 * -5.0 / 11.0),
        (Controller(gain_1=2.0, b=0.5), StaticGains(inf), 1.5, 1.0),
        (Controller(gain_1=2.0), StaticGains(inf, feedforward=0.1), 3.0 + 0.15, 1.0),
        (Controller(gain_1=2.0, feedback=False), StaticGains(5.0, feedforward=0.1), 1.5, 10.0),
        (Controller(gain_3=2.0), StaticGains(5.0), 0.0, 10.0),
        (Controller(gain_1=2.0), StaticGains(5.0, path=4.0, compensation=-0.8), 3.0 * 10.0 / 11.0, 0.0),
        (Controller(gain_1=2.0), StaticGains(6.0, path=4.0, compensation=-0.8), 3.0 * 12.0 / 13.0, 2.0 * -0.8 / 13.0),
        (Controller(gain_1=2.0), StaticGains(inf, path=4.0), 3.0, 0.0),
    ],
)
def test_final_values(controller: Controller, static: StaticGains, reference: float, disturbance: float) -> None:
    """Integral action, proportional action, either action, integrating plants, feedforward of either kind."""
    found = final_values(controller, TRIAL, static)

    assert (found.reference, found.disturbance) == pytest.approx((reference, disturbance), abs=1e-12)


def test_an_open_integrator_ends_nowhere() -> None:
    """Without feedback an integrating plant has no final value."""
    assert isnan(final_values(Controller(feedback=False), TRIAL, StaticGains(inf)).reference)


def test_a_pole_at_the_origin_ends_nowhere() -> None:
    """A loop gain of -1 at rest divides nothing by zero."""
    assert isnan(final_values(Controller(gain_1=1.0), TRIAL, StaticGains(-1.0)).reference)


@pytest.mark.parametrize(
    ("plant", "low", "bounded"),
    [
        ("1/(s + 1)^2", -1.0, True),
        ("1/(s + 1)^2", None, False),
        ("1/(s(s + 1))", -1.0, False),
        ("2/(s - 1)", -1.0, False),
    ],
    ids=["between limits", "one limit", "integrating", "unstable"],
)
def test_a_stable_plant_between_limits_has_a_bounded_output(plant: str, low: float | None, bounded: bool) -> None:
    """Only limits on either side of the effort, and a plant that is stable by itself, bound the output."""
    loop = Loop("bounded", manipulated=Manipulated(low=low, high=1.0))
    sheet = Sheet(loop, ExpressionPlant(plant), Controller(gain_1=3.0), TRIAL)
    (found,) = family_ends(sheet, [Member(NOMINAL, {})])
    assert found.bounded is bounded
