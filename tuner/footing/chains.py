"""What of a loop no gain changes: every plant's chain on a grid of frequencies, kept from frame to frame."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from math import ceil, pi

import numpy as np
from numpy.typing import NDArray

from tuner.footing.affine import Contour, contour
from tuner.model.controller import Controller
from tuner.model.family import family_of
from tuner.model.sheet import Sheet
from tuner.simulate.factors import Stack, stack, to_x
from tuner.simulate.frequency import grid
from tuner.simulate.loop import loops_of, same_shape
from tuner.simulate.traces import Array, ComplexArray

_TURN = pi / 6.0
"""Phase that the dead time may turn between two frequencies."""

_MOST = 4000
"""Frequencies at most for the sake of the dead time."""

_SAME = 1e-6
"""Frequencies that differ by less than this share are one."""

_CLOSER = 1e-4
"""Where the ends of a contour are looked at, in parts of the lowest frequency."""


@dataclass(frozen=True, slots=True, eq=False)
class Chains:
    """Chains of one shape, from the effort of an ideal proportional gain of one to the measurement that the law takes.

    Parameters
    ----------
    members : tuple of int
        Which plants of the family they are.
    rows : Stack
        Their gains as factors, action and filters of the measurement included.
    w : ndarray, shape (p, n)
        Frequencies, rising, rad per time unit.
    at : Contour
        The law's blocks there.
    inverse, gain : ndarray of complex, shape (p, n)
        1/G and G.
    """

    members: tuple[int, ...]
    rows: Stack
    w: Array
    at: Contour
    inverse: ComplexArray
    gain: ComplexArray

    def look(self, rows: NDArray[np.intp], w: Array) -> tuple[ComplexArray, Contour]:
        """Return 1/G of some rows at one frequency each, and the law's blocks there; shapes (k, 1)."""
        with np.errstate(all="ignore"):
            inverse = 1.0 / self.rows.take(rows).response(w[:, None])
        return inverse, _contour(w[:, None], self.rows.step)


def chains_of(sheet: Sheet, size: int) -> tuple[Chains, ...]:
    """Return the chains of a sheet's family; the same for all gains, so they are kept."""
    return _chains(_without_gains(sheet), size)


def looked_at_closely(chains: Chains, poles: Sequence[ComplexArray]) -> Chains:
    """Return chains on a grid that is dense around some poles in s as well, given for every plant of the family."""
    some = [poles[member] for member in chains.members]
    closed = np.full((len(some), max(map(len, some))), complex(np.inf))
    for row, own in zip(closed, some, strict=True):
        row[: len(own)] = own
    return _stacked(chains.rows, chains.members, closed)


def _without_gains(sheet: Sheet) -> Sheet:
    """Return a sheet with an ideal proportional gain of one in place of the law, and nothing that no pole sees."""
    old = sheet.controller
    probe = Controller(
        sample_time=old.sample_time,
        gain_1=1.0,
        action=old.action,
        delay_samples=old.delay_samples,
        measurement_filter=old.measurement_filter,
        lead_lag=old.lead_lag,
        notch=old.notch,
    )
    return replace(sheet, controller=probe, limits=())


@lru_cache(maxsize=8)
def _chains(sheet: Sheet, size: int) -> tuple[Chains, ...]:
    loops = loops_of(sheet, family_of(sheet, size))
    groups = [(stack([loops[i].factors for i in places]), places) for places in same_shape(loops)]
    return tuple(_stacked(rows, places, np.zeros((rows.rows, 0), dtype=complex)) for rows, places in groups)


def _stacked(rows: Stack, members: Sequence[int], closed: ComplexArray) -> Chains:
    w = _frequencies(rows, closed)
    gain = rows.response(w)
    with np.errstate(all="ignore"):
        inverse = 1.0 / gain
    return Chains(tuple(members), rows, w, _contour(w, rows.step), inverse, gain)


def _contour(w: Array, step: float) -> Contour:
    s: ComplexArray = np.asarray(1j * w, dtype=complex)
    return contour(to_x(s, step), step)


def _frequencies(rows: Stack, closed: ComplexArray) -> Array:
    """Return frequencies that show every turn of a chain, its ends and the surroundings of poles looked at closely."""
    w = grid(rows, closed)
    # Twice as many as for the margins of one tuning: here every tuning is looked at through the same points.
    w = np.concatenate((w, np.sqrt(w[:, 1:] * w[:, :-1]), _turning(rows, w[:, -1]), _beyond(rows, w[:, -1])), axis=1)
    low, high = w.min(axis=1), w.max(axis=1)
    w = np.concatenate((w, _CLOSER * low[:, None]), axis=1)
    if rows.step:
        w = np.minimum(w, (high - _CLOSER * low)[:, None])
    w.sort(axis=1)
    # A point that falls on another says nothing; half-way to the next it does.
    same = w[:, 1:-1] - w[:, :-2] <= _SAME * w[:, 1:-1]
    w[:, 1:-1] = np.where(same, 0.5 * (w[:, 1:-1] + w[:, 2:]), w[:, 1:-1])
    return w


def _beyond(rows: Stack, high: Array) -> Array:
    """Return frequencies beyond those at which a gain of one matters, for gains far above it."""
    if rows.step:
        return np.zeros((rows.rows, 0))
    return np.asarray(high[:, None] * np.geomspace(1.1, 1e4, 80))


def _turning(rows: Stack, high: Array) -> Array:
    """Return even steps over the turns of the dead time's phase, as many as there may be."""
    longest = float(rows.delay.max(initial=0.0))
    if longest == 0.0:
        return np.zeros((rows.rows, 0))
    steps = min(ceil(float((rows.delay * high).max()) / _TURN), _MOST)
    end = np.minimum(high, steps * _TURN / longest)
    return np.asarray(end[:, None] * (np.arange(steps) + 0.5) / steps)
