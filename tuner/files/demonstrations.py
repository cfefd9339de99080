"""Demonstrations: read with every fault at once, those of the sheet that they play on included."""

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final

from tuner.errors import Fault, SheetError
from tuner.files import sheet as sheets
from tuner.files import words
from tuner.files.demonstration_schema import DEEDS, LONGEST, action_rules, top_rules
from tuner.files.validation import Table, validate
from tuner.model.demonstration import (
    Action,
    Deed,
    Demonstration,
    SetController,
    SetDisturbance,
    SetEffort,
    SetMode,
    SetNoise,
    SetPlant,
    SetReference,
    Stop,
)
from tuner.model.sheet import Sheet

VERSION: Final = 1
"""Version of the format that is read."""

_WHAT: Final = "a demonstration"


@dataclass(frozen=True, slots=True)
class Staged:
    """A demonstration, the sheet that it plays on, and where that lies."""

    demonstration: Demonstration
    sheet: Sheet
    sheet_path: Path


def is_demonstration(text: str) -> bool:
    """Tell whether a text is a demonstration rather than a tuning sheet, by the key at its top."""
    try:
        return "demonstration" in sheets.tables(text, "")
    except SheetError:
        return False


def read(path: Path) -> Staged:
    """Return the demonstration in a file, with its sheet.

    Raises
    ------
    SheetError
        With every fault found in both, or with the reason why the file cannot be read.
    """
    return parse(sheets.read_text(path, _WHAT), path)


def parse(text: str, path: Path) -> Staged:
    """Return the demonstration that a text holds; the sheet's path is relative to that of the demonstration.

    Raises
    ------
    SheetError
        With every fault found in both.
    """
    written = sheets.tables(text, str(path), _WHAT)
    version = written.get("demonstration")
    if isinstance(version, int) and version > VERSION:
        expected = f"{VERSION}, the newest format that this version of Trimwright reads"
        raise SheetError([Fault("demonstration", expected, words.found(version))], str(path))
    top = validate(written, top_rules())
    faults = list(top.faults)
    place = path.parent / str(top.sound.get("sheet", ""))
    sheet = _sheet(place, faults) if "sheet" in top.sound else None
    actions = _actions(written.get("action"), sheet, faults)
    if faults or sheet is None:
        raise SheetError(faults, str(path))
    sound = top.sound
    told = Demonstration(sound["title"], sound["sheet"], actions, float(sound.get("speed", 1.0)))
    return Staged(told, sheet, place)


def _sheet(path: Path, faults: list[Fault]) -> Sheet | None:
    """Return the sheet that a demonstration plays on; its faults carry its name."""
    try:
        return sheets.read(path)
    except SheetError as error:
        faults += [
            Fault("sheet", "a tuning sheet that can be used", f"in {path.name}: {fault}") for fault in error.faults
        ]
        return None


def _actions(written: object, sheet: Sheet | None, faults: list[Fault]) -> tuple[Action, ...]:
    """Return the actions, each checked by itself, so that its faults carry its number."""
    if not isinstance(written, list):
        return ()
    actions: list[Action] = []
    last = 0.0
    for index, table in enumerate(written[:LONGEST], 1):
        found = list(_faults_of(table, sheet, last))
        faults += [Fault(f"action {index}{'.' if fault.key else ''}{fault.key}", *_rest(fault)) for fault in found]
        if isinstance(table, dict):
            last = _time(table, last)
            if not found:
                actions.append(_action(table))
    return tuple(actions)


def _rest(fault: Fault) -> tuple[str, str, str]:
    return fault.expected, fault.found, fault.nearest


def _time(table: Table, last: float) -> float:
    at = table.get("at")
    return max(last, float(at)) if isinstance(at, int | float) and not isinstance(at, bool) else last


def _faults_of(table: object, sheet: Sheet | None, last: float) -> Iterable[Fault]:
    if not isinstance(table, dict):
        yield Fault("", "a table [[action]]", words.found(table))
        return
    checked = validate(table, action_rules(sheet))
    yield from checked.faults
    at = checked.sound.get("at")
    if at is not None and at < last:
        yield Fault("at", f"a time of at least {words.number(last)}, that of the action before", words.number(at))
    deeds = [key for key in DEEDS if key in table]
    if len(deeds) > 1 or (not deeds and "say" not in table):
        found = " and ".join(deeds) or "none of them"
        yield Fault("", f"exactly one of {' | '.join(DEEDS)}, or say alone", found)


def _action(table: Table) -> Action:
    key = next((key for key in DEEDS if key in table), None)
    deed = None if key is None else _READERS[key](table[key])
    return Action(float(table["at"]), deed, table.get("say", ""))


def _numbers(table: Any, above: str = "") -> tuple[tuple[str, float], ...]:  # noqa: ANN401 - a value of a TOML file
    """Return the numbers of a table by their keys, dotted in tables within it."""
    found: list[tuple[str, float]] = []
    for name, value in table.items():
        found += _numbers(value, f"{above}{name}.") if isinstance(value, dict) else [(f"{above}{name}", float(value))]
    return tuple(found)


def _plant(value: Any) -> SetPlant:  # noqa: ANN401 - a value of a TOML file
    return SetPlant(() if isinstance(value, str) else _numbers(value))


_READERS: Final[dict[str, Callable[[Any], Deed]]] = {
    "set": lambda value: SetController(_numbers(value)),
    "reference": lambda value: SetReference(float(value)),
    "ramp": lambda value: SetReference(float(value["to"]), float(value["over"])),
    "disturbance": lambda value: SetDisturbance(float(value)),
    "noise": SetNoise,
    "plant": _plant,
    "mode": SetMode,
    "effort": lambda value: SetEffort(float(value)),
    "stop": lambda _value: Stop(),
}
