"""A loop with a continuous controller put together by python-control and scipy alone, to compare ours with.

Without dead time it is a finite system of python-control. With it, curves come from the method of steps: over each
interval as long as the dead time the loop is an ordinary differential equation driven by what is known already
(Bellman and Cooke, Differential-Difference Equations, 1963), solved by the eighth-order method of Dormand and Prince.
Its poles are eigenvalues of the derivative along Chebyshev points with the loop's equation as its end (Breda, Maset and
Vermiglio, SIAM Journal on Scientific Computing 27, 2005; from memory).
"""

from collections.abc import Callable
from functools import partial, reduce
from typing import NamedTuple

import control
import numpy as np
from numpy.polynomial import Chebyshev
from numpy.polynomial.chebyshev import chebpts1
from scipy.integrate import solve_ivp

from tests.published.sampled_by_control import ONE, Array, Block, ComplexArray, continuous_process, gains, lag, static
from tuner.model.controller import Controller
from tuner.model.plant import ZeroPolePlant
from tuner.model.sheet import Actuator, Sheet

_DEGREE = 60
_POINTS = 40


class Delayed(NamedTuple):
    """A loop cut at its dead time: the law with the actuator, and the plant with the sensor."""

    law: Block
    plant: Block
    dead_time: float


def law(controller: Controller) -> Block:
    """Return the controller, its derivative filtered: from reference and measurement to effort."""
    kp, ki, kd = gains(controller)
    parts = [static([[kp * controller.b, -kp]])]
    if ki:
        parts.append(control.ss(control.tf([ki], [1.0, 0.0])) * static([[1.0, -1.0]]))
    if kd:
        slope = control.tf([kd, 0.0], [controller.filter_time, 1.0])
        parts.append(control.ss(slope) * static([[controller.c, -1.0]]))
    whole = reduce(lambda one, other: one + other, parts)
    sign = 1.0 if controller.action == "reverse" else -1.0
    return static([[sign]]) * whole * control.append(static(ONE), lag(controller.measurement_filter))


def closed_loop(sheet: Sheet) -> Block:
    """Return the closed loop without dead time: from reference and disturbance to output and effort."""
    both = control.append(law(sheet.controller), continuous_process(sheet))
    wires = np.zeros((4, 3))
    wires[1, 2] = wires[2, 0] = 1.0
    closed = control.feedback(both, static(wires), 1)
    return control.ss(closed.A, closed.B[:, [0, 3]], closed.C[[1, 0]], closed.D[[1, 0]][:, [0, 3]])


def cut(sheet: Sheet) -> Delayed:
    """Return the two halves of a loop with dead time."""
    assert isinstance(sheet.plant, ZeroPolePlant)
    alone = Sheet(sheet.loop, sheet.plant, sheet.controller, sheet.trial, Actuator(), sheet.sensor)
    plant = continuous_process(alone)
    plant = control.ss(plant.A, plant.B[:, :1], plant.C, plant.D[:, :1])
    return Delayed(lag(sheet.actuator.lag) * law(sheet.controller), plant, sheet.plant.dead_time)


