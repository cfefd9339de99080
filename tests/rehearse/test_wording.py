"""What is done to a loop, word for word."""

import pytest

from tests.rehearse.loops import oven
from tuner.model.demonstration import (
    Deed,
    SetController,
    SetDisturbance,
    SetEffort,
    SetMode,
    SetNoise,
    SetPlant,
    SetReference,
    Stop,
)
from tuner.rehearse.wording import told


@pytest.mark.parametrize(
    ("deed", "words"),
    [
        (SetController((("kp", 8.0), ("notch.frequency", 2.0))), "controller: kp 8, notch.frequency 2"),
        (SetReference(80.0), "reference 80 degC"),
        (SetReference(80.0, 20.0), "reference to 80 degC over 20 s"),
        (SetDisturbance(-10.0), "disturbance \u221210 %"),
        (SetDisturbance(0.0), "disturbance off"),
        (SetNoise(True), "noise on"),
        (SetNoise(False), "noise off"),
        (SetPlant((("gain", 1.0), ("delay", 6.0))), "plant: gain 1, delay 6"),
        (SetPlant(()), "nominal plant"),
        (SetMode("manual"), "manual mode"),
        (SetEffort(45.0), "effort by hand 45 %"),
        (Stop(), "stop: by hand at the resting effort"),
    ],
)
def test_the_words_of_a_deed(deed: Deed, words: str) -> None:
    """Every deed is named with its numbers and their units."""
    assert told(deed, oven().loop) == words
