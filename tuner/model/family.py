"""The plants that a spread makes: nominal, corners, and a seeded Latin hypercube between them."""

from dataclasses import dataclass
from itertools import combinations, cycle, islice, product
from math import prod

import numpy as np

from tuner.model.plant import Plant, PlantParameter

FAMILY_SIZE = 25
"""Plants in a family, unless asked otherwise; a plant without spread is a family of one."""

_SEED = 20260


@dataclass(frozen=True, slots=True)
class Member:
    """One plant of the family.

    Parameters
    ----------
    name : str
        In words: "gain 1.035, delay 6"; "nominal" for the nominal plant.
    values : dict of str to float
        Value of every plant parameter.
    """

    name: str
    values: dict[str, float]


def family(plant: Plant, size: int = FAMILY_SIZE) -> tuple[Member, ...]:
    """Return the family of a plant, the nominal plant first; the same call gives the same family.

    The corners come whole while they fit; then every other one is kept, as a half fraction of the full factorial
    design, until they do (Box, Hunter and Hunter, Statistics for Experimenters; from memory). What is left of `size`
    is filled by a Latin hypercube (McKay, Beckman and Conover, Technometrics 21, 1979; from memory).
    """
    nominal = {parameter.name: parameter.value for parameter in plant.parameters}
    drifting = [parameter for parameter in plant.parameters if _drifts(parameter)]
    if not drifting or size < 2:
        return (Member("nominal", nominal),)
    corners = _corners(len(drifting), size - 1)
    between = _latin_hypercube(len(drifting), size - 1 - len(corners))
    members = [_member(nominal, drifting, unit) for unit in (*corners, *between)]
    return (Member("nominal", nominal), *members)


def _drifts(parameter: PlantParameter) -> bool:
    return parameter.spread is not None and parameter.spread.high > parameter.spread.low


def _corners(count: int, room: int) -> list[tuple[float, ...]]:
    """Return corners of the unit cube, at most `room`: 2^(count-p) of them, the last p signs products of the rest."""
    free = count
    while 2**free > room and free > 1:
        free -= 1
    base = [tuple(point) for point in product((-1.0, 1.0), repeat=free)]
    return [tuple((1.0 + sign) / 2.0 for sign in _with_generated(point, count)) for point in base][:room]


def _with_generated(signs: tuple[float, ...], count: int) -> tuple[float, ...]:
    """Add the signs of a fractional design: each a product of a different choice of the free signs, largest first."""
    choices = [chosen for size in range(len(signs), 1, -1) for chosen in combinations(signs, size)] or [signs]
    return (*signs, *(prod(chosen) for chosen in islice(cycle(choices), count - len(signs))))


def _latin_hypercube(count: int, size: int) -> list[tuple[float, ...]]:
    """Return `size` points of the unit cube, one in each of `size` slices along every axis."""
    if size <= 0:
        return []
    random = np.random.default_rng(_SEED)
    slices = np.array([random.permutation(size) for _ in range(count)]).T
    points = (slices + random.random((size, count))) / size
    return [tuple(float(x) for x in point) for point in points]


def _member(nominal: dict[str, float], drifting: list[PlantParameter], unit: tuple[float, ...]) -> Member:
    drifted = {p.name: _within(p, share) for p, share in zip(drifting, unit, strict=True)}
    name = ", ".join(f"{key} {value:.4g}" for key, value in drifted.items())
    return Member(name, nominal | drifted)


def _within(parameter: PlantParameter, share: float) -> float:
    spread = parameter.spread
    if spread is None:
        return parameter.value
    return spread.low + share * (spread.high - spread.low)
