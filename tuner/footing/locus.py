"""Where poles cross the border of stability as one gain moves: exact with dead time, without a simulation.

Along one gain q the characteristic function is A + q B (`affine`). On the border, q = -A/B is real at the gains at
which a pole crosses it: D-decomposition along one parameter (Neimark, 1948; see Ackermann, Robust Control, 1993; both
from memory). A map that is analytic keeps the right-hand side of a curve on its right-hand side: where the image -A/B
of the border, run through upwards in frequency, crosses the real axis upwards, the poles for greater q lie beyond the
border. So each crossing says how many poles come or go, and one count at one gain gives it for all gains.
"""

from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.footing.affine import pair
from tuner.footing.chains import Chains
from tuner.model.controller import Controller
from tuner.simulate.traces import Array

_ROUNDS = 40
_FOUND = 1e-11
"""A crossing is found where the image is real to this share."""

_BEYOND = 3.0
"""A crossing between two points lies within this factor of both."""

_ENDS = 1e-3
"""An end of the contour is real to this share if a pole crosses there."""


class Crossings(NamedTuple):
    """Crossings of the border along one gain, in no order.

    Parameters
    ----------
    row : ndarray of int, shape (k,)
        Which of the chains.
    q : ndarray, shape (k,)
        The gain, as `affine.coordinate` has it; above 0.
    change : ndarray of int, shape (k,)
        Poles that come to lie beyond the border as q grows past it.
    w : ndarray, shape (k,)
        Frequency at which they cross, rad per time unit.
    """

    row: NDArray[np.intp]
    q: Array
    change: NDArray[np.int64]
    w: Array


def crossings(controller: Controller, name: str, chains: Chains, span: tuple[float, float]) -> Crossings:
    """Return where poles cross the border of stability as one gain of a controller goes along a span.

    Parameters
    ----------
    span : tuple of float
        Least and greatest gain that matter, as `affine.coordinate` has them; some crossings beyond may be left out.
    """
    held, moving = pair(controller, name, chains.inverse, chains.at)
    with np.errstate(all="ignore"):
        q = -held / moving
    rising = _side(q)
    row, left = np.nonzero((rising[:, 1:] != rising[:, :-1]) & np.isfinite(q[:, 1:]) & np.isfinite(q[:, :-1]))
    one, other = q.real[row, left], q.real[row, left + 1]
    near = (np.maximum(one, other) > span[0] / _BEYOND) & (np.minimum(one, other) < span[1] * _BEYOND)
    row, left = row[near], left[near]
    w, found = _refined(controller, name, chains, row, left, q)
    change = np.where(rising[row, left + 1], 2, -2)
    parts = [(row, found, change, w), _end(chains, q, rising, 0)]
    if chains.rows.step:
        parts.append(_end(chains, q, rising, -1))
    rows, values, changes, places = (np.concatenate(one) for one in zip(*parts, strict=True))
    usable = np.isfinite(values) & (values > 0.0)
    return Crossings(rows[usable], values[usable], changes[usable], places[usable])


def _side(q: NDArray[np.complex128]) -> NDArray[np.bool_]:
    above: NDArray[np.bool_] = q.imag > 0.0
    return above


def _end(
    chains: Chains, q: NDArray[np.complex128], above: NDArray[np.bool_], at: int
) -> tuple[NDArray[np.intp], Array, NDArray[np.int64], Array]:
    """Return the real poles that cross at an end of the contour: z = 1, or z = -1."""
    end = q[:, at]
    real = np.abs(end.imag) <= _ENDS * np.abs(end.real)
    row = np.flatnonzero(real)
    # Before z = -1 the curve is still on the side that it comes from.
    upwards = above[row, at] if at == 0 else ~above[row, at]
    return row, end.real[row], np.where(upwards, 1, -1), chains.w[row, at]


def _refined(  # noqa: PLR0913, PLR0917 - where to look, and what is known there
    controller: Controller,
    name: str,
    chains: Chains,
    row: NDArray[np.intp],
    left: NDArray[np.intp],
    known: NDArray[np.complex128],
) -> tuple[Array, Array]:
    """Return frequency and gain of crossings between two points, by regula falsi with the Illinois rule."""
    if not len(row):
        return np.zeros(0), np.zeros(0)
    low, high = chains.w[row, left].copy(), chains.w[row, left + 1].copy()

    def image(w: Array) -> NDArray[np.complex128]:
        held, moving = pair(controller, name, *chains.look(row, w))
        with np.errstate(all="ignore"):
            found: NDArray[np.complex128] = -held[:, 0] / moving[:, 0]
        return found

    at_low, at_high = known.imag[row, left], known.imag[row, left + 1]
    w, q, last = high, known[row, left + 1], np.zeros(len(row))
    for _ in range(_ROUNDS):
        with np.errstate(all="ignore"):
            share = at_low / (at_low - at_high)
        w = low + np.where((share > 0.0) & (share < 1.0), share, 0.5) * (high - low)
        q = image(w)
        if (np.abs(q.imag) <= _FOUND * np.abs(q.real)).all():
            break
        side = np.where((q.imag > 0.0) == (at_high > 0.0), 1.0, -1.0)
        upper = side > 0.0
        # An end that stays twice counts half, or else it would stay for ever.
        at_low = np.where(upper, np.where(last == side, 0.5 * at_low, at_low), q.imag)
        at_high = np.where(upper, q.imag, np.where(last == side, 0.5 * at_high, at_high))
        low, high, last = np.where(upper, low, w), np.where(upper, w, high), side
    return w, np.asarray(q.real)
