"""Hold a sheet against its schema and say in sentences where it differs; loads jsonschema."""

from collections.abc import Callable, Iterator
from copy import deepcopy
from dataclasses import dataclass
from functools import cache, lru_cache
from math import isfinite
from typing import Any, cast

from jsonschema import Draft202012Validator, TypeChecker, ValidationError, validators
from jsonschema.protocols import Validator

from tuner.errors import Fault, nearest
from tuner.files import words
from tuner.files.schema import Schema, schema

Table = dict[str, Any]
"""A table of a TOML file, as read."""


@dataclass(frozen=True, slots=True)
class Validated:
    """What the schema says of a sheet: its faults, and a copy of it without the values that are faulty."""

    faults: list[Fault]
    sound: Table


@dataclass(frozen=True, slots=True, eq=False)
class Rules:
    """What tables are held against: a schema, and what the table at its top is called."""

    schema: Schema
    whole: str


def validate(written: Table, rules: Rules | None = None) -> Validated:
    """Hold tables against a schema: that of a sheet unless there is another one."""
    rules = rules or _sheet()
    sound = deepcopy(written)
    faults: dict[Fault, None] = {}
    for error in _validator(rules).iter_errors(written):
        for fault, path in _told(error, rules):
            faults.setdefault(fault)
            _drop(sound, path)
    return Validated(list(faults), sound)


@cache
def _sheet() -> Rules:
    return Rules(schema(), "the sheet")


def _validator(rules: Rules) -> Validator:
    validator: Validator = _kind()(rules.schema)
    return validator


@cache
def _kind() -> Callable[[Schema], Validator]:
    checker = Draft202012Validator.TYPE_CHECKER.redefine_many({"number": _is_number, "integer": _is_integer})
    kind: Callable[[Schema], Validator] = validators.extend(Draft202012Validator, type_checker=checker)  # type: ignore[no-untyped-call] # so declared
    return kind


def _is_number(_: TypeChecker, value: object) -> bool:
    """Tell whether a value is a number to compute with: finite, and no truth value."""
    if isinstance(value, bool) or not isinstance(value, int | float):
        return False
    try:
        return isfinite(value)
    except OverflowError:
        return False


def _is_integer(checker: TypeChecker, value: object) -> bool:
    return _is_number(checker, value) and float(value).is_integer()  # type: ignore[arg-type] # a number by then


Told = tuple[Fault, tuple[str, ...]]


def _told(error: ValidationError, rules: Rules, above: tuple[str | int, ...] = ()) -> Iterator[Told]:
    """Yield the faults of one error, each with the path of the faulty value."""
    path = above + tuple(error.relative_path)
    names = tuple(part for part in path if isinstance(part, str))
    if error.validator == "additionalProperties":
        yield from _unknown(names, error, rules)
    elif error.validator == "required":
        yield from _missing(names, error)
    elif (branch := _branch_of_table(error)) is not None:
        for inner in error.context or ():
            if inner.schema_path[0] == branch:
                yield from _told(inner, rules, path)
    else:
        yield _wrong(names, path, error), names


def _branch_of_table(error: ValidationError) -> int | None:
    """Return which of several alternatives is a table, for a table must mean that one; None where there is none."""
    if error.validator != "anyOf" or not isinstance(error.instance, dict):
        return None
    branches = cast("list[Schema]", error.validator_value)
    return next((index for index, branch in enumerate(branches) if branch.get("type") == "object"), None)


def _wrong(names: tuple[str, ...], path: tuple[str | int, ...], error: ValidationError) -> Fault:
    places = [part + 1 for part in path if isinstance(part, int)]
    where = {0: "", 1: " in place {}", 2: " in row {}, place {}"}[len(places)].format(*places)
    title = str(_schema(error)["title"])
    return Fault(dotted(names), title, f"{words.found(error.instance)}{where}", _nearest_choice(error))


def _nearest_choice(error: ValidationError) -> str:
    if error.validator != "enum" or not isinstance(error.instance, str):
        return ""
    return nearest(error.instance, cast("list[str]", error.validator_value))


def _schema(error: ValidationError) -> Schema:
    """Return the part of the schema that an error breaks, which with us is always a mapping."""
    return cast("Schema", error.schema)


def _missing(names: tuple[str, ...], error: ValidationError) -> Iterator[Told]:
    properties: Schema = _schema(error)["properties"]
    for name in _schema(error)["required"]:
        if name not in cast("Table", error.instance):
            path = (*names, name)
            yield Fault(dotted(path), str(properties[name]["title"]), "nothing"), path


def _unknown(names: tuple[str, ...], error: ValidationError, rules: Rules) -> Iterator[Told]:
    known: Schema = _schema(error)["properties"]
    for name in cast("Table", error.instance):
        if name not in known:
            yield _misplaced(names, name, known, rules), (*names, name)


def _misplaced(names: tuple[str, ...], name: str, known: Schema, rules: Rules) -> Fault:
    """Tell of an unknown key: where it belongs if another table has it, else which name is nearest."""
    table = f"[{dotted(names)}]" if names else rules.whole
    homes = _homes(rules).get(name, ())
    if not homes:
        what = "a measure" if names == ("limits",) else f"a key of {table}"
        return Fault(dotted((*names, name)), what, "an unknown one", nearest(name, known))
    place = " or ".join(f"[{home}]" if home else f"the top of {rules.whole}" for home in homes)
    return Fault(dotted((*names, name)), f"this key in {place}", f"it in {table}", f"{homes[0]}.{name}".lstrip("."))


@lru_cache(maxsize=8)
def _homes(rules: Rules) -> dict[str, tuple[str, ...]]:
    """Return for each key of the schema the tables that have it."""
    homes: dict[str, tuple[str, ...]] = {}
    for table, name in _keys("", rules.schema):
        homes[name] = (*homes.get(name, ()), table)
    return homes


def _keys(table: str, of: Schema) -> Iterator[tuple[str, str]]:
    for name, inner in of.get("properties", {}).items():
        yield table, name
        if name != "as_found":
            yield from _keys(f"{table}.{name}".lstrip("."), inner)


def dotted(names: tuple[str, ...]) -> str:
    """Return the path of a key as a sheet writes it; a name that is no plain word stands in quotes."""
    return ".".join(name if name.isidentifier() else words.quoted(name) for name in names)


def _drop(table: Table, path: tuple[str, ...]) -> None:
    """Take the value at a path out of a table, if it is still there."""
    *above, last = path or ("",)
    for name in above:
        inner = table.get(name)
        if not isinstance(inner, dict):
            return
        table = inner
    table.pop(last, None)
