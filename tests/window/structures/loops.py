"""Comparisons of small loops, made by the true road."""

from functools import cache

from tests.compare.loops import mash
from tuner.compare.comparison import Comparison, compare_structures
from tuner.judge.overlay import overlay
from tuner.model.sheet import Sheet
from tuner.window.beside import Stop
from tuner.window.in_sight import Question, Request
from tuner.window.structures.compared import Compared, comparing_by


def compare(sheet: Sheet, *, stop: Stop = lambda: False) -> tuple[Comparison, ...]:
    """Return the comparisons of a sheet over a small family."""
    return compare_structures(sheet, 5, stop=stop)


PLANT = "gain exp(-0.5 s)/((5 s + 1)(s + 1))"


@cache
def compared(plant: str = PLANT, kp: float = 2.0) -> Compared:
    """Return what the page shows of a loop."""
    sheet = mash(plant)
    controller = sheet.controller.with_value("kp", kp)
    asked = Sheet(sheet.loop, sheet.plant, controller, sheet.trial, sheet.actuator, sheet.sensor, sheet.limits)
    found = comparing_by(compare, overlay)(Request(1, Question(asked)), lambda: False).found
    assert isinstance(found, Compared)
    return found
