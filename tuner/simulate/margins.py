"""Margins of a stable loop: every crossing and peak bracketed on a grid, then found exactly by Newton's method."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import degrees, inf, pi
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.simulate.factors import Index, Stack, Values, stack
from tuner.simulate.frequency import at_end, at_zero, grid
from tuner.simulate.loop import Loop, same_shape
from tuner.simulate.traces import Array, ComplexArray

BANDWIDTH_LEVEL = 0.707
"""The sensitivity that ends the bandwidth: 0.707 as the measure is defined, not the square root of one half."""

_GAIN, _PHASE, _SENSITIVITY, _COMPLEMENTARY, _BANDWIDTH, _LEVEL_TURN, _PHASE_TURN = range(7)
_ROUNDS = 60
_PASSES = 8
_MOST_POINTS = 20_000
_LONGEST_TURN = 1.0
"""Phase of the dead time, rad, that one step of the grid may take where a margin could hide."""


@dataclass(frozen=True, slots=True)
class Margins:
    """Margins of one loop; frequencies in rad per time unit, None where there is no place.

    Parameters
    ----------
    gain_margin : float
        Smallest factor above 1 that brings the loop gain to -1; infinite when none does.
    phase_margin : float
        Degrees; smallest distance of the phase from -180 degrees where the gain is one; infinite when it never is.
    delay_margin : float
        Time units; smallest extra dead time that brings the loop gain to -1. 0 when the gain of a continuous loop stays
        at or above one at w -> infinity; at most a sample when that of a sampled loop is above one at the Nyquist
        frequency.
    max_sensitivity, max_complementary : float
        Largest abs(S) and abs(T), the limits at w -> 0 and at the highest frequency included (there w is infinite for
        a continuous loop).
    bandwidth : float or None
        Lowest frequency at which abs(S) rises to 0.707; None when it does not (Skogestad and Postlethwaite,
        Multivariable Feedback Control; from memory).
    """

    gain_margin: float
    gain_margin_at: float | None
    phase_margin: float
    phase_margin_at: float | None
    delay_margin: float
    delay_margin_at: float | None
    max_sensitivity: float
    max_sensitivity_at: float
    max_complementary: float
    max_complementary_at: float
    bandwidth: float | None


class _Events(NamedTuple):
    """Points of interest: whose they are, of what kind, where, and the loop gain there."""

    row: Index
    kind: Index
    w: Array
    gain: ComplexArray


def margins(loops: Sequence[Loop], poles: Sequence[ComplexArray]) -> tuple[Margins, ...]:
    """Return the margins of stable loops; together they take less time than one by one.

    Parameters
    ----------
    loops : sequence of Loop
        Stable: an unstable loop has no margins, and what is returned for one means nothing.
    poles : sequence of ndarray of complex
        Closed-loop poles of each in s, those that are known: peaks are sought around them.
    """
    found: dict[int, Margins] = {}
    for places in same_shape(loops):
        rows = stack([loops[i].factors for i in places])
        closed = _padded([poles[i] for i in places])
        for place, one in zip(places, _margins([loops[i] for i in places], rows, closed), strict=True):
            found[place] = one
    return tuple(found[i] for i in range(len(loops)))


def _padded(poles: Sequence[ComplexArray]) -> ComplexArray:
    """Return poles as one array, filled up with infinities."""
    out = np.full((len(poles), max(map(len, poles))), complex(inf))
    for row, some in zip(out, poles, strict=True):
        row[: len(some)] = some
    return out


def _margins(loops: Sequence[Loop], rows: Stack, closed: ComplexArray) -> list[Margins]:
    """Return the margins of loops of one shape, looking closer where the dead time turns too fast for the grid."""
    w = grid(rows, closed)
    found = _from_grid(loops, rows, w)
    if not rows.delay.any():
        return found
    for row in range(rows.rows):
        here, one = w[row], rows.take([row])
        for _ in range(_PASSES):
            denser = _denser(one, here, found[row])
            if denser is None:
                break
            here = denser
            found[row] = _from_grid([loops[row]], one, here[None])[0]
    return found


def _from_grid(loops: Sequence[Loop], rows: Stack, w: Array) -> list[Margins]:
    every = np.broadcast_to(np.arange(rows.rows)[:, None], w.shape)
    at = rows.values(w, every)
    turns = _polished(rows, w, _turn_brackets(at))
    if len(turns.w):
        w, at = _with_points(rows, w, turns)
    events = _polished(rows, w, _brackets(at))
    return [_summed_up(loop, events, row) for row, loop in enumerate(loops)]


class _Brackets(NamedTuple):
    """Steps of the grid in which a function of one kind changes its sign."""

    row: Index
    cell: Index
    kind: Index


def _turn_brackets(at: Values) -> _Brackets:
    """Return where gain or phase turn round near the critical value: two crossings may hide between two points."""
    level, angle = np.log(np.abs(at.gain)), np.angle(-at.gain)
    level_turns = (at.slope.real[:, :-1] > 0.0) != (at.slope.real[:, 1:] > 0.0)
    phase_turns = (at.slope.imag[:, :-1] > 0.0) != (at.slope.imag[:, 1:] > 0.0)
    level_turns &= _near(level, 0.5)
    phase_turns &= _near(angle, 0.5)
    return _gathered({_LEVEL_TURN: level_turns, _PHASE_TURN: phase_turns})


def _near(value: Array, reach: float) -> NDArray[np.bool_]:
    """Tell in which steps of the grid a value keeps its sign but comes near zero."""
    left, right = value[:, :-1], value[:, 1:]
    near: NDArray[np.bool_] = ((left > 0.0) == (right > 0.0)) & (np.minimum(np.abs(left), np.abs(right)) < reach)
    return near


def _brackets(at: Values) -> _Brackets:
    signals = _signals(at)
    positive = signals > 0.0
    changes = positive[..., :-1] != positive[..., 1:]
    angle = signals[_PHASE]
    changes[_PHASE] &= np.abs(angle[:, :-1] - angle[:, 1:]) < pi
    changes[_SENSITIVITY] &= positive[_SENSITIVITY, :, 1:]  # |1 + L| has a minimum
    changes[_COMPLEMENTARY] &= positive[_COMPLEMENTARY, :, :-1]  # |T| has a maximum
    changes[_BANDWIDTH] &= positive[_BANDWIDTH, :, :-1]  # |1 + L| falls
    return _gathered(dict(enumerate(changes)))


def _gathered(changes: dict[int, NDArray[np.bool_]]) -> _Brackets:
    places = [(kind, *np.nonzero(change)) for kind, change in changes.items()]
    kinds = [np.full(len(row), kind) for kind, row, _ in places]
    return _Brackets(
        np.concatenate([row for _, row, _ in places]),
        np.concatenate([cell for _, _, cell in places]),
        np.concatenate(kinds),
    )


def _signals(at: Values) -> Array:
    """Return the five functions whose zeros are sought, shape (5, ...), in the order of the kinds.

    ln|L|, the angle of -L, the slopes of ln|1 + L| and of ln|T|, and ln|1 + L| above the level of the bandwidth.
    """
    with np.errstate(all="ignore"):
        returned = 1.0 + at.gain
        inward = at.slope / (1.0 + 1.0 / at.gain)
        return np.stack(
            (
                np.log(np.abs(at.gain)),
                np.angle(-at.gain),
                inward.real,
                (at.slope / returned).real,
                np.log(np.abs(returned) * BANDWIDTH_LEVEL),
            )
        )


def _value_and_slope(at: Values, kind: Index) -> tuple[Array, Array]:
    """Return, at each point, the function of its kind and the derivative with respect to frequency."""
    with np.errstate(all="ignore"):
        returned = 1.0 + at.gain
        share = 1.0 / (1.0 + 1.0 / at.gain)  # T
        inward = at.slope * share
        inward_slope = share * (at.curvature + at.slope * at.slope) - inward * inward
        choices = (
            (np.log(np.abs(at.gain)), at.slope.real),
            (np.angle(-at.gain), at.slope.imag),
            (inward.real, inward_slope.real),
            ((at.slope / returned).real, (at.curvature - inward_slope).real),
            (np.log(np.abs(returned) * BANDWIDTH_LEVEL), inward.real),
            (at.slope.real, at.curvature.real),
            (at.slope.imag, at.curvature.imag),
        )
        return np.choose(kind, [value for value, _ in choices]), np.choose(kind, [slope for _, slope in choices])


def _polished(rows: Stack, w: Array, brackets: _Brackets) -> _Events:
    """Return the zeros in brackets, by Newton's method kept between the ends and halving when it leaves them."""
    row, cell, kind = brackets
    low, high = w[row, cell].copy(), w[row, cell + 1].copy()
    rising = _value_and_slope(rows.values(high, row), kind)[0] > 0.0
    here = 0.5 * (low + high)
    at = rows.values(here, row)
    for _ in range(_ROUNDS if len(row) else 0):
        value, slope = _value_and_slope(at, kind)
        above = (value > 0.0) == rising
        high, low = np.where(above, here, high), np.where(above, low, here)
        with np.errstate(all="ignore"):
            there = here - value / slope
        inside = (there > low) & (there < high)
        there = np.where(inside | (np.abs(there - here) <= 1e-15 * here), there, 0.5 * (low + high))
        moved = np.abs(there - here)
        here = there
        at = rows.values(here, row)
        if (moved <= 1e-14 * here).all():
            break
    return _Events(row, kind, here, at.gain)


