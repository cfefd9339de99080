"""The JSON Schema of a demonstration; what its actions may set comes from the sheet that it plays on."""

from functools import cache, lru_cache
from typing import Final

from tuner.files.schema import Schema, value_schema
from tuner.files.validation import Rules
from tuner.model.controller import Controller
from tuner.model.family import family_of
from tuner.model.parameters import BLOCKS, Parameter, block_rulers, rulers
from tuner.model.sheet import Sheet

DEEDS: Final = ("set", "reference", "ramp", "disturbance", "noise", "plant", "mode", "effort", "stop")
"""The keys of an action of which it has exactly one, or none beside `say`."""

LONGEST: Final = 10_000
"""Actions that a demonstration may have."""

_SLOWEST, _FASTEST = 0.1, 100.0

_NUMBER: Final[Schema] = {"title": "a number", "type": "number"}
_TEXT: Final[Schema] = {"title": "a text", "type": "string"}


def _table(title: str, properties: Schema, required: tuple[str, ...] = ()) -> Schema:
    return {
        "title": title,
        "type": "object",
        "properties": properties,
        "required": list(required),
        "additionalProperties": False,
    }


@cache
def top_rules() -> Rules:
    """Return what the top of a demonstration is held against; its actions are checked one by one."""
    speed = {"title": f"a number from {_SLOWEST:g} to {_FASTEST:g}", "type": "number"}
    actions = {"title": f"1 to {LONGEST:,} tables [[action]]", "type": "array", "minItems": 1, "maxItems": LONGEST}
    properties: Schema = {
        "demonstration": {"title": "a whole number, 1", "type": "integer", "minimum": 1, "maximum": 1},
        "title": _TEXT,
        "sheet": {"title": "the path of a tuning sheet, as text", "type": "string", "minLength": 1},
        "speed": speed | {"minimum": _SLOWEST, "maximum": _FASTEST},
        "action": actions,
    }
    whole = _table("a demonstration", properties, ("demonstration", "title", "sheet", "action"))
    return Rules(whole, "the demonstration")


@lru_cache(maxsize=4)
def action_rules(sheet: Sheet | None) -> Rules:
    """Return what an action is held against; without a usable sheet any key may be set."""
    anything: Schema = {"title": "a table of numbers", "type": "object"}
    drifts = anything if sheet is None else _plant(sheet)
    properties: Schema = {
        "at": {"title": "a number of at least 0", "type": "number", "minimum": 0},
        "say": _TEXT,
        "set": anything if sheet is None else _controller(sheet.controller),
        "reference": _NUMBER,
        "ramp": _table("a table { to = .., over = .. }", {"to": _NUMBER, "over": _over()}, ("to", "over")),
        "disturbance": _NUMBER,
        "noise": {"title": "true or false", "type": "boolean"},
        "plant": {"title": '"nominal" or a table of parameters', "anyOf": [{"const": "nominal"}, drifts]},
        "mode": {"title": '"manual" or "automatic"', "enum": ["manual", "automatic"]},
        "effort": _NUMBER,
        "stop": {"title": "true", "const": True},
    }
    return Rules(_table("a table [[action]]", properties, ("at",)), "an action")


def _over() -> Schema:
    return {"title": "a number above 0", "type": "number", "exclusiveMinimum": 0}


def _controller(controller: Controller) -> Schema:
    """Return the schema of the numbers that a controller has."""
    root = _table(
        "a table of numbers of the controller", {key.name: value_schema(key) for key in rulers(controller.form)}
    )
    for block in BLOCKS:
        there = {key.name: value_schema(key) for key in block_rulers(block) if _has(controller, key)}
        if there:
            root["properties"][block] = _table(f"a table of numbers of the {block.replace('_', ' ')}", there)
    return root


def _has(controller: Controller, parameter: Parameter) -> bool:
    """Tell whether a controller has the block of a parameter, and the number in it."""
    value = controller.value(parameter.key)
    return value is not None and (parameter.key != "measurement_filter.time" or value > 0.0)


def _plant(sheet: Sheet) -> Schema:
    names = family_of(sheet, 1)[0].values
    return _table("a table of parameters of the plant", dict.fromkeys(names, _NUMBER))
