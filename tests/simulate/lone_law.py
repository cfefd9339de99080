"""The control law on its own, sample by sample and without limits, for a measurement that is a deviation from rest."""

from tuner.law import pid
from tuner.law.constants import NO_LEAD, NO_NOTCH, Constants, bake, lead_lag, notch
from tuner.model.controller import Controller

State = tuple[float, float, float, float, float, float, float, float, float, float, float]

AT_REST: State = (0.0,) * 11


def constants_of(controller: Controller) -> Constants:
    """Return the law's constants for a sampled controller."""
    gains, step, section = controller.parallel(), controller.sample_time, NO_NOTCH
    if controller.notch is not None:
        section = notch(step, controller.notch.frequency, controller.notch.depth, controller.notch.width)
    led = controller.lead_lag
    return bake(
        sample_time=step,
        kp=gains.kp,
        ki=gains.ki,
        kd=gains.kd,
        filter_time=controller.filter_time,
        action=controller.sign,
        measurement_filter_time=controller.measurement_filter,
        lead_section=lead_lag(step, led.lead, led.lag) if led else NO_LEAD,
        notch_section=section,
    )


def sample(measurement: float, state: State, constants: Constants) -> State:
    """Return the state after one more sample with the reference at rest; the effort is its first number."""
    return pid.law(0.0, measurement, 0.0, 0.0, *state, *constants)
