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
from tuner.model.plant import CoefficientPlant, ExpressionPlant, PlantParameter, Spread, ZeroPolePlant, spread_percent
from tuner.model.sheet import Sheet
from tuner.places import sample_plants

HEATER = (Path(__file__).parent / "heater.toml").read_text(encoding="utf-8")
BARE = """sheet = 1

[loop]
title = "Bare"

[plant]
numerator = [2]
denominator = [1, 1]

[controller]
sample_time = 0

[trial]
duration = 9
"""
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


def test_an_unchanged_sheet_leaves_its_text() -> None:
    """Comments, order, spacing, spelling of numbers and empty tables stay to the last character."""
    assert render(parse(HEATER), HEATER) == HEATER


def test_a_changed_number_changes_its_line_alone() -> None:
    """A number keeps its comment, and a point where it had one; a whole number stays whole."""
    sheet = parse(HEATER)
    changed = replace(sheet, trial=replace(sheet.trial, reference=7.0, duration=300.0))
    assert changes(HEATER, changed) == [
        "- reference = 5.0                            # step size",
        "+ reference = 7.0                            # step size",
        "- duration = 240",
        "+ duration = 300",
    ]


def test_another_form_renames_the_gains_in_place() -> None:
    """The gains of the new form stand where those of the old one stood."""
    text = BARE.replace("sample_time = 0", "kp = 3.0\n\nki = 0.08  # slow\nkd = 6.0\nsample_time = 0")
    sheet = parse(text)
    rendered = render(with_controller(sheet, sheet.controller.in_form("standard")), text)
    wanted = 'kc = 3.0\n\nti = 37.5  # slow\ntd = 2.0\nsample_time = 0\nform = "standard"'
    assert rendered == text.replace("kp = 3.0\n\nki = 0.08  # slow\nkd = 6.0\nsample_time = 0", wanted)


def text_line(mark: str, key: str) -> str:
    """Return the line of the heater's sheet that begins with a key, marked as a change."""
    return next(mark + line for line in HEATER.splitlines() if line.startswith(key))


def test_a_new_key_stands_after_the_last_of_its_table() -> None:
    """A key that was not there is added before the blank lines and comments that lead to the next table."""
    text = BARE.replace("[controller]", "# the controller:\n[controller]")
    sheet = parse(text)
    assert isinstance(sheet.plant, CoefficientPlant)
    changed = replace(sheet, plant=replace(sheet.plant, dead_time=0.25))
    assert render(changed, text) == text.replace("denominator = [1, 1]\n", "denominator = [1, 1]\ndead_time = 0.25\n")


def test_a_new_block_stands_in_the_controller() -> None:
    """A table that was not there is added behind its parent, before what leads to the next table."""
    text = BARE.replace("[trial]", "# the trial:\n[trial]")
    sheet = parse(text)
    changed = with_controller(sheet, replace(sheet.controller, measurement_filter=0.5))
    block = "sample_time = 0\n\n[controller.measurement_filter]\ntime = 0.5\n"
    assert render(changed, text) == text.replace("sample_time = 0\n", block)


def test_a_removed_key_takes_its_comment_along() -> None:
    """The line goes, and nothing else."""
    sheet = parse(HEATER)
    without = replace(sheet.controller, windup_time=None, as_found=None)
    bare = HEATER.replace("[controller.as_found] ", "# ")
    line = text_line("- ", "windup_time")
    assert changes(bare, with_controller(sheet, without)) == [line]


def test_a_removed_block_keeps_the_comment_that_leads_on() -> None:
    """A comment on its own line before the next table stays when the table above it goes."""
    text = BARE.replace("[trial]", "[controller.notch]\nfrequency = 2\n\n# the trial:\n[trial]")
    sheet = parse(text)
    rendered = render(with_controller(sheet, replace(sheet.controller, notch=None)), text)
    assert rendered == text.replace("frequency = 2\n", "")


def test_another_form_of_plant_replaces_what_the_plant_had() -> None:
    """The keys of the old form and its parameters go, those of the new one come; the comments of the table stay."""
    plant = ZeroPolePlant((), (-1 + 2j, -1 - 2j), 2.5)
    found = changes(HEATER, replace(parse(HEATER), plant=plant))
    assert [line for line in found if line.startswith("+")] == ["+ poles = [[-1, 2], [-1, -2]]", "+ gain = 2.5"]
    assert "- tail = 6" in found


@pytest.mark.parametrize(
    ("parameter", "line"),
    [
        (PlantParameter("lag", 40.0), "lag = 40"),
        (PlantParameter("lag", 40.5), "lag = 40.5"),
        (PlantParameter("lag", 32.0, "s"), 'lag = {value = 32, unit = "s"}'),
        (PlantParameter("lag", 32.0, "", Spread(30.0, 35.5)), "lag = {value = 32, spread = [30, 35.5]}"),
        (PlantParameter("lag", 32.0, "", spread_percent(32.0, 12.5)), 'lag = {value = 32, spread = "12.5 %"}'),
        (PlantParameter("lag", 32.0, "", Spread(30.0, 35.0, 20.0)), "lag = {value = 32, spread = [30, 35]}"),
    ],
)
def test_a_plant_parameter_is_a_number_while_it_can(parameter: PlantParameter, line: str) -> None:
    """A bare number becomes a table when it gets a unit or a spread; a percentage that does not fit is not written."""
    sheet = parse(HEATER)
    assert isinstance(sheet.plant, ExpressionPlant)
    parameters = tuple(parameter if old.name == "lag" else old for old in sheet.plant.parameters)
    found = changes(HEATER, replace(sheet, plant=replace(sheet.plant, parameters=parameters)))
    assert found == ["- lag = 32", f"+ {line}"]


