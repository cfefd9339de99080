"""The plant of a sheet in each of its five forms, and what is wrong with one in its sentence."""

from typing import Any

import pytest

from tests.files.told import EXPRESSION, bare, edited, sentences
from tuner.errors import Fault
from tuner.files.plants import FORMS, PlantForm, PlantText, check_form, form_of, read_plant
from tuner.model.plant import (
    CoefficientPlant,
    ExpressionPlant,
    PhysicsPlant,
    Plant,
    PlantParameter,
    StateSpacePlant,
    ZeroPolePlant,
)

CASES = [
    (
        EXPRESSION,
        EXPRESSION + "\nnumerator = [1]",
        "plant: expected exactly one of expression | numerator + denominator | zeros + poles + gain | a + b + c + d "
        "| physics, found expression and numerator",
    ),
    (
        EXPRESSION,
        "",
        "plant: expected exactly one of expression | numerator + denominator | zeros + poles + gain | a + b + c + d "
        "| physics, found none of them",
    ),
    (
        EXPRESSION,
        EXPRESSION + "\ndead_time = 4",
        "plant.dead_time: expected the dead time in the formula, as exp(-delay s), found a key of its own",
    ),
]


@pytest.mark.parametrize(("old", "new", "said"), CASES)
def test_a_plant_in_no_form_or_several_is_told(old: str, new: str, said: str) -> None:
    """A plant has exactly one form, and no key of another."""
    assert sentences(edited((old, new))) == [said]


PLANTS = [
    ("numerator = [1]", "plant.denominator: expected this key beside numerator + denominator, found nothing"),
    (
        "numerator = [1, 2, 3]\ndenominator = [0, 1, 2]",
        "plant.numerator: expected at most 2 coefficients, as many as the denominator has, "
        "found 3: the plant would be improper",
    ),
    (
        "numerator = [1]\ndenominator = [0, 0]",
        "plant.denominator: expected at least one number other than 0, found zeros alone",
    ),
    (
        "numerator = [0]\ndenominator = [1]",
        "plant.numerator: expected at least one number other than 0, found zeros alone",
    ),
    ("zeros = []\npoles = [-1]", "plant.gain: expected this key beside zeros + poles + gain, found nothing"),
    ("poles = [-1]\ngain = 0", "plant.gain: expected a number other than 0, found 0"),
    (
        "zeros = [1, 2]\npoles = [-1]\ngain = 1",
        "plant.zeros: expected at most 1 zeros, as many as there are poles, found 2: the plant would be improper",
    ),
    ("poles = [[-1, 2]]\ngain = 1", "plant.poles: expected its conjugate [-1, -2] beside [-1, 2], found none"),
    ("a = [[1, 2]]\nb = [1]\nc = [1]", "plant.a: expected a square array, 1 by 1, found 2 in row 1"),
    ("a = [[1, 2], [3, 4]]\nb = [1]\nc = [1, 2]", "plant.b: expected 2 numbers, one for each row of a, found 1"),
    ("a = [[1]]\nb = [1]\nc = [1, 2]", "plant.c: expected 1 number, one for each row of a, found 2"),
    ("a = [[1]]\nb = [1]", "plant.c: expected this key beside a + b + c + d, found nothing"),
    (
        "numerator = [1]\ndenominator = [1, 1]\nparameters = { gain = 2 }",
        "plant.parameters: expected only keys that go with numerator + denominator, found one of another form",
    ),
]


@pytest.mark.parametrize(("plant", "said"), PLANTS)
def test_a_fault_of_a_plant_is_told_in_its_sentence(plant: str, said: str) -> None:
    """One thing wrong with the plant, in whichever form it is given, gives one sentence."""
    assert sentences(bare(plant)) == [said]


def test_an_unknown_physical_model_is_told_with_the_nearest() -> None:
    """The sentence lists the models there are and names the nearest."""
    (said,) = sentences(bare('physics = "dc motor sped"'))
    assert said.startswith('plant.physics: expected one of "dc motor speed", ')
    assert said.endswith("found 'dc motor sped'; the nearest valid name is dc motor speed")


