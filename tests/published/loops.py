"""Loops from published tables, made as an engineer would: a tuning sheet with a plant and a controller."""

from collections.abc import Callable

from tuner.model.controller import Controller
from tuner.model.family import Member
from tuner.model.loop import Loop as LoopTable
from tuner.model.plant import CoefficientPlant, ExpressionPlant, Plant
from tuner.model.sheet import Sheet, Trial
from tuner.simulate.loop import Loop, loop_of
from tuner.simulate.margins import Margins, margins
from tuner.simulate.poles import Poles, closed_loop_poles

UNITY = Controller(gain_1=1.0)


def plant(expression: str) -> Plant:
    """Return a plant written as a formula."""
    return ExpressionPlant(expression)


def coefficients(numerator: tuple[float, ...], denominator: tuple[float, ...], dead_time: float = 0.0) -> Plant:
    """Return a plant given by its coefficients."""
    return CoefficientPlant(numerator, denominator, dead_time)


def loop(what: Plant | str, controller: Controller = UNITY) -> Loop:
    """Return the loop of a plant and a controller, made through a sheet."""
    made = plant(what) if isinstance(what, str) else what
    return loop_of(Sheet(LoopTable("published"), made, controller, Trial(duration=1.0)), Member("nominal", {}))


def poles_of(what: Plant | str, controller: Controller = UNITY) -> Poles:
    """Return the closed-loop poles."""
    return closed_loop_poles(loop(what, controller))


def margins_of(what: Plant | str, controller: Controller = UNITY) -> Margins:
    """Return the margins of a loop that is stable."""
    made = loop(what, controller)
    poles = closed_loop_poles(made)
    assert poles.stable
    return margins([made], [poles.values])[0]


def limit(stable: Callable[[float], bool], inside: float, outside: float) -> float:
    """Return, by bisection, the gain at which stability ends between one that is stable and one that is not."""
    assert stable(inside)
    assert not stable(outside)
    while abs(outside - inside) > 1e-12 * abs(outside):
        middle = 0.5 * (inside + outside)
        if middle in {inside, outside}:
            break
        inside, outside = (middle, outside) if stable(middle) else (inside, middle)
    return 0.5 * (inside + outside)