def _with_points(rows: Stack, w: Array, points: _Events) -> tuple[Array, Values]:
    """Return the grid with points added; rows with fewer of them repeat their last frequency."""
    counts = np.bincount(points.row, minlength=rows.rows)
    extra = np.repeat(w[:, -1:], counts.max(), axis=1)
    order = np.argsort(points.row, kind="stable")
    within = np.concatenate([np.arange(count) for count in counts])
    extra[points.row[order], within] = points.w[order]
    w = np.sort(np.concatenate((w, extra), axis=1), axis=1)
    return w, rows.values(w, np.broadcast_to(np.arange(rows.rows)[:, None], w.shape))


def _denser(row: Stack, w: Array, found: Margins) -> Array | None:
    """Return a finer grid where a margin smaller than those found could hide; None when there is no such place.

    Between two points |L| does not exceed its ends by much, for the grid resolves every root; but its phase may turn.
    """
    turn = np.diff(w) * row.delay[0]
    size = np.abs(row.response(w))[0]
    size = np.maximum(size[:-1], size[1:]) * (1.0 - 1e-9)
    with np.errstate(divide="ignore"):
        distance = np.where(size < 1.0, 1.0 - size, 0.0)
        better = (size > 1.0 / found.gain_margin) & (size < 1.0) | (1.0 / distance > found.max_sensitivity)
        better |= size / distance > found.max_complementary
    hidden = np.flatnonzero((turn > _LONGEST_TURN) & better & (size > 0.0))
    if not len(hidden) or len(w) > _MOST_POINTS:
        return None
    pieces = np.minimum(np.ceil(2.0 * turn[hidden] / _LONGEST_TURN).astype(int), 200)
    added = [np.linspace(w[i], w[i + 1], n + 1)[1:-1] for i, n in zip(hidden, pieces, strict=True)]
    return np.sort(np.concatenate((w, *added)))


