"""What passes between the rulers and their workers: paint for all of them, and the reason at one place."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from types import MappingProxyType
from typing import Protocol

import numpy as np

from tuner.footing.classes import PaintedTrack, Track, is_of_block, tuned
from tuner.model.sheet import Sheet
from tuner.window.beside import Stop


@dataclass(frozen=True, slots=True, eq=False)
class PaintRequest:
    """A sheet, and the tracks of its rulers; the newest `number` wins.

    `fine` asks for edges between the notches too, which a hand on the move does not wait for.
    """

    number: int
    sheet: Sheet
    tracks: tuple[Track, ...]
    fine: bool = True


@dataclass(frozen=True, slots=True, eq=False)
class Painting:
    """What all rulers of a sheet are painted by."""

    number: int
    sheet: Sheet
    tracks: Mapping[str, PaintedTrack] = field(default_factory=lambda: MappingProxyType({}))
    fine: bool = True
    stale: frozenset[str] = frozenset()
    """Tracks of blocks that were left as they were: a hand on the move does not wait for them."""

    def holds(self, name: str, sheet: Sheet) -> bool:
        """Tell whether the paint of one ruler is true of another sheet too: one that differs in that gain alone."""
        return name in self.tracks and name not in self.stale and without(self.sheet, name) == without(sheet, name)


def without(sheet: Sheet, name: str) -> Sheet:
    """Return a sheet in which one gain, and what the footing does not depend on, is left out; it can be computed."""
    controller = replace(tuned(sheet.controller, name, 0.0), as_found=None)
    return replace(sheet, controller=controller)


class PaintRulers(Protocol):
    """Finds the classes along tracks."""

    def __call__(
        self, sheet: Sheet, tracks: Sequence[Track], *, stop: Stop, fine: bool = True
    ) -> tuple[PaintedTrack, ...]:
        """Return one painted track for each that is asked; see `tuner.footing.rulers.paint_rulers`."""
        ...


class Painter:
    """Paints all rulers of a sheet, and takes over from the painting before what the change left as it was.

    While one gain is moved, its own ruler stays true: all others are held.

    Parameters
    ----------
    paint : callable
        Finds the classes along tracks.
    """

    def __init__(self, paint: PaintRulers) -> None:
        self._paint = paint
        self._last: Painting | None = None

    def answer(self, request: PaintRequest, stop: Stop) -> Painting:
        """Return the painting of a request.

        Raises
        ------
        Overtaken
            When `stop` said so before it was done.
        LoopError
            When the loop cannot be computed.
        """
        known = {asked.name: track for asked in request.tracks if (track := self._known(request, asked)) is not None}
        stale = {} if request.fine else {track.name: track for track in self._left(request) if track.name not in known}
        new = [track for track in request.tracks if track.name not in known | stale]
        painted = self._paint(request.sheet, new, stop=stop, fine=request.fine) if new else ()
        found = known | stale | {track.name: track for track in painted}
        self._last = Painting(
            request.number, request.sheet, MappingProxyType(found), request.fine, stale=frozenset(stale)
        )
        return self._last

    def _left(self, request: PaintRequest) -> list[PaintedTrack]:
        """Return the tracks of blocks as they were painted last."""
        last = {} if self._last is None else self._last.tracks
        return [last[asked.name] for asked in request.tracks if is_of_block(asked.name) and asked.name in last]

    def _known(self, request: PaintRequest, track: Track) -> PaintedTrack | None:
        last = self._last
        if last is None or not last.holds(track.name, request.sheet) or (request.fine and not last.fine):
            return None
        painted = last.tracks[track.name]
        return painted if np.array_equal(painted.values, track.values) else None


@dataclass(frozen=True, slots=True)
class ReasonRequest:
    """A place on a ruler; None for the value is an absent one."""

    number: int
    sheet: Sheet
    name: str
    value: float | None


@dataclass(frozen=True, slots=True)
class Reading:
    """What holds at a place on a ruler, and why."""

    number: int
    sheet: Sheet
    name: str
    value: float | None
    grade: int
    sentence: str


class ReasonAt(Protocol):
    """Says what holds with some numbers of the controller changed, and why."""

    def __call__(self, sheet: Sheet, changes: Mapping[str, float], /) -> "Reasoned":
        """Return the reason; see `tuner.footing.reason.reason_at`."""
        ...


class Reasoned(Protocol):
    """What holds, and why, in a sentence."""

    @property
    def grade(self) -> int:
        """The class."""
        ...

    @property
    def sentence(self) -> str:
        """Why."""
        ...


ReadPlace = Callable[[ReasonRequest, Stop], Reading]


def reading_by(reason_at: ReasonAt) -> ReadPlace:
    """Return what answers requests for the reason at a place."""

    def read(request: ReasonRequest, _stop: Stop) -> Reading:
        found = reason_at(request.sheet, {request.name: request.value or 0.0})
        return Reading(request.number, request.sheet, request.name, request.value, found.grade, found.sentence)

    return read
