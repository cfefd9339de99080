"""The numbers of a comparison: sizes, nominal and worst, with the plant; and which is best."""

from dataclasses import replace

import pytest

from tests.compare.loops import mash
from tuner.assess import assess
from tuner.compare.figures import QUANTITIES, Figure, best_of, figures_of
from tuner.compare.structures import structures
from tuner.judge.assessment import Assessment
from tuner.model.sheet import Sheet

BY_NAME = {quantity.name: quantity for quantity in QUANTITIES}


def figures(sheet: Sheet | None) -> dict[str, Figure]:
    """Return the figures of a sheet by name."""
    assert sheet is not None
    return {figure.name: figure for figure in figures_of(assess(sheet))}


def test_sizes_over_the_family() -> None:
    """The size of the error and of the deviation that stays, nominal and worst, and where."""
    forward = structures(mash())[0]
    found = figures(forward.sheet)
    assert list(found) == [quantity.name for quantity in QUANTITIES]
    assert found["steady_state_error"].nominal == pytest.approx(0.0, abs=1e-9)
    assert found["steady_state_error"].worst == pytest.approx(20.0)
    assert found["final_deviation"].nominal == pytest.approx(6.0)
    assert found["final_deviation"].worst == pytest.approx(7.2)
    assert found["final_deviation"].plant == "gain 2.4"
    assert found["gain_margin"] == Figure("gain_margin", None, None, "nominal", "there is no feedback")


def test_the_worst_margin_is_the_smallest() -> None:
    """More is better there."""
    found = figures(mash())["gain_margin"]
    assert found.worst is not None
    assert found.nominal is not None
    assert found.worst < found.nominal
    assert found.plant == "gain 2.4"


def test_an_unstable_plant_is_the_worst() -> None:
    """Its figures do not exist, and the plant that is unstable is named."""
    sheet = mash()
    margin = figures(sheet)["gain_margin"].nominal
    assert margin is not None
    near = replace(sheet.controller, gain_1=2.0 * 0.95 * margin, gain_2=0.5 * 0.95 * margin)
    wild = replace(sheet, controller=near)
    found = figures(wild)["disturbance_peak"]
    assert found.nominal is not None
    assert (found.worst, found.reason) == (None, "it is unstable")
    assert found.plant.startswith("gain 2.")


def test_without_a_disturbance_there_is_no_deviation() -> None:
    """The reason is that of the measure."""
    sheet = mash()
    found: Assessment = assess(replace(sheet, trial=replace(sheet.trial, disturbance=0.0)))
    by_name = {figure.name: figure for figure in figures_of(found)}
    assert by_name["final_deviation"].worst is None
    assert by_name["final_deviation"].reason == by_name["disturbance_peak"].reason != ""


@pytest.mark.parametrize(
    ("name", "values", "best"),
    [
        ("iae_reference", (3.0, 2.0, 2.0), (False, True, True)),
        ("gain_margin", (3.0, 2.0, None), (True, False, False)),
        ("iae_reference", (2.0, 2.0, 2.0), (False, False, False)),
        ("iae_reference", (None, None, None), (False, False, False)),
        ("iae_reference", (2.0, None, 2.0), (True, False, True)),
        ("iae_reference", (2.0,), (False,)),
    ],
)
def test_the_best(name: str, values: tuple[float | None, ...], best: tuple[bool, ...]) -> None:
    """The least or the largest, unless all are alike."""
    assert best_of(BY_NAME[name], values) == best