def _summed_up(loop: Loop, events: _Events, row: int) -> Margins:
    """Choose among the events of one loop and the limits at both ends."""
    mine = events.row == row
    kind, w, gain = events.kind[mine], events.w[mine], events.gain[mine]
    ends = _ends(loop)
    gain_margin = _gain_margin(w[kind == _PHASE], gain[kind == _PHASE], ends)
    crossing, angle = w[kind == _GAIN], np.angle(-gain[kind == _GAIN])
    phase_margin = _least([(abs(degrees(a)), v) for a, v in zip(angle.tolist(), crossing.tolist(), strict=True)])
    delay_margin = _delay_margin(loop, crossing, angle)
    top, widest = (_largest(gain[kind == k], w[kind == k], ends, k) for k in (_SENSITIVITY, _COMPLEMENTARY))
    reached = w[kind == _BANDWIDTH]
    return Margins(
        *gain_margin, *phase_margin, *delay_margin, *top, *widest, float(reached.min()) if len(reached) else None
    )


class _End(NamedTuple):
    """The loop gain at an end of the frequency axis, and whether its phase there takes every value."""

    gain: float
    at: float
    turning: bool


def _ends(loop: Loop) -> tuple[_End, _End]:
    factors = loop.factors
    end = pi / factors.step if factors.step else inf
    turning = factors.delay > 0.0 and not factors.step
    return _End(at_zero(factors), 0.0, turning=False), _End(at_end(factors), end, turning=turning)


def _least(candidates: list[tuple[float, float]]) -> tuple[float, float | None]:
    return min(candidates) if candidates else (inf, None)


def _gain_margin(w: Array, gain: ComplexArray, ends: tuple[_End, _End]) -> tuple[float, float | None]:
    size = np.abs(gain)
    inside = (size < 1.0) & (size > 0.0)
    candidates = list(zip((1.0 / size[inside]).tolist(), w[inside].tolist(), strict=True))
    for end in ends:
        if 0.0 < abs(end.gain) < 1.0 and (end.gain < 0.0 or end.turning):
            candidates.append((1.0 / abs(end.gain), end.at))
    return _least(candidates)


def _delay_margin(loop: Loop, w: Array, angle: Array) -> tuple[float, float | None]:
    """Return the smallest dead time that makes an angle above -180 degrees vanish, and where.

    At the Nyquist frequency one sample more changes the sign of the loop gain there, and so of 1 + L when |L| > 1.
    """
    candidates = [((a % (2.0 * pi)) / v, v) for a, v in zip(angle.tolist(), w.tolist(), strict=True)]
    last = abs(at_end(loop.factors))
    if loop.factors.step and last > 1.0:
        candidates.append((loop.factors.step, pi / loop.factors.step))
    if not loop.factors.step and last >= 1.0:
        candidates.append((0.0, inf))
    return _least(candidates)


def _largest(gain: ComplexArray, w: Array, ends: tuple[_End, _End], kind: int) -> tuple[float, float]:
    """Return the largest abs(S) or abs(T) among peaks and ends, and where."""
    over = np.abs(gain) if kind == _COMPLEMENTARY else np.ones(len(gain))
    candidates = list(zip((over / np.abs(1.0 + gain)).tolist(), w.tolist(), strict=True))
    candidates += [(_end_value(end, kind), end.at) for end in ends]
    value = max(peak for peak, _ in candidates)
    return value, min(at for peak, at in candidates if peak >= value * (1.0 - 1e-12))


def _end_value(end: _End, kind: int) -> float:
    if abs(end.gain) == inf:
        return 1.0 if kind == _COMPLEMENTARY else 0.0
    distance = abs(1.0 - abs(end.gain)) if end.turning else abs(1.0 + end.gain)
    over = abs(end.gain) if kind == _COMPLEMENTARY else 1.0
    return over / distance if distance else inf
