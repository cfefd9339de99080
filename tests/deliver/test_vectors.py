"""The samples with known answers that every file carries."""

from dataclasses import replace
from math import isfinite, isinf, isnan

import pytest
from hypothesis import given, settings

from tests.deliver.branches import evaluate, every_way
from tests.deliver.samples import BARE, DYNAMIC, FULL, OPEN, controllers, specification
from tuner.deliver.reference import Before, Flags, Sample
from tuner.deliver.vectors import Spoiled, spoil
from tuner.law import pid
from tuner.law.constants import UNLIMITED
from tuner.law.translate import read
from tuner.model.sheet import Sheet


def test_rows_lead_through_every_branch_of_the_law(monkeypatch: pytest.MonkeyPatch) -> None:
    """With limits in value and rate, each choice in the law goes both ways within the two hundred rows."""
    law = read(pid.law)
    ways: set[tuple[str, bool]] = set()
    monkeypatch.setattr(pid, "law", lambda *arguments: evaluate(law, arguments, ways))
    assert len(specification(FULL).rows) == 200
    assert every_way(law.body) - ways == set()


@given(sheet=controllers())
@settings(max_examples=40)
def test_limits_that_exist_are_touched_and_kept(sheet: Sheet) -> None:
    """Whatever the gains, every row is finite and short, and the limits that exist are reached from inside."""
    made = specification(sheet)
    constants = made.constants
    efforts = [row.outcome.effort - constants.resting_effort for row in made.rows]
    assert all(isfinite(number) for row in made.rows for number in (*row.sample, row.outcome.effort))
    assert all(constants.low - 1e-9 <= effort <= constants.high + 1e-9 for effort in efforts)
    limited = any(row.outcome.flags & Flags.LIMITED for row in made.rows)
    bounded = constants.high < UNLIMITED or constants.low > -UNLIMITED or constants.rate_step < UNLIMITED
    assert limited == bounded


def test_a_rate_faster_than_the_gains_ask_for_is_touched_by_hand() -> None:
    """Without gains only the hand moves the effort, and it moves it further than the rate allows."""
    loop = replace(BARE.loop, manipulated=replace(BARE.loop.manipulated, rate=300.0))
    rows = specification(replace(BARE, loop=loop, controller=replace(BARE.controller, gain_1=0.0))).rows
    assert any(row.outcome.flags & Flags.LIMITED for row in rows)


@pytest.mark.parametrize("rate", [1e12, 1e308])
def test_rows_stay_finite_for_absurd_rates(rate: float) -> None:
    """A rate beyond every measure is left alone rather than reached."""
    loop = replace(BARE.loop, manipulated=replace(BARE.loop.manipulated, rate=rate))
    rows = specification(replace(BARE, loop=loop)).rows
    assert all(isfinite(number) for row in rows for number in (*row.sample, row.outcome.effort))


@pytest.mark.parametrize("gain", [5e-324, 1e-300, 1e-12, 1e12, 1e300])
def test_rows_stay_finite_for_absurd_gains(gain: float) -> None:
    """A gain that is as good as zero asks for no infinite reference, and one without bounds for no infinite effort."""
    rows = specification(replace(FULL, controller=replace(FULL.controller, gain_1=gain))).rows
    assert all(isfinite(number) for row in rows for number in (*row.sample, row.outcome.effort))


@pytest.mark.parametrize("sheet", [FULL, BARE, OPEN, DYNAMIC])
def test_rows_hold_every_switch_and_every_fault(sheet: Sheet) -> None:
    """Manual, automatic, reset, and each kind of unusable number, with the flag raised right then."""
    rows = specification(sheet).rows
    assert {row.sample.before for row in rows} == set(Before)
    unused = set() if sheet is DYNAMIC else {Spoiled.DISTURBANCE_NAN}
    assert {row.spoiled for row in rows} == set(Spoiled) - unused
    assert all(bool(row.outcome.flags & Flags.FAULT) == (row.spoiled != Spoiled.NOTHING) for row in rows)
    assert any(row.outcome.flags & Flags.MANUAL for row in rows)


def test_what_is_spoilt_is_not_finite() -> None:
    """Each kind spoils the one number it names."""
    sample = Sample(Before.NOTHING, 1.0, 2.0, 3.0)
    assert isnan(spoil(sample, Spoiled.MEASUREMENT_NAN).measurement)
    assert isinf(spoil(sample, Spoiled.REFERENCE_INFINITE).reference)
    assert spoil(sample, Spoiled.MEASUREMENT_MINUS_INFINITE).measurement == -float("inf")
    assert isnan(spoil(sample, Spoiled.VALUE_NAN).value)
    assert isnan(spoil(sample, Spoiled.DISTURBANCE_NAN).disturbance)
    assert spoil(sample, Spoiled.NOTHING) == sample
