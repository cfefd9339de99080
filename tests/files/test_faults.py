"""Every kind of fault in a sheet gives its sentence, word for word."""

from pathlib import Path

import pytest

from tuner.errors import SheetError
from tuner.files.sheet import parse

HEATER = (Path(__file__).parent / "heater.toml").read_text(encoding="utf-8")
EXPRESSION = 'expression = "gain exp(-delay s) / ((lag s + 1)(tail s + 1))"'
OTHER = """sheet = 1
[loop]
title = "Loop"
[plant]
{plant}
[controller]
sample_time = 0
[trial]
duration = 100
"""


def sentences(text: str) -> list[str]:
    """Return what is said of a text that cannot be used."""
    with pytest.raises(SheetError) as caught:
        parse(text)
    return caught.value.sentences()


def edited(*edits: tuple[str, str]) -> str:
    """Return the heater's sheet with some of its text replaced."""
    text = HEATER
    for old, new in edits:
        assert text.count(old) == 1, old
        text = text.replace(old, new)
    return text


CASES = [
    # the whole
    ("sheet = 1 ", "sheet = 2 ", "sheet: expected 1, the newest format that this version of Trimwright reads, found 2"),
    ("sheet = 1 ", "", "sheet: expected a whole number, 1, found nothing"),
    ("sheet = 1 ", "sheet = 0 ", "sheet: expected a whole number, 1, found 0"),
    # unknown and misplaced keys
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
    (
        "kp = 3.0",
        "kc = 3.0",
        "controller.kc: expected the gains of the parallel form: kp, ki, kd, "
        "found a gain of the standard and series forms",
    ),
    (
        "[controller.as_found] ",
        '[controller.as_found]\nform = "series"\nki = 2',
        "controller.as_found.ki: expected the gains of the series form: kc, ti, td, found a gain of the parallel form",
    ),
    # types
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
    # what must agree
    (
        "high = 150",
        "high = -1",
        "loop.controlled.low: expected a number below loop.controlled.high, -1, found 0",
    ),
    (
        "resting = 72",
        "resting = 151",
        "loop.controlled.resting: expected a number of at most loop.controlled.high, 150, found 151",
    ),
    (
        "low = 0, high = 100, resting = 40",
        "low = 10, high = 100",
        "loop.manipulated.resting: expected a number of at least loop.manipulated.low, 10, "
        "found nothing, which means 0",
    ),
    (
        "sample_time = 0.5",
        "sample_time = 300",
        "controller.sample_time: expected at most trial.duration, 240, found 300",
    ),
    (
        "sample_time = 0.5",
        "sample_time = 1e-5",
        "trial.duration: expected at most 5,000,000 samples of controller.sample_time, 1e-05, found 24,000,000",
    ),
    (
        "[controller.notch] ",
        "[controller.notch]\nfrequency = 7",
        "controller.notch.frequency: expected a frequency below pi / sample_time, 6.283, found 7",
    ),
    (
        "[controller.feedforward] ",
        '[controller.feedforward]\nkind = "static"',
        'controller.feedforward.gain: expected a number, for kind = "static", found nothing',
    ),
    (
        "[controller.feedforward] ",
        '[controller.feedforward]\nkind = "inverse"\nfilter_time = 1\ngain = 1',
        'controller.feedforward.gain: expected filter_time alone beside kind = "inverse", found gain',
    ),
    (
        "[controller.disturbance_feedforward] ",
        '[controller.disturbance_feedforward]\nexpression = "2/(lagg s + 1)"',
        "controller.disturbance_feedforward.expression, character 4: expected a name that has a value in "
        "[plant.parameters], found 'lagg'; the nearest valid name is lag",
    ),
    # formula and names
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
    ("[3, 6]", "{ low = 3 }", 'plant.parameters.delay.spread: expected "20 %" or [low, high], found a table'),
    ("[3, 6]", "[3, 6, 7]", 'plant.parameters.delay.spread: expected "20 %" or [low, high], found an array of 3'),
    # forms of the plant
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
def test_a_fault_is_told_in_its_sentence(old: str, new: str, said: str) -> None:
    """One thing wrong in a sheet gives one sentence: where, what was expected, what was found, what is nearest."""
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
        "numerator = [1]\ndenominator = [1, 1]\nparameters = { gain = 2 }",
        "plant.parameters: expected only keys that go with numerator + denominator, found one of another form",
    ),
    ("zeros = []\npoles = [-1]", "plant.gain: expected this key beside zeros + poles + gain, found nothing"),
    ("poles = [-1]\ngain = 0", "plant.gain: expected a number other than 0, found 0"),
    (
        "zeros = [1, 2]\npoles = [-1]\ngain = 1",
        "plant.zeros: expected at most 1 zeros, as many as there are poles, found 2: the plant would be improper",
    ),
    ("poles = [[-1, 2]]\ngain = 1", "plant.poles: expected its conjugate [-1, -2] beside [-1, 2], found none"),
    (
        "poles = [[-1, 2, 3]]\ngain = 1",
        "plant.poles: expected a number, or a complex one as [re, im], found an array of 3 in place 1",
    ),
    (
        "zeros = [{ re = 1 }]\npoles = [-1]\ngain = 1",
        "plant.zeros: expected a number, or a complex one as [re, im], found a table in place 1",
    ),
    ("a = [[1, 2]]\nb = [1]\nc = [1]", "plant.a: expected a square array, 1 by 1, found 2 in row 1"),
    ("a = [[1, 2], [3, 4]]\nb = [1]\nc = [1, 2]", "plant.b: expected 2 numbers, one for each row of a, found 1"),
    ("a = [[1]]\nb = [1]\nc = [1, 2]", "plant.c: expected 1 number, one for each row of a, found 2"),
    ("a = [[1, 'x']]\nb = [1]\nc = [1]", "plant.a: expected a number, found the text 'x' in row 1, place 2"),
    ("a = [1]\nb = [1]\nc = [1]", "plant.a: expected an array of 1 to 200 numbers, found 1 in place 1"),
    ("a = [[1]]\nb = [1]", "plant.c: expected this key beside a + b + c + d, found nothing"),
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
def test_a_fault_of_a_plant_is_told_in_its_sentence(plant: str, said: str) -> None:
    """One thing wrong with the plant, in whichever form it is given, gives one sentence."""
    assert sentences(OTHER.format(plant=plant)) == [said]


