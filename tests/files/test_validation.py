"""Keys and values that the schema refuses, each in its sentence."""

import tomllib
from copy import deepcopy

import pytest

from tests.files.told import HEATER, bare, edited, sentences
from tuner.errors import Fault
from tuner.files.validation import dotted, validate

CASES = [
    ("sheet = 1 ", "", "sheet: expected a whole number, 1, found nothing"),
    ("sheet = 1 ", "sheet = 0 ", "sheet: expected a whole number, 1, found 0"),
    (
        "kp = 3.0",
        "kpp = 3.0",
        "controller.kpp: expected a key of [controller], found an unknown one; the nearest valid name is kp",
    ),
    (
        "[limits]",
        "[limit]",
        "limit: expected a key of the sheet, found an unknown one; the nearest valid name is limits",
    ),
    (
        "overshoot = 8",
        "overshot = 8",
        "limits.overshot: expected a measure, found an unknown one; the nearest valid name is overshoot",
    ),
    (
        "overshoot = 8",
        "settling_band = 3",
        "limits.settling_band: expected this key in [trial], found it in [limits]; "
        "the nearest valid name is trial.settling_band",
    ),
    (
        "duration = 240",
        "duration = 240\nlow = 3",
        "trial.low: expected this key in [loop.controlled] or [loop.manipulated], found it in [trial]; "
        "the nearest valid name is loop.controlled.low",
    ),
    (
        "duration = 240",
        'duration = 240\n"a b\\n" = 3',
        "trial.'a b\\n': expected a key of [trial], found an unknown one",
    ),
    ("sample_time = 0.5", "", "controller.sample_time: expected a number of at least 0, found nothing"),
    (
        "sample_time = 0.5",
        "sample_time = '1'",
        "controller.sample_time: expected a number of at least 0, found the text '1'",
    ),
    ("sample_time = 0.5", "sample_time = -1", "controller.sample_time: expected a number of at least 0, found -1"),
    ("sample_time = 0.5", "sample_time = nan", "controller.sample_time: expected a number of at least 0, found nan"),
    ("duration = 240", "duration = inf", "trial.duration: expected a number above 0, found inf"),
    ("duration = 240", "duration = 0", "trial.duration: expected a number above 0, found 0"),
    ("reference = 5.0", "reference = true", "trial.reference: expected a number, found true"),
    (
        "reference = 5.0",
        "reference = 1979-05-27",
        "trial.reference: expected a number, found the date or time 1979-05-27",
    ),
    ("reference = 5.0", "reference = []", "trial.reference: expected a number, found an empty array"),
    (
        "reference = 5.0",
        f"reference = 1{'0' * 400}",
        "trial.reference: expected a number, found a number over 40 digits long",
    ),
    ("feedback = true ", "feedback = 1 ", "controller.feedback: expected true or false, found 1"),
    ('title = "Product heater outlet"', "title = 7", "loop.title: expected a text, found 7"),
    (
        "delay_samples = 0",
        "delay_samples = 0.5",
        "controller.delay_samples: expected a whole number from 0 to 1000, found 0.5",
    ),
    (
        'form = "parallel"',
        'form = "paralel"',
        'controller.form: expected "parallel", "standard" or "series", found the text \'paralel\'; '
        "the nearest valid name is parallel",
    ),
    (
        'time_unit = "s"',
        'time_unit = "ms"',
        'loop.time_unit: expected "s", "min" or "h", found the text \'ms\'; the nearest valid name is s',
    ),
    (
        "[trial]\nreference = 5.0                            # step size\n"
        "disturbance = 10.0                         # step size, at the plant input\nduration = 240",
        "",
        "trial: expected a table [trial], found nothing",
    ),
    ("[limits]", "[[limits]]", "limits: expected a table [limits], found an array of one"),
    (
        "kp = 3.0",
        "kp = -3.0",
        "controller.kp: expected a number of at least 0 (for a plant whose output falls as the effort rises, write "
        'action = "direct"), found -3.0',
    ),
    ("overshoot = 8", "overshoot = -8", "limits.overshoot: expected a number of at least 0, found -8"),
    (
        "[controller.as_found] ",
        "[controller.as_found]\nwindup_time = 0",
        'controller.as_found.windup_time: expected a number above 0, or "none", found 0',
    ),
    (
        "[controller.as_found] ",
        "[controller.as_found]\nwindup_time = { a = 1 }",
        'controller.as_found.windup_time: expected a number above 0, or "none", found a table',
    ),
    ("lag = 32", "lag = { unit = 's' }", "plant.parameters.lag.value: expected a number, found nothing"),
    (
        "value = 4,",
        "value = 4, spred = 3,",
        "plant.parameters.delay.spred: expected a key of [plant.parameters.delay], found an unknown one; "
        "the nearest valid name is spread",
    ),
    (
        "lag = 32",
        "lag = '32'",
        "plant.parameters.lag: expected a number, or { value = .., unit = .., spread = .. }, found the text '32'",
    ),
    (
        '"15 %"',
        '"15"',
        "plant.parameters.gain.spread: expected \"20 %\" or [low, high], found the text '15'",
    ),
    ("[3, 6]", "{ low = 3 }", 'plant.parameters.delay.spread: expected "20 %" or [low, high], found a table'),
    ("[3, 6]", "[3, 6, 7]", 'plant.parameters.delay.spread: expected "20 %" or [low, high], found an array of 3'),
]


