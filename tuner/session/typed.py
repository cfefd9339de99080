"""What a person types, turned into values; what cannot be used is answered with a sentence."""

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from math import isfinite

from tuner.errors import TrimwrightError, nearest
from tuner.model.parameters import Kind, Parameter
from tuner.model.plant import PlantParameter, Spread, spread_percent

_NUMBER = r"[+-]?(?:\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE][+-]?\d+)?"
_WHOLE = re.compile(rf"\s*({_NUMBER})\s*(.*?)\s*")
_RANGE = re.compile(rf"\s*[\[(]?\s*({_NUMBER})\s*(?:\.\.+|…|;|,\s|to|\u2013)\s*({_NUMBER})\s*[\])]?\s*")
_SIZE = r"\d+(?:[.,]\d*)?(?:[eE][+-]?\d+)?|[.,]\d+(?:[eE][+-]?\d+)?"
_IMAGINARY = rf"(?:(?P<before>{_SIZE})?\*?[ij]|[ij](?P<behind>{_SIZE}))"
_PURE = re.compile(rf"(?P<sign>±|\+/-|\+-|[+-])?{_IMAGINARY}")
_MIXED = re.compile(rf"(?P<real>[+-]?(?:{_SIZE}))(?P<sign>±|\+/-|\+-|[+-]){_IMAGINARY}")


class TypedError(TrimwrightError):
    """Something typed that cannot be used; its text says what was expected and what was found."""


@dataclass(frozen=True, slots=True)
class Bounds:
    """The values a typed number may take; `above` excludes the minimum itself."""

    minimum: float | None = None
    maximum: float | None = None
    above: bool = False
    whole: bool = False

    @classmethod
    def of(cls, parameter: Parameter) -> "Bounds":
        """Return the bounds that the table of parameters gives."""
        whole = parameter.kind is Kind.INTEGER
        return cls(parameter.minimum, parameter.maximum, parameter.above_minimum, whole)

    def in_words(self) -> str:
        """Say the bounds: "a number of at least 0"."""
        noun = "a whole number" if self.whole else "a number"
        low = "" if self.minimum is None else f"{'above' if self.above else 'of at least'} {self.minimum:g}"
        high = "" if self.maximum is None else f"{'and' if low else 'of'} at most {self.maximum:g}"
        return " ".join(part for part in (noun, low, high) if part)

    def holds(self, value: float) -> bool:
        """Tell whether a number lies within."""
        if self.minimum is not None and (value < self.minimum or (self.above and value == self.minimum)):
            return False
        return (self.maximum is None or value <= self.maximum) and (not self.whole or value == int(value))


ANY = Bounds()
NOT_NEGATIVE = Bounds(minimum=0.0)


def number(text: str, bounds: Bounds = ANY, unit: str = "") -> float:
    """Return a typed number: "1.5", "1,5", "2e-3", with its unit or without.

    Raises
    ------
    TypedError
        When it is no number, carries another unit, or lies out of bounds.
    """
    match = _WHOLE.fullmatch(_plain(text))
    if match is None or re.match(r"[\d.,]", match[2]):
        raise TypedError(f"expected {bounds.in_words()}, found {_quoted(text)}")
    if match[2] not in ("", unit):
        wanted = f"the unit {unit} or nothing" if unit else "nothing"
        raise TypedError(f"expected {wanted} behind the number, found {_quoted(match[2])}")
    value = _value(match[1])
    if not isfinite(value) or not bounds.holds(value):
        raise TypedError(f"expected {bounds.in_words()}, found {_quoted(text)}")
    return value