def made(table: dict[str, Any]) -> tuple[Plant | None, list[str]]:
    """Return the plant of a table that the schema has passed, and what is said of it."""
    faults: list[Fault] = []
    return read_plant(PlantText(table, table, {}), faults), [str(fault) for fault in faults]


@pytest.mark.parametrize(
    ("table", "plant"),
    [
        ({"expression": "k/s", "parameters": {"k": 2}}, ExpressionPlant("k/s", (PlantParameter("k", 2.0),))),
        ({"expression": "1/s", "parameters": {}}, ExpressionPlant("1/s")),
        ({"numerator": [0, 2], "denominator": [1, 3], "parameters": {}}, CoefficientPlant((0.0, 2.0), (1.0, 3.0))),
        ({"poles": [-1], "gain": 2, "dead_time": 3}, ZeroPolePlant((), (-1 + 0j,), 2.0, 3.0)),
        ({"zeros": [[-1, 2], [-1, -2]], "poles": [0, 0], "gain": 1}, ZeroPolePlant((-1 + 2j, -1 - 2j), (0j, 0j), 1.0)),
        ({"a": [[-1]], "b": [1], "c": [2]}, StateSpacePlant(((-1.0,),), (1.0,), (2.0,))),
        (
            {"a": [[-1]], "b": [1], "c": [2], "d": 3, "dead_time": 4},
            StateSpacePlant(((-1.0,),), (1.0,), (2.0,), 3.0, 4.0),
        ),
    ],
)
def test_each_form_makes_its_plant(table: dict[str, Any], plant: Plant) -> None:
    """Numbers become floats and roots complex; what a form may leave out has its default."""
    assert made(table) == (plant, [])


def test_a_physical_model_has_its_parameters() -> None:
    """The name alone makes a physical plant, with every parameter of the model."""
    plant, said = made({"physics": "tank level"})
    assert isinstance(plant, PhysicsPlant)
    assert [one.name for one in plant.parameters] == ["area", "outflow_coefficient", "level"]
    assert said == []


@pytest.mark.parametrize("form", FORMS, ids=lambda form: form.title)
def test_each_form_is_told_by_any_of_its_own_keys(form: PlantForm) -> None:
    """One of its keys is enough to mean the form; the keys it lacks are then told, and no others."""
    for key in form.telling:
        assert form_of({key: 1}) is form
        lacking = [f"plant.{needed}" for needed in form.needed if needed != key]
        assert [fault.key for fault in check_form({key: 1})] == lacking


def test_keys_of_two_forms_mean_none() -> None:
    """A table with keys of several forms, or of none, has no form."""
    assert form_of({"expression": "1/s", "gain": 1}) is None
    assert form_of({"dead_time": 1}) is None


def test_half_a_form_makes_no_plant() -> None:
    """Without all that its form needs there is no plant, and the fault says what is missing."""
    assert made({"numerator": [1]}) == (
        None,
        ["plant.denominator: expected this key beside numerator + denominator, found nothing"],
    )


def test_roots_that_are_nearly_conjugate_are_told_apart() -> None:
    """The sentence has the digits in which the two differ; each of them lacks its own."""
    _, said = made({"poles": [[-1, 2], [-1, -2.0000001]], "gain": 1})
    assert said == [
        "plant.poles: expected its conjugate [-1, -2] beside [-1, 2], found none",
        "plant.poles: expected its conjugate [-1, 2.0000001] beside [-1, -2.0000001], found none",
    ]


def test_a_double_pair_needs_both_conjugates() -> None:
    """Roots are counted: a pair given twice on one side and once on the other is not whole."""
    _, said = made({"poles": [[-1, 2], [-1, 2], [-1, -2]], "gain": 1})
    assert said == ["plant.poles: expected its conjugate [-1, -2] beside [-1, 2], found none"]
    assert made({"poles": [[-1, 2], [-1, -2], [-1, -2], [-1, 2], 3, 3], "gain": 1})[1] == []


def test_leading_zeros_do_not_count() -> None:
    """A numerator is as long as from its first number other than 0 on."""
    assert made({"numerator": [0, 0, 0, 1], "denominator": [1, 1]})[1] == []
