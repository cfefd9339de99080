"""The class of one tuning by the road of the assessment itself, for what bounds leave in doubt."""

from collections.abc import Mapping, Sequence
from dataclasses import replace

from tuner.assess import results_of
from tuner.errors import LoopError
from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN
from tuner.footing.ground import Ground
from tuner.judge.verdict import limit_result, verdict, worst_case
from tuner.model.controller import Controller
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet

_GRADES: Mapping[str, int] = {"met": FIRM, "missed": SOFT, "unstable": LOST}


def exactly(sheet: Sheet, ground: Ground, tuning: Controller, members: Sequence[int]) -> int:
    """Return the class of one tuning with some plants of the family, as the assessment has it.

    Unknown where the assessment refuses the loop: other tunings are none the worse for that.
    """
    try:
        results = results_of(replace(sheet, controller=tuning), [ground.members[i] for i in members])
    except (LoopError, ArithmeticError, ValueError, MemoryError):
        return UNKNOWN
    limits = [limit_result(name, limit, worst_case(BY_NAME[name], results)) for name, limit in sheet.limits]
    return _GRADES[verdict(results, limits)]
