"""Plants made from what was typed: a formula with its parameters, and one form of a plant from another."""

from collections.abc import Iterable
from dataclasses import replace

import numpy as np

from tuner.errors import LoopError
from tuner.model.drifts import parameters_of
from tuner.model.formula import names
from tuner.model.plant import (
    CoefficientPlant,
    ExpressionPlant,
    PhysicsPlant,
    Plant,
    PlantParameter,
    StateSpacePlant,
    ZeroPolePlant,
    spread_percent,
)
from tuner.session.plant_forms import PlantForm
from tuner.session.typed import shown
from tuner.simulate.linear import Linear

_DIGITS = 14


def made(plant: Plant) -> Linear:
    """Return the nominal plant as a linear system.

    Raises
    ------
    TrimwrightError
        When there is no such plant, with the reason.
    """
    from tuner.simulate.realise import realise

    return realise(plant, {parameter.name: parameter.value for parameter in parameters_of(plant)})


def names_in(formula: str) -> tuple[str, ...]:
    """Return the parameter names of a formula in the order of their first use; none for an empty one.

    Raises
    ------
    FormulaError
        When the formula cannot be read.
    """
    from tuner.files.formula import parse

    return tuple(names(parse(formula))) if formula.strip() else ()


def with_names(
    plant: ExpressionPlant, spare: tuple[PlantParameter, ...], used: Iterable[str]
) -> tuple[ExpressionPlant, tuple[PlantParameter, ...]]:
    """Return the plant with the parameters that are used, and those that are left over.

    A name used before gets its numbers again, a new one the value 1. Left over are those with numbers of their own.
    """
    known = {parameter.name: parameter for parameter in (*spare, *plant.parameters)}
    wanted = dict.fromkeys(used)
    parameters = tuple(known.get(name, PlantParameter(name, 1.0)) for name in wanted)
    left = (parameter for name, parameter in known.items() if name not in wanted)
    worth = tuple(parameter for parameter in left if parameter != PlantParameter(parameter.name, 1.0))
    return replace(plant, parameters=parameters), worth


def converted(plant: Plant, form: PlantForm) -> Plant:
    """Return the nominal plant in another form.

    Raises
    ------
    TrimwrightError
        When the plant cannot be made, or has no such form.
    """
    if form == "physics":
        raise LoopError("a physical model is chosen by name, not found from numbers")
    if form == "formula" and isinstance(plant, PhysicsPlant):
        return _as_formula(plant)
    return _from_linear(made(plant), form)


def _from_linear(linear: Linear, form: PlantForm) -> Plant:
    zeros = tuple(_clean_complex(root) for root in linear.zeros)
    poles = tuple(_clean_complex(root) for root in linear.poles)
    gain, dead_time = _clean(linear.gain), _clean(linear.dead_time)
    if form == "zeros and poles":
        return ZeroPolePlant(zeros, poles, gain, dead_time)
    if form == "state space":
        a = tuple(tuple(_clean(x) for x in row) for row in linear.a)
        b, c = (tuple(_clean(x) for x in np.ravel(vector)) for vector in (linear.b, linear.c))
        return StateSpacePlant(a, b, c, _clean(linear.d), dead_time)
    numerator, denominator = _polynomial(zeros, gain), _polynomial(poles, 1.0)
    if form == "coefficients":
        return CoefficientPlant(numerator, denominator, dead_time)
    return ExpressionPlant(_formula(numerator, denominator, dead_time))


def _as_formula(plant: PhysicsPlant) -> ExpressionPlant:
    from tuner.model.physics import PHYSICS

    model = PHYSICS.get(plant.physics)
    if model is None:
        raise LoopError(f"there is no physical model called {plant.physics!r}")
    return ExpressionPlant(model.expression, plant.parameters)


def _polynomial(roots: tuple[complex, ...], gain: float) -> tuple[float, ...]:
    coefficients = np.atleast_1d(np.real(np.poly(np.array(roots, dtype=complex)))) * gain
    return tuple(_clean(float(x)) for x in coefficients)


def _formula(numerator: tuple[float, ...], denominator: tuple[float, ...], dead_time: float) -> str:
    over, under = _sum(numerator), _sum(denominator)
    delay = f" exp(-{shown(dead_time)} s)" if dead_time else ""
    above = f"({over})" if " " in over and (under != "1" or delay) else over
    return f"{above}{delay}" if under == "1" else f"{above}{delay} / ({under})"


def _sum(coefficients: tuple[float, ...]) -> str:
    """Write a polynomial in s as ordinary mathematics."""
    text = ""
    for power, value in zip(range(len(coefficients) - 1, -1, -1), coefficients, strict=True):
        if value:
            sign = (" - " if text else "-") if value < 0 else (" + " if text else "")
            text += sign + _term(abs(value), power)
    return text or "0"


def _term(value: float, power: int) -> str:
    variable = "" if power == 0 else "s" if power == 1 else f"s^{power}"
    if not variable:
        return shown(value)
    return variable if value == 1.0 else f"{shown(value)} {variable}"


def _clean(value: float) -> float:
    return float(f"{float(value):.{_DIGITS}g}")


def _clean_complex(value: complex) -> complex:
    return complex(_clean(value.real), _clean(value.imag))


def with_physics(plant: Plant, name: str) -> PhysicsPlant:
    """Return the physical model of a name; quantities that the present plant has too keep their numbers."""
    from tuner.model.physics import PHYSICS

    named = plant.parameters if isinstance(plant, ExpressionPlant | PhysicsPlant) else ()
    present = {parameter.name: parameter for parameter in named}
    quantities = PHYSICS[name].parameters
    fresh = {one.name: PlantParameter(one.name, one.default, one.unit) for one in quantities}
    return PhysicsPlant(name, tuple(present.get(one, fresh[one]) for one in fresh))


def with_value(parameter: PlantParameter, value: float) -> PlantParameter:
    """Return a parameter with another value; a spread in percent goes along, one in numbers stays."""
    spread = parameter.spread
    if spread is not None and spread.percent is not None:
        spread = spread_percent(value, spread.percent)
    return replace(parameter, value=value, spread=spread)
