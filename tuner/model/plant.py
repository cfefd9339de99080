"""The five ways to say what a plant is, and how far its parameters may drift."""

from dataclasses import dataclass

FAMILY_SIZE = 25
"""Plants in a family, unless asked otherwise; a plant without spread is a family of one."""


@dataclass(frozen=True, slots=True)
class Spread:
    """How far a parameter may drift: `low` and `high`, absolute, and the words in which it was given."""

    low: float
    high: float
    percent: float | None = None


@dataclass(frozen=True, slots=True)
class PlantParameter:
    """A named number of a plant, its unit, and its spread; None when it does not drift."""

    name: str
    value: float
    unit: str = ""
    spread: Spread | None = None


def spread_percent(value: float, percent: float) -> Spread:
    """Return the spread of `percent` to either side of `value`."""
    reach = abs(value) * percent / 100.0
    return Spread(value - reach, value + reach, percent)


@dataclass(frozen=True, slots=True)
class ExpressionPlant:
    """A plant written as a formula in s, with named parameters."""

    expression: str
    parameters: tuple[PlantParameter, ...] = ()


@dataclass(frozen=True, slots=True)
class CoefficientPlant:
    """A plant given by the coefficients of numerator and denominator, highest power first."""

    numerator: tuple[float, ...]
    denominator: tuple[float, ...]
    dead_time: float = 0.0
    parameters: tuple[PlantParameter, ...] = ()


@dataclass(frozen=True, slots=True)
class ZeroPolePlant:
    """A plant given by gain, zeros and poles: gain (s - z1)... / ((s - p1)...), conjugates listed."""

    zeros: tuple[complex, ...]
    poles: tuple[complex, ...]
    gain: float
    dead_time: float = 0.0
    parameters: tuple[PlantParameter, ...] = ()


@dataclass(frozen=True, slots=True)
class StateSpacePlant:
    """A plant given as x' = a x + b u, y = c x + d u; `a` holds rows."""

    a: tuple[tuple[float, ...], ...]
    b: tuple[float, ...]
    c: tuple[float, ...]
    d: float = 0.0
    dead_time: float = 0.0
    parameters: tuple[PlantParameter, ...] = ()


@dataclass(frozen=True, slots=True)
class PhysicsPlant:
    """A plant given by the name of a lumped physical model and its physical parameters."""

    physics: str
    parameters: tuple[PlantParameter, ...] = ()


Plant = ExpressionPlant | CoefficientPlant | ZeroPolePlant | StateSpacePlant | PhysicsPlant
