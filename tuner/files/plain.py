"""A sheet as plain tables of what to write: each value beside what its absence would mean."""

from dataclasses import dataclass
from decimal import Decimal
from typing import Final

from tuner.files.drifts import written_drifts
from tuner.files.schema import NONE
from tuner.model.controller import Controller
from tuner.model.drifts import Bare, parameters_of
from tuner.model.parameters import AS_FOUND_KEYS, BLOCKS, GAIN_KEYS, Parameter, in_section
from tuner.model.plant import (
    CoefficientPlant,
    ExpressionPlant,
    PhysicsPlant,
    Plant,
    PlantParameter,
    Spread,
    StateSpacePlant,
    ZeroPolePlant,
    spread_percent,
)
from tuner.model.sheet import Sheet

Value = float | int | str | bool | list["Value"] | None


@dataclass(frozen=True, slots=True)
class Leaf:
    """One value of a sheet.

    Parameters
    ----------
    value : Value
        What the sheet says; None when the key must not be there.
    implied : Value
        What a sheet without the key would say; None when the key must be there.
    shown : bool
        Whether a table made anew shows it although it is implied.
    """

    value: Value
    implied: Value = None
    shown: bool = False


@dataclass(frozen=True, slots=True)
class Inherited:
    """A table that a sheet need not have, for its absence says the same."""

    table: "Tree"


Tree = dict[str, "Leaf | Inherited | Tree"]

_SHOWN: Final = ("form", *{key for keys in GAIN_KEYS.values() for key in keys})


def tree(sheet: Sheet) -> Tree:
    """Return the tables of a sheet, in the order in which a sheet is written."""
    return {
        "sheet": Leaf(1),
        "loop": _section("loop", sheet.loop)
        | {
            "controlled": _section("loop.controlled", sheet.loop.controlled),
            "manipulated": _section("loop.manipulated", sheet.loop.manipulated),
        },
        "plant": _plant(sheet.plant),
        "actuator": _section("actuator", sheet.actuator),
        "sensor": _section("sensor", sheet.sensor),
        "controller": _controller(sheet.controller),
        "trial": _section("trial", sheet.trial),
        "limits": {name: Leaf(bound) for name, bound in sheet.limits},
    }


def _section(section: str, block: object) -> Tree:
    return {p.name: Leaf(_written(block, p), p.default) for p in in_section(section)}


def _written(block: object, parameter: Parameter) -> Value:
    """Return the value of a parameter as a sheet writes it."""
    value: Value | Spread = getattr(block, parameter.name)
    if not isinstance(value, Spread):
        return value
    lag: float = getattr(block, "lag", 0.0)
    return _spread_of(lag, spread_percent(lag, value.percent) if value.percent is not None else value) if lag else None


def _controller(controller: Controller) -> Tree:
    values: Tree = {}
    for parameter in in_section("controller"):
        if not _is_foreign(parameter.name, controller):
            value = controller.form if parameter.name == "form" else controller.value(parameter.name)
            values[parameter.name] = Leaf(value, parameter.default, shown=parameter.name in _SHOWN)
    return values | _blocks(controller) | _as_found(controller)


def _is_foreign(name: str, controller: Controller) -> bool:
    return any(name in keys for keys in GAIN_KEYS.values()) and name not in GAIN_KEYS[controller.form]


def _blocks(controller: Controller) -> dict[str, Tree]:
    return {name: _block(name, block) for name in BLOCKS if (block := getattr(controller, name))}


def _block(name: str, block: object) -> Tree:
    if name == "measurement_filter" and isinstance(block, float):
        return {"time": Leaf(block)}
    return _section(f"controller.{name}", block)


def _as_found(controller: Controller) -> Tree:
    """Return the as-found table; what it leaves out is the controller's, but for gains of another form."""
    found = controller.as_found
    if found is None:
        return {}
    table: Tree = {}
    for key in AS_FOUND_KEYS:
        if not _is_foreign(key, found):
            other_gain = found.form != controller.form and key in GAIN_KEYS[found.form]
            implied = 0.0 if other_gain else _or_none(controller, key)
            table[key] = Leaf(_or_none(found, key), implied, shown=key in _SHOWN)
    return {"as_found": table | _blocks_found(found, controller)}


def _blocks_found(found: Controller, controller: Controller) -> Tree:
    """Return the blocks of the as-found table; those that are the controller's are implied."""
    there, now = _blocks(found), _blocks(controller)
    absent: Tree = {name: Leaf(NONE) for name in now if name not in there}
    return absent | {name: Inherited(block) if block == now.get(name) else block for name, block in there.items()}


def _or_none(controller: Controller, key: str) -> Value:
    value: Value = controller.form if key == "form" else controller.value(key)
    return NONE if value is None else value


def _plant(plant: Plant) -> Tree:
    dead_time: Tree = {"dead_time": Leaf(getattr(plant, "dead_time", None), 0.0)}
    match plant:
        case ExpressionPlant(expression, parameters):
            return {"expression": Leaf(expression), "parameters": _parameters(parameters)}
        case PhysicsPlant(physics, parameters):
            return {"physics": Leaf(physics), "parameters": _physical(physics, parameters)}
        case CoefficientPlant(numerator, denominator):
            return {"numerator": Leaf([*numerator]), "denominator": Leaf([*denominator])} | dead_time | _drifts(plant)
        case ZeroPolePlant(zeros, poles, gain):
            roots: Tree = {"zeros": Leaf(_roots(zeros), []), "poles": Leaf(_roots(poles)), "gain": Leaf(gain)}
            return roots | dead_time | _drifts(plant)
        case StateSpacePlant(a, b, c, d):
            rows: list[Value] = [[*row] for row in a]
            arrays: Tree = {"a": Leaf(rows), "b": Leaf([*b]), "c": Leaf([*c]), "d": Leaf(d, 0.0)}
            return arrays | dead_time | _drifts(plant)


def _drifts(plant: Bare) -> Tree:
    """Return the table of spreads of a plant given by bare numbers."""
    spreads = {one.name: _spread(one) for one in parameters_of(plant)}
    written = written_drifts(plant, spreads)
    return {"spread": {key: Leaf(value) for key, value in written.items()}} if written else {}


def _roots(roots: tuple[complex, ...]) -> list[Value]:
    return [[root.real, root.imag] if root.imag else root.real for root in roots]


def _parameters(parameters: tuple[PlantParameter, ...]) -> Tree:
    return {parameter.name: _parameter(parameter) for parameter in parameters}


def _parameter(parameter: PlantParameter) -> Tree:
    return {"value": Leaf(parameter.value), "unit": Leaf(parameter.unit, ""), "spread": Leaf(_spread(parameter))}


def _spread(parameter: PlantParameter) -> Value:
    return None if parameter.spread is None else _spread_of(parameter.value, parameter.spread)


def _spread_of(value: float, spread: Spread) -> Value:
    percent = spread.percent
    if percent is not None and spread == spread_percent(value, percent):
        return f"{Decimal(str(percent).removesuffix('.0')):f} %"
    return [spread.low, spread.high]


def _physical(physics: str, parameters: tuple[PlantParameter, ...]) -> Tree:
    """Return the physical parameters: what a sheet leaves out has the model's unit and default."""
    from tuner.model.physics import PHYSICS

    models = {parameter.name: parameter for parameter in PHYSICS[physics].parameters}
    return {
        parameter.name: {
            "value": Leaf(parameter.value, models[parameter.name].default, shown=True),
            "unit": Leaf(parameter.unit, models[parameter.name].unit),
            "spread": Leaf(_spread(parameter)),
        }
        for parameter in parameters
    }
