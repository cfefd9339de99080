"""The numbers that structures are compared by, each nominally and at its worst over the family."""

from collections.abc import Sequence
from dataclasses import dataclass

from tuner.judge.assessment import Assessment, MemberResult
from tuner.model.measures import BY_NAME


@dataclass(frozen=True, slots=True)
class Quantity:
    """One number of a comparison.

    Parameters
    ----------
    name, label : str
        Key in results, and words on screen.
    unit : str
        As in `measures.Measure`.
    sentence : str
        Definition, in one sentence.
    at_least : bool
        Whether more is better; the size counts in any case.
    """

    name: str
    label: str
    unit: str
    sentence: str
    at_least: bool = False


def _of_measure(name: str, label: str = "", sentence: str = "") -> Quantity:
    measure = BY_NAME[name]
    return Quantity(name, label or measure.label, measure.unit, sentence or measure.sentence, measure.at_least)


FINAL_DEVIATION = "final_deviation"

_ROUNDING = 1e-12
"""Share of the step, or of the largest deviation, that the arithmetic may leave of nothing."""

QUANTITIES: tuple[Quantity, ...] = (
    _of_measure(
        "steady_state_error",
        "error left after the step",
        "Size of reference minus final value, in % of the reference step: what a drifted plant makes of the model.",
    ),
    _of_measure("disturbance_peak", "largest deviation"),
    Quantity(
        FINAL_DEVIATION, "deviation that stays", "{y}", "Size of the deviation that a disturbance step leaves for ever."
    ),
    _of_measure("iae_reference"),
    _of_measure("iae_disturbance"),
    _of_measure("peak_effort"),
    _of_measure("saturated_share"),
    _of_measure("gain_margin"),
)
"""In the order of the table."""


@dataclass(frozen=True, slots=True)
class Figure:
    """A quantity of one structure.

    Parameters
    ----------
    name : str
        That of the quantity.
    nominal, worst : float or None
        Of the nominal plant, and the worst over the family; None where it does not exist.
    plant : str
        The plant that is worst, by name.
    reason : str
        Where `worst` is None, why, as the end of a sentence.
    """

    name: str
    nominal: float | None
    worst: float | None
    plant: str
    reason: str = ""


def figures_of(assessment: Assessment) -> tuple[Figure, ...]:
    """Return every quantity of an assessment."""
    return tuple(_figure(quantity, assessment.members) for quantity in QUANTITIES)


def best_of(quantity: Quantity, values: Sequence[float | None]) -> tuple[bool, ...]:
    """Tell which values are the best; none where all there are come to the same, or there is but one."""
    there = {value for value in values if value is not None}
    if len(values) < 2 or not there or (len(there) == 1 and None not in values):
        return (False,) * len(values)
    best = max(there) if quantity.at_least else min(there)
    return tuple(value == best for value in values)


def _figure(quantity: Quantity, members: Sequence[MemberResult]) -> Figure:
    values = [_value(quantity, member) for member in members]
    missing = next((i for i, value in enumerate(values) if value is None), None)
    if missing is not None:
        unstable = next((i for i, member in enumerate(members) if not member.stable), missing)
        return Figure(quantity.name, values[0], None, members[unstable].name, _reason(quantity, members[unstable]))
    there = [value for value in values if value is not None]
    worst = (min if quantity.at_least else max)(range(len(there)), key=there.__getitem__)
    return Figure(quantity.name, there[0], there[worst], members[worst].name)


def _value(quantity: Quantity, member: MemberResult) -> float | None:
    """Return a size; what is left of an error or a deviation by rounding alone is nothing."""
    found = member.final_disturbance if quantity.name == FINAL_DEVIATION else member.measures.get(quantity.name)
    if found is None:
        return None
    whole = {"steady_state_error": 100.0, FINAL_DEVIATION: member.measures.get("disturbance_peak") or 0.0}
    return 0.0 if abs(found) <= _ROUNDING * whole.get(quantity.name, 0.0) else abs(found)


def _reason(quantity: Quantity, member: MemberResult) -> str:
    if not member.stable:
        return "it is unstable"
    if quantity.name == FINAL_DEVIATION:
        return member.reasons.get("disturbance_peak", "there is no disturbance step")
    return member.reasons.get(quantity.name, "it does not exist")
