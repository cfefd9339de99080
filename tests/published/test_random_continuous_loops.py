"""Random loops with a continuous controller, through the road that everyone takes, against python-control and scipy.

Poles and margins are exact on both sides and agree to 1e-7. Curves are promised to 1e-3 of the step; they are compared
to the exact solution of the linear system, or with dead time to the method of steps, as a share of the largest value so
far, until an unstable one has grown to a hundred times its step: beyond that the program promises no more than growth.
"""

from math import inf

import control
import numpy as np
import pytest
from numpy.typing import NDArray

from tests.published.continuous_by_control import (
    Delayed,
    closed_loop,
    cut,
    loop_gain,
    method_of_steps,
    poles_with_dead_time,
)
from tests.published.drawn import continuous_sheet
from tests.published.margins_by_grid import LoopGain, margins_by_grid
from tests.published.sampled_by_control import Array, ComplexArray, gains
from tests.published.test_random_loops import judged, same_margins, unmatched
from tuner.judge.assessment import MemberResult
from tuner.model.plant import ZeroPolePlant
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Trace

LOOPS = range(120)
DELAYED = range(36)
CURVE = 1e-3
SAID = 5e-2
"""What a curve may be off when the program says that it did not reach its accuracy."""

EXACT = 1e-7
FAR = 100.0


