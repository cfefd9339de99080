"""The ruler of a number of a block beside the law, such as a filter: every value by the road of the assessment itself.

A block changes what lies between effort and measurement, or what the law is fed, so that nothing that is kept of a
loop for its gains holds along it. There are few such rulers, and they are painted with fewer notches.
"""

from collections.abc import Callable
from dataclasses import replace
from itertools import pairwise

import numpy as np

from tuner.errors import LoopError
from tuner.footing.classes import FIRM, LOST, UNKNOWN, Edge, Overtaken, PaintedTrack, Track, painted, tuned
from tuner.footing.exact import exactly
from tuner.footing.ground import Ground
from tuner.model.sheet import Sheet
from tuner.simulate.loop import loops_of
from tuner.simulate.poles import family_poles

EVERY = 3
"""Of the notches of a track, one in so many is looked at, and both ends."""

_FIRST = 3
"""Plants that a value is tried with before all the others: those that miss limits most."""

_WIDEST = 0.009
"""Share of a value within which an edge is found."""

_ROUNDS = 12


def paint_block(sheet: Sheet, ground: Ground, track: Track, stop: Callable[[], bool], *, fine: bool) -> PaintedTrack:
    """Return a track of a block's number with its classes and edges, as `rulers.paint_rulers` does for gains.

    Notches between two that were looked at have the class of the nearer one, by the edge between them.

    Raises
    ------
    Overtaken
        When `stop` said so.
    """

    def grade(value: float) -> int:
        if stop():
            raise Overtaken("a newer question has come")
        return grade_at(sheet, ground, track.name, value)

    values = track.values[sorted({*range(0, len(track.values), EVERY), len(track.values) - 1})].tolist()
    known = [(value, grade(value)) for value in values]
    edges = [_edge(one, other, grade if fine else None) for one, other in pairwise(known) if one[1] != other[1]]
    rough = painted(track, np.full(len(track.values), known[0][1], dtype=np.int8), edges)
    return replace(rough, classes=rough.class_at(track.values))


def grade_at(sheet: Sheet, ground: Ground, name: str, value: float) -> int:
    """Return the class of a loop with one number of a block changed."""
    tuning = tuned(sheet.controller, name, value)
    members = ground.members
    try:
        poles = family_poles(loops_of(replace(sheet, controller=tuning), members))
    except (LoopError, ArithmeticError, ValueError, MemoryError):
        return UNKNOWN
    if not all(one.stable for one in poles):
        return LOST
    if not sheet.limits:
        return FIRM
    order = np.argsort(-ground.misses, kind="stable").tolist()
    for some in (order[:_FIRST], order[_FIRST:]):
        found = exactly(sheet, ground, tuning, some) if some else FIRM
        if found != FIRM:
            return found
    return FIRM


def _edge(one: tuple[float, int], other: tuple[float, int], grade: Callable[[float], int] | None) -> Edge:
    """Return the edge between two values of different class: halved until it is narrow, or half-way at once."""
    (low, below), (high, above) = one, other
    for _ in range(_ROUNDS if grade is not None else 0):
        if high - low <= _WIDEST * high:
            break
        middle = _middle(low, high)
        found = grade(middle) if grade is not None else below
        low, high, above = (middle, high, above) if found == below else (low, middle, found)
    return Edge(_middle(low, high), below, above)


def _middle(low: float, high: float) -> float:
    return float((low * high) ** 0.5) if low > 0.0 else 0.5 * (low + high)
