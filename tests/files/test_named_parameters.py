"""The named parameters of a plant: values, spreads, units, and whether formula and names agree."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.files.told import EXPRESSION, HEATER, bare, edited, sentences
from tuner.errors import Fault, SheetError
from tuner.files.named_parameters import formula_names, physical_parameters, plant_parameters, told_names
from tuner.files.sheet import parse
from tuner.model.physics import PHYSICS, PhysicsModel
from tuner.model.plant import PlantParameter, Spread

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


@pytest.mark.parametrize("written", ['"15%"', '"15 %"', '" 15.0  % "'])
def test_a_spread_in_percent_is_exact(written: str) -> None:
    """However the percentage is spelt, it is the same number, and kept."""
    assert parse(HEATER.replace('"15 %"', written)) == parse(HEATER)


@pytest.mark.parametrize("model", PHYSICS.values(), ids=lambda model: model.name)
def test_physical_parameters_have_defaults_and_units(model: PhysicsModel) -> None:
    """Of a physical model all parameters are there, in its order, those of the sheet with the sheet's numbers."""
    first, *others = model.parameters
    faults: list[Fault] = []
    last = PlantParameter(others[-1].name, 2e6) if others else PlantParameter(first.name, 2e6)
    found = physical_parameters(model, (last,), faults)
    assert [(one.name, one.unit) for one in found] == [(one.name, one.unit) for one in model.parameters]
    defaults = {one.name: one.default for one in model.parameters}
    assert {one.name: one.value for one in found} == defaults | {last.name: 2e6}
    assert faults == []


def test_a_parameter_is_a_number_or_a_table() -> None:
    """A bare number has neither unit nor spread; a table may have both; one without a value makes none."""
    table = {"lag": 3, "gain": {"value": 2, "unit": "K/W", "spread": [1, 4]}, "delay": {"unit": "s"}}
    faults: list[Fault] = []
    assert plant_parameters(table, faults) == (
        PlantParameter("lag", 3.0),
        PlantParameter("gain", 2.0, "K/W", Spread(1.0, 4.0)),
    )
    assert faults == []


@pytest.mark.parametrize("name", ["s", "exp", "2k", "a-b", "", "a²"])
def test_a_name_that_no_formula_reads_is_no_parameter(name: str) -> None:
    """A reserved or impossible name is told once and left out."""
    faults: list[Fault] = []
    assert plant_parameters({name: 1}, faults) == ()
    assert [fault.found for fault in faults] == [f"'{name}'"]


@given(st.floats(-1e9, 1e9), st.floats(0.0, 1e9), st.floats(0.0, 1e9))
def test_a_range_that_holds_its_value_is_taken(value: float, below: float, above: float) -> None:
    """Whatever range holds the value is the spread, without a fault."""
    faults: list[Fault] = []
    table = {"value": value, "spread": [value - below, value + above]}
    (found,) = plant_parameters({"gain": table}, faults)
    assert (found.spread, faults) == (Spread(value - below, value + above), [])


@pytest.mark.parametrize(
    ("value", "spread", "expected", "found"),
    [
        (4.0, [4.0000001, 5], "a range that contains the value 4", "[4.0000001, 5]"),
        (1000000.5, [1, 1000000], "a range that contains the value 1000000.5", "[1, 1000000]"),
        (2.0, "100.5 %", "a spread of at most 100 %, or [low, high]", "100.5 %"),
    ],
)
def test_numbers_in_sentences_have_their_digits(value: float, spread: object, expected: str, found: str) -> None:
    """What was found never reads like what was expected."""
    faults: list[Fault] = []
    plant_parameters({"gain": {"value": value, "spread": spread}}, faults)
    assert faults == [Fault("plant.parameters.gain.spread", expected, found)]


def test_formula_and_names_that_agree_are_silent() -> None:
    """A name may stand in the formula or elsewhere; a name that no formula could read is told as such, not as idle."""
    assert told_names({"gain": 0}, {"rise": 3}, ["gain", "rise", "a-b"]) == []


def test_the_nearest_name_is_an_idle_one() -> None:
    """Of a misspelt name the nearest is sought among those that the formula leaves unused."""
    unknown, idle = told_names({"lag": 0, "lagg": 9}, {}, ["lag", "large"])
    assert (unknown.nearest, unknown.position) == ("large", 9)
    assert idle.key == "plant.parameters.large"


def test_names_of_a_formula_that_cannot_be_read() -> None:
    """There are none, and the fault names the key of the formula."""
    faults: list[Fault] = []
    assert formula_names("1/(s", "a.b", faults) is None
    assert [str(fault) for fault in faults] == ["a.b, character 3: expected a ')' that closes this '(', found none"]
    assert formula_names("k/s", "a.b", faults) == {"k": 0}
