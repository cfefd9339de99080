"""What may drift in a plant that is given by bare numbers: its gain, its dead time, and each of the numbers."""

import re
from collections.abc import Iterator, Mapping
from dataclasses import replace

from tuner.model.plant import (
    CoefficientPlant,
    Plant,
    PlantParameter,
    StateSpacePlant,
    ZeroPolePlant,
    spread_percent,
)

GAIN, DEAD_TIME = "gain", "dead time"
"""Names of what every such plant has. The gain is a factor, 1 at the nominal plant, unless the plant has its own."""

Bare = CoefficientPlant | ZeroPolePlant | StateSpacePlant

_PLACE = re.compile(r"(\w+) (\d+)(?: (\d+))?")


def nominal_numbers(plant: Bare) -> dict[str, float]:
    """Return the nominal value of everything that may drift, by its name: "numerator 2", "a 1 2", "pole 1".

    A zero or a pole drifts by a factor, 1 at the nominal plant; a complex one with its conjugate, under one name.
    """
    gain = plant.gain if isinstance(plant, ZeroPolePlant) else 1.0
    return {GAIN: gain, DEAD_TIME: plant.dead_time} | dict(_numbers(plant))


def _numbers(plant: Bare) -> Iterator[tuple[str, float]]:
    if isinstance(plant, CoefficientPlant):
        for name, values in (("numerator", plant.numerator), ("denominator", plant.denominator)):
            yield from ((f"{name} {index}", value) for index, value in enumerate(values, 1))
    elif isinstance(plant, ZeroPolePlant):
        for name, roots in (("zero", plant.zeros), ("pole", plant.poles)):
            yield from ((f"{name} {index}", 1.0) for index, root in enumerate(roots, 1) if root.imag >= 0.0)
    else:
        for row, values in enumerate(plant.a, 1):
            yield from ((f"a {row} {column}", value) for column, value in enumerate(values, 1))
        for name, vector in (("b", plant.b), ("c", plant.c)):
            yield from ((f"{name} {index}", value) for index, value in enumerate(vector, 1))
        yield "d", plant.d


def parameters_of(plant: Plant) -> tuple[PlantParameter, ...]:
    """Return the parameters of a plant: named ones as they are, bare numbers with the value that the plant has now."""
    if not isinstance(plant, Bare):
        return plant.parameters
    known = nominal_numbers(plant)
    return tuple(_at(known[one.name], one) for one in plant.parameters if one.name in known)


def _at(value: float, parameter: PlantParameter) -> PlantParameter:
    spread = parameter.spread
    if spread is not None and spread.percent is not None:
        spread = spread_percent(value, spread.percent)
    return replace(parameter, value=value, spread=spread)


def drifted(plant: Bare, values: Mapping[str, float]) -> Bare:
    """Return a plant with some of its numbers drifted, by the names of `nominal_numbers`."""
    if not plant.parameters:
        return plant
    dead_time = values.get(DEAD_TIME, plant.dead_time)
    if isinstance(plant, CoefficientPlant):
        factor = values.get(GAIN, 1.0)
        numerator = tuple(factor * value for value in _vector("numerator", plant.numerator, values))
        return CoefficientPlant(numerator, _vector("denominator", plant.denominator, values), dead_time)
    if isinstance(plant, ZeroPolePlant):
        zeros, poles = _roots("zero", plant.zeros, values), _roots("pole", plant.poles, values)
        return ZeroPolePlant(zeros, poles, values.get(GAIN, plant.gain), dead_time)
    factor = values.get(GAIN, 1.0)
    a = tuple(_vector(f"a {row}", numbers, values) for row, numbers in enumerate(plant.a, 1))
    c = tuple(factor * value for value in _vector("c", plant.c, values))
    return StateSpacePlant(a, _vector("b", plant.b, values), c, factor * values.get("d", plant.d), dead_time)


def _vector(name: str, numbers: tuple[float, ...], values: Mapping[str, float]) -> tuple[float, ...]:
    return tuple(values.get(f"{name} {index}", number) for index, number in enumerate(numbers, 1))


def _roots(name: str, roots: tuple[complex, ...], values: Mapping[str, float]) -> tuple[complex, ...]:
    """Return roots scaled, a complex one and its conjugate alike."""
    factors = {root: values.get(f"{name} {index}", 1.0) for index, root in enumerate(roots, 1) if root.imag >= 0.0}
    return tuple(root * factors[root if root.imag >= 0.0 else root.conjugate()] for root in roots)
