"""Keeps what happens in a rehearsal in a file of its own, so that hours of it take no memory."""

import tempfile
from bisect import bisect_left
from collections.abc import Iterator
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.rehearse.strip import Strip

MOST_SAMPLES = 5_000_000
"""Samples that are kept at most; then the recording has ended."""

_COLUMNS = 7
"""Time, reference, measurement, effort, disturbance, whether by hand, whether at a limit."""

_PIECE = 10_000


class Event(NamedTuple):
    """Something that was done, in words, and the time at which it took hold."""

    time: float
    words: str


class Piece(NamedTuple):
    """Some samples of a recording, arrays of shape (n,), and the events among them."""

    t: NDArray[np.float64]
    reference: NDArray[np.float64]
    measurement: NDArray[np.float64]
    effort: NDArray[np.float64]
    disturbance: NDArray[np.float64]
    manual: NDArray[np.bool_]
    limited: NDArray[np.bool_]
    events: tuple[Event, ...]


class Recorder:
    """A recording; it ends with `close`, or when it is let go."""

    def __init__(self) -> None:
        self._file = tempfile.TemporaryFile(prefix="trimwright-")  # noqa: SIM115 - it lives as long as the recorder
        self._events: list[Event] = []
        self.samples = 0

    @property
    def full(self) -> bool:
        """Whether no more is kept."""
        return self.samples >= MOST_SAMPLES

    def add(self, strip: Strip) -> None:
        """Keep some samples, as many as there is room for."""
        count = min(len(strip), MOST_SAMPLES - self.samples)
        columns = (strip.t, strip.r, strip.ym, strip.u, strip.d, strip.manual, strip.limited)
        rows = np.column_stack([np.asarray(column[:count], dtype=float) for column in columns])
        self._file.seek(0, 2)
        self._file.write(rows.tobytes())
        self.samples += count

    def note(self, time: float, words: str) -> None:
        """Keep that something was done, which takes hold at a time."""
        self._events.append(Event(time, words))

    def pieces(self) -> Iterator[Piece]:
        """Yield all that was kept, piece by piece, each event with the first sample at or after its time."""
        events = sorted(self._events)
        begin = 0
        for first in range(0, self.samples, _PIECE):
            count = min(_PIECE, self.samples - first)
            rows = self._read(first, count)
            last = first + count >= self.samples
            end = len(events) if last else bisect_left(events, (np.nextafter(rows[-1, 0], np.inf), ""))
            yield Piece(
                rows[:, 0], rows[:, 1], rows[:, 2], rows[:, 3], rows[:, 4],
                rows[:, 5] > 0.0, rows[:, 6] > 0.0, tuple(events[begin:end]),
            )  # fmt: skip
            begin = end

    def _read(self, first: int, count: int) -> NDArray[np.float64]:
        self._file.seek(first * _COLUMNS * 8)
        rows: NDArray[np.float64] = np.frombuffer(self._file.read(count * _COLUMNS * 8)).reshape(count, _COLUMNS)
        return rows

    def close(self) -> None:
        """Let everything go."""
        self._file.close()
