"""The law, against the same formulas written in another way, and every branch of it."""

from math import inf, nan, sin
from typing import Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray
from scipy import signal

from tuner.law import pid
from tuner.law.constants import NO_LEAD, NO_NOTCH, Constants, bake, lead_lag, notch

Array = NDArray[np.float64]

REST = (0.0,) * len(pid.STATE)
PLAIN = bake(sample_time=0.5, kp=2.0, ki=0.4, kd=1.0, filter_time=0.3, low=-10.0, high=10.0, windup_time=3.0)


def one(state: tuple[float, ...], constants: Constants, *given: float) -> tuple[float, ...]:
    """Run one sample: reference, measurement, feedforward, manual effort."""
    arguments = (*given, *state, *constants)
    return pid.law(*arguments)


def value(state: tuple[float, ...], name: str) -> float:
    """Return one state by name."""
    return state[pid.STATE.index(name)]


def with_mode(state: tuple[float, ...], mode: float) -> tuple[float, ...]:
    """Return the state in another mode."""
    position = pid.STATE.index("mode")
    return (*state[:position], mode, *state[position + 1 :])


def settled(constants: Constants, samples: int = 40) -> tuple[float, ...]:
    """Return a state in which nothing is zero."""
    state = REST
    for k in range(samples):
        state = one(state, constants, 1.0, 0.7 + 0.1 * sin(k), 0.0, 0.0)
    return state


def from_the_formulas(settings: dict[str, Any], r: Array, ym: Array, extra: Array) -> Array:
    """Compute the effort, in engineering units, from the published formulas with filters of scipy.

    P = kp (b r - ym); D is the backward difference of kd s/(1 + Tf s) on (c r - ym); v = s (P + I + D) + F;
    u = v limited in value, then in rate; I advances by ki Ts (r - ym) + Ts/Tt s (u - v).
    """
    s = settings
    ts, tf = s["sample_time"], s["filter_time"]
    r, x = r - s["resting_measurement"], ym - s["resting_measurement"]
    share = ts / (s["measurement_filter_time"] + ts)
    x = signal.lfilter([share], [1.0, share - 1.0], x)
    gain, rest, part = s["lead_section"]
    x = signal.lfilter([gain, rest * part - gain * (1.0 - part)], [1.0, part - 1.0], x)
    x = signal.lfilter(s["notch_section"][:3], (1.0, *s["notch_section"][3:]), x)
    p = s["kp"] * (s["b"] * r - x)
    d = signal.lfilter(np.array([1.0, -1.0]) * s["kd"] / (tf + ts), [1.0, -tf / (tf + ts)], s["c"] * r - x)
    integral, held, efforts = 0.0, 0.0, []
    for k in range(len(r)):
        v = s["action"] * (p[k] + integral + d[k]) + extra[k]
        u = np.clip(v, s["low"] - s["resting_effort"], s["high"] - s["resting_effort"])
        u = np.clip(u, held - s["rate"] * ts, held + s["rate"] * ts)
        integral += s["ki"] * ts * (r[k] - x[k]) + ts / s["windup_time"] * s["action"] * (u - v)
        held = u
        efforts.append(u + s["resting_effort"])
    return np.array(efforts)


@given(
    seed=st.integers(0, 2**32 - 1),
    kp=st.floats(0.0, 5.0),
    ki=st.floats(0.0, 2.0),
    kd=st.floats(0.0, 5.0),
    filter_time=st.floats(0.0, 5.0),
    windup_time=st.floats(1.0, 50.0),
    b=st.floats(0.0, 1.0),
    c=st.floats(0.0, 1.0),
    action=st.sampled_from([1.0, -1.0]),
    rate=st.floats(0.5, 100.0),
    reach=st.floats(1.0, 100.0),
    filtered=st.floats(0.0, 5.0),
    cut=st.booleans(),
    led=st.booleans(),
    sample_time=st.floats(0.1, 1.0),
)
def test_law_is_the_published_formulas(
    seed: int, cut: bool, led: bool, reach: float, filtered: float, **given: float
) -> None:
    """Over random gains, limits, filters and signals, the law and the formulas agree to 1e-12 of the signals' size."""
    random = np.random.default_rng(seed)
    settings: dict[str, Any] = {
        **given,
        "low": 40.0 - reach,
        "high": 40.0 + 0.7 * reach,
        "measurement_filter_time": filtered,
        "notch_section": notch(given["sample_time"], 2.0, 0.1, 0.8) if cut else NO_NOTCH,
        "lead_section": lead_lag(given["sample_time"], 1.5, 0.4) if led else NO_LEAD,
        "resting_measurement": 72.0,
        "resting_effort": 40.0,
    }
    r = 72.0 + np.repeat(random.normal(0.0, 5.0, 10), 30)
    ym = 72.0 + random.normal(0.0, 3.0, 300)
    extra = np.repeat(random.normal(0.0, 1.0, 10), 30)
    expected = from_the_formulas(settings, r, ym, extra)
    constants, state, found = bake(**settings), REST, []
    for k in range(300):
        state = one(state, constants, r[k], ym[k], extra[k], 0.0)
        found.append(value(state, "effort") + 40.0)
    size = np.max(np.abs(expected)) + 300.0 * (given["kp"] + given["kd"] + given["ki"])
    np.testing.assert_allclose(found, expected, rtol=0.0, atol=1e-12 * size)


