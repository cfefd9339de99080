"""Bare numbers of a plant drift one by one, or all together through the gain."""

from dataclasses import replace

import pytest

from tuner.model.drifts import drifted, nominal_numbers, parameters_of
from tuner.model.family import family
from tuner.model.plant import (
    CoefficientPlant,
    PlantParameter,
    Spread,
    StateSpacePlant,
    ZeroPolePlant,
    spread_percent,
)

LAGS = CoefficientPlant((2.0,), (8.0, 6.0, 1.0), 0.5)
PAIR = ZeroPolePlant((-1.0 + 0j,), (-0.3 + 0.2j, -0.3 - 0.2j), 0.26)
STATES = StateSpacePlant(((-1.0, 0.1), (0.0, -0.5)), (0.0, 1.0), (2.5, 0.0), 0.1)


def test_every_number_has_a_name_and_a_nominal_value() -> None:
    """The gain is a factor unless the plant has its own; roots drift by factors, a pair under one name."""
    assert nominal_numbers(LAGS) == {
        "gain": 1.0, "dead time": 0.5, "numerator 1": 2.0, "denominator 1": 8.0, "denominator 2": 6.0,
        "denominator 3": 1.0,
    }  # fmt: skip
    assert nominal_numbers(PAIR) == {"gain": 0.26, "dead time": 0.0, "zero 1": 1.0, "pole 1": 1.0}
    assert nominal_numbers(STATES)["a 1 2"] == 0.1
    assert nominal_numbers(STATES)["d"] == 0.1


def drifting(plant: CoefficientPlant | ZeroPolePlant | StateSpacePlant, **values: float) -> object:
    """Return a plant with numbers drifted, underscores standing for blanks."""
    named = {name.replace("_", " "): value for name, value in values.items()}
    known = tuple(PlantParameter(name, value) for name, value in named.items())
    return drifted(replace(plant, parameters=known), named)


def test_coefficients_drift() -> None:
    """One coefficient alone, and all of the numerator through the gain."""
    found = drifting(LAGS, gain=1.5, denominator_2=7.0, dead_time=0.7)
    assert found == CoefficientPlant((3.0,), (8.0, 7.0, 1.0), 0.7)


def test_a_complex_pole_drifts_with_its_conjugate() -> None:
    """Both are scaled alike, so that the plant stays real."""
    found = drifting(PAIR, pole_1=2.0, gain=0.3)
    assert found == ZeroPolePlant((-1.0 + 0j,), (-0.6 + 0.4j, -0.6 - 0.4j), 0.3)


def test_a_state_space_drifts_entry_by_entry() -> None:
    """The gain scales the output and the direct term."""
    found = drifting(STATES, a_2_2=-0.4, gain=2.0)
    assert found == StateSpacePlant(((-1.0, 0.1), (0.0, -0.4)), (0.0, 1.0), (5.0, 0.0), 0.2)


def test_a_spread_in_percent_follows_the_number() -> None:
    """After a number was edited its spread is about the new value; a name that is gone is dropped."""
    parameters = (PlantParameter("denominator 1", 4.0, spread=spread_percent(4.0, 10.0)), PlantParameter("zero 9", 1.0))
    plant = CoefficientPlant((2.0,), (8.0, 1.0), parameters=parameters)
    assert parameters_of(plant) == (PlantParameter("denominator 1", 8.0, spread=spread_percent(8.0, 10.0)),)


def test_the_family_of_bare_numbers_holds_corners() -> None:
    """Both ends of every spread are met together."""
    parameters = (
        PlantParameter("gain", 1.0, spread=Spread(0.8, 1.2)),
        PlantParameter("dead time", 0.5, spread=Spread(0.3, 1.0)),
    )
    members = family(CoefficientPlant((2.0,), (8.0, 1.0), 0.5, parameters))
    ends = {(m.values["gain"], m.values["dead time"]) for m in members}
    assert {(0.8, 0.3), (0.8, 1.0), (1.2, 0.3), (1.2, 1.0)} <= ends


@pytest.mark.parametrize("plant", [LAGS, PAIR, STATES])
def test_nothing_drifts_without_a_spread(plant: CoefficientPlant | ZeroPolePlant | StateSpacePlant) -> None:
    """A plant without spreads stays the very same."""
    assert drifted(plant, {"gain": 3.0}) is plant
