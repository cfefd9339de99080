"""Plants and their spreads as data."""

import pytest

from tuner.model.plant import (
    CoefficientPlant,
    ExpressionPlant,
    PhysicsPlant,
    Plant,
    Spread,
    StateSpacePlant,
    ZeroPolePlant,
    spread_percent,
)


@pytest.mark.parametrize(
    ("value", "percent", "spread"),
    [
        (4.0, 25.0, Spread(3.0, 5.0, 25.0)),
        (-4.0, 25.0, Spread(-5.0, -3.0, 25.0)),
        (4.0, 0.0, Spread(4.0, 4.0, 0.0)),
        (0.0, 25.0, Spread(0.0, 0.0, 25.0)),
    ],
)
def test_a_spread_in_percent_reaches_to_either_side(value: float, percent: float, spread: Spread) -> None:
    """The lower end is below the upper one for negative values too, and the percentage is kept."""
    assert spread_percent(value, percent) == spread


@pytest.mark.parametrize(
    "plant",
    [
        ExpressionPlant("1/s"),
        PhysicsPlant("tank level"),
        CoefficientPlant((1.0,), (1.0, 0.0)),
        ZeroPolePlant((), (0j,), 1.0),
        StateSpacePlant(((0.0,),), (1.0,), (1.0,)),
    ],
)
def test_every_form_is_plain_data(plant: Plant) -> None:
    """Whatever its form, a plant has parameters, none by default, and can be a key."""
    assert plant.parameters == ()
    assert {plant: 1}[plant] == 1
