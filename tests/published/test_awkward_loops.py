"""Loops that tools stumble over: each is right, or refused with a reason, never wrong in silence.

Expected numbers come from polynomials by numpy (`poly`, `roots`), closed forms, or the grid of `margins_by_grid`.
"""

from dataclasses import replace
from math import exp, inf, log, pi

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.linalg import expm

from tests.published.continuous_by_control import loop_gain
from tests.published.drawn import continuous_sheet
from tests.published.margins_by_grid import margins_by_grid
from tests.published.test_random_loops import same_margins
from tuner.assess import assess
from tuner.errors import LoopError
from tuner.judge.assessment import MemberResult
from tuner.model.controller import Controller
from tuner.model.loop import Loop, Manipulated
from tuner.model.plant import ExpressionPlant, ZeroPolePlant
from tuner.model.sheet import Sheet, Trial

Array = NDArray[np.float64]


def judged(plant: str, controller: Controller, duration: float = 20.0) -> MemberResult:
    """Return what the program makes of a loop with unit steps of reference and disturbance."""
    return assess(Sheet(Loop("awkward"), ExpressionPlant(plant), controller, Trial(duration, 1.0, 1.0))).nominal


@pytest.mark.parametrize("seed", [0, 6, 12, 18, 24, 30, 36, 42, 48, 54])
def test_a_derivative_without_filter(seed: int) -> None:
    """The ideal law on plants of enough lags: poles are the roots of a polynomial, margins those of a grid."""
    drawn = continuous_sheet(seed)
    assert isinstance(drawn.plant, ZeroPolePlant)
    plant = replace(drawn.plant, zeros=())
    kp, ki, kd = 0.8 / abs(plant.gain), 0.1 / abs(plant.gain), 0.3 / abs(plant.gain)
    scale = float(np.prod(np.abs(plant.poles)))
    controller = Controller(gain_1=kp * scale, gain_2=ki * scale, gain_3=kd * scale, action=drawn.controller.action)
    sheet = Sheet(drawn.loop, plant, controller, drawn.trial)
    found = assess(sheet).nominal
    sign = 1.0 if controller.action == "reverse" else -1.0
    law = sign * plant.gain * np.array([kd, kp, ki]) * scale
    expected = np.roots(np.polyadd(np.append(np.poly(plant.poles), 0.0).real, law))
    assert np.sort_complex(found.poles) == pytest.approx(np.sort_complex(expected), rel=1e-9, abs=1e-9)
    assert found.stable == bool((expected.real < 0.0).all())
    if found.stable:
        sizes, gain = np.abs(expected), loop_gain(sheet)
        reach = (1e-6 * sizes.min(), 1e5 * sizes.max())
        same_margins(found, margins_by_grid(gain, reach, [*expected], (inf, 0.0)), 1e-7)


def test_a_conditionally_stable_loop() -> None:
    """K (s+1)/(s (s-1)(s+6)) holds above 7.5 alone: its gain margin is downwards, so upwards there is none (Routh)."""
    found = judged("(s + 1)/(s(s - 1)(s + 6))", Controller(gain_1=12.0), 60.0)
    assert found.stable
    assert found.measures["gain_margin"] == inf
    expected = np.roots([1.0, 5.0, 6.0, 12.0])
    assert np.sort_complex(found.poles) == pytest.approx(np.sort_complex(expected), rel=1e-12)


def test_a_loop_that_only_a_high_gain_holds() -> None:
    """K (s+2)^2/s^3 is lost up to K = 1 and holds from there on, with a pair at 2 rad (Routh: K 4 K > 4 K)."""
    plant = "(s + 2)^2/s^3"
    assert not judged(plant, Controller(gain_1=0.999)).stable
    found = judged(plant, Controller(gain_1=1.001), 10.0)
    assert (found.stable, found.measures["gain_margin"]) == (True, inf)
    assert found.poles[0].imag == pytest.approx(2.0, rel=1e-3)


@pytest.mark.parametrize("sample_time", [0.0, 0.2])
def test_gains_of_zero(sample_time: float) -> None:
    """Without any gain the loop is open: the plant's own pole, no margins, and an output that stays at rest."""
    found = judged("2/(4 s + 1)", Controller(sample_time=sample_time))
    assert found.poles == pytest.approx([-0.25], rel=1e-12)
    assert found.measures["phase_margin"] is None
    assert not found.traces.reference.y.any()
    assert found.traces.disturbance.y[-1] == pytest.approx(2.0 * (1.0 - exp(-5.0)), rel=1e-9)


