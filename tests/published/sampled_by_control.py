"""A sampled loop put together by python-control and scipy alone, block by block, to compare ours with.

Nothing here is shared with the program but the numbers of the sheet. The law is written as its pulse transfer
functions (Astrom and Wittenmark, Computer-Controlled Systems); blocks are joined by python-control.
"""

import warnings
from collections.abc import Callable
from functools import reduce
from typing import Any, NamedTuple

import control
import numpy as np
from numpy.typing import NDArray
from scipy.linalg import expm

from tuner.model.controller import Controller
from tuner.model.plant import ZeroPolePlant
from tuner.model.sheet import Sheet

Array = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]
Block = Any
"""A system of python-control, which has no types."""

ONE = np.array([[1.0]])


class Gains(NamedTuple):
    """kp, ki, kd of the law."""

    kp: float
    ki: float
    kd: float


class HeldProcess(NamedTuple):
    """x(k+1) = phi x + now v(k-d) + before v(k-d-1), (y, ym) = c x + direct v(k-d-1), v = (effort, disturbance)."""

    phi: Array
    now: Array
    before: Array
    c: Array
    direct: Array
    steps: int


class Answers(NamedTuple):
    """What the loop does from rest: outputs at the samples, from a reference step and from a disturbance step."""

    reference: Array
    disturbance: Array


def gains(controller: Controller) -> Gains:
    """Return the gains multiplied out, written again from the definitions of the forms."""
    first, second, third = controller.gain_1, controller.gain_2, controller.gain_3
    rate = 1.0 / second if second else 0.0
    if controller.form == "parallel":
        return Gains(first, second, third)
    if controller.form == "standard":
        return Gains(first, first * rate, first * third)
    return Gains(first + first * third * rate, first * rate, first * third)


def continuous_process(sheet: Sheet) -> Block:
    """Return actuator, plant and sensor without dead time: from effort and disturbance to output and measurement."""
    plant = sheet.plant
    assert isinstance(plant, ZeroPolePlant)
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # complex pairs leave imaginary parts of rounding size
        middle = control.ss(control.zpk(plant.zeros, plant.poles, plant.gain))
    entry = control.append(lag(sheet.actuator.lag), control.ss(static(ONE)))
    end = control.append(control.ss(static(ONE)), lag(sheet.sensor.lag))
    return end * static([[1.0], [1.0]]) * middle * static([[1.0, 1.0]]) * entry


def held_process(sheet: Sheet) -> HeldProcess:
    """Return the process under a hold, dead time with its fraction of a sample included.

    By python-control where the dead time is whole; else by the integral of the exponential over the two parts of the
    sample, each as the exponential of a larger matrix (Astrom and Wittenmark, section 2.3; Van Loan, 1978).
    """
    step = sheet.controller.sample_time
    process = continuous_process(sheet)
    ratio = getattr(sheet.plant, "dead_time", 0.0) / step
    steps = round(ratio) if abs(ratio - round(ratio)) < 1e-9 else int(ratio)
    late = max(ratio - steps, 0.0) * step
    if late < 1e-9 * step:
        held = control.sample_system(process, step, "zoh")
        return HeldProcess(held.A, held.B, np.zeros_like(held.B), process.C, process.D, steps)
    first, last = _driven(process, step - late), _driven(process, late)
    return HeldProcess(first.phi @ last.phi, first.input, first.phi @ last.input, process.C, process.D, steps)


class _Driven(NamedTuple):
    phi: Array
    input: Array


def _driven(process: Block, time: float) -> _Driven:
    """Return the transition over a time under a constant input."""
    order, inputs = process.B.shape
    block = np.zeros((order + inputs, order + inputs))
    block[:order] = np.hstack((process.A, process.B)) * time
    grown = expm(block)
    return _Driven(grown[:order, :order], grown[:order, order:])


def process_in_z(sheet: Sheet) -> Block:
    """Return the held process as a system of python-control, past inputs as states."""
    held, step = held_process(sheet), sheet.controller.sample_time
    order, count = held.phi.shape[0], held.steps + 1
    a = np.zeros((order + 2 * count, order + 2 * count))
    b = np.zeros((order + 2 * count, 2))
    c = np.zeros((2, order + 2 * count))
    a[:order, :order] = held.phi
    a[:order, -2:] += held.before
    if count > 1:
        a[:order, -4:-2] += held.now
    else:
        b[:order] = held.now
    a[order + 2 :, order:-2] = np.eye(2 * count - 2)
    b[order : order + 2] = np.eye(2)
    c[:, :order], c[:, -2:] = held.c, held.direct
    return control.ss(a, b, c, np.zeros((2, 2)), step)


