"""The spread of a plant that is given by bare numbers: the table [plant.spread], read and written."""

from collections.abc import Iterator
from typing import Any, Final

from tuner.errors import Fault, nearest
from tuner.files import words
from tuner.files.named_parameters import read_spread
from tuner.model.drifts import DEAD_TIME, GAIN, Bare, nominal_numbers
from tuner.model.plant import PlantParameter

Table = dict[str, Any]

_KEY: Final = "plant.spread"
_SCALARS: Final = {"gain": GAIN, "dead_time": DEAD_TIME, "d": "d"}
_LISTS: Final = {"numerator": "numerator", "denominator": "denominator", "zeros": "zero", "poles": "pole"}
_VECTORS: Final = {"b": "b", "c": "c"}

STILL: Final = "0 %"
"""How a number that does not drift is written in a list."""


def read_drifts(plant: Bare, table: Table, faults: list[Fault]) -> tuple[PlantParameter, ...]:
    """Return what drifts in a plant by its table of spreads, adding to the faults what is wrong with it."""
    known = nominal_numbers(plant)
    found: dict[str, PlantParameter] = {}
    for key, written in table.items():
        names = list(_names(plant, key))
        if not names:
            near = nearest(key, [one for one in _keys() if list(_names(plant, one))])
            faults.append(Fault(f"{_KEY}.{key}", "a number that the plant is given by", "none of this name", near))
            continue
        for name, place, one in _entries(key, names, written, faults):
            spread = read_spread(place, known[name], one, faults)
            if spread.high > spread.low:
                found[name] = PlantParameter(name, known[name], spread=spread)
    return tuple(found[name] for name in known if name in found)


def _keys() -> tuple[str, ...]:
    return (*_SCALARS, *_LISTS, *_VECTORS, "a")


def _names(plant: Bare, key: str) -> Iterator[str]:
    """Yield the names of all numbers under a key, in their order; a complex root and its conjugate share one."""
    if key == "d" and not hasattr(plant, "d"):
        return
    if key in _SCALARS:
        yield _SCALARS[key]
    elif key in (*_LISTS, *_VECTORS):
        stem, numbers = (_LISTS | _VECTORS)[key], getattr(plant, key, ())
        yield from (f"{stem} {_shared(numbers, index)}" for index in range(1, len(numbers) + 1))
    elif key == "a":
        order = len(getattr(plant, "a", ()))
        yield from (f"a {row} {column}" for row in range(1, order + 1) for column in range(1, order + 1))


def _shared(numbers: tuple[complex, ...], index: int) -> int:
    """Return the place, from 1, of the number that a number drifts with: itself, or the conjugate above the axis."""
    number = numbers[index - 1]
    return numbers.index(number.conjugate()) + 1 if number.imag < 0.0 else index


def _entries(key: str, names: list[str], written: Any, faults: list[Fault]) -> Iterator[tuple[str, str, Any]]:  # noqa: ANN401 - a value of a TOML file
    """Yield each name with its place in the sheet and what is written there."""
    if key in _SCALARS:
        yield names[0], f"{_KEY}.{key}", written
        return
    flat = [one for row in written for one in row] if key == "a" else written
    if len(flat) != len(names):
        expected = f"{len(names)} spread{'s' if len(names) > 1 else ''}, one for each number of {key}"
        faults.append(Fault(f"{_KEY}.{key}", expected, words.number(len(flat))))
        return
    yield from ((name, f"{_KEY}.{key}", one) for name, one in zip(names, flat, strict=True))


def written_drifts(plant: Bare, spreads: dict[str, Any]) -> Table:
    """Return the table of spreads of a plant, given the spread of each name as a sheet writes it; keys without none."""
    table: Table = {}
    for key in _keys():
        names = list(_names(plant, key))
        if not any(name in spreads for name in names):
            continue
        values = [spreads.get(name, STILL) for name in names]
        order = len(getattr(plant, "a", ()))
        rows = [values[start : start + order] for start in range(0, len(values), order or 1)]
        table[key] = values[0] if key in _SCALARS else rows if key == "a" else values
    return table
