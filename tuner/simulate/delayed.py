"""Rightmost closed-loop poles with dead time: infinitely many in a continuous loop, very many in a sampled one.

They are sought from three sides: eigenvalues of the dead time cut into Chebyshev pieces, the asymptotic chain of roots
that every dead time makes, and the roots of the loop gain. What is found is exact, for it is iterated on the factored
characteristic function; that nothing is missing is shown by the argument principle.
"""

from dataclasses import dataclass, replace
from math import inf, log, pi

import numpy as np

from tuner.simulate.factors import Factors, Stack, folded, stack
from tuner.simulate.linear import from_zeros_poles
from tuner.simulate.roots import count_right, newton_step_in_s, together
from tuner.simulate.traces import Array, ComplexArray

_EFFORT = ((0, 6), (16, 8), (32, 24), (64, 80))
"""Chebyshev pieces and branches of the chain, more and more until nothing is missing."""
_FEW, _TURNS_TRIED = 8, 50
_CONVERGED = 1e-9
_KEPT = 60
_NEAREST = 0.98
"""How near to one abs(L) may stay on a line that roots are counted along."""


@dataclass(frozen=True, slots=True, eq=False)
class Rightmost:
    """Rightmost poles.

    Parameters
    ----------
    values : ndarray of complex
        In s; every pole whose real part is above `known_from`, as the argument principle confirms.
    known_from : float
        1 per time unit; infinite when nothing could be confirmed.
    count_unstable : int
        How many lie right of the imaginary axis; at least one when there is a reason.
    reason : str
        Why the loop is unstable whatever its poles, else empty.
    """

    values: ComplexArray
    known_from: float
    count_unstable: int
    reason: str


def delayed_poles(loop: Stack) -> Rightmost:
    """Return the rightmost poles of one loop with dead time.

    Parameters
    ----------
    loop : Stack
        One row.
    """
    last = _last_gain(loop)
    reason = ""
    if last >= 1.0:
        reason = (
            f"the loop gain stays at {last:.3g}, not below 1, at infinite frequency: "
            "with dead time around it a change once made comes back as large for ever"
        )
    values = np.zeros(0, dtype=complex)
    for nodes, branches in _EFFORT:
        values = _found(loop, _starts(loop, nodes, branches))
        if last >= 1.0:
            break
        for line in _lines(loop, values, last):
            right = values[values.real > line]
            if count_right(loop, line) == len(right):
                return Rightmost(right, line, _unstable(loop, right, line), reason)
    return Rightmost(values, inf, _unstable(loop, values, inf) if last < 1.0 else 1, reason)


def _unstable(loop: Stack, values: ComplexArray, line: float) -> int:
    """Return how many poles lie right of the imaginary axis, counted where they are not all known; 0 on the axis."""
    known = int((values.real > 0.0).sum())
    return known if line <= 0.0 else max(known, count_right(loop, 0.0) or 0)


def _last_gain(loop: Stack) -> float:
    """Return abs(L) as w -> infinity; 0 for a sampled loop, whose frequencies end."""
    if loop.step or loop.excess > 0:
        return 0.0
    return abs(float(loop.gain[0])) if loop.excess == 0 else inf


def _starts(loop: Stack, nodes: int, branches: int) -> ComplexArray:
    """Return guesses in the upper half plane, the rightmost of each kind."""
    chain = _chain(loop, branches)
    modes = loop.modes[0]
    modes = modes[np.isfinite(modes)]
    guesses = [chain, modes * (1.0 + 1e-3) - 1e-3 / loop.delay[0]]
    if nodes:
        guesses += [modes + shift / loop.delay[0] for shift in (0.4, -0.4, 0.4j, -0.4j)]
    alike = _slow_part(loop) if nodes and loop.step else loop
    if nodes and alike.excess >= 0:
        values = np.linalg.eigvals(_chebyshev(alike, nodes))
        values = values[np.argsort(-values.real)]
        guesses += [values[: max(_KEPT, nodes)]]
        guesses[0] = chain[np.abs(chain.imag) * loop.delay[0] > nodes]
    found = np.concatenate(guesses).astype(complex)
    found = found[found.imag >= 0.0]
    step = np.abs(newton_step_in_s(loop, found))
    kept: ComplexArray = found[step <= 0.5 * np.maximum(np.abs(found), 1.0 / loop.delay[0])]
    return kept


def _slow_part(loop: Stack) -> Stack:
    """Return the continuous loop that a sampled one is much like at low frequency: for guesses."""
    modes, count = loop.modes[0], loop.zero_count
    slow = np.abs(modes) * loop.step < 1.0
    zeros, poles = modes[:count][slow[:count]], modes[count:][slow[count:]]
    alike = stack([Factors(zeros, poles, 1.0, float(loop.delay[0]), 0.0)])
    w = np.array([1.0 / float(loop.delay[0])])
    ratio = float((loop.response(w) / alike.response(w))[0, 0].real)
    return replace(alike, gain=alike.gain * ratio)


