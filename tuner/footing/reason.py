"""Why the loop would be firm, soft or lost with other gains, in one sentence, as the assessment itself finds it."""

from collections.abc import Mapping
from dataclasses import dataclass, replace

from tuner.assess import assess
from tuner.footing.classes import FIRM, LOST, SOFT, tuned
from tuner.judge.assessment import Assessment, LimitResult
from tuner.judge.wording import relation, shortfall
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
        Values by the keys of the sheet; 0 leaves out a number that is never 0.

    Raises
    ------
    LoopError
        When the loop cannot be computed, with the reason.
    """
    controller = sheet.controller
    for name, value in changes.items():
        controller = tuned(controller, name, value)
    changed = replace(sheet, controller=controller)
    return _reason(changed, assess(changed, family_size))


def _reason(sheet: Sheet, found: Assessment) -> Reason:
    if found.instability is not None:
        return Reason(LOST, found.instability.sentence.rstrip("."))
    missed = [limit for limit in found.limits if not limit.met]
    if missed:
        worst = max(missed, key=shortfall)
        more = f", and {len(missed) - 1} more missed" if len(missed) > 1 else ""
        return Reason(SOFT, f"{_told(sheet, worst, found)}{more}")
    if not found.limits:
        return Reason(FIRM, "stable with every plant; the sheet gives no limits")
    nearest = max(found.limits, key=shortfall)
    return Reason(FIRM, f"all limits met; nearest: {_told(sheet, nearest, found)}")


def _told(sheet: Sheet, limit: LimitResult, found: Assessment) -> str:
    where = "with the nominal plant" if limit.plant == "nominal" else f"at {found.drift_of(limit.plant)}"
    return f"{relation(limit.measure, limit.value, limit.limit, sheet.loop)} {where}"
