"""Feedforward: the filters that turn a reference or a measured disturbance into an effort, and what they leave out."""

from collections.abc import Iterable, Iterator, Sequence

import numpy as np

from tuner.errors import LoopError
from tuner.model.controller import Controller, DisturbanceFeedforward, ReferenceFilter
from tuner.simulate.linear import Linear, constant, from_zeros_poles, product

_SAME = 1e-9


def lags_of_reference(asked: ReferenceFilter) -> Linear:
    """Return the filter between the reference and the law: equal lags, 1/(time s + 1)^order."""
    return from_zeros_poles((), [-1.0 / asked.time] * asked.order, product([1.0 / asked.time] * asked.order))


def reference_feedforward(controller: Controller, process: Linear) -> Linear | None:
    """Return the way from reference to effort beside the law; None when the controller has none.

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
    return _with_lags(process.poles, kept, 1.0 / gain, missing, filter_time)


def disturbance_feedforward(asked: DisturbanceFeedforward, path: Linear, process: Linear) -> Linear:
    """Return the way from a measured disturbance to the effort that cancels it at the output: -path / process.

    Factors that both have cancel. The dead time is what the path has beyond that of the process; where the process
    is the slower one, the effort comes too late by the difference, and nothing can be done about that. Static is the
    ratio of the static gains alone, none is nothing at all.

    Raises
    ------
    LoopError
        When the filter would be unstable, improper without lags to make it proper, or without end, with the reason.
    """
    if not asked.acts:
        return constant(0.0)
    kept, gain = _invertible(process)
    zeros, poles = _without_shared([*path.zeros, *process.poles], [*path.poles, *kept])
    if any(pole.real > 0.0 for pole in poles):
        raise LoopError("the disturbance feedforward would be unstable: the path of the disturbance is unstable")
    missing = max(len(zeros) - len(poles), 0)
    if asked.kind == "static":
        return _static(_with_lags(zeros, poles, -path.gain / gain, missing, 1.0))
    if missing and not asked.filter_time:
        raise LoopError(
            f"the disturbance feedforward would be improper: its numerator has degree {len(zeros)}, above the "
            f"denominator's {len(poles)}; the disturbance reaches the output with fewer lags than the effort does: "
            f"expected filter_time in controller.disturbance_feedforward for {_lags(missing)}, found none"
        )
    late = max(path.dead_time - process.dead_time, 0.0)
    return _with_lags(zeros, poles, -path.gain / gain, missing, asked.filter_time or 0.0, late)


def left_out(controller: Controller, process: Linear, path: Linear | None) -> tuple[str, ...]:
    """Say in sentences what the feedforwards of a controller cannot undo and leave out.

    Parameters
    ----------
    process : Linear
        Actuator and plant, nominal.
    path : Linear or None
        Of the measured disturbance.
    """
    asked, cancelled = controller.feedforward, controller.disturbance_feedforward
    found: list[str] = []
    if asked is not None and asked.kind == "inverse":
        found += _said("The inverse of the plant leaves out", _not_inverted(process, process.dead_time))
    if cancelled is not None and path is not None and cancelled.kind == "dynamic":
        missing = process.dead_time - path.dead_time
        found += _said("The feedforward of the disturbance leaves out", _not_inverted(process, max(missing, 0.0)))
    return tuple(found)


def _said(beginning: str, parts: Sequence[str]) -> Iterator[str]:
    if parts:
        yield f"{beginning} {' and '.join(parts)}, whose effect on the output stays."


def _not_inverted(process: Linear, dead_time: float) -> list[str]:
    rest = [zero for zero in process.zeros if zero.real >= 0.0]
    parts = [f"a dead time of {dead_time:.4g}"] if dead_time > 0.0 else []
    if len(rest) == 1:
        return [*parts, f"the zero at {rest[0].real:+.4g} in the right half plane"]
    return [*parts, f"{len(rest)} zeros that are not in the left half plane"] if rest else parts


def _static(system: Linear) -> Linear:
    gain = system.static_gain()
    if not np.isfinite(gain):
        raise LoopError(
            "a static disturbance feedforward needs a finite ratio of static gains: the path of the disturbance "
            "integrates and the plant does not"
        )
    return constant(gain)


def _with_lags(  # noqa: PLR0913, PLR0917 - the parts of a filter
    zeros: Iterable[complex], poles: Iterable[complex], gain: float, missing: int, time: float, dead_time: float = 0.0
) -> Linear:
    """Return a filter with as many equal lags as it needs to be proper."""
    lags = [-1.0 / time] * missing if missing else []
    return from_zeros_poles(
        zeros, (*poles, *lags), product((gain, *[1.0 / time] * missing)) if missing else gain, dead_time
    )


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
