"""For which values of a gain some plant of the family is unstable: whole stretches of a track, not single notches."""

from collections.abc import Sequence
from dataclasses import astuple, dataclass, replace
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.footing.affine import DERIVATIVE, INVERSE, MOTIONLESS, PROPORTIONAL, coordinate, value_of
from tuner.footing.chains import Chains, chains_of, looked_at_closely
from tuner.footing.classes import Track, tuned
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


def lost_when_off(sheet: Sheet, members: Sequence[Member], names: Sequence[str]) -> dict[str, bool]:
    """Return whether some plant is unstable with a number at zero, for those of some numbers of which that is told.

    It is not of a continuous controller, nor where nothing is left of the law.
    """
    if not sheet.controller.sample_time or not sheet.controller.feedback:
        return {}
    off = {name: tuned(sheet.controller, name, 0.0) for name in names}
    left = {name: one for name, one in off.items() if any(astuple(one.parallel()))}
    loops = [loop for one in left.values() for loop in loops_of(replace(sheet, controller=one), members)]
    stable = [found.stable for found in family_poles(loops)]
    return {name: not all(stable[k * len(members) : (k + 1) * len(members)]) for k, name in enumerate(left)}


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
    if not controller.sample_time and any(
        _is_flat(controller, track.name, chains) for chains in chains_of(sheet, size)
    ):
        return None
    places = coordinate(track.name, np.array([present, usable[0], usable[-1]]))
    span = float(places.min()), float(places.max())
    groups = [
        _Counted(
            crossings(controller, track.name, chains, span),
            base[list(chains.members)],
            float(coordinate(track.name, np.array([present]))[0]),
        )
        for chains in _chains(sheet, members, track.name, size)
    ]
    return _stretches(track.name, groups, span)


def _chains(sheet: Sheet, members: Sequence[Member], name: str, size: int) -> tuple[Chains, ...]:
    """Return the chains on grids that show every turn of the image of the border.

    Along the filter time that image has poles where the loop without a derivative has its own: near the border they
    turn it fast.
    """
    found = chains_of(sheet, size)
    gains = sheet.controller.parallel()
    if name != "filter_time" or not gains.kd:
        return found
    plain = replace(sheet.controller, form="parallel", gain_1=gains.kp, gain_2=gains.ki, gain_3=0.0)
    poles = [one.values for one in family_poles(loops_of(replace(sheet, controller=plain), members))]
    return tuple(looked_at_closely(chains, poles) for chains in found)


def _is_flat(controller: Controller, name: str, chains: Chains) -> bool:
    """Return whether the gain of a continuous loop may stay above nothing for ever as a gain moves: endless poles."""
    gains = controller.parallel()
    derives = bool(gains.kd) or name in DERIVATIVE
    if not derives and not gains.kp and name not in PROPORTIONAL:
        return chains.rows.excess <= -1
    return chains.rows.excess <= (1 if derives and not controller.filter_time else 0)


def _with(sheet: Sheet, name: str, value: float) -> Sheet:
    return replace(sheet, controller=sheet.controller.with_value(name, value))


class _Changes(NamedTuple):
    """How many plants are unstable below all places, and by how many more or fewer they are beyond each."""

    at_first: int
    places: Array
    more: Counts


def _stretches(name: str, groups: Sequence[_Counted], span: tuple[float, float]) -> Stretches | None:
    """Lay the crossings of all plants over each other."""
    found = [_changes(group, span) for group in groups]
    known = [one for one in found if one is not None]
    if len(known) < len(found):
        return None
    places, more = np.concatenate([one.places for one in known]), np.concatenate([one.more for one in known])
    order = np.argsort(places, kind="stable")
    places, unstable = places[order], sum(one.at_first for one in known) + np.cumsum(more[order])
    within = (places > span[0]) & (places < span[1])
    before = int(np.searchsorted(places, span[0], side="right"))
    first = bool((unstable[before - 1] if before else sum(one.at_first for one in known)) > 0)
    lost = np.append(first, unstable[within] > 0)
    changes = np.flatnonzero(lost[1:] != lost[:-1])
    edges, kept = value_of(name, places[within][changes]), np.append(lost[:1], lost[1:][changes])
    if name in INVERSE:
        edges, kept = edges[::-1], kept[::-1]
    return Stretches(np.ascontiguousarray(edges), np.ascontiguousarray(kept))


def _changes(group: _Counted, span: tuple[float, float]) -> _Changes | None:
    """Return where plants become unstable and where they no longer are; None when a count comes out below zero."""
    row, at, change, _ = group.crossings
    order = np.lexsort((at, row))
    row, at, change = row[order], at[order], change[order]
    start = group.base.copy()
    np.subtract.at(start, row, change * (at < group.at))
    total = np.cumsum(change)
    first = np.searchsorted(row, row)
    beyond = start[row] + total - np.where(first > 0, total[first - 1], 0)
    below = beyond - change
    following = np.append(np.where(row[1:] == row[:-1], at[1:], np.inf), np.inf)[: len(at)]
    alone = np.full(len(start), np.inf)
    np.minimum.at(alone, row, at)
    wrong = ((beyond < 0) & (at < span[1]) & (following > span[0])).any() or ((start < 0) & (alone > span[0])).any()
    if wrong:
        return None
    more = (beyond > 0).astype(np.int64) - (below > 0)
    return _Changes(int((start > 0).sum()), at[more != 0], more[more != 0])
