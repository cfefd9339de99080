"""How judged numbers are said: four significant digits, always with their unit."""

from math import inf, isinf

from tuner.judge.assessment import LimitResult
from tuner.model.loop import Loop
from tuner.model.measures import BY_NAME
from tuner.model.units import unit_in

_DIGITS = 4
_ALL_DIGITS = 17


def number(value: float, digits: int = _DIGITS) -> str:
    """Return a number in words of at most `digits` significant digits, without an exponent where it can be read so."""
    if isinf(value):
        return "inf" if value > 0.0 else "-inf"
    rounded = float(f"{value:.{digits}g}")
    return f"{rounded:.{max(digits, 10)}g}"


def minus(words: str) -> str:
    """Return words with true minus signs, as they stand on the screen."""
    return words.replace("-", "\u2212")


def unit_of(measure: str, loop: Loop) -> str:
    """Return the unit of a measure on one loop; '' for a plain ratio or a signal without unit."""
    return unit_in(BY_NAME[measure].unit, loop)


def quantity(value: float | None, unit: str, digits: int = _DIGITS) -> str:
    """Return a number with its unit: "96 s"; "none" where there is no number."""
    if value is None:
        return "none"
    said = number(value, digits)
    return f"{said} {unit}" if unit and not isinf(value) else said


def told_apart(value: float, limit: float) -> int:
    """Return how many significant digits two different numbers need in order to be read as different."""
    for digits in range(_DIGITS, _ALL_DIGITS):
        if value == limit or number(value, digits) != number(limit, digits):
            return digits
    return _ALL_DIGITS


def relation(measure: str, value: float | None, limit: float, loop: Loop) -> str:
    """Say how a value stands to its limit: "settling time 96 s > 90 s", "no settling time (at most 90 s)"."""
    facts = BY_NAME[measure]
    unit = unit_of(measure, loop)
    if value is None:
        bound = "at least" if facts.at_least else "at most"
        return f"no {facts.label} ({bound} {quantity(limit, unit)})"
    size = abs(value) if facts.by_size else value
    digits = told_apart(size, limit)
    sign = ">" if size > limit else "<" if size < limit else "="
    return f"{facts.label} {quantity(size, unit, digits)} {sign} {quantity(limit, unit, digits)}"


def shortfall(result: LimitResult) -> float:
    """Return how far a value is beyond its limit, above 0 when it is missed, in parts of the limit."""
    measure = BY_NAME[result.measure]
    if result.value is None:
        return -inf if result.met else inf
    size = abs(result.value) if measure.by_size else result.value
    beyond = result.limit - size if measure.at_least else size - result.limit
    return beyond / abs(result.limit) if result.limit else beyond
