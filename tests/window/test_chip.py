"""One chip: what it says of a limit, and how wide it is."""

import pytest
from pytestqt.qtbot import QtBot

from tuner.judge.assessment import LimitResult
from tuner.model.loop import Loop
from tuner.window.chip import Chip, ChipWords, chip_words
from tuner.window.earlier import EarlierWords
from tuner.window.theme import Theme

LOOP = Loop("x", "min")


def test_a_chip_has_value_limit_and_worst_plant() -> None:
    """Units on value and limit, the sense of the limit, and the plant in words."""
    result = LimitResult("settling_time", 90.0, 96.0, "gain 1.04", met=False)
    assert chip_words(result, LOOP, stable=True) == ChipWords(
        "settling time", "96 min", "≤ 90 min", "at gain 1.04", "missed"
    )


@pytest.mark.parametrize(
    ("result", "value", "limit", "standing"),
    [
        (LimitResult("gain_margin", 2.0, float("inf"), "nominal", met=True), "∞", "≥ 2", "met"),
        (LimitResult("overshoot", 8.0, 8.0004, "nominal", met=False), "8.0004 %", "≤ 8 %", "missed"),
        (LimitResult("settling_time", 8.0, None, "nominal", met=False), "—", "≤ 8 min", "unstable"),
        (LimitResult("peak_time", 8.0, None, "nominal", met=True), "none", "≤ 8 min", "met"),
        (LimitResult("damping", 0.5, -0.25, "nominal", met=False), "\u22120.25", "≥ 0.5", "missed"),
        (LimitResult("steady_state_error", 1.0, -2.0, "nominal", met=False), "2 %", "≤ 1 %", "missed"),
    ],
)
def test_values_are_said_honestly(result: LimitResult, value: str, limit: str, standing: str) -> None:
    """Infinity, nothing, signs and sizes, and enough figures to tell a value from its limit."""
    words = chip_words(result, LOOP, stable=False)
    assert (words.value, words.limit, words.standing) == (value, limit, standing)


def test_it_only_ever_widens(theme: Theme, qtbot: QtBot) -> None:
    """For its own words, and for an earlier value where it has room for one; another measure begins anew."""
    words = ChipWords("overshoot", "3.2 %", "≤ 8 %", "at gain +15 %", "met")
    chip = Chip(words, "", theme)
    qtbot.addWidget(chip)
    plain, roomy = chip.width_with(roomy=False), chip.width_with(roomy=True)
    assert plain < roomy
    long = (EarlierWords("found 123.456 degC s of something", ""),)
    chip.show_words(ChipWords("overshoot", "3.2 %", "≤ 8 %", "at gain +15 %", "met", earlier=long), "")
    assert chip.width_with(roomy=False) == plain
    widest = chip.width_with(roomy=True)
    assert widest > roomy
    chip.show_words(words, "")
    assert chip.width_with(roomy=True) == widest
    chip.show_words(ChipWords("damping", "0.3", "≥ 0.2", "at gain +15 %", "met"), "")
    assert chip.width_with(roomy=True) < widest
