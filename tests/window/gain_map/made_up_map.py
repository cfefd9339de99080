"""A gain map in closed form: kp and ki decide, by their product and by kp alone. It stands in for the simulation."""

import threading
from collections.abc import Callable
from dataclasses import dataclass, field

import numpy as np

from tuner.errors import LoopError
from tuner.footing.classes import FIRM, LOST, SOFT, Overtaken, Track
from tuner.footing.gain_map import GainMap
from tuner.model.sheet import Sheet

Stop = Callable[[], bool]

SOFT_FROM, LOST_FROM = 2.5, 10.0
"""Values of kp."""


def classes(x: Track, y: Track) -> np.ndarray:
    """Return three classes across, the same ones upwards."""
    across = np.where(x.values < SOFT_FROM, FIRM, np.where(x.values < LOST_FROM, SOFT, LOST)).astype(np.int8)
    return np.broadcast_to(across, (len(y.values), len(x.values))).copy()


@dataclass(slots=True)
class Mapping:
    """Makes maps and notes what was asked, and in which threads.

    Parameters
    ----------
    hold : callable
        Called before every map, with its `stop`; a test makes it wait there.
    """

    hold: Callable[[Stop], None] = lambda _stop: None
    asked: list[tuple[Sheet, str, str, str, int]] = field(default_factory=list)
    threads: set[int] = field(default_factory=set)
    refusal: str = ""

    @property
    def counts(self) -> list[int]:
        """How many values there were across in each map."""
        return [asked[4] for asked in self.asked]

    def __call__(self, sheet: Sheet, x: Track, y: Track, measure: str, *, stop: Stop) -> GainMap:
        """Return the map; the measure is ten times kp."""
        self.threads.add(threading.get_ident())
        self.asked.append((sheet, x.name, y.name, measure, len(x.values)))
        self.hold(stop)
        if stop():
            raise Overtaken
        if self.refusal:
            raise LoopError(self.refusal)
        found = classes(x, y)
        worst = np.where(found == LOST, np.nan, np.broadcast_to(10.0 * x.values, found.shape))
        return GainMap(x, y, found, measure, worst)
