"""The keys of a sheet, read and replaced by their paths."""

from dataclasses import replace

from tests.session.sheets import wash_bath
from tuner.files.sheet import parse, render
from tuner.model.controller import DisturbanceFeedforward, Feedforward
from tuner.model.measures import BY_NAME
from tuner.model.parameters import GAIN_KEYS, PARAMETERS, find
from tuner.model.plant import ExpressionPlant
from tuner.session.fields import (
    first_lead_lag,
    first_measurement_filter,
    first_notch,
    first_reference_filter,
    unit_of,
    value_at,
    with_disturbance_feedforward,
    with_feedforward,
    with_lead_lag,
    with_limit,
    with_measurement_filter,
    with_notch,
    with_reference_filter,
    with_value_at,
    without_limit,
)

HELD = [p.path for p in PARAMETERS if p.section and p.name not in {key for keys in GAIN_KEYS.values() for key in keys}]


def test_every_key_of_the_table_is_held() -> None:
    """Each key of the table, but the gains, is found in the dataclasses and can be put back."""
    sheet = with_feedforward(with_notch(wash_bath(), first_notch(wash_bath())), "static")
    sheet = with_reference_filter(with_lead_lag(sheet, first_lead_lag(sheet)), first_reference_filter(sheet))
    sheet = with_disturbance_feedforward(sheet, "1/(s + 1)")
    for path in HELD:
        assert with_value_at(sheet, path, value_at(sheet, path)) == sheet


def test_below_an_absent_block_there_is_nothing() -> None:
    """A key of an absent notch has no value."""
    assert value_at(wash_bath(), "controller.notch.depth") is None


def test_the_measurement_filter_is_held_as_a_number() -> None:
    """Its table has one key, and the dataclass one number."""
    changed = with_value_at(wash_bath(), "controller.measurement_filter.time", 2.0)
    assert changed.controller.measurement_filter == 2.0


def test_what_blocks_begin_with_is_accepted() -> None:
    """New blocks of every kind make a sheet whose file is read."""
    sheet = wash_bath()
    for changed in (
        with_notch(sheet, first_notch(sheet)),
        *(with_feedforward(sheet, k) for k in ("static", "inverse")),
        with_lead_lag(sheet, first_lead_lag(sheet)),
        with_reference_filter(sheet, first_reference_filter(sheet)),
        with_measurement_filter(sheet, first_measurement_filter(sheet)),
    ):
        assert parse(render(changed)) == changed
    assert with_feedforward(with_feedforward(sheet, "static"), "none") == sheet


def test_static_feedforward_begins_with_what_the_plant_needs() -> None:
    """1/G(0) of the nominal plant; nothing for one that integrates."""
    sheet = wash_bath()
    assert with_feedforward(sheet, "static").controller.feedforward == Feedforward("static", gain=1.25)
    level = replace(sheet, plant=ExpressionPlant("1 / s"))
    assert with_feedforward(level, "static").controller.feedforward == Feedforward("static", gain=0.0)


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


def test_another_formula_keeps_what_else_is_known_of_the_disturbance() -> None:
    """Name, unit and kind stay; an empty formula takes the block out."""
    first = with_disturbance_feedforward(wash_bath(), "1/(s + 1)")
    named = with_value_at(first, "controller.disturbance_feedforward.name", "Inflow")
    path = with_disturbance_feedforward(named, "2/(s + 1)").controller.disturbance_feedforward
    assert path == DisturbanceFeedforward("2/(s + 1)", name="Inflow")
    assert with_disturbance_feedforward(named, " ").controller.disturbance_feedforward is None
