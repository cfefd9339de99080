"""Where the output of a linear, stable loop ends, from the static gains around it."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import isinf, nan

from tuner.model.controller import Controller
from tuner.model.family import Member
from tuner.model.sheet import Sheet, Trial
from tuner.simulate.algebra import series
from tuner.simulate.batch import nominal
from tuner.simulate.feedforward import disturbance_feedforward, reference_feedforward
from tuner.simulate.linear import lag
from tuner.simulate.wiring import processes


@dataclass(frozen=True, slots=True)
class StaticGains:
    """Static gains of one plant and of the feedforward, which is made for the nominal plant.

    Parameters
    ----------
    plant : float
        From effort to output; infinite for an integrating plant.
    path : float or None
        From a measured disturbance to the output; None where the disturbance acts at the plant input.
    feedforward, compensation : float
        From the reference to the effort; from a measured disturbance to the effort.
    """

    plant: float
    path: float | None = None
    feedforward: float = 0.0
    compensation: float = 0.0


@dataclass(frozen=True, slots=True)
class FinalValues:
    """Where the output ends in each run, deviation; NaN when it is not known exactly.

    `bounded` says that the output cannot run away, whatever the effort does between its limits.
    """

    reference: float
    disturbance: float
    bounded: bool = False


def family_final_values(sheet: Sheet, members: Sequence[Member]) -> tuple[FinalValues, ...]:
    """Return the exact final values of each plant's loop, should it be stable and stay linear."""
    controller, trial = sheet.controller, sheet.trial
    if has_integral(controller):
        return (FinalValues(trial.reference, 0.0),) * len(members)
    forward, compensation = _feedforward(sheet)
    gains = (
        StaticGains(plant.static_gain(), path.static_gain() if path is not None else None, forward, compensation)
        for plant, path in processes(sheet, members)
    )
    return tuple(final_values(controller, trial, static) for static in gains)


def family_ends(sheet: Sheet, members: Sequence[Member]) -> tuple[FinalValues, ...]:
    """Return the exact final values of each plant's loop, and whether its output is bounded.

    So it is where the effort has a limit on either side and the plant, and any path of the disturbance, is stable
    by itself.
    """
    final, effort = family_final_values(sheet, members), sheet.loop.manipulated
    if effort.low is None or effort.high is None:
        return final
    return tuple(
        replace(values, bounded=all(pole.real < 0.0 for part in process if part for pole in part.poles))
        for values, process in zip(final, processes(sheet, members), strict=True)
    )


def has_integral(controller: Controller) -> bool:
    """Return whether the feedback drives the error to zero."""
    return controller.feedback and controller.parallel().ki > 0.0


def _feedforward(sheet: Sheet) -> tuple[float, float]:
    """Return the static gains from the reference and from a measured disturbance to the effort."""
    controller = sheet.controller
    if controller.feedforward is None and controller.disturbance_feedforward is None:
        return 0.0, 0.0
    plant, path = nominal(sheet)
    process = series(lag(sheet.actuator.lag), plant)
    forward, against = reference_feedforward(controller, process), controller.disturbance_feedforward
    compensation = disturbance_feedforward(against, path, process) if against and path is not None else None
    return (forward.static_gain() if forward else 0.0, compensation.static_gain() if compensation else 0.0)


def final_values(controller: Controller, trial: Trial, static: StaticGains) -> FinalValues:
    """Return the exact final values of a stable loop, by the final value theorem.

    With integral action the error ends at zero. Without it, K being the signed proportional gain, F and H the
    feedforward from reference and disturbance, G the plant and P the disturbance's path (G at the plant input):
    y = G (K b + F) r / (1 + G K) and y = (P + G H) d / (1 + G K), with their limits for an integrating plant.
    """
    gains = controller.parallel()
    if has_integral(controller):
        return FinalValues(trial.reference, 0.0)
    gain = controller.sign * gains.kp if controller.feedback else 0.0
    forward = gain * controller.b + static.feedforward
    if isinf(static.plant):
        return _integrating(trial, static, gain, forward)
    through = 1.0 + static.plant * gain
    path = static.plant if static.path is None else static.path
    if through == 0.0:  # a pole at the origin, so an unstable loop
        return FinalValues(nan, nan)
    return FinalValues(
        static.plant * forward / through * trial.reference,
        (path + static.plant * static.compensation) / through * trial.disturbance,
    )


def _integrating(trial: Trial, static: StaticGains, gain: float, forward: float) -> FinalValues:
    if not gain:
        return FinalValues(nan, nan)
    if static.path is None:
        disturbance = (1.0 + static.compensation) / gain
    else:
        disturbance = nan if isinf(static.path) else static.compensation / gain
    return FinalValues(forward / gain * trial.reference, disturbance * trial.disturbance)
