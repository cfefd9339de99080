"""Trials of continuous controllers against textbooks, closed forms, and exact or dense solutions."""

from dataclasses import replace

import control
import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.integrate import solve_ivp

from tests.simulate.invented import NOMINAL, sheet
from tuner.errors import LoopError
from tuner.model.controller import Controller, Feedforward, Notch
from tuner.model.loop import Manipulated
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial
from tuner.simulate.continuous import direct_gain
from tuner.simulate.traces import Trace
from tuner.simulate.trial import run
from tuner.simulate.wiring import processes

Array = NDArray[np.float64]
CLOSE = 1e-3
"""What the traces of a continuous controller promise, in steps."""


def _peak(trace: Trace) -> tuple[float, float]:
    """Return time and height of the highest point, by the parabola through it and its neighbours."""
    i = int(np.argmax(trace.y))
    left, top, right = trace.y[i - 1 : i + 2]
    shift = 0.5 * (left - right) / (left - 2.0 * top + right)
    return trace.t[i] + shift * (trace.t[1] - trace.t[0]), top - 0.25 * (left - right) * shift


def _settled(trace: Trace) -> float:
    """Return when the curve enters the 2 % band about one for good."""
    off = np.abs(trace.y - 1.0) - 0.02
    i = int(np.nonzero(off > 0.0)[0][-1])
    return float(trace.t[i] + off[i] / (off[i] - off[i + 1]) * (trace.t[1] - trace.t[0]))


@pytest.mark.parametrize(
    ("gains", "overshoot", "peak_time", "settling_time"),
    [
        ((18.0, 1.405, 0.35124), 61.8247, 1.6677, 10.0345),
        ((18.0, 3.077, 0.7692), 18.560, 1.18695, 5.1420),
        ((39.42, 3.077, 0.7692), 28.0561, 0.6507, 3.4436),
    ],
)
def test_the_ultimate_cycle_example_of_ogata(
    gains: tuple[float, float, float], overshoot: float, peak_time: float, settling_time: float
) -> None:
    """Ogata, Modern Control Engineering, example 8-1, and its retunes: an unfiltered PID on the error."""
    # The book prints about 62, 18 and 28 % overshoot; the digits here were computed independently.
    ideal = Controller("standard", 0.0, *gains, c=1.0)
    traces = run(sheet("1/(s (s + 1)(s + 5))", ideal, Trial(30.0)), NOMINAL)[0]
    time, height = _peak(traces.reference)
    assert 100.0 * (height - 1.0) == pytest.approx(overshoot, abs=100.0 * CLOSE)
    assert time == pytest.approx(peak_time, abs=2e-3)
    assert _settled(traces.reference) == pytest.approx(settling_time, rel=2e-3)
    assert traces.notes == (
        "The unfiltered derivative of the reference step is an impulse: the first effort shown stands for it and has "
        "no size of its own.",
    )


@pytest.mark.parametrize(
    ("windup_time", "leaves", "peak", "peak_time", "settling_time"),
    [
        (None, 9.0 + 3.0 * np.sqrt(11.0), 1.90018, 19.0554, 62.343),
        (1.0, 10.0, 1.05463, 11.2092, 12.754),
        (0.5, 9.505, 1.03497, 11.3138, 12.476),
        (1e-6, 9.0, 1.0 + 0.1 * np.exp(-2.0 * np.pi / 27.0**0.5), 9.0 + 4.0 * np.pi / 27.0**0.5, 12.399),
    ],
)
def test_an_integrator_that_saturates(
    windup_time: float | None, leaves: float, peak: float, peak_time: float, settling_time: float
) -> None:
    """1/s under PI with the effort limited to 0.1: the closed form, with and without back-calculation."""
    # With a wind-up time far below any step the integral is wherever the effort is just at its limit.
    # Method: Astrom and Hagglund, PID Controllers, 1995; numbers from the closed form.
    pi = Controller(gain_1=1.0, gain_2=1.0, windup_time=windup_time)
    trace = run(sheet("1/s", pi, Trial(120.0), Manipulated(low=-0.1, high=0.1)), NOMINAL)[0].reference
    spacing = trace.t[1] - trace.t[0]
    assert trace.t[np.argmin(trace.limited)] == pytest.approx(leaves, abs=2.0 * spacing)
    time, height = _peak(trace)
    assert height == pytest.approx(peak, abs=CLOSE)
    assert time == pytest.approx(peak_time, abs=0.02)
    assert _settled(trace) == pytest.approx(settling_time, abs=0.03)
    assert not trace.linear