def method_of_steps(halves: Delayed, reference: float, disturbance: float, times: Array) -> Array:
    """Return the output at rising times from rest; at a multiple of the dead time, just before what happens there."""
    inner, outer, late = halves.law, halves.plant, halves.dead_time
    order = outer.A.shape[0]
    x, out = np.zeros(order + inner.A.shape[0]), np.empty_like(times)
    sent: Callable[[Array], Array] = _nothing

    def effort(state: Array, entering: Array) -> Array:
        measured = outer.C[1] @ state[:order] + outer.D[1, 0] * entering
        return np.asarray(inner.C[0] @ state[order:] + inner.D[0, 0] * reference + inner.D[0, 1] * measured)

    def slope(t: float, state: Array, arrives: Callable[[Array], Array]) -> Array:
        entering = arrives(np.array(t))
        measured = outer.C[1] @ state[:order] + outer.D[1, 0] * entering
        ahead = outer.A @ state[:order] + outer.B[:, 0] * entering
        return np.concatenate((ahead, inner.A @ state[order:] + inner.B @ np.array([reference, float(measured)])))

    for k in range(int(np.ceil(times[-1] / late)) + 1):
        start, end = k * late, (k + 1) * late
        arriving = partial(_later, sent, late)
        solved = solve_ivp(slope, (start, end), x, "DOP853", rtol=1e-9, atol=1e-11, dense_output=True, args=(arriving,))
        assert solved.sol is not None
        here = (times > start) & (times <= end) | ((times == 0.0) & (k == 0))
        if here.any():
            state = solved.sol(times[here])
            out[here] = outer.C[0] @ state[:order] + outer.D[0, 0] * arriving(times[here])
        points = chebpts1(_DEGREE + 1) * 0.5 * late + (start + 0.5 * late)
        wanted = effort(solved.sol(points), arriving(points)) + disturbance
        sent = Chebyshev.fit(points, wanted, _DEGREE, (start, end)).__call__
        x = solved.y[:, -1]
    return out


def _nothing(t: Array) -> Array:
    """Return what is under way before the first dead time is over."""
    return 0.0 * t


def _later(sent: Callable[[Array], Array], late: float, t: Array) -> Array:
    return np.asarray(sent(t - late))


def poles_with_dead_time(halves: Delayed) -> ComplexArray:
    """Return poles of a loop whose plant or law has no direct term; those far left or of high frequency are wrong."""
    now, late = _matrices(halves)
    order = len(now)
    # Chebyshev points from 0 to minus the dead time; rows 1 on differentiate, row 0 is the equation itself.
    points = np.cos(np.pi * np.arange(_POINTS + 1) / _POINTS)
    weights = np.array([2.0, *[1.0] * (_POINTS - 1), 2.0]) * (-1.0) ** np.arange(_POINTS + 1)
    apart = points[:, None] - points + np.eye(_POINTS + 1)
    slope = np.outer(weights, 1.0 / weights) / apart
    slope -= np.diag(slope.sum(1))
    generator = np.kron(slope * (2.0 / halves.dead_time), np.eye(order))
    generator[:order] = 0.0
    generator[:order, :order], generator[:order, -order:] = now, late
    return np.asarray(np.linalg.eigvals(generator))


def _matrices(halves: Delayed) -> tuple[Array, Array]:
    """Return the matrices of x' = now x + late x(t - dead time), plant states first."""
    inner, outer = halves.law, halves.plant
    assert outer.D[1, 0] * inner.D[0, 1] == 0.0
    order, size = outer.A.shape[0], outer.A.shape[0] + inner.A.shape[0]
    now, late = np.zeros((size, size)), np.zeros((size, size))
    now[:order, :order], now[order:, order:] = outer.A, inner.A
    now[order:, :order] = np.outer(inner.B[:, 1], outer.C[1])
    sent = np.concatenate((inner.D[0, 1] * outer.C[1], inner.C[0]))
    late[:order] = np.outer(outer.B[:, 0], sent)
    late[order:] = np.outer(inner.B[:, 1], outer.D[1, 0] * sent)
    return now, late


def loop_gain(sheet: Sheet) -> Callable[[Array], ComplexArray]:
    """Return L(jw) as a function of w, by the formulas of its blocks; an unfiltered derivative is allowed."""
    plant, controller = sheet.plant, sheet.controller
    assert isinstance(plant, ZeroPolePlant)
    kp, ki, kd = gains(controller)
    sign = 1.0 if controller.action == "reverse" else -1.0

    def response(w: Array) -> ComplexArray:
        s = 1j * w
        value = sign * plant.gain * np.exp(-plant.dead_time * s) * np.ones_like(s)
        for zero in plant.zeros:
            value = value * (s - zero)
        for pole in plant.poles:
            value = value / (s - pole)
        for time in (sheet.actuator.lag, sheet.sensor.lag, controller.measurement_filter):
            value = value / (time * s + 1.0)
        return np.asarray(value * (kp + (ki / s if ki else 0.0) + kd * s / (controller.filter_time * s + 1.0)))

    return response
