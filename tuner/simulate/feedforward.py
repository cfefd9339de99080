"""Feedforward: the filters that turn a reference or a measured disturbance into an effort, and what they give."""

from collections.abc import Iterable

import numpy as np

from tuner.errors import LoopError
from tuner.kernels.loop import step_response
from tuner.model.controller import Controller
from tuner.simulate.discrete import hold, split
from tuner.simulate.linear import Linear, constant, from_zeros_poles, product
from tuner.simulate.traces import Array

_SAME = 1e-9


def reference_filter(controller: Controller, process: Linear) -> Linear | None:
    """Return the filter from reference to effort; None when the controller has none.

    Parameters
    ----------
    controller : Controller
        With its feedforward: static is a gain; inverse undoes `process` as far as a stable, causal filter can.
    process : Linear
        Actuator and plant, nominal.

    Raises
    ------
    LoopError
        When the inverse does not exist, with the reason.
    """
    asked = controller.feedforward
    if asked is None:
        return None
    if asked.kind == "static":
        return constant(asked.gain or 0.0)
    return inverse(process, asked.filter_time or 0.0)


def inverse(process: Linear, filter_time: float) -> Linear:
    """Return the inverse of the part of a process that has a stable and causal one, made proper by equal lags.

    Dead time is left out; a zero that is not in the left half plane is too, but for its static gain. The lags
    1/(filter_time s + 1) are as many as the inverse needs (common practice, no source).

    Raises
    ------
    LoopError
        When the process has a zero at the origin, or lags are needed and `filter_time` is 0.
    """
    kept, gain = _invertible(process)
    missing = process.order - len(kept)
    if missing and filter_time <= 0.0:
        raise LoopError(
            f"the inverse of the plant needs {_lags(missing)} to be proper: expected filter_time above 0 in "
            f"controller.feedforward, found {filter_time:g}"
        )
    lags = (-1.0 / filter_time,) * missing if missing else ()
    return from_zeros_poles(process.poles, (*kept, *lags), product((1.0 / gain, *[1.0 / filter_time] * missing)))


def disturbance_filter(path: Linear, process: Linear) -> Linear:
    """Return the filter from a measured disturbance to the effort that cancels it at the output: -path / process.

    Factors that both have cancel. The dead time is what the path has beyond that of the process; where the process
    is the slower one, the effort comes too late by the difference, and nothing can be done about that.

    Raises
    ------
    LoopError
        When the filter would be improper or unstable, with the reason.
    """
    kept, gain = _invertible(process)
    zeros, poles = _without_shared([*path.zeros, *process.poles], [*path.poles, *kept])
    if len(zeros) > len(poles):
        raise LoopError(
            f"the disturbance feedforward would be improper: its numerator has degree {len(zeros)}, above the "
            f"denominator's {len(poles)}; the disturbance reaches the output with fewer lags than the effort does"
        )
    if any(pole.real > 0.0 for pole in poles):
        raise LoopError("the disturbance feedforward would be unstable: the path of the disturbance is unstable")
    return from_zeros_poles(zeros, poles, -path.gain / gain, max(path.dead_time - process.dead_time, 0.0))


def step_sequence(system: Linear, step: float, count: int) -> Array:
    """Return the unit step response at `count` samples, each just after what happens at it; shape (count,)."""
    held = hold(system, step)
    on_a_sample = split(system.dead_time, step).offset == 0.0
    direct = np.array([0.0, system.d] if on_a_sample else [system.d, 0.0])
    out = np.empty(count)
    step_response(held.growth, held.old, held.new, held.c, direct, held.steps, out)
    return out


def _invertible(process: Linear) -> tuple[list[complex], float]:
    """Return the zeros in the left half plane, and the gain that stands for the rest: gain prod(-z)."""
    kept = [zero for zero in process.zeros if zero.real < 0.0]
    rest = [zero for zero in process.zeros if zero.real >= 0.0]
    if not all(rest):
        raise LoopError("a plant with a zero at the origin has no inverse: no steady effort holds its output")
    turned = np.prod([-zero for zero in rest]) if rest else 1.0
    return kept, process.gain * float(np.real(turned))


def _without_shared(zeros: Iterable[complex], poles: Iterable[complex]) -> tuple[list[complex], list[complex]]:
    left, under = [], list(poles)
    for zero in zeros:
        partner = min(under, key=lambda pole: abs(pole - zero), default=None)
        if partner is not None and abs(partner - zero) <= _SAME * abs(zero):
            under.remove(partner)
        else:
            left.append(zero)
    return left, under


def _lags(count: int) -> str:
    return "a lag" if count == 1 else f"{count} lags"
