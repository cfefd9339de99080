"""Sheets written as text: what is written is read back the same, and a person's text keeps what did not change."""

import tomllib
from dataclasses import replace
from difflib import ndiff
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings

from tests.files.strategies import sheets
from tuner.files.rendering import fresh, merged
from tuner.files.sheet import parse, render
from tuner.model.controller import Controller, Feedforward, Notch
from tuner.model.plant import ExpressionPlant, PlantParameter, Spread, ZeroPolePlant, spread_percent
from tuner.model.sheet import Sheet

HEATER = (Path(__file__).parent / "heater.toml").read_text(encoding="utf-8")
slow = settings(suppress_health_check=[HealthCheck.too_slow], max_examples=60)


def changes(text: str, sheet: Sheet) -> list[str]:
    """Return the lines that writing the sheet over the text takes out and puts in."""
    lines = ndiff(text.splitlines(), render(sheet, text).splitlines())
    return [line.rstrip() for line in lines if line[0] in "+-"]


def with_controller(sheet: Sheet, controller: Controller) -> Sheet:
    """Return a sheet with another controller."""
    return replace(sheet, controller=controller)


@slow
@given(sheets)
def test_a_new_text_says_the_sheet(sheet: Sheet) -> None:
    """Any sheet of any plant form, written anew, is read back equal."""
    assert parse(fresh(sheet)) == sheet


@slow
@given(sheets, sheets)
def test_a_text_written_over_says_the_new_sheet(before: Sheet, after: Sheet) -> None:
    """Any sheet written over the text of any other is read back equal, without starting anew."""
    text = merged(after, render(before))
    assert text is not None
    assert parse(text) == after


@slow
@given(sheets)
def test_a_text_written_over_itself_stays(sheet: Sheet) -> None:
    """Writing a sheet over its own text changes no character."""
    assert render(sheet, render(sheet)) == render(sheet)
