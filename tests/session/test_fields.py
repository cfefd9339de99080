"""The keys of a sheet, read and replaced by their paths."""

from dataclasses import replace

from tests.session.sheets import wash_bath
from tuner.files.sheet import parse, render
from tuner.model.controller import Feedforward
from tuner.model.measures import BY_NAME
from tuner.model.parameters import GAIN_KEYS, PARAMETERS, find
from tuner.session.fields import (
    first_notch,
    unit_of,
    value_at,
    with_feedforward,
    with_limit,
    with_notch,
    with_value_at,
    without_limit,
)

HELD = [p.path for p in PARAMETERS if p.section and p.name not in {key for keys in GAIN_KEYS.values() for key in keys}]


def test_every_key_of_the_table_is_held() -> None:
    """Each key of the table, but the gains, is found in the dataclasses and can be put back."""
    sheet = with_feedforward(with_notch(wash_bath(), first_notch(wash_bath())), "static")
    for path in HELD:
        if path.startswith("controller.disturbance_feedforward"):
            continue
        assert with_value_at(sheet, path, value_at(sheet, path)) == sheet


def test_below_an_absent_block_there_is_nothing() -> None:
    """A key of an absent notch has no value."""
    assert value_at(wash_bath(), "controller.notch.depth") is None


def test_the_measurement_filter_is_held_as_a_number() -> None:
    """Its table has one key, and the dataclass one number."""
    changed = with_value_at(wash_bath(), "controller.measurement_filter.time", 2.0)
    assert changed.controller.measurement_filter == 2.0


def test_what_blocks_begin_with_is_accepted() -> None:
    """A new notch and new feedforward of both kinds make a sheet whose file is read."""
    sheet = wash_bath()
    for changed in (
        with_notch(sheet, first_notch(sheet)),
        *(with_feedforward(sheet, k) for k in ("static", "inverse")),
    ):
        assert parse(render(changed)) == changed
    assert with_feedforward(with_feedforward(sheet, "static"), "none") == sheet
    assert with_feedforward(sheet, "static").controller.feedforward == Feedforward("static", gain=0.0)


def test_limits_are_set_in_place_added_and_removed() -> None:
    """A limit changed stays where it was, a new one is the last, a removed one is gone."""
    sheet = with_limit(wash_bath(), "settling_time", 90.0)
    assert with_limit(sheet, "overshoot", 5.0).limits == (("overshoot", 5.0), ("settling_time", 90.0))
    assert without_limit(sheet, "overshoot").limits == (("settling_time", 90.0),)


def test_units_are_the_loops() -> None:
    """Parameters and measures carry the units of the loop, none for a signal without."""
    sheet = wash_bath()
    assert unit_of(find("controller.ki"), sheet) == "%/(degC s)"
    assert unit_of(BY_NAME["iae_reference"], sheet) == "degC s"
    bare = replace(sheet, loop=replace(sheet.loop, controlled=replace(sheet.loop.controlled, unit="")))
    assert unit_of(find("controller.kp"), bare) == "%"
