"""The named parameters of a plant: their values, units and spreads, and whether formula and names agree."""

from collections.abc import Collection, Iterable
from typing import TYPE_CHECKING, Any, Final

from tuner.errors import Fault, FormulaError, nearest
from tuner.files import words
from tuner.files.formula import RESERVED, is_name, parse
from tuner.model.formula import names
from tuner.model.plant import PlantParameter, Spread, spread_percent

if TYPE_CHECKING:
    from tuner.model.physics import PhysicalParameter, PhysicsModel

_TABLE: Final = "plant.parameters"

_SMALL: Final = 1e-9
"""A minimum up to here stands for above zero."""


def formula_names(text: str, key: str, faults: list[Fault]) -> dict[str, int] | None:
    """Return the names in a formula with their positions; None, and a fault, when it cannot be read."""
    try:
        return names(parse(text))
    except FormulaError as error:
        faults.append(Fault(key, error.expected, error.found, position=error.position))
        return None


def told_names(used: dict[str, int], elsewhere: dict[str, int], named: Collection[str]) -> list[Fault]:
    """Tell of names in the formula without a value, and of values that no formula uses."""
    given = set(named)
    unknown = [name for name in used if name not in given]
    idle = [name for name in named if name not in used and name not in elsewhere and is_name(name)]
    return [
        *(missing_name("plant.expression", name, used[name], idle or given) for name in unknown),
        *(Fault(f"{_TABLE}.{name}", "a name that the formula uses", "one it does not use") for name in idle),
    ]


def missing_name(key: str, name: str, position: int, given: Iterable[str]) -> Fault:
    """Tell of a name in a formula that has no value."""
    expected = f"a name that has a value in [{_TABLE}]"
    return Fault(key, expected, words.quoted(name), nearest(name, given), position)


def plant_parameters(table: dict[str, Any], faults: list[Fault]) -> tuple[PlantParameter, ...]:
    """Return the parameters of a table that the schema has passed."""
    return tuple(_parameter(name, entry, faults) for name, entry in table.items() if _is_usable(name, entry, faults))


def _is_usable(name: str, entry: Any, faults: list[Fault]) -> bool:  # noqa: ANN401 - a value of a TOML file
    if not is_name(name):
        expected = f"a name other than {', '.join(RESERVED[:-1])} and {RESERVED[-1]}"
        letters = "a name of letters, digits and _ that begins with a letter"
        reserved = name in RESERVED
        faults.append(Fault(_TABLE, expected if reserved else letters, words.quoted(name)))
        return False
    return not isinstance(entry, dict) or "value" in entry


def _parameter(name: str, entry: Any, faults: list[Fault]) -> PlantParameter:  # noqa: ANN401 - a value of a TOML file
    if not isinstance(entry, dict):
        return PlantParameter(name, float(entry))
    value = float(entry["value"])
    spread = read_spread(f"{_TABLE}.{name}.spread", value, entry["spread"], faults) if "spread" in entry else None
    return PlantParameter(name, value, entry.get("unit", ""), spread)


def read_spread(key: str, value: float, written: str | list[float], faults: list[Fault]) -> Spread:
    """Return a spread as written, adding to the faults what is wrong with it."""
    if isinstance(written, str):
        return _spread_in_percent(key, value, float(written.replace("%", "")), faults)
    low, high = (float(end) for end in written)
    found = f"[{words.number(low)}, {words.number(high)}]"
    if low > high:
        faults.append(Fault(key, "[low, high], the lower end first", found))
    elif not low <= value <= high:
        faults.append(Fault(key, f"a range that contains the value {words.number(value)}", found))
    return Spread(low, high)


def _spread_in_percent(key: str, value: float, percent: float, faults: list[Fault]) -> Spread:
    if percent > 100.0:
        faults.append(Fault(key, "a spread of at most 100 %, or [low, high]", f"{words.number(percent)} %"))
    if value == 0.0 and percent:
        faults.append(Fault(key, "[low, high] for a value of 0", f"{words.number(percent)} % of nothing"))
    return spread_percent(value, percent)


def physical_parameters(
    model: "PhysicsModel", given: tuple[PlantParameter, ...], faults: list[Fault]
) -> tuple[PlantParameter, ...]:
    """Return all parameters of a physical model, in its order: as given, else with their default."""
    known = {parameter.name: parameter for parameter in model.parameters}
    for parameter in given:
        if parameter.name not in known:
            expected = f'a parameter of the model "{model.name}"'
            near = nearest(parameter.name, known)
            faults.append(Fault(f"{_TABLE}.{parameter.name}", expected, "an unknown one", near))
        else:
            faults += _told_physical(known[parameter.name], parameter)
    values = {parameter.name: parameter for parameter in given}
    return tuple(_physical(parameter, values.get(parameter.name)) for parameter in model.parameters)


def _physical(model: "PhysicalParameter", given: PlantParameter | None) -> PlantParameter:
    if given is None:
        return PlantParameter(model.name, model.default, model.unit)
    return PlantParameter(model.name, given.value, model.unit, given.spread)


def _told_physical(model: "PhysicalParameter", given: PlantParameter) -> list[Fault]:
    key = f"{_TABLE}.{model.name}"
    lowest = given.value if given.spread is None else min(given.value, given.spread.low)
    faults = []
    if lowest < model.minimum:
        bound = f"of at least {model.minimum:g}" if model.minimum == 0.0 or model.minimum > _SMALL else "above 0"
        faults.append(Fault(key, f"a number {bound}, drift included", words.number(lowest)))
    if given.unit and given.unit != model.unit:
        faults.append(Fault(f"{key}.unit", f"'{model.unit}', the unit of this model", words.quoted(given.unit)))
    return faults
