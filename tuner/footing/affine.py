"""How the loop depends on one gain: 1 + L is a part that holds plus the gain times a part that goes with it."""

from typing import NamedTuple

import numpy as np

from tuner.model.controller import Controller, Gains
from tuner.simulate.traces import Array, ComplexArray

INVERSE = ("ti",)
"""Gains that enter by their reciprocal."""

PROPORTIONAL, DERIVATIVE = ("kp", "kc"), ("kd", "td")
"""Gains that act on the measurement as it is, and on how fast it moves."""

MOTIONLESS = ("b", "c", "windup_time")
"""Numbers that no pole depends on."""


class Contour(NamedTuple):
    """A curve in the plane of poles, upwards along frequency, and what the blocks of the law are on it.

    Parameters
    ----------
    x : ndarray of complex, shape (p, n)
        z - 1 for a sampled loop, s for a continuous one.
    integral : ndarray of complex, shape (p, n)
        What an integral gain of one makes: Ts/(z - 1), or 1/s.
    lead : ndarray of complex, shape (p, n)
        The derivative is kd x / (Tf x + lead): Ts z, or 1.
    """

    x: ComplexArray
    integral: ComplexArray
    lead: ComplexArray


class Pair(NamedTuple):
    """The characteristic function, held + q * moving, at each point of a contour."""

    held: ComplexArray
    moving: ComplexArray


def contour(x: ComplexArray, step: float) -> Contour:
    """Return a contour through points in z - 1, or in s when `step` is 0."""
    with np.errstate(all="ignore"):
        if step:
            return Contour(x, step / x, step * (1.0 + x))
        return Contour(x, 1.0 / x, np.ones_like(x))


def coordinate(name: str, values: Array) -> Array:
    """Return the number that enters the characteristic function linearly, for values of a gain."""
    with np.errstate(divide="ignore"):
        return 1.0 / values if name in INVERSE else values


def value_of(name: str, q: Array) -> Array:
    """Return the values of a gain, the inverse of `coordinate`, which is its own inverse."""
    return coordinate(name, q)


def pair(controller: Controller, name: str, inverse_chain: ComplexArray, at: Contour) -> Pair:
    """Return the characteristic function along one gain, divided by the gain of the chain.

    Parameters
    ----------
    inverse_chain : ndarray of complex
        1/G on the contour, G being all that the effort of an ideal proportional gain of one passes.
    """
    if name == "filter_time":
        rest = inverse_chain + _law(Gains(*_proportional_and_integral(controller)), controller.filter_time, at)
        return Pair(rest * at.lead + controller.parallel().kd * at.x, rest * at.x)
    one, two = (_gains_at(controller, name, q) for q in (1.0, 2.0))
    moving = Gains(two.kp - one.kp, two.ki - one.ki, two.kd - one.kd)
    held = Gains(one.kp - moving.kp, one.ki - moving.ki, one.kd - moving.kd)
    time = controller.filter_time
    return Pair(inverse_chain + _law(held, time, at), _law(moving, time, at) + 0.0 * inverse_chain)


def _proportional_and_integral(controller: Controller) -> tuple[float, float, float]:
    gains = controller.parallel()
    return gains.kp, gains.ki, 0.0


def _gains_at(controller: Controller, name: str, q: float) -> Gains:
    return controller.with_value(name, 1.0 / q if name in INVERSE else q).parallel()


def _law(gains: Gains, filter_time: float, at: Contour) -> ComplexArray:
    """Return what the law makes of the measurement, its sign and filters left to the chain."""
    law: ComplexArray = gains.kp + gains.ki * at.integral
    return law + gains.kd * at.x / (filter_time * at.x + at.lead) if gains.kd else law
