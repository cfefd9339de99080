"""Why the loop would be firm, soft or lost with other gains, in one sentence, as the assessment itself finds it."""

from collections.abc import Mapping
from dataclasses import dataclass, replace

from tuner.assess import assess
from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.judge.assessment import Assessment, LimitResult
from tuner.judge.wording import relation
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet


@dataclass(frozen=True, slots=True)
class Reason:
    """The class, and the sentence that says why."""

    grade: int
    sentence: str


def reason_at(sheet: Sheet, changes: Mapping[str, float], family_size: int | None = None) -> Reason:
    """Return what the loop would be with some numbers of the controller changed, and why.

    Parameters
    ----------
    changes : mapping of str to float
        Values by the keys of the sheet, as `Controller.with_value` takes them.

    Raises
    ------
    LoopError
        When the loop cannot be computed, with the reason.
    """
    controller = sheet.controller
    for name, value in changes.items():
        controller = controller.with_value(name, value)
    changed = replace(sheet, controller=controller)
    return _reason(changed, assess(changed, family_size))


def _reason(sheet: Sheet, found: Assessment) -> Reason:
    if found.instability is not None:
        return Reason(LOST, found.instability.sentence.rstrip("."))
    missed = [limit for limit in found.limits if not limit.met]
    if missed:
        worst = max(missed, key=_shortfall)
        more = f", and {len(missed) - 1} more missed" if len(missed) > 1 else ""
        return Reason(SOFT, f"{_told(sheet, worst)}{more}")
    if not found.limits:
        return Reason(FIRM, "stable with every plant; the sheet gives no limits")
    nearest = max(found.limits, key=_shortfall)
    return Reason(FIRM, f"all limits met; nearest: {_told(sheet, nearest)}")


def _told(sheet: Sheet, limit: LimitResult) -> str:
    where = "with the nominal plant" if limit.plant == "nominal" else f"at {limit.plant}"
    return f"{relation(limit.measure, limit.value, limit.limit, sheet.loop)} {where}"


def _shortfall(limit: LimitResult) -> float:
    """Return how near a value is to its limit, or how far beyond: above 0 when missed, in parts of the limit."""
    measure = BY_NAME[limit.measure]
    if limit.value is None:
        return float("inf") if not limit.met else -1.0
    value = abs(limit.value) if measure.by_size else limit.value
    beyond = limit.limit - value if measure.at_least else value - limit.limit
    return beyond / abs(limit.limit) if limit.limit else beyond
