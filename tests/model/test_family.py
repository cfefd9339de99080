"""The family of a plant covers the spread: nominal, corners, and points between."""

from itertools import pairwise, product

import pytest

from tuner.model.family import family
from tuner.model.plant import FAMILY_SIZE, CoefficientPlant, ExpressionPlant, PlantParameter, Spread, spread_percent


def plant(count: int) -> ExpressionPlant:
    """Return a plant with so many drifting parameters between 0 and 1, and one that does not drift."""
    drifting = [PlantParameter(f"p{index}", 0.5, "", Spread(0.0, 1.0)) for index in range(count)]
    return ExpressionPlant("fixed/(s + 1)", (*drifting, PlantParameter("fixed", 7.0)))


def corners(count: int, size: int = FAMILY_SIZE) -> list[tuple[float, ...]]:
    """Return the members of that plant's family with every parameter at an end."""
    members = [tuple(member.values[f"p{i}"] for i in range(count)) for member in family(plant(count), size)[1:]]
    return [member for member in members if set(member) <= {0.0, 1.0}]


@pytest.mark.parametrize("count", [1, 2, 3, 4, 5, 8, 12, 20])
def test_a_family_has_its_size_and_its_nominal_plant_first(count: int) -> None:
    """As many plants as asked, the nominal one first, all within the spread, fixed parameters fixed."""
    members = family(plant(count))
    assert len(members) == FAMILY_SIZE
    assert members[0].name == "nominal"
    assert set(members[0].values.values()) == {0.5, 7.0}
    assert all(0.0 <= value <= 1.0 for m in members for name, value in m.values.items() if name != "fixed")
    assert {m.values["fixed"] for m in members} == {7.0}


def test_the_same_plant_has_the_same_family() -> None:
    """Nothing is left to chance between two calls."""
    assert family(plant(5)) == family(plant(5))


@pytest.mark.parametrize("count", [1, 2, 3, 4])
def test_all_corners_come_while_they_fit(count: int) -> None:
    """Up to four drifting parameters, every corner is in the family."""
    assert set(corners(count)) == set(product((0.0, 1.0), repeat=count))


@pytest.mark.parametrize("count", [5, 6, 8, 12, 15])
def test_a_fraction_of_the_corners_is_balanced(count: int) -> None:
    """Each parameter is at either end equally often, and no two always move together or apart."""
    # The property of a two-level fractional design of resolution III or more (Box, Hunter and Hunter).
    columns = list(zip(*corners(count), strict=True))
    assert len(columns[0]) == 16
    assert all(sum(column) == 8 for column in columns)
    for i, first in enumerate(columns):
        assert all(sum(a == b for a, b in zip(first, second, strict=True)) == 8 for second in columns[i + 1 :])


def test_points_between_are_a_latin_hypercube() -> None:
    """Along every axis each slice holds one of the points between the corners."""
    members = family(plant(2))[5:]
    for name in ("p0", "p1"):
        slices = sorted(int(member.values[name] * len(members)) for member in members)
        assert slices == list(range(20))


@pytest.mark.parametrize("size", [0, 1])
def test_a_family_of_one_is_the_nominal_plant(size: int) -> None:
    """Asked for one, or without anything that drifts, the family is the nominal plant."""
    assert [member.name for member in family(plant(3), size)] == ["nominal"]
    assert [member.name for member in family(plant(0))] == ["nominal"]
    assert family(CoefficientPlant((1.0,), (1.0, 1.0)))[0].values == {}


@pytest.mark.parametrize("size", [2, 3, 4, 9])
def test_small_families_have_their_size(size: int) -> None:
    """However few are asked for, so many there are, all different."""
    members = family(plant(3), size)
    assert len(members) == size
    assert len({tuple(member.values.values()) for member in members}) == size


def test_a_member_is_named_in_words() -> None:
    """The name lists what drifts, with four digits."""
    parameters = (PlantParameter("gain", 0.9, "", spread_percent(0.9, 15.0)), PlantParameter("lag", 3.0))
    names = [member.name for member in family(ExpressionPlant("gain/(lag s + 1)", parameters), 3)]
    assert names == ["nominal", "gain 0.765", "gain 1.035"]


def test_a_spread_of_nothing_does_not_drift() -> None:
    """A range of one point adds no plants."""
    parameter = PlantParameter("gain", 2.0, "", Spread(2.0, 2.0))
    assert len(family(ExpressionPlant("gain/s", (parameter,)))) == 1


def test_one_parameter_is_spread_evenly() -> None:
    """With one drifting parameter no gap between neighbours exceeds two slices."""
    values = sorted(member.values["p0"] for member in family(plant(1)))
    assert max(high - low for low, high in pairwise(values)) <= 2.0 / 22.0
