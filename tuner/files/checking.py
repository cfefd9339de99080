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
    if not isinstance(controller, dict):
        return written
    return written | {"controller": {key: value for key, value in controller.items() if value != {}}}


def _plant(written: Table, sound: Table, faults: list[Fault]) -> Plant | None:
    path = table(sound, "controller.disturbance_feedforward").get("expression")
    key = "controller.disturbance_feedforward.expression"
    names = (formula_names(path, key, faults) if path is not None else None) or {}
    if not isinstance(written.get("plant"), dict):
        return None
    plant = read_plant(PlantText(written["plant"], table(sound, "plant"), names), faults)
    given = {p.name for p in plant.parameters} if plant else set()
    given |= set(table(written, "plant.parameters"))
    if plant:
        faults += [missing_name(key, name, position, given) for name, position in names.items() if name not in given]
    return plant
