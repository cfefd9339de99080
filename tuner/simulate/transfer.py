"""Transfer functions of the controller's blocks and of a continuous plant, as factors in s or in z - 1."""

from math import sqrt, tan

import numpy as np

from tuner.model.controller import Controller, LeadLag, Notch
from tuner.simulate.factors import Factors
from tuner.simulate.linear import Linear
from tuner.simulate.traces import ComplexArray

NONE: ComplexArray = np.zeros(0, dtype=complex)


def controller_factors(controller: Controller) -> Factors:
    """Return the way from the measurement, with its sign turned, to the effort: action, law, filter, notch, delay.

    The poles and zeros of a block that does nothing are left out: the integral when ki = 0, the derivative when
    kd = 0. Gain 0 when the feedback is off or has no gains.
    """
    step = controller.sample_time
    law = _law(controller)
    if not controller.feedback or law.gain == 0.0:
        return Factors(NONE, NONE, 0.0, 0.0, step)
    for block in _measurement_blocks(controller):
        law = law.then(block)
    return law.then(Factors(NONE, NONE, controller.sign, controller.delay_samples * step, step))


def plant_factors(chain: Linear) -> Factors:
    """Return the factors of a continuous chain."""
    return Factors(chain.zeros, chain.poles, chain.gain, chain.dead_time, 0.0)


def _law(controller: Controller) -> Factors:
    """Return kp + ki/s + kd s/(Tf s + 1), or what the sampled law makes of it.

    Sampled, in x = z - 1: kp + ki Ts/x + kd/(Tf + Ts) x/(x + e), e = Ts/(Tf + Ts) (Astrom and Wittenmark,
    Computer-Controlled Systems): both are kp + i/x + g x/(x + e), or + kd x without a filter.
    """
    gains, step = controller.parallel(), controller.sample_time
    span = controller.filter_time + step
    integral = gains.ki * step if step else gains.ki
    if gains.kd == 0.0:
        numerator = (0.0, gains.kp, integral)
        poles: list[complex] = []
    elif span == 0.0:
        numerator = (gains.kd, gains.kp, integral)
        poles = []
    else:
        decay = (step or 1.0) / span
        numerator = (gains.kp + gains.kd / span, gains.kp * decay + integral, integral * decay)
        poles = [complex(-decay)]
    if integral:
        return _ratio(numerator, [*poles, 0j], step)
    return _ratio((0.0, *numerator[:2]), poles, step)


def _ratio(numerator: tuple[float, float, float], poles: list[complex], step: float) -> Factors:
    zeros, gain = quadratic_roots(*numerator)
    return Factors(zeros, np.array(poles, dtype=complex), gain, 0.0, step)


def quadratic_roots(a: float, b: float, c: float) -> tuple[ComplexArray, float]:
    """Return the roots of a x^2 + b x + c and its leading coefficient that is not zero; 0 when all are."""
    if a == 0.0:
        return (np.array([-c / b], dtype=complex), b) if b else (NONE, c)
    half = -0.5 * b / a
    product = c / a
    square = half * half - product
    if square < 0.0:
        return np.array([complex(half, sqrt(-square)), complex(half, -sqrt(-square))]), a
    large = half + np.copysign(sqrt(square), half)
    return np.array([large, product / large if large else 0.0], dtype=complex), a


def _measurement_blocks(controller: Controller) -> list[Factors]:
    blocks = []
    if controller.measurement_filter:
        blocks.append(_filter(controller.measurement_filter, controller.sample_time))
    if controller.lead_lag is not None:
        blocks.append(_lead_lag(controller.lead_lag, controller.sample_time))
    if controller.notch is not None:
        blocks.append(_notch(controller.notch, controller.sample_time))
    return blocks


def _filter(time: float, step: float) -> Factors:
    """Return 1/(time s + 1), or its backward difference g z/(z - 1 + g)."""
    if not step:
        return Factors(NONE, np.array([-1.0 / time + 0j]), 1.0 / time, 0.0, 0.0)
    gain = step / (time + step)
    return Factors(np.array([-1.0 + 0j]), np.array([-gain + 0j]), gain, 0.0, step)


def _lead_lag(block: LeadLag, step: float) -> Factors:
    """Return (lead s + 1)/(lag s + 1), or its backward difference; see `law.constants.lead_lag`."""
    if not step:
        zeros = np.array([-1.0 / block.lead + 0j]) if block.lead else NONE
        return Factors(zeros, np.array([-1.0 / block.lag + 0j]), (block.lead or 1.0) / block.lag, 0.0, 0.0)
    over, under = block.lead + step, block.lag + step
    return Factors(np.array([-step / over + 0j]), np.array([-step / under + 0j]), over / under, 0.0, step)


def _notch(notch: Notch, step: float) -> Factors:
    """Return the notch, or its bilinear transform prewarped at the centre; see `law.constants.notch`."""
    zeros, _ = quadratic_roots(1.0, notch.depth * notch.width, 1.0)
    poles, _ = quadratic_roots(1.0, notch.width, 1.0)
    if not step:
        return Factors(zeros * notch.frequency, poles * notch.frequency, 1.0, 0.0, 0.0)
    t = tan(0.5 * notch.frequency * step)
    gain = (1.0 + notch.depth * notch.width * t + t * t) / (1.0 + notch.width * t + t * t)
    return Factors(_bilinear(zeros * t), _bilinear(poles * t), gain, 0.0, step)


def _bilinear(q: ComplexArray) -> ComplexArray:
    x: ComplexArray = 2.0 * q / (1.0 - q)
    return x
