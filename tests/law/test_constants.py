"""Gains and times made into the constants of the law."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import signal

from tuner.law.constants import NO_LEAD, NO_NOTCH, UNLIMITED, Constants, bake, lead_lag, notch
from tuner.law.pid import PARAMETERS


def test_constants_are_in_the_order_of_the_law() -> None:
    """The law takes them by position, so their order is the contract."""
    assert Constants._fields == PARAMETERS


def test_derivative_is_a_backward_difference() -> None:
    """Astrom and Wittenmark, Computer-Controlled Systems, ch. 8: ad = Td/(Td + N h), bd = K Td N/(Td + N h)."""
    k, td, n, h = 1.0, 1.0, 10.0, 0.05
    made = bake(sample_time=h, kp=k, ki=0.0, kd=k * td, filter_time=td / n)
    assert made.derivative_decay == pytest.approx(0.6666666667, abs=1e-9)
    assert made.derivative_gain == pytest.approx(6.6666666667, abs=1e-9)


def test_sampled_constants_of_a_normalised_loop() -> None:
    """K = 4, Ti = 90, Td = 22.5, h = 0.5, N = 8 in exact fractions: h/Ti K, 45/53, 1440/53."""
    made = bake(sample_time=0.5, kp=4.0, ki=4.0 / 90.0, kd=4.0 * 22.5, filter_time=22.5 / 8.0)
    assert made.integral_gain == pytest.approx(1.0 / 45.0, rel=1e-15)
    assert made.derivative_decay == pytest.approx(45.0 / 53.0, rel=1e-15)
    assert made.derivative_gain == pytest.approx(1440.0 / 53.0, rel=1e-15)


def test_absent_limits_and_times_change_nothing() -> None:
    """Without limits, wind-up time, filter and notch their constants are neutral."""
    made = bake(sample_time=0.5, kp=1.0, ki=0.0, kd=0.0)
    assert (made.low, made.high, made.rate_step) == (-UNLIMITED, UNLIMITED, UNLIMITED)
    assert made.windup_gain == 0.0
    assert made.filter_gain == 1.0
    assert made[12:15] == NO_LEAD
    assert made[15:20] == NO_NOTCH


def test_limits_become_deviations_and_the_rate_a_step() -> None:
    """Value limits are absolute in the sheet and deviations in the law; the rate is per sample there."""
    made = bake(sample_time=0.5, kp=1.0, ki=0.0, kd=0.0, low=0.0, high=100.0, rate=8.0, resting_effort=40.0)
    assert (made.low, made.high, made.rate_step) == (-40.0, 60.0, 4.0)


def test_windup_and_filter_follow_their_times() -> None:
    """Ts/Tt, and the backward difference of a first-order lag, Ts/(Tm + Ts)."""
    made = bake(sample_time=0.5, kp=1.0, ki=0.0, kd=0.0, windup_time=2.0, measurement_filter_time=1.5)
    assert (made.windup_gain, made.filter_gain) == (0.25, 0.25)


@given(sample_time=st.floats(1e-3, 10.0), lead=st.floats(0.0, 100.0), lag=st.floats(1e-3, 100.0))
def test_lead_lag_is_a_backward_difference(sample_time: float, lead: float, lag: float) -> None:
    """S becomes (1 - 1/z)/Ts in (lead s + 1)/(lag s + 1); at rest it is one, at the first sample lead over lag."""
    gain, rest, share = lead_lag(sample_time, lead, lag)
    z = np.exp(1j * np.array([0.01, 0.3, 2.0]))
    s = (1.0 - 1.0 / z) / sample_time
    assert gain + rest * share / (z - 1.0 + share) == pytest.approx((lead * s + 1.0) / (lag * s + 1.0), rel=1e-9)
    assert gain + rest == pytest.approx(1.0, rel=1e-12 * max(1.0, lead / lag))


@given(
    sample_time=st.floats(1e-3, 10.0),
    share=st.floats(1e-3, 0.99),
    depth=st.floats(0.0, 1.0),
    width=st.floats(1e-2, 10.0),
)
def test_notch_is_the_prewarped_bilinear_transform(
    sample_time: float, share: float, depth: float, width: float
) -> None:
    """The coefficients are those of scipy's bilinear transform of the same notch, with the prewarped rate."""
    frequency = share * np.pi / sample_time
    rate = 0.5 * frequency / np.tan(0.5 * frequency * sample_time)
    square = frequency**2
    above, below = [1.0, depth * width * frequency, square], [1.0, width * frequency, square]
    numerator, denominator = signal.bilinear(above, below, fs=rate)
    made = notch(sample_time, frequency, depth, width)
    np.testing.assert_allclose(made[:3], numerator, rtol=1e-9, atol=1e-9)
    np.testing.assert_allclose((1.0, *made[3:]), denominator, rtol=1e-9, atol=1e-9)


def test_notch_has_its_depth_at_its_centre_and_unity_at_rest() -> None:
    """The centre stays where it was asked, and a steady measurement passes unchanged."""
    made = notch(0.1, 12.0, 0.2, 0.7)
    _, response = signal.freqz(made[:3], (1.0, *made[3:]), worN=[0.0, 1.2])
    np.testing.assert_allclose(np.abs(response), [1.0, 0.2], rtol=1e-12)
