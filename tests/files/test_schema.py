"""The schema follows the tables of parameters and measures."""

import pytest
from jsonschema import Draft202012Validator

from tuner.files.schema import expectation, schema
from tuner.model.measures import MEASURES
from tuner.model.parameters import AS_FOUND_KEYS, BLOCKS, PARAMETERS, Kind, Parameter


def test_the_schema_is_one() -> None:
    """The schema itself is right by the rules of JSON Schema."""
    Draft202012Validator.check_schema(schema())


@pytest.mark.parametrize("parameter", PARAMETERS, ids=lambda parameter: parameter.path)
def test_every_parameter_is_in_its_table(parameter: Parameter) -> None:
    """Every parameter stands in the table of its section with its sentence, and is required where it is."""
    table = schema()
    for name in filter(None, parameter.section.split(".")):
        table = table["properties"][name]
    assert table["properties"][parameter.name]["description"] == parameter.sentence
    assert (parameter.name in table["required"]) == parameter.required


def test_every_measure_can_be_limited() -> None:
    """The limits are the measures."""
    assert list(schema()["properties"]["limits"]["properties"]) == [measure.name for measure in MEASURES]


def test_as_found_repeats_the_controller() -> None:
    """The as-found table has the controller's keys and blocks and needs none of them."""
    table = schema()["properties"]["controller"]["properties"]["as_found"]
    assert set(table["properties"]) == {*AS_FOUND_KEYS, *BLOCKS}
    assert table["required"] == []


@pytest.mark.parametrize(
    ("bounds", "words"),
    [
        ({}, "a number"),
        ({"minimum": 0}, "a number of at least 0"),
        ({"minimum": 0, "above_minimum": True}, "a number above 0"),
        ({"minimum": 0, "maximum": 1}, "a number from 0 to 1"),
        ({"minimum": 0, "maximum": 1, "above_minimum": True}, "a number above 0 and at most 1"),
        ({"minimum": 1, "maximum": 1}, "a number, 1"),
    ],
)
def test_bounds_are_said_in_words(bounds: dict[str, float], words: str) -> None:
    """Each kind of range has its words."""
    parameter = Parameter("", "x", "", Kind.NUMBER, "", **bounds)  # type: ignore[arg-type] # names of bounds
    assert expectation(parameter) == words