@pytest.mark.parametrize("sample_time", [0.0, 0.05])
def test_an_unstable_plant_without_gains_runs_away(sample_time: float) -> None:
    """A pole at +0.5 in an open loop: unstable, growing at its own rate, however still the reference run looks."""
    found = judged("1/(2 s - 1)", Controller(sample_time=sample_time))
    assert not found.stable
    assert found.poles == pytest.approx([0.5], rel=1e-12)
    late = found.traces.disturbance
    assert log(late.y[-1] / late.y[len(late.y) // 2]) / (late.t[-1] - late.t[len(late.t) // 2]) == pytest.approx(
        0.5, rel=0.02
    )


def test_a_sample_time_that_sees_only_the_end() -> None:
    """A lag sampled every hundred time constants is a gain one sample late: y(k+1) = K u(k), stable below kp K = 1."""
    found = judged("2/(s + 1)", Controller(sample_time=100.0, gain_1=0.45), 2000.0)
    y = found.traces.reference.y[found.traces.reference.sample_index]
    assert y == pytest.approx(0.9 * (1.0 - (-0.9) ** np.arange(y.size)) / 1.9, rel=1e-12)
    assert found.measures["gain_margin"] == pytest.approx(1.0 / 0.9, rel=1e-12)
    assert not judged("2/(s + 1)", Controller(sample_time=100.0, gain_1=0.51), 2000.0).stable


def test_a_dead_time_of_many_samples() -> None:
    """exp(-30 s)/s sampled every 0.1: 300 samples of dead time; the limit is near the continuous loop's, pi/60."""
    edge = pi / 2.0 / 30.05  # half a sample of the hold is dead time as well
    assert judged("exp(-30 s)/s", Controller(sample_time=0.1, gain_1=0.999 * edge), 300.0).stable
    assert not judged("exp(-30 s)/s", Controller(sample_time=0.1, gain_1=1.001 * edge), 300.0).stable


REFUSED = [
    pytest.param("(s + 2)/(s + 1)", Controller(gain_1=1.0, gain_3=1.0), "an unfiltered derivative acts", id="kick"),
    pytest.param("(s + 2)/(s + 1)", Controller(gain_1=1.5, action="direct"), "no answer", id="algebraic"),
    pytest.param("1/(s + 1)", Controller(sample_time=1e-6, gain_1=1.0), "samples, more than", id="too many samples"),
]


@pytest.mark.parametrize(("plant", "controller", "reason"), REFUSED)
def test_what_has_no_answer_is_refused(plant: str, controller: Controller, reason: str) -> None:
    """A loop without a meaning, or too long to run, is refused with the reason."""
    with pytest.raises(LoopError, match=reason):
        judged(plant, controller)


@pytest.mark.parametrize("sample_time", [0.0, 0.05])
def test_a_stable_plant_between_limits_never_runs_away(sample_time: float) -> None:
    """A bounded effort keeps the output of a stable plant bounded (textbook theorem), however short the trial is."""
    # Between 2.95 and 3 act on 1/(s + 1)^3 throughout, whose step response is 1 - exp(-t)(1 + t + t^2/2), rising.
    loop = Loop("short trial", manipulated=Manipulated(low=-0.05, high=0.05))
    controller = Controller(sample_time=sample_time, gain_1=1.0, gain_2=0.1, windup_time=10.0)
    found = assess(Sheet(loop, ExpressionPlant("1/(s + 1)^3"), controller, Trial(1.5, 0.1, 3.0))).nominal
    response = 1.0 - exp(-1.5) * (1.0 + 1.5 + 1.125)
    peak = found.measures["disturbance_peak"]
    assert found.stable
    assert peak is not None
    assert 2.95 * response <= peak <= 3.0 * response


def test_what_a_loop_does_between_samples() -> None:
    """A plant two time constants long in a sample, over two thousand samples: peak and area are those of fine steps."""
    # Zero-order hold by the exponential of a matrix (Astrom and Wittenmark, Computer-Controlled Systems), 400 steps.
    step, kp, count = 1.0, 0.9, 2000
    fine = expm(np.array([[-2.0, 1.0, 0.0], [0.0, -2.0, 4.0], [0.0, 0.0, 0.0]]) * step / 400.0)
    state, peak, area = np.zeros(3), 0.0, 0.0
    for _ in range(count):
        state[2] = 1.0 - kp * state[0]
        for _ in range(400):
            state = fine @ state
            peak, area = max(peak, abs(state[0])), area + abs(state[0]) * step / 400.0
    found = judged("4/((s + 2)(s + 2))", Controller(sample_time=step, gain_1=kp), count * step)
    assert found.measures["disturbance_peak"] == pytest.approx(peak, rel=2e-3)
    assert found.measures["iae_disturbance"] == pytest.approx(area, rel=2e-3)
