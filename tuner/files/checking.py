"""From the tables of a sheet to its model, with everything that is wrong on the way."""

from dataclasses import dataclass
from typing import Any

from tuner.errors import Fault
from tuner.files.building import build
from tuner.files.checks import check_all, table
from tuner.files.named_parameters import formula_names, missing_name
from tuner.files.plants import PlantText, read_plant
from tuner.files.validation import validate
from tuner.model.plant import Plant
from tuner.model.sheet import Sheet

Table = dict[str, Any]


@dataclass(frozen=True, slots=True)
class Checked:
    """The faults of a sheet, and the sheet when there are none."""

    faults: list[Fault]
    sheet: Sheet | None


def check(written: Table) -> Checked:
    """Return the sheet that these tables make, or everything that is wrong with them."""
    written = _without_empty_blocks(written)
    validated = validate(written)
    faults = validated.faults + check_all(written, validated.sound)
    plant = _plant(written, validated.sound, faults)
    if faults or plant is None:
        return Checked(faults, None)
    return Checked([], build(validated.sound, plant))


def _without_empty_blocks(written: Table) -> Table:
    """Return the tables of a sheet without the empty ones of the controller, which say as much as absent ones."""
    controller = written.get("controller")
    return written | {"controller": _without_empty(controller)} if isinstance(controller, dict) else written


def _without_empty(table: Table) -> Table:
    kept = {key: _without_empty(value) if isinstance(value, dict) else value for key, value in table.items()}
    return {key: value for key, value in kept.items() if value != {}}


def _plant(written: Table, sound: Table, faults: list[Fault]) -> Plant | None:
    paths = _disturbance_paths(sound, faults)
    if not isinstance(written.get("plant"), dict):
        return None
    elsewhere = {name: position for names in paths.values() for name, position in names.items()}
    plant = read_plant(PlantText(written["plant"], table(sound, "plant"), elsewhere), faults)
    if plant is None:
        return None
    given = {parameter.name for parameter in plant.parameters} | set(table(written, "plant.parameters"))
    for key, names in paths.items():
        faults += [missing_name(key, name, place, given) for name, place in names.items() if name not in given]
    return plant


def _disturbance_paths(sound: Table, faults: list[Fault]) -> dict[str, dict[str, int]]:
    """Return the names in the formulas of the disturbance's own path, by the key of the formula."""
    blocks = ("controller.disturbance_feedforward", "controller.as_found.disturbance_feedforward")
    keys = {f"{block}.expression": table(sound, block).get("expression") for block in blocks}
    return {key: formula_names(text, key, faults) or {} for key, text in keys.items() if text is not None}