def test_an_unknown_physical_model_is_told_with_the_nearest() -> None:
    """The sentence lists the models there are and names the nearest."""
    (said,) = sentences(OTHER.format(plant='physics = "dc motor sped"'))
    assert said.startswith('plant.physics: expected one of "dc motor speed", ')
    assert said.endswith("found 'dc motor sped'; the nearest valid name is dc motor speed")


def test_physical_models_count_in_seconds() -> None:
    """A physical model in SI units asks for the second as time unit."""
    text = OTHER.format(plant='physics = "dc motor speed"').replace("[plant]", 'time_unit = "h"\n[plant]')
    assert sentences(text) == ["loop.time_unit: expected \"s\", the time unit of physical models, found the text 'h'"]


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


def test_the_file_stands_before_each_sentence() -> None:
    """A sentence about a file begins with its name."""
    with pytest.raises(SheetError) as caught:
        parse(edited(("kp = 3.0", "kpp = 3.0"), ("overshoot = 8", "overshot = 8")), "loops/heater.toml")
    assert [said.partition(": ")[0] for said in caught.value.sentences()] == ["loops/heater.toml"] * 2


def test_a_fault_of_a_formula_has_its_place() -> None:
    """The fault of a formula carries the index of the character, for an editor to show."""
    with pytest.raises(SheetError) as caught:
        parse(edited((EXPRESSION, 'expression = "gain ) 2"')))
    assert [(fault.key, fault.position) for fault in caught.value.faults] == [("plant.expression", 5)]


SYNTAX = [
    ("kp 3.0", "line 2, column 4: expected '=' after the key, found 'kp 3.0'"),
    (
        "kp = ",
        'at the end: expected a value: a number, a "text", true, false, an [array] or a { table }, '
        "found the end of the file",
    ),
    ("kp = 3 4", "line 2, column 8: expected the end of the line after the value, found 'kp = 3 4'"),
    ("kp = 3\nkp = 4", "at the end: expected each key once, found the end of the file"),
    ("kp = 3\nkp = 4\n", "line 3, column 7: expected each key once, found 'kp = 4'"),
    ("kp = 'x", "at the end: expected the quote that ends the text, found the end of the file"),
    ("[a\nb = 2", "line 2, column 3: expected ']' after the name of the table, found '[a'"),
    ("[a]\n[a]", "line 3, column 3: expected each table once, found '[a]'"),
    ("a = [1, 2", "at the end: expected ',' or ']' in the array, found the end of the file"),
    ("a = 1e", "line 2, column 6: expected the end of the line after the value, found 'a = 1e'"),
    ("a = { b = 1", "at the end: expected ',' or '}' in the table, found the end of the file"),
    ("= 3", "line 2, column 1: expected a key, a [table] or a comment, found '= 3'"),
    (f"a = 1{'0' * 5000}", "expected TOML that can be read, found numbers too long or tables nested too deep"),
    (f"a = 0x{'f' * 4000}", "expected TOML that can be read, found numbers too long or tables nested too deep"),
    (f"a{'.a' * 3000} = 1", "expected TOML that can be read, found numbers too long or tables nested too deep"),
    (
        f"[limits]\na{'.a' * 900} = 1",
        "expected TOML that can be read, found numbers too long or tables nested too deep",
    ),
    ("# \u2028\nkp 3", "line 3, column 4: expected '=' after the key, found 'kp 3'"),
    (f"a = {'[' * 50000}", "expected TOML that can be read, found numbers too long or tables nested too deep"),
]


@pytest.mark.parametrize(("line", "said"), SYNTAX)
def test_a_text_that_is_no_toml_is_told_by_line_and_column(line: str, said: str) -> None:
    """Where the text stops being TOML is said in words, with the line as it stands."""
    assert sentences(f"sheet = 1\n{line}") == [said]


@pytest.mark.parametrize("text", ["", " \n\t\n"])
def test_an_empty_text_is_told(text: str) -> None:
    """A text with nothing in it gets one sentence rather than one for each key that is missing."""
    assert sentences(text) == ["expected a tuning sheet, found an empty file"]