@pytest.mark.parametrize("position", [0, 1, 2, 3])
@pytest.mark.parametrize("spoilt", [nan, inf, -inf])
def test_an_input_that_is_not_finite_holds_everything_and_says_so(position: int, spoilt: float) -> None:
    """Reference, measurement, feedforward and manual effort alike: only the flag changes, and it clears again."""
    before = settled(PLAIN)
    given = [1.0, 0.5, 0.0, 0.0]
    given[position] = spoilt
    held = one(before, PLAIN, *given)
    assert held == (*before[:-1], 1.0)
    assert value(one(held, PLAIN, 1.0, 0.5, 0.0, 0.0), "fault") == 0.0


def test_limits_in_value_are_kept_on_both_sides() -> None:
    """An effort beyond the range stops at its end, and the flag says so."""
    up, down = one(REST, PLAIN, 100.0, 0.0, 0.0, 0.0), one(REST, PLAIN, -100.0, 0.0, 0.0, 0.0)
    assert (value(up, "effort"), value(up, "limited")) == (10.0, 1.0)
    assert (value(down, "effort"), value(down, "limited")) == (-10.0, 1.0)
    assert value(one(REST, PLAIN, 1.0, 0.0, 0.0, 0.0), "limited") == 0.0


def test_limits_in_rate_are_kept_both_ways() -> None:
    """The effort moves by one rate step a sample, up and down."""
    slow = PLAIN._replace(rate_step=0.5)
    up = one(REST, slow, 100.0, 0.0, 0.0, 0.0)
    down = one(up, slow, -100.0, 0.0, 0.0, 0.0)
    assert [value(up, "effort"), value(down, "effort")] == [0.5, 0.0]
    assert value(up, "limited") == value(down, "limited") == 1.0


def test_integral_stops_where_the_windup_time_says() -> None:
    """With back-calculation the integral settles at a limit; without, it goes on (Astrom and Wittenmark)."""
    free = PLAIN._replace(windup_gain=0.0)
    with_it, without = REST, REST
    for _ in range(400):
        with_it = one(with_it, PLAIN, 20.0, 0.0, 0.0, 0.0)
        without = one(without, free, 20.0, 0.0, 0.0, 0.0)
    # Settled: ki (r - ym) = (v - u)/Tt, so v = 10 + 0.4 * 20 * 3 = 34, of which the proportional part is 40.
    assert value(with_it, "integral") == pytest.approx(-6.0, abs=1e-9)
    assert value(without, "integral") == pytest.approx(400 * 0.2 * 20.0)


def test_manual_takes_the_effort_by_hand_within_the_limits() -> None:
    """By hand the effort goes where it is asked, in engineering units, but not beyond the limits."""
    resting = PLAIN._replace(resting_effort=40.0)
    state = with_mode(settled(resting), pid.MANUAL)
    assert value(one(state, resting, 1.0, 0.0, 0.0, 43.0), "effort") == pytest.approx(3.0)
    assert value(one(state, resting, 1.0, 0.0, 0.0, 99.0), "effort") == 10.0


@pytest.mark.parametrize("action", [1.0, -1.0])
def test_going_to_automatic_is_bumpless(action: float) -> None:
    """The transfer keeps the effort exactly, and the sample after moves by the law alone."""
    constants = PLAIN._replace(action=action)
    state = with_mode(settled(constants), pid.MANUAL)
    for _ in range(60):
        state = one(state, constants, 1.0, 0.9, 0.3, 4.0)
    moved = one(with_mode(state, pid.TRANSFER), constants, 1.0, 0.9, 0.3, 0.0)
    after = one(moved, constants, 1.0, 0.9, 0.3, 0.0)
    assert value(moved, "effort") == value(state, "effort") == pytest.approx(4.0)
    assert value(moved, "mode") == pid.AUTOMATIC
    assert value(after, "effort") - 4.0 == pytest.approx(action * constants.integral_gain * 0.1, abs=1e-12)


def test_a_changed_gain_taken_through_the_transfer_is_bumpless() -> None:
    """I_new = I_old + K_old(..) - K_new(..): one sample of the transfer mode keeps the effort under new gains."""
    before = settled(PLAIN)
    louder = PLAIN._replace(proportional_gain=4.0, derivative_gain=3.0)
    after = one(with_mode(before, pid.TRANSFER), louder, 1.0, 0.72, 0.0, 0.0)
    assert value(after, "effort") == value(before, "effort")


def test_a_transfer_waits_for_a_usable_measurement() -> None:
    """A reading that is no number leaves the transfer pending, with the effort held."""
    pending = with_mode(settled(PLAIN), pid.TRANSFER)
    held = one(pending, PLAIN, 1.0, nan, 0.0, 0.0)
    assert value(held, "mode") == pid.TRANSFER
    assert value(held, "effort") == value(pending, "effort")


def test_nothing_moves_at_the_resting_point() -> None:
    """At rest every state stays exactly zero."""
    resting = PLAIN._replace(resting_measurement=72.0, resting_effort=40.0)
    assert one(REST, resting, 72.0, 72.0, 0.0, 40.0) == REST
