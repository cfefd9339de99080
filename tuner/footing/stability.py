"""For which values of a gain some plant of the family is unstable: whole stretches of a track, not single notches."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.footing.affine import INVERSE, MOTIONLESS, coordinate, value_of
from tuner.footing.chains import Chains, chains_of
from tuner.footing.classes import Track
from tuner.footing.locus import Crossings, crossings
from tuner.model.controller import Controller
from tuner.model.family import Member
from tuner.model.sheet import Sheet
from tuner.simulate.loop import loops_of
from tuner.simulate.poles import family_poles
from tuner.simulate.traces import Array

Flags = NDArray[np.bool_]
Counts = NDArray[np.int64]

_CLOSE = 1e-6
"""A value this near to an edge, relatively, is looked at with the poles themselves."""


@dataclass(frozen=True, slots=True, eq=False)
class Stretches:
    """Where along a track some plant is unstable.

    Parameters
    ----------
    edges : ndarray, shape (k,)
        Values, rising, at which the track becomes lost or is no longer.
    lost : ndarray of bool, shape (k + 1,)
        Whether it is, before the first edge, between edges, after the last.
    """

    edges: Array
    lost: Flags

    def at(self, values: Array) -> Flags:
        """Return whether the track is lost at values."""
        found: Flags = self.lost[np.searchsorted(self.edges, values)]
        return found

    def unsure(self, values: Array) -> Flags:
        """Return which values are too near to an edge to tell."""
        if not len(self.edges):
            return np.zeros(len(values), dtype=bool)
        nearest = np.abs(values[:, None] - self.edges).min(axis=1)
        return np.asarray(nearest <= _CLOSE * np.abs(values))


class _Counted(NamedTuple):
    """Crossings of one group of chains, and the poles beyond the border at one gain, shape (p,)."""

    crossings: Crossings
    base: Counts
    at: float


def counts(sheet: Sheet, members: Sequence[Member]) -> Counts:
    """Return how many poles each plant's loop has on or beyond the border, shape (m,)."""
    return np.array([found.count_unstable for found in family_poles(loops_of(sheet, members))], dtype=np.int64)


def stretches(
    sheet: Sheet, members: Sequence[Member], track: Track, size: int, base: Counts | None
) -> Stretches | None:
    """Return where a track is lost; None when that cannot be told but at every value by itself.

    Parameters
    ----------
    size : int
        Of the family.
    base : ndarray of int, shape (m,), or None
        What `counts` says of the sheet as it is, where that is known.
    """
    controller = sheet.controller
    if not controller.feedback or track.name in MOTIONLESS:
        known = counts(sheet, members) if base is None else base
        return Stretches(np.zeros(0), np.array([bool(known.any())]))
    usable = track.values[track.values > 0.0]
    if not len(usable):
        return None
    present = controller.value(track.name) or 0.0
    if present <= 0.0 or base is None:
        present = present if present > 0.0 else float(usable[len(usable) // 2])
        base = counts(_with(sheet, track.name, present), members)
    if not controller.sample_time and any(_is_flat(controller, chains) for chains in chains_of(sheet, size)):
        return None
    places = coordinate(track.name, np.array([present, usable[0], usable[-1]]))
    span = float(places.min()), float(places.max())
    groups = [
        _Counted(
            crossings(controller, track.name, chains, span),
            base[list(chains.members)],
            float(coordinate(track.name, np.array([present]))[0]),
        )
        for chains in chains_of(sheet, size)
    ]
    return _stretches(track.name, groups)


def _is_flat(controller: Controller, chains: Chains) -> bool:
    """Return whether the gain of a continuous loop may stay above nothing for ever: its poles are endless."""
    return chains.rows.excess <= (1 if controller.parallel().kd and not controller.filter_time else 0)


def _with(sheet: Sheet, name: str, value: float) -> Sheet:
    return replace(sheet, controller=sheet.controller.with_value(name, value))


def _stretches(name: str, groups: Sequence[_Counted]) -> Stretches | None:
    """Lay the crossings of all plants over each other."""
    places = np.unique(np.concatenate([group.crossings.q for group in groups]))
    between = _between(places)
    lost = np.zeros(len(between), dtype=bool)
    for group in groups:
        found = _poles_beyond(group, between)
        if (found < 0).any():
            return None
        lost |= (found > 0).any(axis=0)
    changes = np.flatnonzero(lost[1:] != lost[:-1])
    edges = value_of(name, places[changes])
    kept = np.append(lost[:1], lost[1:][changes])
    if name in INVERSE:
        edges, kept = edges[::-1], kept[::-1]
    return Stretches(np.ascontiguousarray(edges), np.ascontiguousarray(kept))


def _between(places: Array) -> Array:
    """Return a gain before the first place, between places, and after the last."""
    if not len(places):
        return np.ones(1)
    middle = np.sqrt(places[1:] * places[:-1])
    return np.concatenate(([0.5 * places[0]], middle, [2.0 * places[-1]]))


def _poles_beyond(group: _Counted, q: Array) -> NDArray[np.int64]:
    """Return how many poles lie beyond the border at gains, shape (p, k)."""
    row, at, change, _ = group.crossings
    passed = (at[:, None] < q).astype(np.int64) - (at < group.at).astype(np.int64)[:, None]
    found = np.repeat(group.base[:, None], len(q), axis=1)
    np.add.at(found, row, change[:, None] * passed)
    return found
