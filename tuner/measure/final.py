"""Where the output of a linear, stable loop ends, from the static gains around it."""

from dataclasses import dataclass
from math import isinf, nan

from tuner.model.controller import Controller
from tuner.model.sheet import Trial


@dataclass(frozen=True, slots=True)
class FinalValues:
    """Where the output ends in each run, deviation; NaN when it is not known exactly."""

    reference: float
    disturbance: float


def final_values(controller: Controller, trial: Trial, static_gain: float) -> FinalValues:
    """Return the exact final values of a stable loop, by the final value theorem.

    With integral action the error ends at zero. Without it, K being the signed proportional gain, F the static gain
    of the feedforward and G that of the plant, y = G (K b + F) r / (1 + G K) and y = G d / (1 + G K); with an
    integrating plant their limits b r + F r / K and d / K.

    Parameters
    ----------
    static_gain : float
        From the effort to the measurement; infinite for an integrating plant.
    """
    gains = controller.parallel()
    if controller.feedback and gains.ki:
        return FinalValues(trial.reference, 0.0)
    gain = controller.sign * gains.kp if controller.feedback else 0.0
    forward = gain * controller.b + _feedforward(controller, static_gain)
    compensated = controller.disturbance_feedforward is not None
    if isinf(static_gain):
        if not gain:
            return FinalValues(nan, nan)
        return FinalValues(forward / gain * trial.reference, nan if compensated else trial.disturbance / gain)
    through = static_gain / (1.0 + static_gain * gain)
    disturbance = through * trial.disturbance
    if compensated:
        disturbance = 0.0 if static_gain else nan
    return FinalValues(through * forward * trial.reference, disturbance)


def _feedforward(controller: Controller, static_gain: float) -> float:
    """Return the static gain of the feedforward from the reference; an inverse one undoes the plant's."""
    feedforward = controller.feedforward
    if feedforward is None:
        return 0.0
    if feedforward.kind == "static":
        return feedforward.gain or 0.0
    return 1.0 / static_gain if static_gain else nan