def follow(found: MemberResult, sheet: Sheet, runs: tuple[Array, Array], jumps: Array) -> None:
    """Hold both curves to the expected ones, but for the steps after the given instants, where the output may jump."""
    allowed = SAID if found.traces.notes else CURVE
    t, step = found.traces.reference.t, abs(sheet.trial.reference)
    counts = (np.maximum.accumulate(np.abs(runs[0])) <= FAR * step) & (t > 0.0)
    # Every way around the loop a jump is read a step later.
    after = (t[:, None] - jumps) / t[1]
    counts &= ~((after > -0.5) & (after < np.arange(jumps.size) + 1.5)).any(axis=1)
    last = int(np.flatnonzero(counts)[-1])
    assert off(found.traces.reference, runs[0], step, counts) < allowed
    assert off(found.traces.disturbance, runs[1], float(np.abs(runs[1][: last // 2 + 1]).max()), counts) < allowed


def off(trace: Trace, expected: Array, size: float, counts: NDArray[np.bool_]) -> float:
    """Return the largest distance, as a share of a size or of the largest value until then."""
    moved = np.maximum(np.maximum.accumulate(np.abs(expected)), max(size, 1e-300))
    return float((np.abs(trace.y - expected) / moved)[counts].max())


@pytest.mark.parametrize("seed", LOOPS)
def test_a_random_continuous_loop(seed: int) -> None:
    """Curves, poles, stability, static error and all margins are those of python-control and scipy."""
    sheet = continuous_sheet(seed)
    found, closed = judged(sheet), closed_loop(sheet)
    poles = control.poles(closed).astype(np.complex128)

    assert found.stable == bool((poles.real < 0.0).all())
    assert len(found.poles) == len(poles)
    assert unmatched(found.poles / np.abs(poles).max(), poles / np.abs(poles).max()) < EXACT
    follow(found, sheet, _exact_runs(sheet, closed, found.traces.reference.t), np.zeros(0))
    if found.stable:
        gain = float(np.real(control.dcgain(closed)[0, 0]))
        assert found.measures["steady_state_error"] == pytest.approx(100.0 * (1.0 - gain), abs=1e-6)
        _same_margins(sheet, found)


def _exact_runs(sheet: Sheet, closed: object, t: Array) -> tuple[Array, Array]:
    none, one = np.zeros(t.size), np.ones(t.size)
    reference = control.forced_response(closed, t, np.vstack((sheet.trial.reference * one, none))).outputs[0]
    disturbance = control.forced_response(closed, t, np.vstack((none, sheet.trial.disturbance * one))).outputs[0]
    return reference, disturbance


def _same_margins(sheet: Sheet, found: MemberResult) -> None:
    """Compare with a grid from far below the slowest pole to far above the fastest, and the limit at zero frequency."""
    gain, sizes = loop_gain(sheet), np.abs(found.poles)
    integrating = gains(sheet.controller).ki or 0j in getattr(sheet.plant, "poles", ())
    start = inf if integrating else float(gain(np.zeros(1))[0].real)
    if not start:  # no gains at all
        return
    expected = margins_by_grid(
        gain, (1e-6 * sizes.min(), 1e4 * sizes.max()), [*found.poles], (start, *_end(sheet, gain))
    )
    same_margins(found, expected, EXACT)


def _end(sheet: Sheet, gain: LoopGain) -> tuple[float, ...]:
    """Return the limit of L at infinite frequency, 0 with any lag; there is none to count with dead time."""
    if getattr(sheet.plant, "dead_time", 0.0):
        return ()
    value = float(gain(np.array([1e9]))[0].real)
    return (value if abs(value) > 1e-6 else 0.0,)


@pytest.mark.parametrize("seed", DELAYED)
def test_a_random_loop_with_dead_time(seed: int) -> None:
    """Curves follow the method of steps; poles, stability and margins are exact, with no approximation of the delay."""
    sheet = continuous_sheet(seed, dead_time=True)
    found, halves = judged(sheet), cut(sheet)
    t = found.traces.reference.t
    jumps = np.arange(0.0, t[-1] + halves.dead_time, halves.dead_time) if halves.plant.D.any() else np.zeros(0)
    runs = (
        method_of_steps(halves, sheet.trial.reference, 0.0, t),
        method_of_steps(halves, 0.0, sheet.trial.disturbance, t),
    )

    follow(found, sheet, runs, jumps)
    if halves.plant.D[1, 0] * halves.law.D[0, 1] == 0.0:
        _same_rightmost_poles(found, halves, poles_with_dead_time(halves))
    if found.stable:
        _same_margins(sheet, found)


def _same_rightmost_poles(found: MemberResult, halves: Delayed, poles: ComplexArray) -> None:
    """Compare those that both find well: within some turns of the dead time."""
    assert found.stable == bool((poles.real < 0.0).all())
    ours = found.poles[np.abs(found.poles) * halves.dead_time < 10.0] * halves.dead_time
    assert unmatched(ours, poles * halves.dead_time) < EXACT
    known = poles.real > (found.poles[-1].real if len(found.poles) > 1 else 0.0) + 1e-6
    near = known & (np.abs(poles) * halves.dead_time < 10.0)
    assert near.sum() <= ours.size


def test_step_measures_of_python_control() -> None:
    """Overshoot, rise and settling are those of `control.step_info`, which knows them to one step of its grid."""
    compared = [_same_step_measures(seed) for seed in LOOPS if seed % 6 in {0, 1, 4}]

    assert sum(compared) >= 30


def _same_step_measures(seed: int) -> bool:
    """Compare the measures of a stable loop that rises; tell whether there was one."""
    sheet = continuous_sheet(seed)
    found = judged(sheet)
    if not found.stable or found.measures["rise_time"] is None or found.traces.notes:
        return False
    t = np.linspace(0.0, sheet.trial.duration, 20_001)
    closed = closed_loop(sheet)
    response = control.ss(closed.A, closed.B[:, :1], closed.C[:1], closed.D[:1, :1])
    final = float(np.real(control.dcgain(response)))
    info = control.step_info(response, t, yfinal=final, SettlingTimeThreshold=0.02)
    # A curve off by the promise passes a level earlier or later by as much as that over its slope there.
    near = pytest.approx(info["RiseTime"], rel=5e-3, abs=2.0 * t[1])

    assert found.measures["overshoot"] == pytest.approx(info["Overshoot"], abs=100.0 * CURVE / abs(final)), seed
    assert found.measures["rise_time"] == near, seed
    settling = found.measures["settling_time"]
    if settling is not None and not _grazes(control.step_response(response, t).outputs / final):
        assert settling == pytest.approx(info["SettlingTime"], rel=5e-3, abs=2.0 * t[1]), seed
    return True


def _grazes(z: Array) -> bool:
    """Tell whether a curve turns so near to its settling band that an error within the promise moves the exit."""
    turns = z[1:-1][(z[1:-1] - z[:-2]) * (z[2:] - z[1:-1]) <= 0.0]
    return bool((np.abs(np.abs(turns - 1.0) - 0.02) < 2.0 * CURVE).any())


def test_margins_of_python_control() -> None:
    """Without dead time, `control.stability_margins` gives the same margins; its polynomials keep five digits."""
    compared = [_same_as_its_margins(seed) for seed in LOOPS if seed % 3 == 0]

    assert sum(compared) >= 15


def _same_as_its_margins(seed: int) -> bool:
    """Compare the margins of a stable loop; tell whether there was one."""
    sheet, s = continuous_sheet(seed), control.tf([1.0, 0.0], [1.0])
    found, controller, (kp, ki, kd) = judged(sheet), sheet.controller, gains(sheet.controller)
    if found.margins is None:
        return False
    assert isinstance(sheet.plant, ZeroPolePlant)
    loop = control.tf(control.zpk(sheet.plant.zeros, sheet.plant.poles, sheet.plant.gain))
    for time in (sheet.actuator.lag, sheet.sensor.lag, controller.measurement_filter):
        loop = loop / (time * s + 1) if time else loop
    law = kp + (ki / s if ki else 0.0) + (kd * s / (controller.filter_time * s + 1) if kd else 0.0)
    loop = loop * law * (1.0 if controller.action == "reverse" else -1.0)
    gain_margins, phase_margins, *_ = control.stability_margins(loop, returnall=True)
    above = [value for value in np.atleast_1d(gain_margins) if value > 1.0]
    assert found.margins.gain_margin == pytest.approx(min(above, default=inf), rel=1e-5), seed
    assert found.margins.phase_margin == pytest.approx(min(np.abs(phase_margins), default=inf), rel=1e-5), seed
    return True
