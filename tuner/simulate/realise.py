"""From what a plant is said to be, in any of the five forms, to a linear system."""

import math
from collections.abc import Mapping, Sequence
from functools import lru_cache

import numpy as np

from tuner.errors import LoopError, nearest
from tuner.files.formula import parse
from tuner.model import formula
from tuner.model.drifts import Bare, drifted
from tuner.model.physics import PHYSICS
from tuner.model.plant import CoefficientPlant, ExpressionPlant, PhysicsPlant, Plant, StateSpacePlant, ZeroPolePlant
from tuner.simulate.factored import VARIABLE, Factored, quotient, total
from tuner.simulate.linear import Linear, from_state_space, from_zeros_poles

LARGEST_ORDER = 60
"""Poles that a plant may have."""

_WHOLE = 1e-12

_parsed = lru_cache(maxsize=256)(parse)


def realise(plant: Plant, values: Mapping[str, float]) -> Linear:
    """Return the linear system of a plant with these values of its parameters.

    Nothing cancels: a factor above and below is a mode that the output does not show, and stays.

    Raises
    ------
    LoopError
        With the reason, when there is no such system: improper, zero, dividing by zero, predicting, not finite.
    FormulaError
        When the formula cannot be read.
    """
    return _realised(plant, tuple(values.items()))


def realise_expression(expression: str, values: Mapping[str, float], name: str = "the plant formula") -> Linear:
    """Return the linear system of a formula; `name` is what messages call it. See `realise`."""
    try:
        found = evaluate(_parsed(expression), values)
    except LoopError as error:
        raise LoopError(f"{name}: {error}") from None
    return _linear(found, name)


def evaluate(node: formula.Node, values: Mapping[str, float]) -> Factored:  # noqa: PLR0911 - one way for each kind
    """Return a formula with numbers for its names, as factors.

    Raises
    ------
    LoopError
        With the place and the reason, when a part has no value.
    """
    match node:
        case formula.Number(value):
            return Factored(value)
        case formula.Name():
            return _value(node, values)
        case formula.Sum(terms):
            return _finite(total([evaluate(term, values) for term in terms]), node)
        case formula.Product(factors):
            return _finite(_product([evaluate(factor, values) for factor in factors]), node)
        case formula.Quotient(over, under):
            return _finite(evaluate(over, values).times(_inverse(evaluate(under, values), under)), node)
        case formula.Negative(of):
            return Factored(-1.0).times(evaluate(of, values))
        case formula.Power(base, exponent):
            return _finite(_power(evaluate(base, values), evaluate(exponent, values), node), node)
        case formula.Exponential(argument):
            return _finite(_exponential(evaluate(argument, values), node), node)
        case formula.SquareRoot(argument):
            return _square_root(evaluate(argument, values), node)


@lru_cache(maxsize=512)
def _realised(plant: Plant, items: tuple[tuple[str, float], ...]) -> Linear:
    values = dict(items)
    if isinstance(plant, Bare):
        plant = drifted(plant, values)
    match plant:
        case ExpressionPlant():
            system = realise_expression(plant.expression, values)
        case CoefficientPlant():
            system = _from_coefficients(plant)
        case ZeroPolePlant():
            system = from_zeros_poles(plant.zeros, plant.poles, plant.gain, plant.dead_time)
        case StateSpacePlant():
            a = np.array(plant.a, dtype=float)
            system = from_state_space(a, np.array(plant.b), np.array(plant.c), plant.d, plant.dead_time)
        case PhysicsPlant():
            system = _from_physics(plant.physics, values)
    if system.gain == 0.0:
        raise LoopError("the plant is zero: its output does not follow the effort")
    return system


def _from_coefficients(plant: CoefficientPlant) -> Linear:
    numbers = (*plant.numerator, *plant.denominator)
    if not all(map(math.isfinite, numbers)):
        raise LoopError("the coefficients of a plant must be finite numbers")
    if not any(plant.denominator):
        raise LoopError("the denominator of the plant is zero")
    found = quotient(plant.numerator, plant.denominator)
    return _linear(Factored(found.gain, found.zeros, found.poles, plant.dead_time), "the plant")


def _from_physics(name: str, values: Mapping[str, float]) -> Linear:
    model = PHYSICS.get(name)
    if model is None:
        near = nearest(name, PHYSICS)
        hint = f"; the nearest is {near}" if near else ""
        raise LoopError(f"there is no physical model named {name!r}{hint}")
    defaults = {parameter.name: parameter.default for parameter in model.parameters}
    return realise_expression(model.expression, defaults | dict(values), f"the model {name!r}")


