"""A footing in closed form, of the made-up loop: kp decides alone. It stands in for the batch simulation."""

import threading
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field

import numpy as np

from tuner.footing.classes import FIRM, LOST, SOFT, WORDS, Edge, Overtaken, PaintedTrack, Track, painted
from tuner.model.sheet import Sheet

Stop = Callable[[], bool]

SOFT_FROM, LOST_FROM = 2.0, 3.5
"""Values of kp, of whichever track."""


def grade(kp: float) -> int:
    """Return the class that a proportional gain gives."""
    return FIRM if kp < SOFT_FROM else SOFT if kp < LOST_FROM else LOST


def paint(track: Track, sheet: Sheet) -> PaintedTrack:
    """Return a track: three classes along the proportional gain, one along everything else."""
    if track.name not in ("kp", "kc"):
        present = grade(sheet.controller.gain_1)
        return painted(track, np.full(len(track.values), present, dtype=np.int8), ())
    classes = np.array([grade(value) for value in track.values], dtype=np.int8)
    return painted(track, classes, (Edge(SOFT_FROM, FIRM, SOFT), Edge(LOST_FROM, SOFT, LOST)))


@dataclass(slots=True)
class Painting:
    """Paints tracks and notes what was asked, and in which threads.

    Parameters
    ----------
    hold : callable
        Called before every painting, with its `stop`; a test makes it wait there.
    """

    hold: Callable[[Stop], None] = lambda _stop: None
    asked: list[tuple[float, tuple[str, ...]]] = field(default_factory=list)
    threads: set[int] = field(default_factory=set)
    fine: list[bool] = field(default_factory=list)

    def __call__(
        self, sheet: Sheet, tracks: Sequence[Track], *, stop: Stop, fine: bool = True
    ) -> tuple[PaintedTrack, ...]:
        """Return the painted tracks."""
        self.fine.append(fine)
        self.threads.add(threading.get_ident())
        self.asked.append((sheet.controller.gain_1, tuple(track.name for track in tracks)))
        self.hold(stop)
        if stop():
            raise Overtaken
        return tuple(paint(track, sheet) for track in tracks)


@dataclass(frozen=True, slots=True)
class Said:
    """A class and a sentence."""

    grade: int
    sentence: str


@dataclass(slots=True)
class Reasons:
    """Gives reasons, and notes for which places."""

    asked: list[dict[str, float]] = field(default_factory=list)
    threads: set[int] = field(default_factory=set)

    def __call__(self, sheet: Sheet, changes: Mapping[str, float], /) -> Said:
        """Return a sentence that names the class and the place."""
        self.threads.add(threading.get_ident())
        self.asked.append(dict(changes))
        found = grade(changes.get("kp", changes.get("kc", sheet.controller.gain_1)))
        return Said(found, f"made up: {WORDS[found]} with {changes}")