def _chebyshev(loop: Stack, nodes: int) -> Array:
    """Return the generator of the closed loop with its dead time as a line of `nodes` Chebyshev pieces.

    The effort travels along the line by w_t = -w_sigma; at its entry it is minus the output of the rational part, which
    its end drives (after Breda, Maset and Vermiglio, SIAM J. Sci. Comput. 27, 2005; from memory).
    """
    count = loop.zero_count
    zeros, poles = loop.roots[0, :count] * loop.unit, loop.roots[0, count:] * loop.unit
    open_loop = from_zeros_poles(_symmetric(zeros), _symmetric(poles), float(loop.gain[0]) * loop.unit**loop.excess)
    order = open_loop.order
    slope = _differentiation(nodes) * (2.0 / loop.delay[0])
    matrix = np.zeros((order + nodes, order + nodes))
    matrix[:order, :order] = open_loop.a
    matrix[:order, -1] = open_loop.b
    matrix[order:, order:] = -slope[1:, 1:]
    matrix[order:, :order] = np.outer(slope[1:, 0], open_loop.c)
    matrix[order:, -1] += slope[1:, 0] * open_loop.d
    return matrix


def _symmetric(roots: ComplexArray) -> ComplexArray:
    """Return roots with exact conjugates."""
    above = roots[roots.imag > 0.0]
    return np.concatenate((roots[roots.imag == 0.0], above, above.conj()))


def _differentiation(nodes: int) -> Array:
    """Return the differentiation matrix at x = -cos(i pi/nodes), on -1 to 1 (Trefethen, Spectral Methods in MATLAB)."""
    index = np.arange(nodes + 1)
    x = -np.cos(pi * index / nodes)
    weight = np.where((index == 0) | (index == nodes), 2.0, 1.0) * (-1.0) ** index
    apart = x[:, None] - x[None, :] + np.eye(nodes + 1)
    matrix: Array = (weight[:, None] / weight[None, :]) / apart
    return matrix - np.diag(matrix.sum(1))


def _chain(loop: Stack, branches: int) -> ComplexArray:
    """Return approximate roots of exp(delay s) = -R(s), one for each turn: s = (ln(-R(s)) + 2 pi j m)/delay.

    A resonance far up the chain may hold the rightmost, so more turns are tried than the rightmost that are returned.
    """
    delay = float(loop.delay[0])
    m = np.arange(branches * _TURNS_TRIED if branches > _FEW or loop.step else branches, dtype=float)
    if loop.step:
        m = m[: int(0.5 * delay / loop.step) + 2]
    s = 1j * (2.0 * pi * m + pi) / delay
    for _ in range(6):
        x = np.expm1(s * loop.step) / loop.unit if loop.step else s / loop.unit
        with np.errstate(all="ignore"):
            difference = x[:, None] - loop.roots
            logarithm = (np.log(difference) * loop.sign).sum(-1) + log(abs(loop.gain[0]))
        angle = np.angle(np.exp(1j * logarithm.imag) * -np.sign(loop.gain[0]))
        following = (logarithm.real + 1j * (angle + 2.0 * pi * m)) / delay
        s = np.where(np.isfinite(following), following, s)
    return s[np.argsort(-s.real)[:branches]].astype(complex)


def _found(loop: Stack, starts: ComplexArray) -> ComplexArray:
    """Return the roots that the starts lead to, with their conjugates, rightmost first."""
    starts = _distinct(starts)
    real = np.abs(starts.imag) <= 1e-9 * np.abs(starts)
    both = np.concatenate((starts[real].real, starts[~real], starts[~real].conj())).astype(complex)
    roots, error = together(loop, both, rounds=30)
    roots = roots[error < _CONVERGED]
    if loop.step:
        roots = roots.real + 1j * folded(roots.imag, loop.step)
    roots = np.where(np.abs(roots.imag) <= 1e-8 * np.abs(roots), roots.real, roots)
    above = roots[roots.imag > 0.0]
    real_roots = roots[roots.imag == 0.0]
    roots = np.concatenate((_distinct(real_roots), _mirrored(_distinct(above), loop.step)))
    ordered: ComplexArray = roots[np.argsort(-roots.real)]
    return ordered


def _mirrored(above: ComplexArray, step: float) -> ComplexArray:
    """Return roots with their conjugates; one at the Nyquist frequency is its own."""
    own = above.imag >= pi / step * (1.0 - 1e-9) if step else np.zeros(len(above), dtype=bool)
    return np.concatenate((above, above[~own].conj()))


def _distinct(values: ComplexArray) -> ComplexArray:
    """Return values without repetitions, to nine digits."""
    kept: list[complex] = []
    for value in sorted(values.tolist(), key=lambda v: (v.real, v.imag)):
        if all(abs(value - other) > 1e-9 * abs(value) for other in kept[-40:]):
            kept.append(value)
    return np.array(kept, dtype=complex)


def _lines(loop: Stack, values: ComplexArray, last: float) -> list[float]:
    """Return where to draw the line, best first: in gaps between roots, clear of them.

    Three times as far left as the rightmost root or farther; if too many are there to find, just beyond the first few.
    A root chain that does not bend left, at ln(last)/delay, stays left of the line.
    """
    if not len(values):
        return []
    unit = 1.0 / float(loop.delay[0])
    rightmost = float(values[0].real)
    goal = rightmost - max(2.0 * abs(rightmost), 0.5 * unit)
    reals = np.append(values.real, min(goal, float(values[-1].real)) - 0.5 * unit)
    bound = unit * log(last / _NEAREST) if last > 0.0 else -inf
    middle, wide = 0.5 * (reals[:-1] + reals[1:]), reals[:-1] - reals[1:] > 1e-3 * unit
    lines = middle[wide & (middle > bound)].tolist()
    beyond, before = [line for line in lines if line <= goal], [line for line in lines if line > goal]
    return [*beyond[:1], *before[::-1][:2], *before[1:2], *before[:1]]