def law_in_z(controller: Controller) -> Block:
    """Return the controller: from reference and measurement to effort; the integral is there once for both.

    One without gains reads nothing, so its filter and notch are no part of the loop.
    """
    step, kp, ki, kd = controller.sample_time, *gains(controller)
    if not (kp or ki or kd):
        return static([[0.0, 0.0]], step)
    parts = [static([[kp * controller.b, -kp]], step)]
    if ki:
        parts.append(control.ss(control.tf([ki * step], [1.0, -1.0], step)) * static([[1.0, -1.0]], step))
    if kd:
        span = controller.filter_time + step
        slope = control.tf([kd / span, -kd / span], [1.0, -controller.filter_time / span], step)
        parts.append(control.ss(slope) * static([[controller.c, -1.0]], step))
    law = reduce(lambda one, other: one + other, parts)
    law = law * control.append(static(ONE, step), _on_measurement(controller))
    late = [1.0] + [0.0] * controller.delay_samples
    sign = 1.0 if controller.action == "reverse" else -1.0
    return control.ss(control.tf([sign], late, step)) * law if len(late) > 1 else static([[sign]], step) * law


def _on_measurement(controller: Controller) -> Block:
    step, time, notch = controller.sample_time, controller.measurement_filter, controller.notch
    found = static(ONE, step)
    if time:
        share = step / (time + step)
        found = control.ss(control.tf([share, 0.0], [1.0, share - 1.0], step)) * found
    if notch is not None:
        w, width = notch.frequency, notch.width
        plain = control.tf([1.0, notch.depth * width * w, w * w], [1.0, width * w, w * w])
        found = control.ss(control.sample_system(plain, step, "tustin", prewarp_frequency=w)) * found
    return found


def closed_loop(sheet: Sheet) -> Block:
    """Return the closed loop, every mode of every block in it: from reference and disturbance to output and effort."""
    process, law = process_in_z(sheet), law_in_z(sheet.controller)
    # Inputs: reference, measurement, effort, disturbance. Outputs: effort, output, measurement.
    both = control.append(law, process)
    wires = np.zeros((4, 3))
    wires[1, 2] = wires[2, 0] = 1.0
    closed = control.feedback(both, static(wires, sheet.controller.sample_time), 1)
    return control.ss(closed.A, closed.B[:, [0, 3]], closed.C[[1, 0]], closed.D[[1, 0]][:, [0, 3]], closed.dt)


def answers(sheet: Sheet, closed: Block, count: int) -> Answers:
    """Return both runs at the first samples."""
    times = np.arange(count) * sheet.controller.sample_time
    runs = []
    for which, size in enumerate((sheet.trial.reference, sheet.trial.disturbance)):
        inputs = np.zeros((2, count))
        inputs[which] = size
        runs.append(control.forced_response(closed, times, inputs).outputs[0])
    return Answers(*runs)


def loop_gain(sheet: Sheet) -> Callable[[Array], ComplexArray]:
    """Return L at exp(jw Ts) as a function of w, each block evaluated by its own formula at each frequency."""
    held, controller = held_process(sheet), sheet.controller
    sign = 1.0 if controller.action == "reverse" else -1.0
    late = -float(held.steps + controller.delay_samples)

    def response(w: Array) -> ComplexArray:
        z = np.exp(1j * w * controller.sample_time)
        inputs = held.now[:, 0] + held.before[:, 0] / z[:, None]
        states = np.linalg.solve(z[:, None, None] * np.eye(len(held.phi)) - held.phi, inputs[..., None])[..., 0]
        process = (states @ held.c[1] + held.direct[1, 0] / z) * z**late
        return np.asarray(sign * _law(controller, z) * _measured(controller, z) * process)

    return response


def ends(sheet: Sheet, gain: Callable[[Array], ComplexArray]) -> tuple[float, float]:
    """Return L at z = 1, infinite with an integrator anywhere, and at z = -1; both are real."""
    integrating = gains(sheet.controller).ki or 0j in getattr(sheet.plant, "poles", ())
    nyquist = gain(np.array([np.pi / sheet.controller.sample_time]))[0].real
    return (np.inf if integrating else float(gain(np.zeros(1))[0].real), float(nyquist))


def _law(controller: Controller, z: ComplexArray) -> ComplexArray:
    step, kp, ki, kd = controller.sample_time, *gains(controller)
    span = controller.filter_time + step
    value = kp + kd / span * (z - 1.0) / (z - controller.filter_time / span)
    return value + ki * step / (z - 1.0) if ki else value


def _measured(controller: Controller, z: ComplexArray) -> ComplexArray:
    step, time, notch = controller.sample_time, controller.measurement_filter, controller.notch
    value = np.ones_like(z)
    if time:
        share = step / (time + step)
        value = value * share * z / (z - 1.0 + share)
    if notch is not None:
        w = notch.frequency
        s = w / np.tan(0.5 * w * step) * (z - 1.0) / (z + 1.0)
        value = value * (s * s + notch.depth * notch.width * w * s + w * w) / (s * s + notch.width * w * s + w * w)
    return value


def lag(time: float) -> Block:
    """Return a first-order lag, or nothing but a wire when its time is zero."""
    return control.ss([[-1.0 / time]], [[1.0]], [[1.0 / time]], [[0.0]]) if time else control.ss(static(ONE))


def static(matrix: object, step: float | None = None) -> Block:
    """Return a gain, which may be a matrix."""
    gain = np.atleast_2d(np.asarray(matrix, dtype=float))
    return control.ss([], np.zeros((0, gain.shape[1])), np.zeros((gain.shape[0], 0)), gain, *([step] if step else []))