@pytest.mark.parametrize(("old", "new", "said"), CASES)
def test_a_key_or_value_that_the_schema_refuses_is_told(old: str, new: str, said: str) -> None:
    """One wrong key or value gives one sentence: where, what was expected, what was found, what is nearest."""
    assert sentences(edited((old, new))) == [said]


PLANTS = [
    (
        "numerator = []\ndenominator = [1]",
        "plant.numerator: expected an array of 1 to 200 numbers, found an empty array",
    ),
    ("numerator = 1\ndenominator = [1]", "plant.numerator: expected an array of 1 to 200 numbers, found 1"),
    ("numerator = [1]\ndenominator = [1, true]", "plant.denominator: expected a number, found true in place 2"),
    (
        "numerator = [1]\ndenominator = [1, 1]\ndead_time = -1",
        "plant.dead_time: expected a number of at least 0, found -1",
    ),
    (
        "poles = [[-1, 2, 3]]\ngain = 1",
        "plant.poles: expected a number, or a complex one as [re, im], found an array of 3 in place 1",
    ),
    (
        "zeros = [{ re = 1 }]\npoles = [-1]\ngain = 1",
        "plant.zeros: expected a number, or a complex one as [re, im], found a table in place 1",
    ),
    ("a = [[1, 'x']]\nb = [1]\nc = [1]", "plant.a: expected a number, found the text 'x' in row 1, place 2"),
    ("a = [1]\nb = [1]\nc = [1]", "plant.a: expected an array of 1 to 200 numbers, found 1 in place 1"),
]


@pytest.mark.parametrize(("plant", "said"), PLANTS)
def test_a_wrong_number_in_an_array_is_told_with_its_place(plant: str, said: str) -> None:
    """Arrays of a plant are told by what is in them, rows and places counted from one."""
    assert sentences(bare(plant)) == [said]


def test_a_right_sheet_is_sound_as_written() -> None:
    """Nothing is told and nothing is dropped; the tables handed in stay as they are."""
    written = tomllib.loads(HEATER)
    written["controller"] = {key: value for key, value in written["controller"].items() if value != {}}
    before = deepcopy(written)
    found = validate(written)
    assert (found.faults, found.sound, written) == ([], before, before)
    assert found.sound is not written


def test_what_is_faulty_is_dropped_from_the_sound_copy() -> None:
    """The faulty values go, their neighbours stay, so that what remains can be checked further."""
    written = tomllib.loads(
        edited(("kp = 3.0", "kp = -3.0"), ("[3, 6]", "[3, 6, 7]"), ("overshoot = 8", "overshot = 8"))
    )
    sound = validate(written).sound
    assert "kp" not in sound["controller"]
    assert sound["controller"]["ki"] == 0.08
    assert sound["plant"]["parameters"]["delay"] == {"value": 4}
    assert list(sound["limits"]) == ["settling_time", "max_sensitivity"]


def test_a_table_that_is_none_is_dropped_whole() -> None:
    """A value where a table should be is told once, and what would be in it is not asked for."""
    found = validate(tomllib.loads(HEATER) | {"trial": 3})
    assert [fault.key for fault in found.faults if fault.key.startswith("trial")] == ["trial"]
    assert "trial" not in found.sound


def test_each_fault_is_told_once() -> None:
    """A row with two wrong numbers is two faults, the same fault twice is one."""
    written = tomllib.loads(bare('a = [["x", 1], [1, "x"]]\nb = [1, 2]\nc = [1, 2]'))
    assert [fault.found for fault in validate(written).faults] == [
        "the text 'x' in row 1, place 1",
        "the text 'x' in row 2, place 2",
    ]
    written["controller"]["as_found"] = {"notch": {"depth": 1, "width": 1}}
    (missing,) = [fault for fault in validate(written).faults if "notch" in fault.key]
    assert missing == Fault("controller.as_found.notch.frequency", "a number above 0", "nothing")


@pytest.mark.parametrize("value", [2.0, 2])
def test_a_count_may_be_written_as_a_number(value: float) -> None:
    """A whole number is one, with a point or without."""
    written = tomllib.loads(HEATER)
    assert validate({"controller": written["controller"] | {"delay_samples": value}}).sound["controller"][
        "delay_samples"
    ] == pytest.approx(2)


@pytest.mark.parametrize(
    ("names", "path"),
    [((), ""), (("a",), "a"), (("a", "κ", "b_1"), "a.κ.b_1"), (("a", "b c"), "a.'b c'"), (("a", ""), "a.''")],
)
def test_a_path_is_written_with_dots(names: tuple[str, ...], path: str) -> None:
    """A name that is no plain word stands in quotes."""
    assert dotted(names) == path
