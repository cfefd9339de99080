"""Holds, derivatives, limits and error integrals as they show in the curves of an assessment.

Numbers to the digits given were computed independently; closed forms are given beside them. Attributions are from
memory where no closed form makes them certain.
"""

from math import exp, sqrt

import numpy as np
import pytest
from numpy.typing import NDArray

from tuner.assess import assess
from tuner.judge.assessment import MemberResult
from tuner.model.controller import Controller, Feedforward
from tuner.model.loop import Loop, Manipulated
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial
from tuner.simulate.traces import Trace

Array = NDArray[np.float64]

DIGITS = 6e-9
"""Half a unit of the ninth decimal, in which the coefficients are given."""


def judged(plant: str, controller: Controller, trial: Trial, manipulated: Manipulated | None = None) -> MemberResult:
    """Return what the road that everyone takes makes of a loop."""
    loop = Loop("published", manipulated=manipulated or Manipulated())
    return assess(Sheet(loop, ExpressionPlant(plant), controller, trial)).nominal


def at_samples(trace: Trace) -> Array:
    """Return the output at the samples."""
    return trace.y[trace.sample_index]


def integral(trace: Trace) -> float:
    """Return the integral of the error, by trapezia."""
    return float(np.trapezoid(trace.r - trace.y, trace.t))


@pytest.mark.parametrize(
    ("step", "a", "b"),
    [(0.1, 0.904837418, 0.095162582), (0.5, 0.606530660, 0.393469340), (1.0, 0.367879441, 0.632120559)],
)
def test_the_held_lag(step: float, a: float, b: float) -> None:
    """1/(s+1) behind a hold follows y(k+1) = a y(k) + b u(k) (Astrom and Wittenmark, table 2.1)."""
    forward = Controller(sample_time=step, feedback=False, feedforward=Feedforward("static", gain=1.0))
    y = at_samples(judged("1/(s + 1)", forward, Trial(8.0 * step)).traces.reference)
    assert y[1:] == pytest.approx(a * y[:-1] + b, abs=DIGITS)
    assert y[1] == pytest.approx(b, abs=DIGITS)


@pytest.mark.parametrize(
    ("plant", "step", "late", "first", "second", "a"),
    [
        ("exp(-0.2 s)/(s + 1)", 0.5, 0, 0.259181779, 0.134287561, 0.606530660),
        ("exp(-0.5 s)/(s + 1)", 1.0, 0, 0.393469340, 0.238651219, 0.367879441),
        ("exp(-2.3 s)/(10 s + 1)", 1.0, 2, 0.0676061801, 0.0275564019, 0.904837418),
        ("exp(-0.25 s)/(s + 1)", 0.1, 2, 0.0487705755, 0.0463920065, 0.904837418),
    ],
)
def test_the_held_lag_with_a_fraction_of_dead_time(  # noqa: PLR0913, PLR0917 - the columns of the table
    plant: str, step: float, late: int, first: float, second: float, a: float
) -> None:
    """z^-(d+1) (b0 + b1/z)/(1 - a/z): b0 at first, then a y + b0 + b1 (Astrom and Wittenmark, section 2.3)."""
    forward = Controller(sample_time=step, feedback=False, feedforward=Feedforward("static", gain=1.0))
    y = at_samples(judged(plant, forward, Trial(12.0 * step)).traces.reference)
    assert y[: late + 1] == pytest.approx(np.zeros(late + 1), abs=1e-15)
    assert y[late + 1] == pytest.approx(first, abs=DIGITS)
    assert y[late + 2 :] == pytest.approx(a * y[late + 1 : -1] + first + second, abs=2.0 * DIGITS)


def test_the_backward_difference_in_the_effort() -> None:
    """Kc = 1, Td = 1, N = 10, h = .05: a kick of 6.6666667 that falls by .6666667 (Astrom and Wittenmark, ch. 8)."""
    kick = Controller(form="standard", gain_1=1.0, gain_3=1.0, filter_time=0.1, sample_time=0.05, c=1.0)
    trace = judged("exp(-50 s)/(s + 1)", kick, Trial(2.0)).traces.reference
    expected = 1.0 + 6.6666667 * 0.6666667 ** np.arange(trace.sample_index.size)
    assert trace.u[trace.sample_index] == pytest.approx(expected, abs=4e-7)


def test_the_forward_difference_in_the_effort() -> None:
    """Kc = 2, Ti = 5, h = .25: the integral adds Kc h/Ti = .1 a sample, after use (Astrom and Wittenmark, ch. 8)."""
    ramp = Controller(form="standard", gain_1=2.0, gain_2=5.0, sample_time=0.25, b=0.5)
    trace = judged("exp(-50 s)/(s + 1)", ramp, Trial(10.0)).traces.reference
    assert trace.u[trace.sample_index] == pytest.approx(1.0 + 0.1 * np.arange(41), abs=1e-12)


WINDUP = [
    pytest.param(None, 9.0 + 3.0 * sqrt(11.0), 0.0, id="none"),
    pytest.param(1.0, 10.0, 4.900, id="Tt 1"),
    pytest.param(0.5, 9.505, 4.9375, id="Tt 0.5"),
]
"""1/s under PI, kp = ki = 1, abs(u) <= .1: back-calculation after Astrom and Hagglund, PID Controllers, 1995, ch. 3.

When the effort first leaves its limit and the integral of the error until rest; closed forms. Without back-calculation:
the output is t/10, so the wanted effort 1 - t/10 + t - t^2/20 falls back to .1 at 9 + 3 sqrt(11)."""


