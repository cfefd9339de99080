"""The spread of bare numbers is read, written, and its faults are told."""

import pytest

from tuner.errors import SheetError
from tuner.files.sheet import parse, render
from tuner.model.family import family_of
from tuner.model.plant import Spread

SHEET = """sheet = 1
[loop]
title = "Bare numbers"
[plant]
{plant}
[plant.spread]
{spread}
[controller]
sample_time = 0.2
kp = 0.8
[trial]
duration = 60
"""

LAGS = "numerator = [2.0]\ndenominator = [8.0, 6.0, 1.0]\ndead_time = 0.5"
PAIR = "poles = [[-0.3, 0.2], [-0.3, -0.2]]\ngain = 0.26"
STATES = "a = [[-1, 0.1], [0, -0.5]]\nb = [0, 1]\nc = [2.5, 0]"

SOUND = [
    (LAGS, 'gain = "15 %"\ndead_time = [0.3, 1]\ndenominator = ["10 %", "0 %", "0 %"]'),
    (PAIR, 'gain = "15 %"\npoles = ["10 %", "10 %"]'),
    (STATES, 'a = [["10 %", "0 %"], ["0 %", [-0.6, -0.4]]]\nc = ["5 %", "0 %"]'),
]


@pytest.mark.parametrize(("plant", "spread"), SOUND)
def test_a_spread_comes_back_as_written(plant: str, spread: str) -> None:
    """A sheet that was not changed is written as it was, and one made anew says the same."""
    text = SHEET.format(plant=plant, spread=spread)
    sheet = parse(text)
    assert render(sheet, text) == text
    assert parse(render(sheet)) == sheet


def test_the_spreads_are_those_written() -> None:
    """Names and ranges of what drifts."""
    sheet = parse(SHEET.format(plant=LAGS, spread=SOUND[0][1]))
    found = {one.name: one.spread for one in sheet.plant.parameters}
    assert found == {
        "gain": Spread(0.85, 1.15, 15.0),
        "dead time": Spread(0.3, 1.0),
        "denominator 1": Spread(7.2, 8.8, 10.0),
    }
    assert family_of(sheet)[1].name == "gain 0.85, dead time 0.3, denominator 1 7.2"


@pytest.mark.parametrize(
    ("plant", "spread", "sentence"),
    [
        (LAGS, 'poles = ["5 %"]', "plant.spread.poles: expected a number that the plant is given by, found none of"),
        (LAGS, 'numerator = ["5 %", "5 %"]', "plant.spread.numerator: expected 1 spread, one for each number of"),
        (LAGS, "dead_time = [0.6, 1]", "plant.spread.dead_time: expected a range that contains the value 0.5, found"),
        (STATES, 'a = [["5 %", "5 %"], ["5 %", "0 %"]]', "plant.spread.a: expected [low, high] for a value of 0, fou"),
        ('expression = "1/(s+1)"', 'gain = "5 %"', "plant.spread: expected only keys that go with expression, found"),
        (LAGS, 'gian = "5 %"', "plant.spread.gian"),
    ],
)
def test_faults_are_told(plant: str, spread: str, sentence: str) -> None:
    """One sentence for each, with the key."""
    with pytest.raises(SheetError) as raised:
        parse(SHEET.format(plant=plant, spread=spread))
    assert sentence in str(raised.value)


@pytest.mark.parametrize(
    ("block", "sentence"),
    [
        ('[actuator]\nspread = "20 %"', "actuator.spread: expected a lag above 0 in [actuator] beside it, found none"),
        ("[sensor]\nlag = 1\nspread = [0, 2]", "sensor.spread: expected a range of lags above 0, found 0 at its lower"),
        ("[sensor]\nlag = 1\nspread = [2, 3]", "sensor.spread: expected a range that contains the value 1, found"),
    ],
)
def test_faults_in_the_spread_of_a_lag_are_told(block: str, sentence: str) -> None:
    """The lag must be there, and stay a lag."""
    text = SHEET.format(plant=LAGS, spread='gain = "5 %"') + block + "\n"
    with pytest.raises(SheetError) as raised:
        parse(text)
    assert sentence in str(raised.value)


def test_lags_drift_with_the_plant() -> None:
    """The family has them beside the plant's own parameters, also in words of drift."""
    text = SHEET.format(plant=LAGS, spread='gain = "15 %"') + '[actuator]\nlag = 0.4\nspread = "50 %"\n'
    members = family_of(parse(text))
    assert members[1].values["actuator lag"] == 0.2
    assert members[1].drift == "gain \u221215 %, actuator lag \u221250 %"
    assert {round(member.values["actuator lag"], 9) for member in members} >= {0.2, 0.4, 0.6}