def _exactly(whole: Sheet, numerator: tuple[float, ...], denominator: tuple[float, ...]) -> tuple[Array, Array]:
    """Return times and the exact linear response to the reference, for the weights and filter of the controller."""
    controller, gains = whole.controller, whole.controller.parallel()
    s = control.tf("s")
    slope = gains.kd * s / (controller.filter_time * s + 1.0)
    plant = control.tf(numerator, denominator) / (whole.actuator.lag * s + 1.0)
    back = (gains.kp + gains.ki / s + slope) / (whole.sensor.lag * s + 1.0)
    ahead = controller.b * gains.kp + gains.ki / s + controller.c * slope
    loop = control.minreal(plant * ahead / (1.0 + plant * back), verbose=False)
    times = np.linspace(0.0, whole.trial.duration, 1001)
    return times, control.forced_response(control.ss(loop), times, np.ones(1001)).outputs


@pytest.mark.parametrize(
    "controller",
    [
        Controller(gain_1=2.0, gain_2=1.0, gain_3=0.8, filter_time=0.1, b=0.6),
        Controller(gain_1=4.0, gain_2=2.0, gain_3=1.5, filter_time=0.02, c=1.0),
        Controller(gain_1=4.0),
    ],
)
def test_linear_loops_are_exact_to_a_thousandth(controller: Controller) -> None:
    """Lags, weights, a filtered derivative: every point within 1e-3 of the exact linear response."""
    whole = sheet("3/((s + 1)(0.4 s + 1))", controller, Trial(15.0))
    whole = replace(whole, actuator=Actuator(0.1), sensor=Sensor(0.05))
    times, expected = _exactly(whole, (3.0,), (0.4, 1.4, 1.0))
    trace = run(whole, NOMINAL)[0].reference
    assert np.interp(times, trace.t, trace.y) == pytest.approx(expected, abs=CLOSE)
    assert trace.linear


def test_dead_time_is_exact_to_a_thousandth() -> None:
    """PI on exp(-s)/(s + 1), ti = 1: the loop exp(-s)/(2 s), solved piece by piece as polynomials in time."""
    pi = Controller("standard", 0.0, 0.5, 1.0)
    trace = run(sheet("exp(-s)/(s + 1)", pi, Trial(12.0)), NOMINAL)[0].reference
    expected = np.zeros_like(trace.t)
    pieces = [np.poly1d([0.0])]  # y on [k, k + 1), in time since its start; y' = (1 - y(t - 1))/2 from t = 1 on
    for k in range(13):
        here = (trace.t >= k) & (trace.t < k + 1)
        expected[here] = pieces[k](trace.t[here] - k)
        pieces.append(np.poly1d([pieces[k](1.0)]) + (0.5 * (np.poly1d([1.0]) - pieces[k])).integ())
    assert trace.y == pytest.approx(expected, abs=CLOSE)


def test_simc_step_of_skogestad() -> None:
    """Skogestad, J. Process Control 13, 2003: with tc = theta the step overshoots 4.05 % at 4.74 theta."""
    pi = Controller("standard", 0.0, 0.5, 1.0)
    time, height = _peak(run(sheet("exp(-s)/(s + 1)", pi, Trial(12.0)), NOMINAL)[0].reference)
    assert height == pytest.approx(1.0405196, abs=CLOSE)
    assert time == pytest.approx(4.74008, abs=0.01)


