"""Many tunings of one controller: their numbers at once, each of them only when it is asked for."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import inf
from typing import NamedTuple, overload

import numpy as np

from tuner.footing.classes import tuned
from tuner.model.controller import Controller, parallel_gains
from tuner.model.parameters import GAIN_KEYS
from tuner.simulate.traces import Array

_OTHERS = ("filter_time", "windup_time", "b", "c")
"""What tunings differ in beside their gains, in the order of `Numbers`."""

_WINDUP = 4
"""The place of the wind-up time in it."""


class Numbers(NamedTuple):
    """What tunings differ in, shape (t,) each: parallel gains, times and weights; no wind-up time is infinite."""

    kp: Array
    ki: Array
    kd: Array
    filter_time: Array
    windup_time: Array
    b: Array
    c: Array


@dataclass(frozen=True, slots=True, eq=False)
class Tunings(Sequence[Controller]):
    """A controller with some of its numbers changed, in many ways.

    Parameters
    ----------
    base : Controller
    changes : sequence of tuple
        For each tuning, names as in the sheet and values; see `classes.tuned`.
    """

    base: Controller
    changes: Sequence[tuple[tuple[str, float], ...]]

    def __len__(self) -> int:
        """Return how many there are."""
        return len(self.changes)

    @overload
    def __getitem__(self, at: int) -> Controller: ...
    @overload
    def __getitem__(self, at: slice) -> "Tunings": ...
    def __getitem__(self, at: int | slice) -> "Controller | Tunings":
        """Return one of them, or some."""
        if isinstance(at, slice):
            return Tunings(self.base, self.changes[at])
        found = self.base
        for name, value in self.changes[at]:
            found = tuned(found, name, value)
        return found

    def numbers(self) -> Numbers:
        """Return the numbers of all of them."""
        base, form = self.base, self.base.form
        places = {name: place for place, name in enumerate((*GAIN_KEYS[form], *_OTHERS))}
        held = [base.gain_1, base.gain_2, base.gain_3, *(getattr(base, name) for name in _OTHERS)]
        rows = []
        for change in self.changes:
            row = held.copy()
            for name, value in change:
                row[places[name]] = value
            gains = parallel_gains(form, *row[:3])
            row[:3] = gains.kp, gains.ki, gains.kd
            row[_WINDUP] = row[_WINDUP] or inf
            rows.append(row)
        return Numbers(*np.array(rows, dtype=float).reshape(-1, len(places)).T)
