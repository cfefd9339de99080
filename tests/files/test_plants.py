"""The plant of a sheet in each of its five forms, and what is wrong with one in its sentence."""

import pytest

from tests.files.told import EXPRESSION, bare, edited, sentences

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