def test_filter_and_notch_of_the_measurement_are_continuous() -> None:
    """Measurement filter and notch converge to their continuous transfer functions."""
    shaped = Controller(gain_1=2.0, gain_2=0.8, measurement_filter=0.2, notch=Notch(3.0, 0.2, 0.7))
    trace = run(sheet("1/(s + 1)^2", shaped, Trial(20.0)), NOMINAL)[0].reference
    s = control.tf("s")
    way = (s**2 + 0.2 * 0.7 * 3.0 * s + 9.0) / (s**2 + 0.7 * 3.0 * s + 9.0) / (0.2 * s + 1.0)
    law, plant = 2.0 + 0.8 / s, 1.0 / (s + 1.0) ** 2
    closed = control.ss(control.minreal(plant * law / (1.0 + plant * law * way), verbose=False))
    expected = control.forced_response(closed, trace.t, np.ones_like(trace.t)).outputs
    assert trace.y == pytest.approx(expected, abs=CLOSE)


@pytest.mark.parametrize("kp", [0.4, 3.0, 40.0, -0.4])
def test_a_direct_term_is_solved(kp: float) -> None:
    """(s + 2)/(s + 1) under proportional control of any gain above -1: kp (s + 2)/((1 + kp) s + 1 + 2 kp)."""
    reverse = Controller(gain_1=abs(kp), action="reverse" if kp > 0.0 else "direct")
    found = run(sheet("(s + 2)/(s + 1)", reverse, Trial(4.0)), NOMINAL)[0]
    trace = found.reference
    start, end, rate = kp / (1.0 + kp), 2.0 * kp / (1.0 + 2.0 * kp), (1.0 + 2.0 * kp) / (1.0 + kp)
    expected = end + (start - end) * np.exp(-rate * trace.t)
    assert trace.y[1:] == pytest.approx(expected[1:], abs=CLOSE * max(1.0, abs(end)))
    assert trace.u == pytest.approx(kp * (1.0 - expected), abs=4.0 * CLOSE * max(1.0, abs(kp)))
    assert found.notes == ()


def test_an_unfiltered_derivative_on_an_integrator_is_solved() -> None:
    """1/(s + 1) with u = 2 (r - y) - 5 y' is a lag of 6/3 to the static value 2/3: the gain at infinity is 5."""
    pd = Controller(gain_1=2.0, gain_3=5.0)
    trace = run(sheet("1/(s + 1)", pd, Trial(10.0)), NOMINAL)[0].reference
    assert trace.y == pytest.approx(2.0 / 3.0 * (1.0 - np.exp(-trace.t / 2.0)), abs=CLOSE)


def test_a_saturating_loop_with_lags_against_a_dense_solution() -> None:
    """PI with back-calculation on a second-order plant: DOP853 of the continuous equations."""
    pi = Controller(gain_1=5.0, gain_2=3.0, windup_time=0.7)
    whole = sheet("1/((s + 1)(0.5 s + 1))", pi, Trial(10.0, 1.0), Manipulated(low=-2.0, high=1.3))
    trace = run(whole, NOMINAL)[0].reference

    def slope(_: float, x: Array) -> list[float]:
        wanted = 5.0 * (1.0 - x[1]) + x[2]
        u = min(max(wanted, -2.0), 1.3)
        return [u - x[0], (x[0] - x[1]) / 0.5, 3.0 * (1.0 - x[1]) + (u - wanted) / 0.7]

    dense = solve_ivp(slope, (0.0, 10.0), np.zeros(3), "DOP853", t_eval=trace.t, rtol=1e-8, atol=1e-10, max_step=0.02)
    assert trace.y == pytest.approx(dense.y[1], abs=CLOSE)