@pytest.mark.parametrize(("windup", "leaves", "error"), WINDUP)
def test_a_continuous_controller_leaves_its_limit(windup: float | None, leaves: float, error: float) -> None:
    """When it leaves is known to a step of the computation, the integral of the error to a thousandth of the step."""
    controller = Controller(gain_1=1.0, gain_2=1.0, windup_time=windup)
    trace = judged("1/s", controller, Trial(120.0), Manipulated(low=-0.1, high=0.1)).traces.reference
    assert trace.t[int(np.argmin(trace.limited))] == pytest.approx(leaves, abs=2.5 * trace.t[1])
    assert integral(trace) == pytest.approx(error, abs=5e-3)


@pytest.mark.parametrize(("windup", "leaves", "error"), WINDUP)
def test_a_sampled_controller_tends_to_the_continuous_one(windup: float | None, leaves: float, error: float) -> None:
    """As the sample time falls to a tenth, so do the errors of the time at the limit and of the integral."""
    errors = []
    for step in (0.05, 0.005):
        controller = Controller(sample_time=step, gain_1=1.0, gain_2=1.0, windup_time=windup)
        trace = judged("1/s", controller, Trial(120.0), Manipulated(low=-0.1, high=0.1)).traces.reference
        left = trace.t[trace.sample_index[int(np.argmin(trace.limited))]]
        errors.append((abs(left - leaves), abs(integral(trace) - error)))
    (coarse_time, coarse_area), (fine_time, fine_area) = errors
    assert (fine_time, fine_area) < (0.02, 0.02)
    assert fine_time <= 0.2 * coarse_time + 0.005
    assert fine_area <= 0.2 * coarse_area + 1e-5


PLANTS = ["2/(5 s + 1)", "2 exp(-1.5 s)/(5 s + 1)", "3/((s + 1)(2 s + 1))", "0.4/(s(s + 2))", "2 (1 - s)/(s + 1)^2"]


@pytest.mark.parametrize("step", [0.0, 0.1])
@pytest.mark.parametrize("plant", PLANTS)
def test_the_error_integral_of_a_load_step(plant: str, step: float) -> None:
    """Any plant, any b: a step d at the plant input leaves the error integral -d/ki (algebra; Astrom and Hagglund)."""
    controller = Controller(sample_time=step, gain_1=0.4, gain_2=0.05, b=0.3)
    found = judged(plant, controller, Trial(400.0, disturbance=1.5))
    trace = found.traces.disturbance
    # Sampled, the law's own sum over the samples is exact, and so a left-hand sum is.
    area = -step * at_samples(trace).sum() if step else integral(trace)
    assert found.stable
    assert area == pytest.approx(-1.5 / 0.05, rel=1e-6 if step else 5e-4)


@pytest.mark.parametrize(("plant", "gain"), [(PLANTS[0], 2.0), (PLANTS[1], 2.0), (PLANTS[2], 3.0)])
@pytest.mark.parametrize("b", [0.0, 0.4, 1.0])
def test_the_error_integral_of_a_reference_step(plant: str, gain: float, b: float) -> None:
    """A self-regulating plant of gain K: 1/(K ki) + (1 - b) kp/ki of the step (algebra; Astrom and Hagglund, 1995)."""
    found = judged(plant, Controller(gain_1=0.4, gain_2=0.05, b=b), Trial(400.0, reference=2.0))
    assert integral(found.traces.reference) == pytest.approx(2.0 * (1.0 / gain + (1.0 - b) * 0.4) / 0.05, rel=5e-4)


@pytest.mark.parametrize(("plant", "ki"), [("2/(5 s + 1)", 0.05), ("0.5/((s + 1)(2 s + 1))", 0.15)])
def test_the_absolute_error_is_the_error_where_it_keeps_its_sign(plant: str, ki: float) -> None:
    """IAE = abs(IE) = abs(d)/ki if and only if the error does not change its sign (algebra)."""
    calm = judged(plant, Controller(gain_1=1.0, gain_2=ki), Trial(400.0, disturbance=1.0))
    eager = judged(plant, Controller(gain_1=0.1, gain_2=20.0 * ki), Trial(400.0, disturbance=1.0))
    assert calm.traces.disturbance.y.min() > -1e-3
    assert calm.measures["iae_disturbance"] == pytest.approx(1.0 / ki, rel=1e-3)
    assert eager.traces.disturbance.y.min() < -0.01
    area = eager.measures["iae_disturbance"]
    assert area is not None
    assert area > 1.2 / (20.0 * ki)


@pytest.mark.parametrize("zeta", [0.3, 0.5, 0.66238, 1.0, 1.5])
def test_the_error_integral_of_a_second_order_step(zeta: float) -> None:
    """1/(s(s + 2 zeta)) in a loop: IE = 2 zeta/wn and ISE = (1 + 4 zeta^2)/(4 zeta wn) (all texts)."""
    trace = judged(f"1/(s(s + {2.0 * zeta}))", Controller(gain_1=1.0), Trial(60.0)).traces.reference
    assert integral(trace) == pytest.approx(2.0 * zeta, rel=2e-3)
    square = float(np.trapezoid((trace.r - trace.y) ** 2, trace.t))
    assert square == pytest.approx((1.0 + 4.0 * zeta**2) / (4.0 * zeta), rel=2e-3)


def test_a_fast_sampled_lag_keeps_its_digits() -> None:
    """1/(s+1) every millionth of its time constant: b = 1 - exp(-h) to twelve digits (closed form)."""
    step = 1e-6
    forward = Controller(sample_time=step, feedback=False, feedforward=Feedforward("static", gain=1.0))
    y = at_samples(judged("1/(s + 1)", forward, Trial(1e-3)).traces.reference)
    assert y[1] == pytest.approx(step * (1.0 - step / 2.0 + step * step / 6.0), rel=1e-12)
    assert y[-1] == pytest.approx(1.0 - exp(-1e-3), rel=1e-12)