def spread(text: str, value: float) -> Spread | None:
    """Return a typed spread of a value: "20 %", "3 to 6", "[3, 6]"; empty text means none.

    Raises
    ------
    TypedError
        When it is neither, or does not hold the value.
    """
    plain = _plain(text).strip()
    if not plain:
        return None
    if plain.endswith("%"):
        return spread_percent(value, number(plain[:-1], NOT_NEGATIVE))
    match = _RANGE.fullmatch(plain)
    if match is None:
        raise TypedError(f'expected a spread such as "20 %" or "3 to 6", found {_quoted(text)}')
    low, high = _value(match[1]), _value(match[2])
    if not low <= value <= high:
        raise TypedError(f"expected a spread that holds the value {shown(value)}, found {_quoted(text)}")
    return Spread(low, high)


def drifts(text: str, known: Mapping[str, float]) -> tuple[PlantParameter, ...]:
    """Return a typed list of what drifts in a plant, one a line: "gain 15 %", "pole 1 0.9 to 1.2".

    Parameters
    ----------
    known : mapping of str to float
        What may drift, and its nominal value; see `model.drifts.nominal_numbers`.

    Raises
    ------
    TypedError
        When a line names nothing that may drift, or something twice, or its spread cannot be used.
    """
    found: dict[str, PlantParameter] = {}
    for line in filter(None, (" ".join(one.split()) for one in text.replace(";", "\n").splitlines())):
        name = _drifting(line, known)
        if name in found:
            raise TypedError(f"expected each spread once, found two of {name}")
        spread_of_it = spread(line[len(name) :].lstrip(" :="), known[name])
        if spread_of_it is None:
            raise TypedError(f'expected a spread behind {name}, such as "{name} 10 %"')
        found[name] = PlantParameter(name, known[name], spread=spread_of_it)
    return tuple(found.values())


def _drifting(line: str, known: Mapping[str, float]) -> str:
    """Return the longest name that a line begins with."""
    plain = line.casefold()
    names = [name for name in known if plain.startswith(name) and not plain[len(name) : len(name) + 1].isalnum()]
    if names:
        return max(names, key=len)
    words = re.match(r"[^\d%]*(?:\d+(?!\s*%|[.,\d]))?", plain)
    near = nearest(words[0].strip() if words else plain, known)
    hint = f"; the nearest valid name is {near}" if near else ""
    raise TypedError(f'expected a number of the plant and its spread, such as "gain 15 %", found {_quoted(line)}{hint}')


def numbers(text: str) -> tuple[float, ...]:
    """Return a typed list of numbers, parted by spaces or semicolons, or by a comma and a space.

    Raises
    ------
    TypedError
        Naming the first item that is no number.
    """
    return tuple(number(item) for item in _items(text))


def complex_numbers(text: str) -> tuple[complex, ...]:
    """Return a typed list of complex numbers, parted by semicolons, or a comma and a space; "-1 ± 2j" is a pair.

    Raises
    ------
    TypedError
        Naming the first item that is no number, or a complex one without its conjugate.
    """
    found = tuple(root for item in _complex_items(text) for root in _complex_item(item))
    lonely = [root for root in found if root.imag and found.count(root) != found.count(root.conjugate())]
    if lonely:
        raise TypedError(
            f"expected complex numbers in conjugate pairs, found {shown_complex(lonely[0])} alone; "
            f'write "{shown(lonely[0].real)} ± {shown(abs(lonely[0].imag))}j" for both'
        )
    return found


def rows(text: str) -> tuple[tuple[float, ...], ...]:
    """Return a typed matrix: one row a line, numbers parted as in `numbers`.

    Raises
    ------
    TypedError
        When a row is of another length than the first, or an item is no number.
    """
    matrix = tuple(numbers(line) for line in text.splitlines() if line.strip())
    uneven = [index for index, row in enumerate(matrix) if len(row) != len(matrix[0])]
    if uneven:
        first, other = len(matrix[0]), len(matrix[uneven[0]])
        raise TypedError(f"expected {first} numbers in every row, found {other} in row {uneven[0] + 1}")
    return matrix


def shown(value: float | None) -> str:
    """Return a number as it is shown for editing: all its digits, none more; empty for None."""
    if value is None:
        return ""
    text = repr(float(value) + 0.0)  # no "-0"
    return text.removesuffix(".0") if "e" not in text else text.replace(".0e", "e")


