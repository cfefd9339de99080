"""Gains and times, as an engineer gives them, made into the constants that the law multiplies with."""

from math import inf, tan
from sys import float_info
from typing import NamedTuple

UNLIMITED = float_info.max
"""Stands for an absent limit: a finite number, so that every target language can write it."""


class Constants(NamedTuple):
    """The parameters of `pid.law`, in the order of `pid.PARAMETERS`."""

    proportional_gain: float
    integral_gain: float
    derivative_gain: float
    derivative_decay: float
    windup_gain: float
    b: float
    c: float
    action: float
    low: float
    high: float
    rate_step: float
    filter_gain: float
    lead_gain: float
    lead_rest: float
    lead_share: float
    notch_b0: float
    notch_b1: float
    notch_b2: float
    notch_a1: float
    notch_a2: float
    resting_measurement: float
    resting_effort: float


class GainConstants(NamedTuple):
    """The constants that gains and times make, the first of `Constants`."""

    proportional_gain: float
    integral_gain: float
    derivative_gain: float
    derivative_decay: float
    windup_gain: float


def gain_constants(  # noqa: PLR0913, PLR0917 - one argument for each number that an engineer gives
    sample_time: float, kp: float, ki: float, kd: float, filter_time: float, windup_time: float
) -> GainConstants:
    """Make gains and times into constants; see `bake`. An infinite wind-up time is none."""
    span = filter_time + sample_time
    return GainConstants(kp, ki * sample_time, kd / span, filter_time / span, sample_time / windup_time)


class LeadCoefficients(NamedTuple):
    """A first-order section: what passes at once, what is added in the end, and its share in one sample."""

    gain: float
    rest: float
    share: float


NO_LEAD = LeadCoefficients(1.0, 0.0, 0.0)


def lead_lag(sample_time: float, lead: float, lag: float) -> LeadCoefficients:
    """Discretise (lead s + 1)/(lag s + 1) by a backward difference, as the derivative and the filter are.

    With z - 1 = x it is gain + rest share / (x + share), so that the static gain is one to the last digit.

    Parameters
    ----------
    sample_time, lead, lag : float
        Time unit of the sheet; `sample_time` or `lag` above zero.
    """
    span = lag + sample_time
    return LeadCoefficients((lead + sample_time) / span, (lag - lead) / span, sample_time / span)


class NotchCoefficients(NamedTuple):
    """Coefficients of a second-order section in z, the leading denominator coefficient being one."""

    b0: float
    b1: float
    b2: float
    a1: float
    a2: float


NO_NOTCH = NotchCoefficients(1.0, 0.0, 0.0, 0.0, 0.0)


def notch(sample_time: float, frequency: float, depth: float, width: float) -> NotchCoefficients:
    """Discretise a notch so that its centre stays where it was asked.

    The notch is (s^2 + depth width w s + w^2) / (s^2 + width w s + w^2): unity far from its centre `w`, `depth` at
    it. Bilinear transform, prewarped at the centre (Astrom and Wittenmark, Computer-Controlled Systems).

    Parameters
    ----------
    sample_time : float
        Time unit of the sheet.
    frequency : float
        Centre, rad per time unit, below pi / sample_time.
    depth : float
        Gain at the centre, 0 to 1.
    width : float
        Bandwidth divided by the centre frequency, dimensionless.
    """
    t = tan(0.5 * frequency * sample_time)
    square = t * t
    scale = 1.0 + width * t + square
    middle = 2.0 * (square - 1.0) / scale
    return NotchCoefficients(
        b0=(1.0 + depth * width * t + square) / scale,
        b1=middle,
        b2=(1.0 - depth * width * t + square) / scale,
        a1=middle,
        a2=(1.0 - width * t + square) / scale,
    )


def bake(  # noqa: PLR0913 - one argument for each number that an engineer gives
    *,
    sample_time: float,
    kp: float,
    ki: float,
    kd: float,
    filter_time: float = 0.0,
    windup_time: float | None = None,
    b: float = 1.0,
    c: float = 0.0,
    action: float = 1.0,
    low: float | None = None,
    high: float | None = None,
    rate: float | None = None,
    measurement_filter_time: float = 0.0,
    lead_section: LeadCoefficients = NO_LEAD,
    notch_section: NotchCoefficients = NO_NOTCH,
    resting_measurement: float = 0.0,
    resting_effort: float = 0.0,
) -> Constants:
    """Make the constants of the law for one sample time.

    Parameters
    ----------
    sample_time, filter_time, windup_time, measurement_filter_time : float
        Time unit of the sheet; `sample_time` above zero. No wind-up time: the limits do not act on the integral.
    kp, ki, kd : float
        Parallel gains: effort per measurement, the same per time, the same times time.
    low, high : float or None
        Limits of the effort in engineering units; None for none.
    rate : float or None
        Largest change of the effort per time unit; None for none.
    action : float
        +1 for reverse action, -1 for direct.

    Returns
    -------
    Constants
        In the order in which the law takes them.
    """
    return Constants(
        *gain_constants(sample_time, kp, ki, kd, filter_time, inf if windup_time is None else windup_time),
        b=b,
        c=c,
        action=action,
        low=-UNLIMITED if low is None else low - resting_effort,
        high=UNLIMITED if high is None else high - resting_effort,
        rate_step=UNLIMITED if rate is None else rate * sample_time,
        filter_gain=sample_time / (measurement_filter_time + sample_time),
        lead_gain=lead_section.gain,
        lead_rest=lead_section.rest,
        lead_share=lead_section.share,
        notch_b0=notch_section.b0,
        notch_b1=notch_section.b1,
        notch_b2=notch_section.b2,
        notch_a1=notch_section.a1,
        notch_a2=notch_section.a2,
        resting_measurement=resting_measurement,
        resting_effort=resting_effort,
    )
