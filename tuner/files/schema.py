"""The JSON Schema of the tuning sheet, made from the tables of parameters and measures.

Each schema's `title` says in words what is expected there; the faults of a sheet are told in these words.
"""

from functools import cache
from typing import Any, Final

from tuner.model.measures import MEASURES
from tuner.model.parameters import AS_FOUND_KEYS, BLOCKS, PARAMETERS, Kind, Parameter, find

Schema = dict[str, Any]

MOST_NUMBERS: Final = 200
"""Numbers that an array of a plant may hold."""

NONE: Final = "none"
"""What the as-found table writes for a number or a block of the controller that was not there."""

PERCENT: Final = r"^\s*[0-9]+(\.[0-9]*)?\s*%\s*$"
"""How a spread in percent is written: "20 %"."""

_SIGNED_BY_ACTION: Final = ("kp", "ki", "kd", "kc")


@cache
def schema() -> Schema:
    """Return the schema of a whole sheet."""
    root = _table("a tuning sheet", {})
    for parameter in PARAMETERS:
        _into(root, parameter)
    root["properties"] |= {"plant": _plant(), "limits": _limits()}
    controller = root["properties"]["controller"]
    controller["properties"]["as_found"] = _as_found(controller["properties"])
    root["required"] += ["loop", "plant", "controller", "trial"]
    return root


def value_schema(parameter: Parameter) -> Schema:
    """Return the schema of the value of one parameter."""
    return {"title": expectation(parameter), "description": parameter.sentence} | _rule(parameter)


def expectation(parameter: Parameter) -> str:
    """Say in words which values a parameter takes."""
    if parameter.kind is Kind.CHOICE:
        *others, last = (f'"{choice}"' for choice in parameter.choices)
        return f"{', '.join(others)} or {last}"
    if parameter.name in _SIGNED_BY_ACTION:
        return 'a number of at least 0 (for a plant whose output falls as the effort rises, write action = "direct")'
    return f"{parameter.kind}{_bounds(parameter)}"


def _bounds(parameter: Parameter) -> str:
    low, high = parameter.minimum, parameter.maximum
    if low is None or low == high:
        return "" if low is None else f", {low:g}"
    if parameter.above_minimum:
        return f" above {low:g}" + ("" if high is None else f" and at most {high:g}")
    return f" of at least {low:g}" if high is None else f" from {low:g} to {high:g}"


def _rule(parameter: Parameter) -> Schema:
    types = {Kind.NUMBER: "number", Kind.INTEGER: "integer", Kind.TEXT: "string", Kind.FLAG: "boolean"}
    if parameter.kind is Kind.CHOICE:
        return {"enum": list(parameter.choices)}
    if parameter.kind is Kind.SPREAD:
        return {"anyOf": _SPREAD}
    low = "exclusiveMinimum" if parameter.above_minimum else "minimum"
    bounds = {low: parameter.minimum, "maximum": parameter.maximum}
    return {"type": types[parameter.kind]} | {key: bound for key, bound in bounds.items() if bound is not None}


def _table(title: str, properties: Schema, required: tuple[str, ...] = ()) -> Schema:
    return {
        "title": title,
        "type": "object",
        "properties": properties,
        "required": list(required),
        "additionalProperties": False,
    }


def _into(root: Schema, parameter: Parameter) -> None:
    """Put a parameter into the table of its section, making the tables on the way."""
    table, path = root, ""
    for name in filter(None, parameter.section.split(".")):
        path = f"{path}.{name}".lstrip(".")
        table = table["properties"].setdefault(name, _table(f"a table [{path}]", {}))
    table["properties"][parameter.name] = value_schema(parameter)
    if parameter.required:
        table["required"].append(parameter.name)


def _as_found(controller: Schema) -> Schema:
    properties = {key: controller[key] for key in AS_FOUND_KEYS}
    absent = {key: _or_none(value) for key, value in properties.items() if _absence_means(key)}
    blocks = {key: _or_none(controller[key]) for key in BLOCKS}
    return _table("a table [controller.as_found]", properties | absent | blocks)


def _absence_means(key: str) -> bool:
    """Tell whether a controller without this key is another than one with any value of it."""
    parameter = find(f"controller.{key}")
    return parameter.default is None and not parameter.required


def _or_none(value: Schema) -> Schema:
    return {"title": f'{value["title"]}, or "{NONE}"', "anyOf": [value, {"const": NONE}]}


def _limits() -> Schema:
    bounds = {m.name: {"title": "a number of at least 0", "type": "number", "minimum": 0} for m in MEASURES}
    return _table("a table [limits]", bounds)


def _plant() -> Schema:
    number: Schema = {"title": "a number", "type": "number"}
    texts = {"expression": "a formula in s, as text", "physics": "the name of a physical model, as text"}
    roots = _array("numbers, a complex one as [re, im]", _complex(), least=0)
    properties = {
        **{key: {"title": title, "type": "string"} for key, title in texts.items()},
        **{key: _array("numbers", number) for key in ("numerator", "denominator", "b", "c")},
        **dict.fromkeys(("zeros", "poles"), roots),
        "a": _array("rows of numbers", _array("numbers", number)),
        "gain": number,
        "d": number,
        "dead_time": {"title": "a number of at least 0", "type": "number", "minimum": 0},
        "parameters": _parameters(),
        "spread": _plant_spread(),
    }
    return _table("a table [plant]", properties)


def _plant_spread() -> Schema:
    """Return the schema of how far the bare numbers of a plant may drift."""
    one: Schema = {"title": str(Kind.SPREAD), "anyOf": _SPREAD}
    lists = {key: _array("spreads", one) for key in ("numerator", "denominator", "zeros", "poles", "b", "c")}
    scalars = dict.fromkeys(("gain", "dead_time", "d"), one)
    return _table("a table [plant.spread]", scalars | lists | {"a": _array("rows of spreads", _array("spreads", one))})


def _array(what: str, items: Schema, least: int = 1) -> Schema:
    return {
        "title": f"an array of {least} to {MOST_NUMBERS} {what}",
        "type": "array",
        "items": items,
        "minItems": least,
        "maxItems": MOST_NUMBERS,
    }


def _pair(title: str) -> Schema:
    return {"title": title, "type": "array", "items": {"title": "a number", "type": "number"}} | {
        "minItems": 2,
        "maxItems": 2,
    }


_SPREAD: Final = [{"type": "string", "pattern": PERCENT}, _pair("[low, high]")]


def _complex() -> Schema:
    return {"title": "a number, or a complex one as [re, im]", "anyOf": [{"type": "number"}, _pair("[re, im]")]}


def _parameters() -> Schema:
    spread = {"title": str(Kind.SPREAD), "anyOf": _SPREAD}
    properties = {
        "value": {"title": "a number", "type": "number"},
        "unit": {"title": "a text", "type": "string"},
        "spread": spread,
    }
    entry = {
        "title": "a number, or { value = .., unit = .., spread = .. }",
        "anyOf": [{"type": "number"}, _table("a table", properties, ("value",))],
    }
    return {"title": "a table [plant.parameters]", "type": "object", "additionalProperties": entry}