def test_the_as_found_table_holds_what_differs() -> None:
    """Anew it shows form and gains, and of the rest what is not the controller's; what was not there is "none"."""
    sheet = parse(BARE)
    found = replace(sheet.controller, gain_1=2.0)
    left = replace(sheet.controller, gain_1=3.0, windup_time=5.0, notch=Notch(2.0), b=0.5, as_found=found)
    rendered = render(with_controller(sheet, left), BARE)
    wanted = {"form": "parallel", "kp": 2, "ki": 0, "kd": 0, "b": 1, "windup_time": "none", "notch": "none"}
    assert tomllib.loads(rendered)["controller"]["as_found"] == wanted
    assert parse(rendered).controller == left


def test_what_the_as_found_table_leaves_out_is_written_when_the_controller_leaves_it() -> None:
    """A change of the controller does not change the controller found on site."""
    text = BARE.replace("[trial]", "[controller.as_found]\nki = 0.5\n\n[trial]")
    sheet = parse(text)
    changed = with_controller(sheet, replace(sheet.controller, gain_1=9.0, feedforward=Feedforward("static", 2.0)))
    assert parse(render(changed, text)) == changed


STYLES = [
    "sheet = 1\nloop.title = 'A'  # title\nloop.controlled.low = 1\nloop.controlled.resting = 2\n"
    "plant.numerator = [1]\nplant.denominator = [1, 1]\ncontroller.sample_time = 0  # none\ntrial.duration = 9\n",
    "sheet = 1\nloop = { title = 'A' }  # title\nplant = { numerator = [1], denominator = [1, 1] }\n"
    "controller = { sample_time = 0 }  # none\ntrial = { duration = 9 }\n",
    "sheet = 1\n[loop]\ntitle = 'A'  # title\n[loop.controlled]\nresting = 2\n[plant]\nnumerator = [1]\n"
    "denominator = [1, 1]\n[controller]\nsample_time = 0  # none\n[trial]\nduration = 9\n"
    "[controller.notch]\nfrequency = 2\n",
    "sheet = 1\r\n[loop]\r\ntitle = 'A'  # title\r\n[plant]\r\nnumerator = [1]\r\ndenominator = [1, 1]\r\n"
    "[controller]\r\nsample_time = 0  # none\r\n[trial]\r\nduration = 9\r\n",
]


@pytest.mark.parametrize("text", STYLES, ids=["dotted", "inline", "out of order", "Windows"])
def test_every_style_of_toml_keeps_its_comments(text: str) -> None:
    """Dotted keys, inline tables, tables out of order and Windows line ends are written over with comments kept."""
    sheet = parse(text)
    controller = replace(sheet.controller, form="series", gain_1=2.0, windup_time=3.0, measurement_filter=0.5)
    changed = replace(
        sheet, controller=controller, limits=(("overshoot", 5.0),), trial=replace(sheet.trial, duration=8.0)
    )
    rendered = render(changed, text)
    assert parse(rendered) == changed
    assert "# title" in rendered
    assert "# none" in rendered


def test_limits_come_in_the_order_given() -> None:
    """Other limits in another order are written in it, each with its comment."""
    text = BARE + "\n[limits]\novershoot = 8  # of the step\ndamping = 0.4\n"
    changed = replace(parse(text), limits=(("damping", 0.4), ("bandwidth", 2.0), ("overshoot", 8.0)))
    rendered = render(changed, text)
    assert parse(rendered) == changed
    assert rendered.endswith("damping = 0.4\nbandwidth = 2\novershoot = 8  # of the step\n")


def test_physical_parameters_stay_in_the_order_of_the_text() -> None:
    """A physical model knows its parameters by name, so a person may write them in any order and finds it again."""
    text = (sample_plants() / "spindle_speed.toml").read_text(encoding="utf-8")
    sheet = parse(text)
    assert render(sheet, text) == text
    assert list(tomllib.loads(text)["plant"]["parameters"]) != [parameter.name for parameter in sheet.plant.parameters]


@pytest.mark.parametrize("text", ["not TOML", "sheet = 1\nother = 3", "[loop]\n" * 2])
def test_a_text_that_is_no_sheet_is_written_over(text: str) -> None:
    """Whatever stood there, what is written is the sheet."""
    sheet = parse(HEATER)
    assert parse(render(sheet, text)) == sheet


def test_a_new_text_looks_like_this() -> None:
    """A sheet written anew has its tables in the order of the format, signals and spreads within a line."""
    sheet = parse(HEATER.replace("[controller.as_found] ", "# "))
    assert render(sheet).splitlines()[:16] == [
        "sheet = 1",
        "",
        "[loop]",
        'title = "Product heater outlet"',
        'controlled = {name = "Outlet temperature", unit = "degC", low = 0, high = 150, resting = 72}',
        'manipulated = {name = "Steam valve", unit = "%", low = 0, high = 100, resting = 40, rate = 8}',
        "",
        "[plant]",
        'expression = "gain exp(-delay s) / ((lag s + 1)(tail s + 1))"',
        "",
        "[plant.parameters]",
        'gain = {value = 0.9, unit = "degC/%", spread = "15 %"}',
        "delay = {value = 4, spread = [3, 6]}",
        "lag = 32",
        "tail = 6",
        "",
    ]
