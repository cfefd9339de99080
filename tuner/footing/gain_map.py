"""Two gains at once: the class at every pair of their values, and what one measure comes to there."""

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np

from tuner.footing.classes import LOST, Classes, Overtaken, Track, never, tuned
from tuner.footing.grading import Grading
from tuner.footing.ground import ground_of
from tuner.footing.stability import Flags, stretches
from tuner.footing.tunings import Tunings
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Array


@dataclass(frozen=True, slots=True, eq=False)
class GainMap:
    """Classes over two gains.

    Parameters
    ----------
    x, y : Track
        The gains, of nx and ny values.
    classes : ndarray of int, shape (ny, nx)
    measure : str
        Which measure `worst` is of; empty for none.
    worst : ndarray, shape (ny, nx)
        Its worst value over the family; not a number where it is lost, or the measure does not exist.
    """

    x: Track
    y: Track
    classes: Classes
    measure: str
    worst: Array


def paint_map(  # noqa: PLR0913, PLR0917 - the question as it is asked
    sheet: Sheet,
    x: Track,
    y: Track,
    measure: str = "",
    family_size: int | None = None,
    stop: Callable[[], bool] = never,
) -> GainMap:
    """Return the class at every pair of values of two gains, as `assess` gives it.

    Parameters
    ----------
    sheet : Sheet
        What is held; its own values of the two gains do not matter.
    measure : str
        A measure to tell the worst value of, within the bounds that the points of a trial give; empty for none.
    family_size : int or None
        Plants to judge by; as many as the sheet says unless told.
    stop : callable
        Asked now and then; the question is given up when it returns true.

    Raises
    ------
    LoopError
        When a loop cannot be computed, with the reason.
    Overtaken
        When `stop` said so.
    """
    size = sheet.trial.family_size if family_size is None else family_size
    ground = ground_of(sheet, size)
    lost, unsure = _lost(sheet, x, y, size, stop)
    pairs = [((y.name, up), (x.name, across)) for up in y.values.tolist() for across in x.values.tolist()]
    grading = Grading(sheet, ground, Tunings(sheet.controller, pairs), stop)
    classes = grading.classes(lost.ravel(), unsure.ravel())
    worst = grading.watch(measure, classes < LOST) if measure else np.full(len(pairs), np.nan)
    return GainMap(x, y, classes.reshape(lost.shape), measure, worst.reshape(lost.shape))


def _lost(sheet: Sheet, x: Track, y: Track, size: int, stop: Callable[[], bool]) -> tuple[Flags, Flags]:
    """Return where some plant is unstable and where that is not sure, row by row, each a track of its own."""
    members = ground_of(sheet, size).members
    lost, unsure = (
        np.zeros((len(y.values), len(x.values)), dtype=bool),
        np.ones((len(y.values), len(x.values)), dtype=bool),
    )
    for row, value in enumerate(y.values.tolist()):
        if stop():
            raise Overtaken("a newer question has come")
        held = replace(sheet, controller=tuned(sheet.controller, y.name, value))
        known = stretches(held, members, x, size, None)
        if known is not None:
            lost[row], unsure[row] = known.at(x.values), known.unsure(x.values) | (x.values <= 0.0)
    return lost, unsure
