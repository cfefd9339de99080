"""The named parameters of a plant: values, spreads, units, and whether formula and names agree."""

import pytest

from tests.files.told import EXPRESSION, bare, edited, sentences
from tuner.errors import SheetError
from tuner.files.sheet import parse

CASES = [
    (
        EXPRESSION,
        'expression = "gain & 2 / (delay lag tail)"',
        "plant.expression, character 6: expected an operator such as + or *, or the end of the formula, found '&'",
    ),
    (
        EXPRESSION,
        'expression = "gain exp(-delay s) / ((lagg s + 1)(tail s + lag))"',
        "plant.expression, character 24: expected a name that has a value in [plant.parameters], found 'lagg'; "
        "the nearest valid name is lag",
    ),
    (
        "tail = 6",
        "tail = 6\nspare = 2",
        "plant.parameters.spare: expected a name that the formula uses, found one it does not use",
    ),
    ("tail = 6", "tail = 6\ns = 2", "plant.parameters: expected a name other than s, exp, sqrt, pi and π, found 's'"),
    (
        "tail = 6",
        "tail = 6\nlag-2 = 2",
        "plant.parameters: expected a name of letters, digits and _ that begins with a letter, found 'lag-2'",
    ),
    (
        '"15 %"',
        '"150 %"',
        "plant.parameters.gain.spread: expected a spread of at most 100 %, or [low, high], found 150 %",
    ),
    (
        "value = 0.9",
        "value = 0",
        "plant.parameters.gain.spread: expected [low, high] for a value of 0, found 15 % of nothing",
    ),
    ("[3, 6]", "[5, 6]", "plant.parameters.delay.spread: expected a range that contains the value 4, found [5, 6]"),
    ("[3, 6]", "[6, 3]", "plant.parameters.delay.spread: expected [low, high], the lower end first, found [6, 3]"),
]


@pytest.mark.parametrize(("old", "new", "said"), CASES)
def test_names_and_spreads_that_are_wrong_are_told(old: str, new: str, said: str) -> None:
    """A formula that its names do not fit, and a spread that does not fit its value, give one sentence."""
    assert sentences(edited((old, new))) == [said]


PLANTS = [
    (
        'physics = "dc motor speed"\nparameters = { inertai = 2 }',
        'plant.parameters.inertai: expected a parameter of the model "dc motor speed", found an unknown one; '
        "the nearest valid name is inertia",
    ),
    (
        'physics = "dc motor speed"\nparameters = { inertia = -2 }',
        "plant.parameters.inertia: expected a number above 0, drift included, found -2",
    ),
    (
        'physics = "dc motor speed"\nparameters = { inductance = { value = 1, spread = [-1, 2] } }',
        "plant.parameters.inductance: expected a number of at least 0, drift included, found -1",
    ),
    (
        'physics = "dc motor speed"\nparameters = { inertia = { value = 2, unit = "g" } }',
        "plant.parameters.inertia.unit: expected 'kg m^2', the unit of this model, found 'g'",
    ),
]


@pytest.mark.parametrize(("plant", "said"), PLANTS)
def test_a_physical_parameter_that_is_wrong_is_told(plant: str, said: str) -> None:
    """A quantity that the model has not, below its bound or in another unit, gives one sentence."""
    assert sentences(bare(plant)) == [said]


def test_a_fault_of_a_formula_has_its_place() -> None:
    """The fault of a formula carries the index of the character, for an editor to show."""
    with pytest.raises(SheetError) as caught:
        parse(edited((EXPRESSION, 'expression = "gain ) 2"')))
    assert [(fault.key, fault.position) for fault in caught.value.faults] == [("plant.expression", 5)]
