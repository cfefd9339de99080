"""Plants made from what was typed, and one form made from another."""

import numpy as np
import pytest

from tuner.errors import LoopError
from tuner.model.physics import PHYSICS
from tuner.model.plant import (
    CoefficientPlant,
    ExpressionPlant,
    PhysicsPlant,
    Plant,
    PlantParameter,
    StateSpacePlant,
    ZeroPolePlant,
    spread_percent,
)
from tuner.session.plant_forms import PLANT_FORMS, form_of, start
from tuner.session.plants import converted, made, names_in, with_names, with_physics, with_value
from tuner.simulate.traces import ComplexArray

PLANTS: list[Plant] = [
    ExpressionPlant("2 (3 s - 1) exp(-0.7 s) / ((4 s + 1)(s^2 + 0.4 s + 1))"),
    ExpressionPlant("k / s^2", (PlantParameter("k", 0.3),)),
    CoefficientPlant((1.5, 0.0, 2.0), (1.0, 3.0, 2.0), 0.25),
    ZeroPolePlant((-1 + 2j, -1 - 2j), (-0.5 + 0j, -3 + 1j, -3 - 1j), -4.0),
    StateSpacePlant(((0.0, 1.0), (-2.0, -0.5)), (0.0, 1.0), (1.0, 0.2), 0.5, 1.0),
    start("physics"),
]


@pytest.mark.parametrize("form", [form for form in PLANT_FORMS if form != "physics"])
@pytest.mark.parametrize("plant", PLANTS)
def test_a_converted_plant_answers_alike(plant: Plant, form: str) -> None:
    """Every form of a plant has the frequency response of the one it was made from."""
    s: ComplexArray = np.zeros(25) + 1j * np.logspace(-2, 1, 25)
    other = converted(plant, form)  # type: ignore[arg-type] # the words of the type
    assert form_of(other) == form
    assert made(other).response(s) == pytest.approx(made(plant).response(s), rel=1e-9)


def test_a_formula_is_written_as_one_would() -> None:
    """Powers, signs, ones and zeros are written as by hand."""
    plant = CoefficientPlant((2.0, -1.0), (1.0, 0.0, 0.5, 0.0), 3.0)
    assert converted(plant, "formula") == ExpressionPlant("(2 s - 1) exp(-3 s) / (s^3 + 0.5 s)")
    assert converted(CoefficientPlant((2.0,), (1.0,)), "formula") == ExpressionPlant("2")


def test_no_numbers_make_a_physical_model() -> None:
    """The refusal says what to do instead."""
    with pytest.raises(LoopError, match=r"^a physical model is chosen by name, not found from numbers$"):
        converted(PLANTS[0], "physics")


def test_names_keep_their_numbers() -> None:
    """Known names keep their numbers, new ones begin at 1, and only those with numbers of their own are left over."""
    plant = ExpressionPlant("", (PlantParameter("a", 2.0), PlantParameter("b", 1.0)))
    changed, spare = with_names(plant, (PlantParameter("c", 5.0),), names_in("(c + d) / (s + c)"))
    assert changed.parameters == (PlantParameter("c", 5.0), PlantParameter("d", 1.0))
    assert spare == (PlantParameter("a", 2.0),)


def test_a_spread_in_percent_goes_along() -> None:
    """A spread in percent stays that percentage of another value."""
    parameter = PlantParameter("gain", 2.0, "K/W", spread_percent(2.0, 10.0))
    assert with_value(parameter, 4.0).spread == spread_percent(4.0, 10.0)


def test_another_physical_model_keeps_common_quantities() -> None:
    """Choosing the position of a motor after its speed keeps the motor's numbers."""
    speed, position = (next(name for name in PHYSICS if word in name) for word in ("motor speed", "motor position"))
    before = with_physics(ExpressionPlant("1/s"), speed)
    tuned = PhysicsPlant(speed, (PlantParameter(before.parameters[0].name, 0.9, "N m/A"), *before.parameters[1:]))
    assert with_physics(tuned, position).parameters[0] == tuned.parameters[0]