def test_feedforward_of_a_continuous_controller() -> None:
    """The inverse leads an open loop along its filter."""
    forward = Controller(feedback=False, feedforward=Feedforward("inverse", filter_time=0.5))
    trace = run(sheet("4/(3 s + 1)", forward, Trial(4.0)), NOMINAL)[0].reference
    assert trace.y == pytest.approx(1.0 - np.exp(-trace.t / 0.5), abs=CLOSE)


@pytest.mark.parametrize(("high", "largest"), [(None, 2.0 * (0.5 * 1.5 + 0.8 * 0.6 / 0.004)), (60.0, 60.0)])
def test_the_kick_of_a_filtered_derivative_is_whole(high: float | None, largest: float) -> None:
    """By the law at time 0, u = r (kp b + kd c / Tf), however short the filter; and at most what the limit allows."""
    kicking = Controller(gain_1=1.5, gain_3=0.8, filter_time=0.004, b=0.5, c=0.6)
    made = sheet("1/((s + 1)(s + 2)(s + 3))", kicking, Trial(10.0, 2.0))
    made = replace(made, loop=replace(made.loop, manipulated=Manipulated(high=high)))
    trace = run(made, NOMINAL)[0].reference
    assert trace.u[0] == pytest.approx(largest, rel=1e-9)


def test_an_unstable_loop_ends() -> None:
    """A continuous loop that runs away stays finite and is not refined for ever."""
    traces = run(sheet("1/(s (s + 1)(s + 2))", Controller(gain_1=60.0), Trial(100.0, 1.0, 1.0)), NOMINAL)[0]
    assert np.isfinite(traces.reference.y).all()
    assert np.abs(traces.reference.y).max() > 1e6


def test_what_does_not_converge_is_said() -> None:
    """A loop whose limits switch ever faster has curves that the trial does not vouch for."""
    sliding = Controller(gain_1=1e6, gain_2=1e3)
    whole = sheet("1/(s (s + 1)(s + 2))", sliding, Trial(400.0), Manipulated(low=-1.0, high=2.0))
    assert run(whole, NOMINAL)[0].notes == (
        "The curves of the continuous controller still changed in places by more than 0.05% of the step when the "
        "computing step was halved for the last time.",
    )


@pytest.mark.parametrize(
    ("expression", "controller", "sentence"),
    [
        (
            "(s + 2)/(s + 1)",
            Controller(gain_1=1.0, gain_3=0.5),
            "an unfiltered derivative acts on a plant with a direct term, so the effort would be infinite: "
            "expected controller.filter_time above 0",
        ),
        (
            "-(s + 2)/(s + 1)",
            Controller(gain_1=2.0),
            "effort and measurement depend on each other in the same instant with a loop gain of -2; "
            "at -1 or less such a loop has no answer",
        ),
        (
            "(s + 2)/(s + 1)",
            Controller(gain_1=1.0, gain_3=2.0, measurement_filter=0.5),
            "an unfiltered derivative acts on a plant with a direct term through the measurement filter, with a loop "
            "gain of 4 at infinite frequency, which is not simulated from 1 upwards: expected "
            "controller.filter_time above 0",
        ),
        (
            "1/(s + 1)",
            Controller(gain_1=1.0, notch=Notch(1e4)),
            "the notch at 10000 rad per time unit is too fast for a trial of 5: shorten trial.duration",
        ),
    ],
)
def test_loops_without_an_answer(expression: str, controller: Controller, sentence: str) -> None:
    """A loop that no instant can satisfy is refused in one sentence."""
    with pytest.raises(LoopError) as caught:
        run(sheet(expression, controller, Trial(5.0)), NOMINAL)
    assert str(caught.value) == sentence


def test_dead_time_or_lags_part_the_instant() -> None:
    """With dead time, or lags beyond the derivative, effort and measurement do not meet in one instant."""
    pd = Controller(gain_1=2.0, gain_3=5.0)
    for expression in ("exp(-0.1 s)/(s + 1)", "1/(s + 1)^2"):
        whole = sheet(expression, pd, Trial(5.0))
        assert direct_gain(whole, processes(whole, NOMINAL)[0]) == 0.0
