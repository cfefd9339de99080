"""Sheets with something wrong in them, and what is said of them."""

from pathlib import Path

import pytest

from tuner.errors import SheetError
from tuner.files.sheet import parse

HEATER = (Path(__file__).parent / "heater.toml").read_text(encoding="utf-8")
EXPRESSION = 'expression = "gain exp(-delay s) / ((lag s + 1)(tail s + 1))"'
_BARE = """sheet = 1
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


def bare(plant: str) -> str:
    """Return a short sheet with these lines for its plant."""
    return _BARE.format(plant=plant)
