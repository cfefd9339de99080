"""What actions may set comes from the sheet."""

from dataclasses import replace

from tests.files.told import HEATER
from tuner.files.demonstration_schema import action_rules, top_rules
from tuner.files.sheet import parse
from tuner.model.controller import Feedforward


def test_only_numbers_that_the_controller_has_may_be_set() -> None:
    """The gains of its form, its times and weights, and of its blocks the numbers that are there."""
    sheet = parse(HEATER)
    keys = action_rules(sheet).schema["properties"]["set"]["properties"]
    assert list(keys) == ["kp", "ki", "kd", "filter_time", "b", "c", "windup_time"]
    ahead = replace(sheet.controller, feedforward=Feedforward("inverse", filter_time=3.0), measurement_filter=0.5)
    keys = action_rules(replace(sheet, controller=ahead)).schema["properties"]["set"]["properties"]
    assert list(keys["feedforward"]["properties"]) == ["filter_time"]
    assert list(keys["measurement_filter"]["properties"]) == ["time"]


def test_without_a_sheet_any_key_passes() -> None:
    """Faults of a sheet that cannot be used do not become faults of every action."""
    assert "properties" not in action_rules(None).schema["properties"]["set"]
    assert top_rules().whole == "the demonstration"
