"""Tunings side by side: the same trial, family and limits for all of them."""

from dataclasses import replace

import pytest

from tests.compare.loops import mash
from tuner.assess import assess
from tuner.compare.tuning_table import Cell, Row, Tuning, TuningTable
from tuner.compare.tunings import compare_tunings, tunings_of
from tuner.footing.classes import Overtaken
from tuner.model.measures import BY_NAME, MEASURES

AS_FOUND = "[controller.as_found]\nkp = 1\nki = 0.1\n"


def rows(table: TuningTable) -> dict[str, Row]:
    """Return the rows by the name of the measure."""
    return {row.measure.name: row for row in table.rows}


def test_as_found_as_left_and_kept() -> None:
    """In this order; as found only where the sheet has it; the present tuning has none beside it."""
    kept = Tuning("A", "kp 3", replace(mash().controller, gain_1=3.0))
    assert [one.name for one in tunings_of(mash(more=AS_FOUND), (kept,))] == ["as found", "as left", "A"]
    assert [one.name for one in tunings_of(mash())] == ["as left"]
    assert tunings_of(mash(more=AS_FOUND))[1].controller.as_found is None


def test_each_column_is_the_assessment_of_its_controller() -> None:
    """The worst of every measure is what `assess` says of a sheet with that controller."""
    sheet = mash(more=AS_FOUND)
    table = compare_tunings(sheet)
    found = sheet.controller.as_found
    assert found is not None
    expected = assess(replace(sheet, controller=found)), assess(sheet)
    for name, row in rows(table).items():
        for cell, assessment in zip(row.cells, expected, strict=True):
            worst = assessment.worst[name].value
            assert cell.value == (abs(worst) if BY_NAME[name].by_size and worst is not None else worst)
            assert cell.plant == assessment.drift_of(assessment.worst[name].plant)


def test_limited_measures_come_first() -> None:
    """In the order of the sheet, then all others; met and missed are told for those alone."""
    table = compare_tunings(mash(more=AS_FOUND))
    assert [row.measure.name for row in table.rows][:2] == ["overshoot", "max_sensitivity"]
    assert len(table.rows) == len(MEASURES)
    found = rows(table)
    assert [cell.met for cell in found["overshoot"].cells] == [True, False]
    assert found["overshoot"].limit == 10.0
    assert [cell.met for cell in found["rise_time"].cells] == [None, None]


def test_the_best_tuning_of_each_measure() -> None:
    """The least, or the largest where more is better; no overshoot at all is best, and of equals none."""
    found = rows(compare_tunings(mash(more=AS_FOUND)))
    assert [cell.best for cell in found["overshoot"].cells] == [True, False]
    assert [cell.best for cell in found["gain_margin"].cells] == [True, False]
    assert [cell.best for cell in found["rise_time"].cells] == [False, True]
    assert [cell.best for cell in found["peak_time"].cells] == [True, False]
    assert [cell.best for cell in found["saturated_share"].cells] == [False, False]


def test_one_tuning_has_no_rival() -> None:
    """Nothing is best of one."""
    assert not any(cell.best for row in compare_tunings(mash()).rows for cell in row.cells)


def test_an_unstable_tuning_has_no_numbers() -> None:
    """Its cells say why, a limit is missed, and the other tuning is best."""
    wild = Tuning("A", "", replace(mash().controller, gain_1=50.0))
    found = rows(compare_tunings(mash(), (wild,)))["overshoot"]
    assert found.cells[1].value is None
    assert found.cells[1].met is False
    assert found.cells[1].reason == "the loop is unstable"
    assert [cell.best for cell in found.cells] == [True, False]


def test_a_tuning_that_cannot_be_computed_says_why() -> None:
    """Its column has a refusal, and its cells are empty."""
    odd = Tuning("A", "", replace(mash().controller, sample_time=1e-9))
    table = compare_tunings(mash(), (odd,))
    assert table.columns[1].assessment is None
    assert table.columns[1].refusal.startswith("It cannot be computed: ")
    assert table.rows[0].cells[1] == Cell(None, reason="it cannot be computed")


def test_what_is_not_wanted_any_more_ends_early() -> None:
    """Asked before each tuning."""
    answers = iter([False, True])
    with pytest.raises(Overtaken):
        compare_tunings(mash(more=AS_FOUND), stop=lambda: next(answers))
