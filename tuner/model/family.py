"""The plants that a spread makes: nominal, corners, and a seeded Latin hypercube between them."""

from dataclasses import dataclass
from itertools import combinations, cycle, islice, product
from math import prod

import numpy as np

from tuner.model.drifts import parameters_of
from tuner.model.plant import FAMILY_SIZE, Plant, PlantParameter, spread_percent
from tuner.model.sheet import Actuator, Sensor, Sheet

NOMINAL = "nominal"
"""Name of the plant that has not drifted."""

ACTUATOR_LAG, SENSOR_LAG = "actuator lag", "sensor lag"
"""Names of what drifts beside the plant; no parameter of a formula can have them."""

_SEED = 20260


@dataclass(frozen=True, slots=True)
class Member:
    """One plant of the family.

    Parameters
    ----------
    name : str
        In words: "gain 1.035, delay 6"; "nominal" for the nominal plant.
    values : dict of str to float
        Value of every plant parameter, and of the lags of actuator and sensor where they drift.
    drift : str
        How far it is from the nominal plant, in words: "gain +15 %, delay +50 %"; empty for the nominal plant.
    """

    name: str
    values: dict[str, float]
    drift: str = ""


def family_of(sheet: Sheet, size: int | None = None) -> tuple[Member, ...]:
    """Return the family of a sheet: its plant with its actuator and its sensor, see `family`.

    Parameters
    ----------
    size : int or None
        Plants, the nominal one included; None for as many as the sheet says.
    """
    lags = (_lag(ACTUATOR_LAG, sheet.actuator), _lag(SENSOR_LAG, sheet.sensor))
    drifting = tuple(lag for lag in lags if lag.spread is not None and lag.value > 0.0)
    return family(sheet.plant, sheet.trial.family_size if size is None else size, drifting)


def _lag(name: str, block: Actuator | Sensor) -> PlantParameter:
    spread = block.spread
    if spread is not None and spread.percent is not None:
        spread = spread_percent(block.lag, spread.percent)
    return PlantParameter(name, block.lag, spread=spread)


def family(plant: Plant, size: int = FAMILY_SIZE, more: tuple[PlantParameter, ...] = ()) -> tuple[Member, ...]:
    """Return the family of a plant, the nominal plant first; the same call gives the same family.

    The corners come whole while they fit; then every other one is kept, as a half fraction of the full factorial
    design, until they do (Box, Hunter and Hunter, Statistics for Experimenters; from memory). What is left of `size`
    is filled by a Latin hypercube (McKay, Beckman and Conover, Technometrics 21, 1979; from memory).
    """
    parameters = (*parameters_of(plant), *more)
    nominal = {parameter.name: parameter.value for parameter in parameters}
    drifting = [parameter for parameter in parameters if _drifts(parameter)]
    if not drifting or size < 2:
        return (Member(NOMINAL, nominal),)
    corners = _corners(len(drifting), size - 1)
    between = _latin_hypercube(len(drifting), size - 1 - len(corners))
    members = [_member(nominal, drifting, unit) for unit in (*corners, *between)]
    return (Member(NOMINAL, nominal), *members)


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
    return Member(
        name, nominal | drifted, ", ".join(_drift(key, nominal[key], value) for key, value in drifted.items())
    )


def _drift(name: str, nominal: float, value: float) -> str:
    """Return how far a parameter has drifted: in percent, or, from a nominal value of 0, as it is."""
    if nominal == 0.0:
        return f"{name} {value:+.3g}"
    return f"{name} {100.0 * (value - nominal) / abs(nominal):+.3g} %".replace("-", "\u2212")


def _within(parameter: PlantParameter, share: float) -> float:
    spread = parameter.spread
    if spread is None:
        return parameter.value
    return spread.low + share * (spread.high - spread.low)
