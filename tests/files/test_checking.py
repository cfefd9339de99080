"""A whole sheet checked: all of its faults at once, or the sheet."""

import tomllib

import pytest

from tests.files.told import EXPRESSION, HEATER, bare, edited, sentences
from tuner.files.checking import check
from tuner.files.sheet import parse

CASES = [
    (
        "[controller.disturbance_feedforward] ",
        '[controller.disturbance_feedforward]\nexpression = "2/(lagg s + 1)"',
        "controller.disturbance_feedforward.expression, character 4: expected a name that has a value in "
        "[plant.parameters], found 'lagg'; the nearest valid name is lag",
    ),
]


@pytest.mark.parametrize(("old", "new", "said"), CASES)
def test_a_name_without_value_in_a_disturbance_path_is_told(old: str, new: str, said: str) -> None:
    """The paths of a measured disturbance share the parameters of the plant."""
    assert sentences(edited((old, new))) == [said]


def test_all_faults_are_told_at_once() -> None:
    """Faults of every kind, in keys, values, what must agree, the formula and the names, come together."""
    text = edited(
        ("kp = 3.0", "kpp = 3.0"),
        ("resting = 72", "resting = 151"),
        (EXPRESSION, 'expression = "gain exp(-delay s) / (lag s + 1)"'),
        ("[3, 6]", "[5, 6]"),
        ("duration = 240", "duration = '240'"),
        ("overshoot = 8", "overshot = 8"),
    )
    assert [said.partition(":")[0] for said in sentences(text)] == [
        "controller.kpp",
        "trial.duration",
        "limits.overshot",
        "loop.controlled.resting",
        "plant.parameters.tail",
        "plant.parameters.delay.spread",
    ]


def test_a_right_sheet_comes_without_faults() -> None:
    """The sheet is there when nothing is wrong, and only then."""
    found = check(tomllib.loads(HEATER))
    assert (found.faults, found.sheet) == ([], parse(HEATER))
    wrong = check(tomllib.loads(edited(("kp = 3.0", "kp = -3.0"))))
    assert len(wrong.faults) == 1
    assert wrong.sheet is None


def test_nothing_at_all_lacks_every_table() -> None:
    """Empty tables are told what a sheet must have, without a word on what would be in those tables."""
    assert [fault.key for fault in check({}).faults] == ["sheet", "loop", "plant", "controller", "trial"]


def test_empty_tables_of_the_controller_say_nothing() -> None:
    """An empty block, an empty as-found table and an empty block within it are as good as absent."""
    written = tomllib.loads(HEATER)
    written["controller"]["as_found"] = {"notch": {}}
    found = check(written)
    assert found.sheet == parse(HEATER)
    assert written["controller"]["as_found"] == {"notch": {}}


@pytest.mark.parametrize("value", [3, "x", [], None])
def test_a_controller_or_plant_that_is_no_table_is_told(value: object) -> None:
    """Whatever stands in the place of a table is one fault."""
    found = check(tomllib.loads(HEATER) | {"controller": value, "plant": value})
    assert [fault.key for fault in found.faults] == ["controller", "plant"]


def test_the_disturbance_path_shares_the_names() -> None:
    """A name that only the path uses is not idle; a plant without names has none to share."""
    path = "[controller.disturbance_feedforward]"
    assert check(
        tomllib.loads(edited((path, f'{path}\nexpression = "rise/s"'), ("lag = 32", "lag = 32\nrise = 2")))
    ).sheet
    text = bare("numerator = [1]\ndenominator = [1, 1]") + f'{path}\nexpression = "rise/s"'
    assert sentences(text) == [
        "controller.disturbance_feedforward.expression, character 1: expected a name that has a value in "
        "[plant.parameters], found 'rise'"
    ]


def test_a_path_as_found_is_checked_too() -> None:
    """The path of the controller as found has its own fault, and a formula that cannot be read its place."""
    found = "[controller.as_found]"
    lines = f'{found}\ndisturbance_feedforward = {{ expression = "2/(" }}'
    assert sentences(edited((found, lines))) == [
        "controller.as_found.disturbance_feedforward.expression, character 3: expected a ')' that closes this '(', "
        "found none"
    ]
