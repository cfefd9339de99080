"""Pulse transfer functions, as factors, of what a sampled controller acts on."""

from collections.abc import Sequence
from itertools import pairwise
from math import ceil, log

import numpy as np

from tuner.simulate.discrete import HeldBatch
from tuner.simulate.factors import Factors, to_x
from tuner.simulate.linear import Linear
from tuner.simulate.traces import Array, ComplexArray

_FAR = 1.7
"""A point well to the right of z = 1, in z - 1."""


def pulse_factors(chains: Sequence[Linear], held: HeldBatch, steps: Sequence[int], step: float) -> list[Factors]:
    """Return the pulse transfer functions of k chains of one order n under a hold.

    The poles are exact, exp(p step) for each pole p of the chain, and one at z = 0 for the input before the jump.
    The zeros are found from the state space seen from a point x0 to the right of every pole: in m = 1/(x - x0) it has a
    direct term, so its zeros are eigenvalues, and a zero far away is an m near 0 without harm. One m is exactly 0
    and is deflated by a reflection. With fast sampling some zeros crowd at z = 1 and the others stay away from it
    (Astrom, Hagander and Sternby, Automatica 20, 1984; from memory), so more than one x0 looks at them.

    Parameters
    ----------
    chains : sequence of Linear
    held : HeldBatch
        Their equivalents under the hold, with one input.
    steps : sequence of int
        Whole samples of dead time.
    step : float
        Time between samples.
    """
    a, b, c = _augmented(chains, held.growth, held.old[..., 0], held.new[..., 0])
    poles = np.array([chain.poles for chain in chains]).reshape(len(chains), -1)
    near = _viewpoint(poles, step)
    zeros, value = _zeros(a, b, c, near)
    views = _views(near)
    for closer, farther in pairwise(views):
        zeros = _merged(zeros, _zeros(a, b, c, farther)[0], (closer * farther) ** 0.5)
    known = np.concatenate((to_x(poles, step), np.full((len(chains), 1), -1.0 + 0j)), axis=1)
    gain = value * np.exp(np.log(near - known).sum(1) - np.log(near - zeros).sum(1)).real
    return [
        Factors(zeros[i], known[i], float(gain[i]) if chain.gain else 0.0, steps[i] * step, step)
        for i, chain in enumerate(chains)
    ]


def _augmented(chains: Sequence[Linear], growth: Array, old: Array, new: Array) -> tuple[Array, Array, Array]:
    """Return x -> a x + b u, y = c x in z - 1, with the input before the jump as the last state."""
    count, order = old.shape
    a = np.zeros((count, order + 1, order + 1))
    a[:, :order, :order] = growth
    a[:, :order, order] = old
    a[:, order, order] = -1.0
    b = np.concatenate((new, np.ones((count, 1))), axis=1)
    c = np.array([[*chain.c, chain.d] for chain in chains])
    return a, b, c


def _viewpoint(poles: ComplexArray, step: float) -> float:
    """Return a real z - 1 to the right of every pole, about as far from them as they are from z = 1."""
    sizes = np.abs(poles)
    sizes = sizes[sizes > 0.0]
    typical = float(np.exp(np.log(sizes).mean())) if len(sizes) else 1.0 / step
    right = float(max(poles.real.max(initial=0.0), 0.0))
    return float(np.expm1((1.5 * right + 1.234 * min(typical, 1.0 / step)) * step))


def _zeros(a: Array, b: Array, c: Array, x0: float) -> tuple[ComplexArray, Array]:
    """Return the n zeros of c (x - a)^-1 b, shape (k, n), and its value at `x0`, shape (k,)."""
    size = a.shape[1]
    resolvent = np.linalg.inv(x0 * np.eye(size) - a)
    right = (resolvent @ b[..., None])[..., 0]
    left = (c[:, None, :] @ resolvent)[:, 0]
    value = (c * right).sum(-1)
    scale = _balance(right, left)
    resolvent = resolvent * scale[:, None, :] / scale[:, :, None]
    # A state that cannot be seen has no part in the zeros but its own mode, whatever drives it.
    b, left = np.where(left == 0.0, 0.0, b / scale), left * scale
    second = (left[:, None, :] @ resolvent)[:, 0]
    with np.errstate(divide="ignore", invalid="ignore"):
        closed = b[:, :, None] * (second / value[:, None])[:, None, :] - resolvent
    closed = np.where((value != 0.0)[:, None, None], closed, 0.0)
    m = np.linalg.eigvals(_deflated(closed, left)).astype(complex)
    tiny = np.abs(m) < 1e-30
    zeros = x0 + 1.0 / np.where(tiny, 1e-30, m)
    return zeros.astype(complex), np.asarray(value)


def _views(near: float) -> list[float]:
    """Return points from `near` to far, each some hundred times farther: a zero is exact from a point about as far."""
    steps = ceil(log(max(_FAR / near, 1.0)) / log(100.0))
    return [near * (_FAR / near) ** (i / steps) for i in range(steps + 1)] if steps else [near]


def _merged(near: ComplexArray, far: ComplexArray, limit: float) -> ComplexArray:
    """Return zeros by size: from the near view those below the limit, from the far view the rest."""
    near = np.take_along_axis(near, np.argsort(np.abs(near), axis=1), axis=1)
    far = np.take_along_axis(far, np.argsort(np.abs(far), axis=1), axis=1)
    return np.where(np.abs(near) < limit, near, far)


def _balance(right: Array, left: Array) -> Array:
    """Return a size for every state that makes it as easy to reach as to see."""
    right, left = np.abs(right), np.abs(left)
    usable = (right > 0.0) & (left > 0.0)
    ratio: Array = np.sqrt(np.divide(right, left, out=np.ones_like(right), where=usable))
    return ratio


def _deflated(matrix: Array, left: Array) -> Array:
    """Return what is left of matrices, shape (k, n+1, n+1), whose left null vector is known: shape (k, n, n)."""
    direction = left / np.maximum(np.linalg.norm(left, axis=-1, keepdims=True), 1e-300)
    direction[:, -1] += np.where(direction[:, -1] < 0.0, -1.0, 1.0)
    square = (direction * direction).sum(-1)
    reflection = np.eye(left.shape[1]) - direction[:, :, None] * direction[:, None, :] * (2.0 / square)[:, None, None]
    turned: Array = reflection @ matrix @ reflection
    return turned[:, :-1, :-1]
