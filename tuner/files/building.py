"""Make the model of a sheet from its tables, once they are known to be right."""

from dataclasses import replace
from typing import Any

from tuner.files.named_parameters import read_spread
from tuner.files.schema import NONE
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.parameters import BLOCKS, GAIN_KEYS, Kind, in_section
from tuner.model.plant import Plant
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial

Table = dict[str, Any]

_KINDS = {
    "feedforward": Feedforward,
    "reference_filter": ReferenceFilter,
    "disturbance_feedforward": DisturbanceFeedforward,
    "lead_lag": LeadLag,
    "notch": Notch,
}
"""Blocks around the law by the key of their table; the measurement filter is a mere time."""


def build(table: Table, plant: Plant) -> Sheet:
    """Return the sheet of a table that has no faults."""
    return Sheet(
        loop=_loop(table["loop"]),
        plant=plant,
        controller=_controller(table["controller"]),
        trial=Trial(**_values("trial", table["trial"])),
        actuator=Actuator(**_with_spread(_values("actuator", table.get("actuator", {})))),
        sensor=Sensor(**_with_spread(_values("sensor", table.get("sensor", {})))),
        limits=tuple((name, float(bound)) for name, bound in table.get("limits", {}).items()),
    )


def _values(section: str, table: Table) -> Table:
    """Return every key of a section: as written, else with its default; numbers as floats."""
    return {
        parameter.name: _value(parameter.kind, table.get(parameter.name, parameter.default))
        for parameter in in_section(section)
    }


def _value(kind: Kind, written: Any) -> Any:  # noqa: ANN401 - a value of a TOML file
    if written is None or kind in (Kind.TEXT, Kind.CHOICE, Kind.FLAG, Kind.SPREAD):
        return written
    return float(written) if kind is Kind.NUMBER else int(written)


def _with_spread(values: Table) -> Table:
    """Return the values of a block with its spread as the model has it."""
    written = values["spread"]
    return values | {"spread": None if written is None else read_spread("", values["lag"], written, [])}


def _loop(table: Table) -> Loop:
    controlled = Signal(**_values("loop.controlled", table.get("controlled", {})))
    manipulated = Manipulated(**_values("loop.manipulated", table.get("manipulated", {})))
    return Loop(controlled=controlled, manipulated=manipulated, **_values("loop", table))


def _controller(table: Table) -> Controller:
    values = _values("controller", table)
    gains = _gains(values, values["form"])
    others = {key: value for key, value in values.items() if not _is_gain(key)}
    controller = Controller(**gains, **others, **_blocks(table))
    as_found = table.get("as_found")
    return controller if as_found is None else replace(controller, as_found=_as_found(controller, as_found))


def _is_gain(key: str) -> bool:
    return any(key in keys for keys in GAIN_KEYS.values())


def _gains(values: Table, form: str) -> Table:
    return {f"gain_{index}": float(values.get(key, 0.0)) for index, key in enumerate(GAIN_KEYS[form], 1)}


def _blocks(table: Table) -> Table:
    """Return the blocks around the law, those that are there."""
    blocks: Table = {
        key: kind(**_values(f"controller.{key}", table[key])) for key, kind in _KINDS.items() if key in table
    }
    if "measurement_filter" in table:
        blocks["measurement_filter"] = float(table["measurement_filter"]["time"])
    return blocks


def _absent_blocks(table: Table) -> Table:
    """Return what the as-found table says was not there."""
    return {key: 0.0 if key == "measurement_filter" else None for key in BLOCKS if table.get(key) == NONE}


def _as_found(controller: Controller, table: Table) -> Controller:
    """Return the controller with what the as-found table says; gains of another form are not taken over."""
    form = table.get("form", controller.form)
    kept = {f"gain_{i}": 0.0 for i in (1, 2, 3)} if form != controller.form else {}
    gains = {f"gain_{i}": float(table[key]) for i, key in enumerate(GAIN_KEYS[form], 1) if key in table}
    others = {
        parameter.name: None if table[parameter.name] == NONE else _value(parameter.kind, table[parameter.name])
        for parameter in in_section("controller")
        if parameter.name in table and not _is_gain(parameter.name)
    }
    there = {key: block for key, block in table.items() if block != NONE}
    changes: Table = kept | gains | others | _blocks(there) | _absent_blocks(table)
    return replace(controller, **changes)
