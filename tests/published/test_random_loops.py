"""Hundreds of random sampled loops, through the road that everyone takes, against python-control and scipy.

Both sides are exact, so what is compared agrees to rounding: curves to 1e-9 of the largest value so far, poles to 1e-8,
margins and peaks to 1e-7 of themselves. Every kind of plant is among them, with dead times of whole samples and of any
fraction, lags of actuator and sensor, both setpoint weights, all three forms, either action, computing delay,
measurement filter and notch, and gains of zero.
"""

from dataclasses import replace
from math import inf, isinf

import control
import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.optimize import linear_sum_assignment
from scipy.signal import lsim

from tests.published.drawn import sampled_sheet
from tests.published.margins_by_grid import GridMargins, margins_by_grid
from tests.published.sampled_by_control import answers, closed_loop, continuous_process, ends, loop_gain
from tuner.assess import assess
from tuner.judge.assessment import MemberResult
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Trace

Array = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]

LOOPS = range(210)
CURVE = 1e-9
POLE = 1e-8
MARGIN = 1e-7
RUNAWAY = 1e9
"""Curves are compared up to this many times their natural size; ours are held at 1e12."""

DEADBEAT = 0.02
"""Poles nearer to z = 0 are not compared: delays put many at 0, which eigenvalues scatter around it."""


def judged(sheet: Sheet) -> MemberResult:
    """Return what the program makes of the nominal plant."""
    return assess(sheet, 1).nominal


def farthest(trace: Trace, expected: Array) -> float:
    """Return the largest distance at the samples, as a share of the largest value until then."""
    size = np.maximum.accumulate(np.maximum(np.abs(expected), 1.0))
    return float(np.abs((trace.y[trace.sample_index] - expected) / size)[size < RUNAWAY].max())


def unmatched(ours: ComplexArray, theirs: ComplexArray) -> float:
    """Return the largest distance between poles in z, each of ours paired with another of theirs."""
    distance = np.abs(ours[:, None] - theirs)
    return float(distance[linear_sum_assignment(distance)].max()) if ours.size else 0.0


@pytest.mark.parametrize("seed", LOOPS)
def test_a_random_sampled_loop(seed: int) -> None:
    """Both runs at the samples, poles, stability, static error, all margins are those of python-control and scipy."""
    sheet = sampled_sheet(seed)
    found, closed = judged(sheet), closed_loop(sheet)
    poles = control.poles(closed)
    stable = bool((np.abs(poles) < 1.0 - 1e-9).all())
    runs = answers(sheet, closed, found.traces.reference.sample_index.size)

    assert found.stable == stable
    assert farthest(found.traces.reference, runs.reference) < CURVE
    assert farthest(found.traces.disturbance, runs.disturbance) < CURVE
    _same_poles(sheet, found, poles)
    if stable:
        _same_error(found, float(np.real(control.dcgain(closed)[0, 0])))
        _same_margins(sheet, found)


def _same_poles(sheet: Sheet, found: MemberResult, poles: ComplexArray) -> None:
    ours = np.exp(found.poles * sheet.controller.sample_time)
    live, known = ours[np.abs(ours) > DEADBEAT], poles[np.abs(poles) > DEADBEAT * (1.0 - 1e-4)]
    assert unmatched(live, poles) < POLE
    assert (np.abs(known) > DEADBEAT * (1.0 + 1e-4)).sum() <= live.size <= known.size


def _same_error(found: MemberResult, gain: float) -> None:
    assert found.measures["steady_state_error"] == pytest.approx(100.0 * (1.0 - gain), abs=1e-6)


def _same_margins(sheet: Sheet, found: MemberResult) -> None:
    gain, nyquist = loop_gain(sheet), np.pi / sheet.controller.sample_time
    reach = (1e-6 * nyquist, nyquist * (1.0 - 1e-9))
    expected = margins_by_grid(gain, reach, [*found.poles], ends(sheet, gain))
    if abs(ends(sheet, gain)[1]) > 1.0:  # one sample more turns the loop gain at the Nyquist frequency
        expected.delay_margin = min(expected.delay_margin, sheet.controller.sample_time)
    same_margins(found, expected, MARGIN)


def same_margins(found: MemberResult, expected: GridMargins, tolerance: float) -> None:
    """Hold every margin, peak and the bandwidth to what the grid gives."""
    for name in ("gain_margin", "phase_margin", "delay_margin", "max_sensitivity", "max_complementary", "bandwidth"):
        value, wanted = found.measures[name], getattr(expected, name)
        if wanted is None or isinf(wanted):
            assert value == wanted, name
        else:
            assert value == pytest.approx(wanted, rel=tolerance), name


def test_the_drawing_holds_every_kind() -> None:
    """Among the loops are stable and unstable ones in numbers, and each block with and without."""
    sheets = [sampled_sheet(seed) for seed in LOOPS]
    controllers = [sheet.controller for sheet in sheets]
    stable = sum(judged(sheet).stable for sheet in sheets)
    ratios = [getattr(sheet.plant, "dead_time", inf) / sheet.controller.sample_time for sheet in sheets]
    fractional = sum(abs(ratio - round(ratio)) > 1e-9 for ratio in ratios)

    assert 60 < stable < len(LOOPS) - 60
    assert 40 < fractional < len(LOOPS) - 40
    assert {one.form for one in controllers} == {"parallel", "standard", "series"}
    assert {one.action for one in controllers} == {"reverse", "direct"}
    for block in ("notch", "measurement_filter", "delay_samples", "filter_time", "gain_1", "gain_2", "gain_3", "c"):
        count = sum(bool(getattr(one, block)) for one in controllers)
        assert 10 < count < len(LOOPS) - 1, block


@pytest.mark.parametrize("seed", range(0, 42, 2))
def test_between_the_samples(seed: int) -> None:
    """At every point of the grid the output is what scipy's `lsim` makes of the effort held between the samples."""
    sheet = sampled_sheet(seed)
    found = judged(replace(sheet, plant=replace(sheet.plant, dead_time=0.0)))  # type: ignore[arg-type]  # has one
    process = continuous_process(sheet)
    for trace, disturbance in ((found.traces.reference, 0.0), (found.traces.disturbance, sheet.trial.disturbance)):
        inputs = np.column_stack((trace.u, np.full(trace.t.size, disturbance)))
        expected = lsim((process.A, process.B, process.C, process.D), inputs, trace.t, interp=False)[1][:, 0]
        # `lsim` shows a direct term just after the jump of the effort, the program just before it.
        before = np.vstack((np.zeros(2), inputs[:-1]))
        expected += (before - inputs) @ process.D[0]
        size = np.maximum.accumulate(np.maximum(np.abs(expected), 1.0))
        assert np.abs((trace.y - expected) / size)[size < RUNAWAY].max() < CURVE
