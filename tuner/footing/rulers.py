"""Whole rulers: the class at every notch of every gain, and where it changes in between."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from tuner.footing.affine import MOTIONLESS
from tuner.footing.blocks import paint_block
from tuner.footing.classes import (
    LOST,
    UNKNOWN,
    Classes,
    Edge,
    PaintedTrack,
    Track,
    is_of_block,
    never,
    painted,
    tuned,
)
from tuner.footing.exact import exactly
from tuner.footing.grading import Grading
from tuner.footing.ground import Ground, ground_of
from tuner.footing.stability import Counts, Stretches, counts, lost_when_off, stretches
from tuner.footing.tunings import Tunings
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Array

_WIDEST = 0.009
"""Share of a value within which an edge lies between two notches; in the middle it is then within half of that."""

_POINTS = 15
"""Values looked at between two notches where the class changes."""

_BESIDE = 1e-4
"""How near to the edge of stability the stable side is looked at, as a share of the value."""

_ROUNDS = 12

Flags = NDArray[np.bool_]


@dataclass(slots=True, eq=False)
class _Line:
    """A track while it is being painted: values looked at so far, rising, and their classes.

    `off` says whether it is lost where the number is zero, None where that is not known.
    """

    track: Track
    stretches: Stretches | None
    off: bool | None
    values: Array
    classes: Classes
    doubts: dict[float, list[int]]

    def known(self, values: Array) -> tuple[Flags, Flags]:
        """Return where values are lost, and where that is not sure."""
        if self.stretches is None:
            return np.zeros(len(values), dtype=bool), np.ones(len(values), dtype=bool)
        lost, unsure = self.stretches.at(values), self.stretches.unsure(values)
        lost[values <= 0.0], unsure[values <= 0.0] = bool(self.off), self.off is None
        return lost, unsure

    def add(self, values: Array, classes: Classes, doubts: Mapping[float, list[int]]) -> None:
        """Take in further values, and with which plants those that are unknown are in doubt."""
        self.doubts.update(doubts)
        together = np.concatenate((self.values, values))
        order = np.argsort(together, kind="stable")
        self.values, self.classes = together[order], np.concatenate((self.classes, classes))[order]


@dataclass(frozen=True, slots=True, eq=False)
class _Asked:
    """Values of some lines put together, for one call."""

    lines: Sequence[_Line]
    values: Sequence[Array]


def paint_rulers(
    sheet: Sheet,
    tracks: Sequence[Track],
    family_size: int | None = None,
    stop: Callable[[], bool] = never,
    *,
    fine: bool = True,
) -> tuple[PaintedTrack, ...]:
    """Return each track with the class at all its values and the edges between them.

    The classes are those that `assess` gives with the gain at that value: 'met' is firm, 'missed' soft, 'unstable'
    lost. An edge of stability is exact, any other within 0.5 % of its value.

    Parameters
    ----------
    sheet : Sheet
        What is held while one gain moves.
    tracks : sequence of Track
    family_size : int or None
        Plants to judge by; as many as the sheet says unless told.
    stop : callable
        Asked now and then; the question is given up when it returns true.
    fine : bool
        Whether edges are looked for between notches; if not, those that are not of stability lie half-way.

    Raises
    ------
    LoopError
        When a loop cannot be computed, with the reason.
    Overtaken
        When `stop` said so.
    """
    size = sheet.trial.family_size if family_size is None else family_size
    ground = ground_of(sheet, size)
    gains = [track for track in tracks if not is_of_block(track.name)]
    found = {track.name: track for track in _Painter(sheet, ground, size, stop).paint(gains, fine=fine)}
    found |= {
        track.name: paint_block(sheet, ground, track, stop, fine=fine) for track in tracks if is_of_block(track.name)
    }
    return tuple(found[track.name] for track in tracks)


@dataclass(frozen=True, slots=True, eq=False)
class _Painter:
    sheet: Sheet
    ground: Ground
    size: int
    stop: Callable[[], bool]

    def paint(self, tracks: Sequence[Track], *, fine: bool) -> tuple[PaintedTrack, ...]:
        """Paint all tracks together."""
        lines = self._lines(tracks)
        values = [np.concatenate((line.track.values, _beside(line), self._present(line.track))) for line in lines]
        self._grade(lines, values, settle=True)
        if fine:
            self._narrow(lines)
        return tuple(_finished(line) for line in lines)

    def _present(self, track: Track) -> Array:
        """Return the value that the sheet has, where it lies between notches: what is there is never passed over."""
        value = self.sheet.controller.value(track.name)
        inside = value is not None and len(track.values) and track.values[0] < value < track.values[-1]
        return np.array([value]) if inside and value not in track.values else np.zeros(0)

    def _lines(self, tracks: Sequence[Track]) -> list[_Line]:
        base = counts(self.sheet, self.ground.members)
        found = [stretches(self.sheet, self.ground.members, track, self.size, base) for track in tracks]
        off = self._off(tracks, base)
        none = np.zeros(0), np.zeros(0, dtype=np.int8)
        return [_Line(track, known, off.get(track.name), *none, {}) for track, known in zip(tracks, found, strict=True)]

    def _off(self, tracks: Sequence[Track], base: Counts) -> dict[str, bool]:
        """Return whether some plant is unstable where a number is zero; for what no pole depends on, as it is now."""
        names = [track.name for track in tracks if (track.values <= 0.0).any()]
        moving = lost_when_off(self.sheet, self.ground.members, [name for name in names if name not in MOTIONLESS])
        return dict.fromkeys(MOTIONLESS, bool(base.any())) | moving

    def _grade(self, lines: Sequence[_Line], values: Sequence[Array], *, settle: bool) -> None:
        """Find the classes at some values of some lines, all in one go."""
        known = [line.known(some) for line, some in zip(lines, values, strict=True)]
        changes = [
            ((line.track.name, value),) for line, some in zip(lines, values, strict=True) for value in some.tolist()
        ]
        if not changes:
            return
        grading = Grading(self.sheet, self.ground, Tunings(self.sheet.controller, changes), self.stop)
        lost, unsure = (np.concatenate(part) for part in zip(*known, strict=True))
        classes = grading.classes(lost, unsure, settle=settle)
        ends = np.cumsum([0, *(len(some) for some in values)]).tolist()
        for line, some, (begin, end) in zip(lines, values, pairwise(ends), strict=True):
            doubts = {float(some[at - begin]): who for at, who in grading.doubts.items() if begin <= at < end}
            line.add(some, classes[begin:end], doubts)

    def _narrow(self, lines: Sequence[_Line]) -> None:
        """Look between notches where the class changes, until it changes within the share of a value."""
        self._grade(lines, [_between(line) for line in lines], settle=False)
        for line in lines:
            for _ in range(_ROUNDS):
                middle = _still_wide(line)
                if not len(middle):
                    break
                self._settle(line, middle)

    def _settle(self, line: _Line, values: Array) -> None:
        """Find the class at values for good."""
        new = values[~np.isin(values, line.values)]
        self._grade([line], [new], settle=True)
        for at in np.flatnonzero(np.isin(line.values, values) & (line.classes == UNKNOWN)).tolist():
            value = float(line.values[at])
            tuning = tuned(self.sheet.controller, line.track.name, value)
            line.classes[at] = exactly(self.sheet, self.ground, tuning, line.doubts[value])


def _beside(line: _Line) -> Array:
    """Return values right beside the edges of stability, on their stable side and on the track."""
    if line.stretches is None or not len(line.track.values):
        return np.zeros(0)
    low, high = line.track.values[0], line.track.values[-1]
    edges, lost = line.stretches.edges, line.stretches.lost
    near = edges * np.where(lost[1:], 1.0 - _BESIDE, 1.0 + _BESIDE)
    return np.asarray(near[(near > low) & (near < high)])


def _changes(line: _Line) -> list[tuple[float, float]]:
    """Return neighbouring values, unknown ones left out, between which the class changes.

    Not those with an edge of stability between them: where that is, is known.
    """
    sure = (line.classes != UNKNOWN) & (line.values > 0.0)
    values, classes = line.values[sure], line.classes[sure]
    at = np.flatnonzero(classes[1:] != classes[:-1])
    pairs = [(float(values[i]), float(values[i + 1])) for i in at.tolist()]
    return [one for one in pairs if not _parted(line, *one)]


def _parted(line: _Line, low: float, high: float) -> bool:
    """Return whether an edge of stability lies between two values."""
    return line.stretches is not None and bool(((line.stretches.edges > low) & (line.stretches.edges < high)).any())


def _is_wide(low: float, high: float) -> bool:
    return high - low > _WIDEST * high


def _between(line: _Line) -> Array:
    """Return values to look at where the class changes."""
    found = [np.geomspace(low, high, _POINTS + 2)[1:-1] for low, high in _changes(line) if _is_wide(low, high)]
    return np.concatenate(found) if found else np.zeros(0)


def _still_wide(line: _Line) -> Array:
    """Return one value in each stretch in which the class changes and that is too wide: one looked at if any."""
    found = []
    for low, high in _changes(line):
        if _is_wide(low, high):
            inside = line.values[(line.values > low) & (line.values < high)]
            found.append(inside[len(inside) // 2] if len(inside) else (low * high) ** 0.5)
    return np.array(found)


def _finished(line: _Line) -> PaintedTrack:
    """Return the track with the classes of its notches, and the edges between all that was looked at."""
    places = np.searchsorted(line.values, line.track.values)
    edges = [*_edges_of_stability(line), *_other_edges(line)]
    return painted(line.track, line.classes[places], edges)


def _other_edges(line: _Line) -> list[Edge]:
    # A notch that is unknown still has no answer; any other value may just not have been asked for good.
    sure = (line.classes != UNKNOWN) | np.isin(line.values, line.track.values)
    values, classes = line.values[sure], line.classes[sure]
    at = np.flatnonzero(classes[1:] != classes[:-1])
    return [
        Edge(_middle(float(values[i]), float(values[i + 1])), int(classes[i]), int(classes[i + 1]))
        for i in at.tolist()
        if not _parted(line, float(values[i]), float(values[i + 1]))
    ]


def _middle(low: float, high: float) -> float:
    return (low * high) ** 0.5 if low > 0.0 else 0.5 * high


def _edges_of_stability(line: _Line) -> list[Edge]:
    """Return the exact edges on the track, with the class on the stable side."""
    if line.stretches is None or not len(line.track.values):
        return []
    low, high = line.track.values[0], line.track.values[-1]
    found = []
    for value, before, after in zip(
        line.stretches.edges.tolist(), line.stretches.lost[:-1], line.stretches.lost[1:], strict=True
    ):
        if low < value < high:
            beside = value * (1.0 - _BESIDE if after else 1.0 + _BESIDE)
            near = int(line.classes[np.abs(line.values - beside).argmin()])
            found.append(Edge(value, LOST if before else near, LOST if after else near))
    return found
