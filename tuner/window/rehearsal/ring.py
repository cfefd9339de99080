"""What the strip chart holds: the samples of the last while, in arrays that never grow."""

from math import ceil
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.rehearse.strip import Strip

Array = NDArray[np.float64]

MOST = 12_000
"""Points of each curve that are held for one width of the chart."""

_SIGNALS = 5


class Signals(NamedTuple):
    """Curves over time, shape (n,) each: reference, output, measurement, effort, and where a limit changed it."""

    t: Array
    r: Array
    y: Array
    ym: Array
    u: Array
    limited: Array


class Ring:
    """The samples of the last `span`; where they are too many, the lowest and the highest of every few.

    Parameters
    ----------
    span : float
        Width of the chart, time units.
    sample_time : float
        Time between samples, time units.
    """

    def __init__(self, span: float, sample_time: float) -> None:
        samples = ceil(span / sample_time) + 1
        self.each = 1 if samples <= MOST else ceil(2.0 * samples / MOST)
        """Samples that become one pair of points; 1 where each is a point of its own."""
        self._points = samples if self.each == 1 else 2 * (ceil(samples / self.each) + 1)
        # Twice as much as is shown: what is old is thrown away half a room at a time.
        self._held = np.empty((2 * self._points, 1 + _SIGNALS))
        self._count = 0
        self._waiting = np.empty((0, 1 + _SIGNALS))

    def add(self, strip: Strip) -> None:
        """Take in samples that follow the last ones."""
        rows = np.column_stack((strip.t, strip.r, strip.y, strip.ym, strip.u, strip.limited.astype(float)))
        if self.each > 1:
            rows = self._thinned(rows)
        rows = rows[-self._points :]
        if self._count + len(rows) > len(self._held):
            kept = self._points - len(rows)
            self._held[:kept] = self._held[self._count - kept : self._count]
            self._count = kept
        self._held[self._count : self._count + len(rows)] = rows
        self._count += len(rows)

    def _thinned(self, rows: Array) -> Array:
        """Return a pair of points for every few samples, those of each signal in their order in time."""
        rows = np.vstack((self._waiting, rows))
        whole = len(rows) // self.each
        self._waiting = rows[whole * self.each :].copy()
        groups = rows[: whole * self.each].reshape(whole, self.each, rows.shape[1])
        low, high = groups.min(axis=1), groups.max(axis=1)
        falls = groups.argmax(axis=1) < groups.argmin(axis=1)
        pairs = np.stack((np.where(falls, high, low), np.where(falls, low, high)), axis=1)
        pairs[:, 0, 0], pairs[:, 1, 0] = groups[:, 0, 0], groups[:, self.each // 2, 0]
        return pairs.reshape(2 * whole, rows.shape[1])

    def signals(self) -> Signals:
        """Return what is held of the last span, a copy."""
        rows = self._held[max(self._count - self._points, 0) : self._count].T.copy()
        return Signals(*rows)

    @property
    def size(self) -> int:
        """Bytes that it takes, however long it runs."""
        return self._held.nbytes
