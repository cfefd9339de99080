"""Limits laid over the measures of a whole family: the worst plant of each, the verdict, and the notes."""

from collections.abc import Iterable, Sequence
from math import inf

from tuner.judge.assessment import Assessment, Instability, LimitResult, MemberResult, Verdict, WorstCase
from tuner.judge.wording import quantity
from tuner.measure.family import DISTURBANCE, REFERENCE
from tuner.measure.loop import MARGINS
from tuner.measure.trial import NO_OVERSHOOT
from tuner.model.measures import BY_NAME, MEASURES, Measure
from tuner.model.sheet import Sheet

OUT_OF_RANGE = "The reference step ends at {end}, outside the range of the controlled signal ({low} to {high})."
NO_LIMITS = "The sheet gives no limits; only stability is judged."

_GROUPS = (
    ("measures of the reference trial", REFERENCE),
    ("measures of the disturbance trial", DISTURBANCE),
    ("margins", MARGINS),
)


def judge(sheet: Sheet, members: Sequence[MemberResult], instability: Instability | None = None) -> Assessment:
    """Judge a family by the limits of its sheet.

    Parameters
    ----------
    members : sequence of MemberResult
        At least one, the nominal plant first.
    instability : Instability or None
        What makes the loop run away, when a plant of the family does.
    """
    worst = {measure.name: worst_case(measure, members) for measure in MEASURES}
    limits = tuple(limit_result(name, limit, worst[name]) for name, limit in sheet.limits)
    return Assessment(
        title=sheet.loop.title,
        verdict=verdict(members, limits),
        members=tuple(members),
        worst=worst,
        limits=limits,
        notes=tuple(_notes(sheet, members)),
        instability=instability,
    )


def verdict(members: Iterable[MemberResult], limits: Iterable[LimitResult]) -> Verdict:
    """Return 'unstable' when any plant is, else 'missed' when any limit is, else 'met'."""
    if not all(member.stable for member in members):
        return "unstable"
    return "met" if all(limit.met for limit in limits) else "missed"


def worst_case(measure: Measure, members: Sequence[MemberResult]) -> WorstCase:
    """Return the worst value of a measure and its plant, the first of equals.

    A measure that does not exist is worse than any value, an unstable plant's first; unless that means "none", which
    is better than any.
    """
    name = measure.name
    present = [member for member in members if member.measures[name] is not None]
    missing = [member for member in members if member.measures[name] is None and not _means_none(measure, member)]
    if missing:
        return WorstCase(None, next((member for member in missing if not member.stable), missing[0]).name)
    if not present:
        return WorstCase(None, members[0].name, none=True)
    worst = max(present, key=lambda member: _badness(measure, member.measures[name]))
    return WorstCase(worst.measures[name], worst.name)


def meets(measure: Measure, worst: WorstCase, limit: float) -> bool:
    """Return whether the worst value keeps a limit; one that does not exist keeps it only when that means "none"."""
    value = worst.value
    if value is None:
        return worst.none
    if measure.at_least:
        return value >= limit
    return (abs(value) if measure.by_size else value) <= limit


def limit_result(name: str, limit: float, worst: WorstCase) -> LimitResult:
    """Return one line of the acceptance sheet."""
    return LimitResult(name, limit, worst.value, worst.plant, meets(BY_NAME[name], worst, limit))


def _means_none(measure: Measure, member: MemberResult) -> bool:
    """Return whether a plant has no such measure because there is nothing to measure, and that is good."""
    return measure.none_is_good and member.reasons.get(measure.name) == NO_OVERSHOOT


def _badness(measure: Measure, value: float | None) -> float:
    if value is None:
        return float("inf")
    if measure.at_least:
        return -value
    return abs(value) if measure.by_size else value


def _notes(sheet: Sheet, members: Sequence[MemberResult]) -> list[str]:
    notes = [] if sheet.limits else [NO_LIMITS]
    notes += _range_note(sheet)
    notes += dict.fromkeys(note for member in members for note in member.notes)
    return notes + _absences(members)


def _range_note(sheet: Sheet) -> list[str]:
    signal = sheet.loop.controlled
    end = signal.resting + sheet.trial.reference
    low = -inf if signal.low is None else signal.low
    high = inf if signal.high is None else signal.high
    if low <= end <= high:
        return []
    words = {"end": end, "low": low, "high": high}
    return [OUT_OF_RANGE.format(**{key: quantity(value, signal.unit) for key, value in words.items()})]


def _absences(members: Sequence[MemberResult]) -> list[str]:
    """Return one sentence for each reason and set of plants for which measures do not exist."""
    plants: dict[tuple[str, str], list[str]] = {}
    for member in members:
        for name, why in member.reasons.items():
            plants.setdefault((name, why), []).append(member.name)
    absent: dict[tuple[str, tuple[str, ...]], list[str]] = {}
    for measure in MEASURES:
        for (name, why), names in plants.items():
            if name == measure.name:
                absent.setdefault((why, tuple(names)), []).append(name)
    return [_absence(measures, why, names, len(members)) for (why, names), measures in absent.items()]


def _absence(names: Sequence[str], why: str, plants: Sequence[str], family: int) -> str:
    return f"No {', '.join(_told(names))}: {why}{_where(plants, family)}."


def _told(names: Sequence[str]) -> list[str]:
    """Return what measures are called; a whole group by its name."""
    groups = [(label, group) for label, group in _GROUPS if set(group) <= set(names)]
    grouped = {name for _, group in groups for name in group}
    return [label for label, _ in groups] + [BY_NAME[name].label for name in names if name not in grouped]


def _where(plants: Sequence[str], family: int) -> str:
    if len(plants) == family:
        return ""
    if len(plants) == 1:
        return " for the nominal plant" if plants[0] == "nominal" else f" for {plants[0]}"
    first = "the nominal plant" if plants[0] == "nominal" else plants[0]
    return f" for {len(plants)} of {family} plants, {first} among them"