def shown_spread(spread: Spread | None) -> str:
    """Return a spread as it is shown for editing."""
    if spread is None:
        return ""
    return (
        f"{shown(spread.percent)} %" if spread.percent is not None else f"{shown(spread.low)} to {shown(spread.high)}"
    )


def shown_drifts(parameters: Sequence[PlantParameter]) -> str:
    """Return what drifts as it is shown for editing, one a line."""
    return "\n".join(f"{one.name} {shown_spread(one.spread)}" for one in parameters if one.spread is not None)


def shown_numbers(values: tuple[float, ...]) -> str:
    """Return a list of numbers as it is shown for editing."""
    return "  ".join(shown(value) for value in values)


def shown_rows(matrix: tuple[tuple[float, ...], ...]) -> str:
    """Return a matrix as it is shown for editing, one row a line."""
    return "\n".join(shown_numbers(row) for row in matrix)


def shown_complex(value: complex) -> str:
    """Return one complex number: "-1 + 2j"."""
    if not value.imag:
        return shown(value.real)
    return f"{shown(value.real)} {'+' if value.imag > 0 else '-'} {shown(abs(value.imag))}j"


def shown_complex_numbers(values: tuple[complex, ...]) -> str:
    """Return complex numbers as they are shown for editing, conjugates as one item with a ± sign."""
    left, items = list(values), []
    while left:
        root = left.pop(0)
        pair = root.imag and root.conjugate() in left
        if pair:
            left.remove(root.conjugate())
        items.append(f"{shown(root.real)} ± {shown(abs(root.imag))}j" if pair else shown_complex(root))
    return ";  ".join(items)


def _plain(text: str) -> str:
    """Return the text with the typographic minus and odd spaces made plain."""
    return text.replace("\u2212", "-").replace("\u00a0", " ").replace("\u202f", " ")


def _value(text: str) -> float:
    return float(text.replace(",", "."))


def _quoted(text: str) -> str:
    return f'"{text.strip()}"' if text.strip() else "nothing"


def _items(text: str) -> list[str]:
    """Part a list; a comma is a decimal sign only where spaces or semicolons part the numbers and no point is about.

    Raises
    ------
    TypedError
        When a single comma might be either.
    """
    inside = _plain(text).strip().strip("[]").strip()
    if ";" in inside:
        return [item for item in re.split(r"[;\s]+", inside) if item]
    parts = re.search(r"\s", inside) is not None
    if "." in inside or re.search(r",\s", inside) or (inside.count(",") > 1 and not parts):
        return [item for item in re.split(r"[,\s]+", inside) if item]
    if "," in inside and not parts:
        raise TypedError(f"expected numbers parted by spaces, found {_quoted(text)}, which is one number or two")
    return inside.split()


def _complex_items(text: str) -> list[str]:
    plain = _plain(text)
    if not re.search("[ij]", plain):
        return _items(plain) if re.search(r"[\s;]", plain.strip()) else [plain.strip()] if plain.strip() else []
    return [item.strip() for item in re.split(r"[;\n]|,\s+", plain.strip().strip("[]")) if item.strip()]


def _complex_item(item: str) -> tuple[complex, ...]:
    """Return one item: a real number, a complex one, or a pair."""
    compact = re.sub(r"\s+", "", item)
    if re.fullmatch(_NUMBER, compact) and compact == item:
        return (complex(_value(item)),)
    match = _PURE.fullmatch(compact) or _MIXED.fullmatch(compact)
    if match is None:
        raise TypedError(f'expected a number such as "-2" or "-1 ± 2j", found {_quoted(item)}')
    parts = match.groupdict()
    size = _value(parts["before"] or parts["behind"] or "1")
    root = complex(_value(parts.get("real") or "0"), -size if parts["sign"] == "-" else size)
    return (root, root.conjugate()) if parts["sign"] in ("±", "+/-", "+-") and size else (root,)
