"""Closed-loop poles, every mode of the loop counted, also those that the loop gain does not show."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import inf, pi

import numpy as np

from tuner.law.constants import lead_lag, notch
from tuner.model.controller import Controller
from tuner.simulate.delayed import delayed_poles
from tuner.simulate.factors import Stack, folded, stack, to_s, to_x
from tuner.simulate.linear import from_zeros_poles
from tuner.simulate.loop import ContinuousLoop, Loop, SampledLoop, same_shape
from tuner.simulate.roots import newton_steps, together
from tuner.simulate.traces import Array, ComplexArray

LONGEST_CHAIN = 150
"""States up to which all poles of a sampled loop are found; beyond, those that decide."""

_MARGINAL = 1e-9
_ROUNDING = 1e-12
_DEADBEAT = 1e-6
_SURE = 1e-7


@dataclass(frozen=True, slots=True, eq=False)
class Poles:
    """Closed-loop poles of one loop.

    Parameters
    ----------
    values : ndarray of complex
        In s, rad per time unit, rightmost first; those of a sampled loop through ln(z)/Ts, without those at z = 0.
    stable : bool
        Whether all poles lie left of the imaginary axis, or inside the unit circle by more than 1e-9.
    count_unstable : int
        How many do not; at least so many when there are infinitely many.
    growth : float
        Real part of the rightmost pole, 1 per time unit; minus infinity when there is none.
    complete : bool
        Whether `values` holds all poles; if not, all those whose real part is above `known_from`.
    known_from : float
        1 per time unit; minus infinity when complete.
    reason : str
        Why the loop is not stable, when the poles alone do not say it; empty otherwise.
    """

    values: ComplexArray
    stable: bool
    count_unstable: int
    growth: float
    complete: bool
    known_from: float
    reason: str = ""


def closed_loop_poles(loop: Loop) -> Poles:
    """Return the poles of a loop; those of what the controller acts on when it is open."""
    return family_poles((loop,))[0]


def family_poles(loops: Sequence[Loop]) -> tuple[Poles, ...]:
    """Return the poles of several loops; together they take less time than one by one. See `closed_loop_poles`."""
    found: dict[int, Poles] = {}
    for alike in same_shape(loops):
        for places in _of_one_law(loops, alike):
            found |= dict(zip(places, _of_shape([loops[i] for i in places]), strict=True))
    return tuple(found[i] for i in range(len(loops)))


def _of_one_law(loops: Sequence[Loop], places: Sequence[int]) -> list[list[int]]:
    """Return the places of loops that one controller closes: the rows of its law are laid out once for all of them."""
    groups: dict[int, list[int]] = {}
    for i in places:
        groups.setdefault(id(loops[i].controller), []).append(i)
    return list(groups.values())


def _of_shape(loops: Sequence[Loop]) -> list[Poles]:
    if loops[0].factors.gain == 0.0:
        return [_open(loop) for loop in loops]
    loose = [i for i, loop in enumerate(loops) if _is_algebraic(loop)]
    if loose:
        rest = [i for i in range(len(loops)) if i not in loose]
        found = dict(zip(rest, _of_shape([loops[i] for i in rest]) if rest else [], strict=True))
        return [found.get(i, _ALGEBRAIC) for i in range(len(loops))]
    rows = stack([loop.factors for loop in loops])
    short = [i for i, loop in enumerate(loops) if _states(loop) <= LONGEST_CHAIN]
    out = {i: _delayed(loops[i], rows.take([i])) for i in range(len(loops)) if i not in short}
    out |= dict(zip(short, _finite([loops[i] for i in short], rows.take(short)), strict=True))
    return [out[i] for i in range(len(loops))]


_ALGEBRAIC = Poles(
    values=np.zeros(0, dtype=complex),
    stable=False,
    count_unstable=1,
    growth=inf,
    complete=False,
    known_from=inf,
    reason="the loop gain is -1 at infinite frequency: the effort has no unique value",
)


def _is_algebraic(loop: Loop) -> bool:
    """Tell whether 1 + L vanishes at infinite frequency, without dead time or samples to prevent it."""
    factors = loop.factors
    biproper = len(factors.zeros) == len(factors.poles) and not factors.step and not factors.delay
    return biproper and abs(1.0 + factors.gain) <= _ROUNDING


def _states(loop: Loop) -> float:
    """Return how many states the closed loop has, infinitely many with dead time around a continuous controller."""
    if isinstance(loop, SampledLoop):
        return len(loop.factors.poles) + loop.held.steps
    return np.inf if loop.factors.delay else len(loop.factors.poles)


def _open(loop: Loop) -> Poles:
    """Return the modes of a chain that nothing acts on."""
    return _listed(loop.chain.poles[None], loop.sample_time, _scale(loop.chain.poles[None]))[0]


def _scale(modes: ComplexArray) -> Array:
    """Return the typical size of the modes in each row, 1 where there are none."""
    sizes = np.abs(modes)
    usable = np.isfinite(sizes) & (sizes > 0.0)
    logarithm = np.log(np.where(usable, sizes, 1.0)).sum(1) / np.maximum(usable.sum(1), 1)
    scale: Array = np.exp(logarithm)
    return scale


def _delayed(loop: Loop, row: Stack) -> Poles:
    found = delayed_poles(row)
    (listed,) = _listed(found.values[None], loop.sample_time, _scale(row.modes))
    return replace(
        listed,
        stable=listed.stable and not found.reason and found.count_unstable == 0,
        count_unstable=max(listed.count_unstable, found.count_unstable),
        growth=max(listed.growth, 0.0) if found.count_unstable else listed.growth,
        complete=False,
        known_from=found.known_from,
        reason=found.reason,
    )


def _listed(s: ComplexArray, step: float, scale: Array) -> list[Poles]:
    """Sort the poles of each row and count those on or beyond the border; minus infinity is none."""
    order = np.lexsort((-s.imag, np.abs(s.imag), -s.real))
    values = np.take_along_axis(s, order, axis=1)
    border = _MARGINAL / step if step else _ROUNDING * (np.abs(values) + scale[:, None])
    unstable = (values.real >= -border).sum(1).tolist()
    present = (values.real > -np.inf).sum(1).tolist()
    return [
        Poles(
            values=row[:length],
            stable=count == 0,
            count_unstable=count,
            growth=float(row[0].real) if length else -np.inf,
            complete=True,
            known_from=-np.inf,
        )
        for row, count, length in zip(values, unstable, present, strict=True)
    ]


def _finite(loops: Sequence[Loop], rows: Stack) -> list[Poles]:
    """Return the poles of loops with few states: eigenvalues, brought to full digits on the factors."""
    if not loops:
        return []
    matrices = _sampled_matrices(loops) if rows.step else _continuous_matrices(loops)
    eigenvalues: ComplexArray = (np.linalg.eigvals(matrices) / rows.unit).astype(complex)
    x = _refined(rows, eigenvalues) * rows.unit
    s = to_s(x, rows.step)
    if rows.step:
        s[np.abs(1.0 + x) <= _DEADBEAT] = -np.inf
    return _listed(s, rows.step, _scale(rows.modes))


def _refined(rows: Stack, x: ComplexArray) -> ComplexArray:
    """Return roots after one step of Newton's method, or as many as they need where eigenvalues were poor.

    Parameters
    ----------
    x : ndarray of complex, shape (rows, k)
        Eigenvalues of real matrices: each complex one before its conjugate, if it lies above the real axis.
    """
    step = newton_steps(rows, x)
    step.imag[x.imag == 0.0] = 0.0
    deadbeat = np.abs(1.0 + x * rows.unit) <= _DEADBEAT if rows.step else np.zeros(x.shape, dtype=bool)
    step[deadbeat] = 0.0
    poor = (np.abs(step) > _SURE * np.maximum(np.abs(x), 1e-6)).any(1)
    refined = x - step
    refined = np.where(x.imag < 0.0, np.roll(refined, 1, axis=1).conj(), refined)
    for row in np.flatnonzero(poor).tolist():
        live = ~deadbeat[row]
        refined[row, live] = _together(rows.take([row]), x[row, live])
    return refined


def _together(row: Stack, x: ComplexArray) -> ComplexArray:
    """Return roots found together, symmetric about the real axis; the given ones where that fails."""
    s, error = together(row, to_s(x * row.unit, row.step))
    if row.step:
        s = s.real + 1j * folded(s.imag, row.step)
        own = np.abs(s.imag) >= pi / row.step * (1.0 - 1e-9)
    roots = to_x(s, row.step) / row.unit
    real = np.abs(s.imag) <= 1e-9 * np.abs(s)
    if row.step:
        real |= own
    above = roots[~real & (roots.imag > 0.0)]
    found = np.concatenate((roots[real].real, above, above.conj())).astype(complex)
    return found if len(found) == len(x) and (error < 1e-3).all() else x


# --- the closed loop as a matrix ---------------------------------------------------------------------------------


def _continuous_matrices(loops: Sequence[Loop]) -> Array:
    return np.array([_continuous_matrix(loop) for loop in loops if isinstance(loop, ContinuousLoop)])


def _continuous_matrix(loop: ContinuousLoop) -> Array:
    """Return the state matrix of 1 + L = 0, or of 1 + 1/L = 0 when L is improper or larger than one at infinity."""
    zeros, poles, gain = loop.factors.zeros, loop.factors.poles, loop.factors.gain
    excess = len(poles) - len(zeros)
    if excess < 0 or (excess == 0 and abs(gain) > 1.0):
        zeros, poles, gain = poles, zeros, 1.0 / gain
    open_loop = from_zeros_poles(zeros, poles, gain)
    return open_loop.a - np.outer(open_loop.b, open_loop.c) / (1.0 + open_loop.d)


def _sampled_matrices(loops: Sequence[Loop]) -> Array:
    """Return what one sample adds to the state of each closed loop, shape (k, n, n): its matrix less the identity.

    States: the chain, past efforts with the latest first, integral, derivative, measurement filter, lead-lag, notch;
    of the law only those that have an effect. Loops with a shorter delay have efforts that nobody reads, at z = 0.
    """
    sampled = [loop for loop in loops if isinstance(loop, SampledLoop)]
    controller, order = sampled[0].controller, sampled[0].chain.order
    chain_length = max(loop.held.steps for loop in sampled) + 1
    every, steps = np.arange(len(sampled)), np.array([loop.held.steps for loop in sampled])
    size = order + chain_length + _law_states(controller)
    measurement = np.zeros((len(sampled), size))
    measurement[:, :order] = [loop.held.c for loop in sampled]
    measurement[every, order + steps] = [loop.held.d for loop in sampled]
    rows = _LawRows(controller, measurement, order + chain_length)
    matrix = np.zeros((len(sampled), size, size))
    matrix[:, :order, :order] = [loop.held.growth for loop in sampled]
    matrix[every, :order, order + steps] += np.array([loop.held.old for loop in sampled]).reshape(len(sampled), order)
    new = np.array([loop.held.new for loop in sampled]).reshape(len(sampled), order)
    # The effort of `steps` samples ago: this sample's own when there is no delay.
    inputs = np.zeros((len(sampled), size))
    inputs[every, order + steps - 1] = 1.0
    inputs = np.where(steps[:, None] == 0, rows.effort, inputs)
    matrix[:, :order] += new[:, :, None] * inputs[:, None, :]
    matrix[:, order] = rows.effort
    past = np.arange(order + 1, order + chain_length)
    matrix[:, past, past - 1] = 1.0
    for place, row in rows.updates:
        matrix[:, place] = row
    held = np.arange(order, size)
    matrix[:, held, held] -= 1.0
    return matrix


def _law_states(controller: Controller) -> int:
    gains = controller.parallel()
    single = (gains.ki, gains.kd, controller.measurement_filter, controller.lead_lag)
    return sum(1 for value in single if value) + (0 if controller.notch is None else 2)


class _LawRows:
    """The law as rows over the state of the loop: the effort, and what becomes of each of the law's states.

    Parameters
    ----------
    controller : Controller
    measurement : ndarray, shape (k, n)
        The measurement as a combination of states.
    place : int
        Where the law's states begin.
    """

    def __init__(self, controller: Controller, measurement: Array, place: int) -> None:
        self.updates: list[tuple[int, Array]] = []
        self._place, self._shape = place, measurement.shape
        self.effort = controller.sign * self._law(controller, self._filtered(controller, measurement))

    def _state(self) -> tuple[int, Array]:
        """Take the next state and return its place and its row."""
        row = np.zeros(self._shape)
        row[:, self._place] = 1.0
        self._place += 1
        return self._place - 1, row

    def _filtered(self, controller: Controller, measurement: Array) -> Array:
        step, found = controller.sample_time, measurement
        if controller.measurement_filter:
            gain = step / (controller.measurement_filter + step)
            place, last = self._state()
            found = last + gain * (found - last)
            self.updates.append((place, found))
        if controller.lead_lag is not None:
            lead = lead_lag(step, controller.lead_lag.lead, controller.lead_lag.lag)
            place, memory = self._state()
            filtered, found = found, lead.gain * found + memory
            self.updates.append((place, memory + lead.share * (lead.rest * filtered - memory)))
        if controller.notch is not None:
            section = notch(step, controller.notch.frequency, controller.notch.depth, controller.notch.width)
            (first, one), (second, two) = self._state(), self._state()
            filtered, found = found, section.b0 * found + one
            self.updates.append((first, section.b1 * filtered - section.a1 * found + two))
            self.updates.append((second, section.b2 * filtered - section.a2 * found))
        return found

    def _law(self, controller: Controller, found: Array) -> Array:
        gains, step = controller.parallel(), controller.sample_time
        effort = -gains.kp * found
        if gains.ki:
            place, integral = self._state()
            effort = effort + integral
            self.updates.append((place, integral - gains.ki * step * found))
        if gains.kd:
            span = controller.filter_time + step
            place, rest = self._state()
            derivative = rest - (gains.kd / span) * found
            effort = effort + derivative
            self.updates.append((place, (controller.filter_time / span) * derivative + (gains.kd / span) * found))
        return effort