def _linear(found: Factored, name: str) -> Linear:
    over, under = len(found.zeros), len(found.poles)
    if found.dead_time < 0.0:
        raise LoopError(f"{name} predicts by {-found.dead_time:g}: a dead time is exp(-time s), with a minus")
    if over > under:
        raise LoopError(
            f"{name} is improper: its numerator has degree {over}, above the denominator's {under}; "
            "no plant reacts to slopes alone, so a lag is missing"
        )
    if under > LARGEST_ORDER:
        raise LoopError(f"{name} has {under} poles; at most {LARGEST_ORDER} are computed with")
    return from_zeros_poles(found.zeros, found.poles, found.gain, found.dead_time)


def _value(node: formula.Name, values: Mapping[str, float]) -> Factored:
    if node.name == "s":
        return VARIABLE
    if node.name not in values:
        near = nearest(node.name, values)
        hint = f"; the nearest parameter is {near}" if near else ""
        raise LoopError(f"{node.name} at character {node.position + 1} has no value{hint}")
    value = values[node.name]
    if not math.isfinite(value):
        raise LoopError(f"{node.name} at character {node.position + 1} must be a finite number, found {value:g}")
    return Factored(float(value))


def _product(factors: Sequence[Factored]) -> Factored:
    result = Factored(1.0)
    for factor in factors:
        result = result.times(factor)
    return result


def _inverse(under: Factored, node: formula.Node) -> Factored:
    if under.gain == 0.0:
        raise LoopError(f"division by zero{_place(node)}")
    return under.inverse()


def _power(base: Factored, exponent: Factored, node: formula.Power) -> Factored:
    if not exponent.is_constant:
        raise LoopError(f"s stands in an exponent at character {node.position + 1}; only exp(-time s) may hold it")
    if base.is_constant:
        return Factored(_number_power(base.gain, exponent.gain, node))
    whole = round(exponent.gain)
    if abs(exponent.gain - whole) > _WHOLE * max(1.0, abs(whole)):
        raise LoopError(
            f"s to the power {exponent.gain:g} at character {node.position + 1}: only whole powers are used"
        )
    if abs(whole) * max(len(base.zeros), len(base.poles), 1) > 10 * LARGEST_ORDER:
        raise LoopError(f"the power {whole} at character {node.position + 1} is too high")
    return base.power(whole)


def _number_power(base: float, exponent: float, node: formula.Power) -> float:
    try:
        value = base**exponent
    except ZeroDivisionError:
        raise LoopError(f"division by zero at character {node.position + 1}") from None
    except OverflowError:
        value = math.inf
    if isinstance(value, complex):
        raise LoopError(f"{base:g} to the power {exponent:g} at character {node.position + 1} is not a real number")
    return float(value)


def _exponential(argument: Factored, node: formula.Exponential) -> Factored:
    if argument.is_constant:
        return Factored(_exp(argument.gain))
    if argument.poles or argument.dead_time or len(argument.zeros) != 1:
        raise LoopError(
            f"exp(...) at character {node.position + 1} must hold a multiple of s, as in exp(-time s), or a number"
        )
    constant = -argument.gain * argument.zeros[0].real
    return Factored(_exp(constant), dead_time=-argument.gain)


def _exp(value: float) -> float:
    return math.exp(value) if value < 709.0 else math.inf


def _square_root(argument: Factored, node: formula.SquareRoot) -> Factored:
    if not argument.is_constant:
        raise LoopError(f"sqrt(...) at character {node.position + 1} holds s; only numbers have a square root here")
    if argument.gain < 0.0:
        raise LoopError(f"sqrt(...) at character {node.position + 1} of the negative number {argument.gain:g}")
    return Factored(math.sqrt(argument.gain))


def _finite(found: Factored, node: formula.Node) -> Factored:
    numbers = (found.gain, found.dead_time, *map(abs, found.zeros), *map(abs, found.poles))
    if not all(map(math.isfinite, numbers)):
        raise LoopError(f"a number becomes too large to compute with{_place(node)}")
    return found


def _place(node: formula.Node) -> str:
    """Say where a node stands: at the first character below it that is known."""
    position = _position(node)
    return "" if position is None else f" at character {position + 1}"


def _position(node: formula.Node) -> int | None:
    if isinstance(node, formula.Name):
        return node.position
    below = (_position(child) for child in formula.children(node))
    return min((position for position in below if position is not None), default=None)
