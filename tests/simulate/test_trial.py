"""The trial of a sampled controller against closed forms, python-control, and a slow simulation of every event."""

import math
from dataclasses import replace
from itertools import pairwise

import control
import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.integrate import solve_ivp

from tests.simulate.invented import NOMINAL, heater, sheet
from tuner.errors import LoopError
from tuner.law.pid import law
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, LeadLag, Notch
from tuner.model.family import family
from tuner.model.loop import Manipulated
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial
from tuner.simulate.batch import law_constants
from tuner.simulate.discrete import chain
from tuner.simulate.realise import realise
from tuner.simulate.trial import run

Array = NDArray[np.float64]


def test_an_open_loop_is_the_step_response_of_the_plant() -> None:
    """Static feedforward alone, dead time of a fraction: the closed form, to 1e-9, between samples too."""
    forward = Controller(sample_time=0.5, feedback=False, feedforward=Feedforward("static", gain=2.0))
    trace = run(sheet("3 exp(-0.7 s)/((s + 1)(0.5 s + 1))", forward, Trial(10.0, 1.5)), NOMINAL)[0].reference
    late = np.maximum(trace.t - 0.7, 0.0)
    expected = 9.0 * (1.0 - 2.0 * np.exp(-late) + np.exp(-2.0 * late))
    assert trace.y == pytest.approx(expected, abs=1e-9)
    assert (trace.u == 3.0).all()
    assert trace.linear


@pytest.mark.parametrize(
    ("expression", "numerator", "denominator"),
    [("2/((s + 1)(3 s + 1))", (2.0,), (3.0, 4.0, 1.0)), ("(s + 2)/(s^2 + 0.4 s + 4)", (1.0, 2.0), (1.0, 0.4, 4.0))],
)
def test_a_linear_loop_is_that_of_python_control(
    expression: str, numerator: tuple[float, ...], denominator: tuple[float, ...]
) -> None:
    """PI control, sampled: reference and disturbance runs agree with python-control at the samples to 1e-9."""
    step, kp, ki = 0.2, 1.1, 0.6
    sampled = Controller(sample_time=step, gain_1=kp, gain_2=ki)
    found = run(sheet(expression, sampled, Trial(20.0, 1.0, 2.0)), NOMINAL)[0]
    plant = control.sample_system(control.tf(numerator, denominator), step)
    law_ = control.tf([kp, ki * step - kp], [1.0, -1.0], step)
    times = np.arange(101) * step
    closed = control.forced_response(control.ss(control.feedback(law_ * plant, 1)), times, np.ones(101)).outputs
    upset = control.forced_response(control.ss(control.feedback(plant, law_)), times, 2.0 * np.ones(101)).outputs
    at = found.reference.sample_index
    assert found.reference.y[at] == pytest.approx(closed, abs=1e-9)
    assert found.disturbance.y[at] == pytest.approx(upset, abs=1e-9)
    assert (found.disturbance.r == 0.0).all()


def test_deadbeat_of_an_integrator() -> None:
    """A proportional gain of one over the sample time takes an integrator to its reference in one sample."""
    trace = run(sheet("1/s", Controller(sample_time=0.5, gain_1=2.0), Trial(5.0)), NOMINAL)[0].reference
    assert trace.y == pytest.approx(np.minimum(trace.t / 0.5, 1.0), abs=1e-13)


def _slow(whole: Sheet, reference: float, disturbance: float, substeps: int) -> tuple[Array, Array]:
    """Simulate one run event by event: the plain law at samples, DOP853 between jumps of the delayed inputs."""
    step, controller = whole.controller.sample_time, whole.controller
    plant = realise(whole.plant, {p.name: p.value for p in whole.plant.parameters})
    act, sense = whole.actuator.lag, whole.sensor.lag
    constants = law_constants(whole, step, controller.measurement_filter)
    count = round(whole.trial.duration / step) + 1
    efforts: list[float] = []

    def slope(_: float, x: Array, u: float, d: float) -> Array:
        entry = x[0] + d
        y = plant.c @ x[1:-1] + plant.d * entry
        return np.array([(u - x[0]) / act, *(plant.a @ x[1:-1] + plant.b * entry), (y - x[-1]) / sense])

    def inputs(time: float) -> tuple[float, float]:
        late = time - plant.dead_time
        k = math.floor(late / step + 1e-9) - controller.delay_samples
        return efforts[k] if k >= 0 else 0.0, disturbance if late >= -1e-9 else 0.0

    x, state, ys = np.zeros(plant.order + 2), (0.0,) * 11, []
    for k in range(count):
        measured = whole.loop.controlled.resting + x[-1]
        quantum = whole.sensor.resolution
        measured = quantum * math.floor(measured / quantum + 0.5) if quantum else measured
        state = law(reference + whole.loop.controlled.resting, measured, 0.0, 0.0, *state, *constants)
        efforts.append(state[0])
        grid = k * step + np.arange(substeps + 1) * step / substeps
        edges = np.unique(np.round((*grid, k * step + plant.dead_time % step), 12))
        for start, end in pairwise(edges):
            if np.abs(grid - start).min() < 1e-9 and end <= (k + 1) * step + 1e-9:
                ys.append(float(plant.c @ x[1:-1]))
            x = solve_ivp(slope, (start, end), x, "DOP853", rtol=1e-10, atol=1e-12, args=inputs(start)).y[:, -1]
    return np.array(ys), np.array(efforts)


@pytest.mark.parametrize(
    "change",
    [
        {},
        {"delay_samples": 3, "windup_time": None, "measurement_filter": 0.0},
        {"notch": Notch(2.0), "lead_lag": LeadLag(1.0, 0.3), "c": 1.0, "b": 0.5},
    ],
)
def test_a_saturating_loop_is_that_of_a_slow_simulation(change: dict[str, object]) -> None:
    """Limits, rate, resolution, lags, fractional dead time, computing delay: output and effort to 1e-8 of a step."""
    whole = heater()
    whole = replace(whole, controller=replace(whole.controller, **change))  # type: ignore[arg-type]  # its own fields
    whole = replace(whole, plant=ExpressionPlant("gain exp(-1.13 s)/((lag s + 1)(6 s + 1))", whole.plant.parameters))
    whole = replace(whole, trial=Trial(40.0, 5.0, 10.0))
    found = run(whole, family(whole.plant, 1))[0]
    for trace, steps in ((found.reference, (5.0, 0.0)), (found.disturbance, (0.0, 10.0))):
        every = int(trace.sample_index[1])
        y, u = _slow(whole, *steps, every)
        late = whole.controller.delay_samples
        assert trace.y == pytest.approx(y[: len(trace.y)], abs=1e-7)
        assert trace.u[trace.sample_index[late:]] == pytest.approx(u[: len(u) - late], abs=1e-7)
        assert not trace.linear
    assert found.reference.limited.any()


def test_direct_action_controls_a_falling_plant() -> None:
    """Turning plant and action gives the same output and the opposite effort, to the last bit."""
    up = Controller(sample_time=0.3, gain_1=2.0, gain_2=0.5, gain_3=0.4, filter_time=0.2)
    rising = run(sheet("exp(-0.4 s)/(s + 1)", up, Trial(8.0)), NOMINAL)[0].reference
    falling = run(sheet("-exp(-0.4 s)/(s + 1)", replace(up, action="direct"), Trial(8.0)), NOMINAL)[0].reference
    assert np.array_equal(falling.y, rising.y)
    assert np.array_equal(falling.u, -rising.u)


def test_a_biproper_plant_is_read_before_the_effort_acts() -> None:
    """A gain of 0.5 with proportional gain 1 reads, at each sample, half of the effort before."""
    trace = run(sheet("0.5", Controller(sample_time=1.0, gain_1=1.0), Trial(4.0)), NOMINAL)[0].reference
    assert trace.u[trace.sample_index] == pytest.approx([1.0, 0.5, 0.75, 0.625, 0.6875])
    assert trace.y[trace.sample_index] == pytest.approx([0.0, 0.5, 0.25, 0.375, 0.3125])


def test_computing_delay_holds_the_effort_back() -> None:
    """The effort shown is the one that holds, and a disturbance is not delayed by computing."""
    late = Controller(sample_time=0.5, gain_1=1.0, delay_samples=2)
    found = run(sheet("1/(s + 1)", late, Trial(5.0, 1.0, 1.0)), NOMINAL)[0]
    assert (found.reference.u[found.reference.t < 1.0] == 0.0).all()
    assert found.reference.u[found.reference.t == 1.0] == 1.0
    early = found.disturbance.t <= 0.9
    assert found.disturbance.y[early] == pytest.approx(1.0 - np.exp(-found.disturbance.t[early]), abs=1e-12)


def test_the_inverse_leads_the_plant_along_its_filter() -> None:
    """Open loop, sampled fast: the output follows the reference as the filter says, to a step of the hold."""
    forward = Controller(sample_time=0.001, feedback=False, feedforward=Feedforward("inverse", filter_time=0.5))
    trace = run(sheet("4/(3 s + 1)", forward, Trial(4.0)), NOMINAL)[0].reference
    assert trace.y == pytest.approx(1.0 - np.exp(-trace.t / 0.5), abs=2e-3)


def test_a_measured_disturbance_is_compensated() -> None:
    """With its own path the disturbance no longer enters at the plant input, and the filter cancels it."""
    path = DisturbanceFeedforward("1.5 exp(-3 s)/(5 s + 1)")
    whole = sheet(
        "2 exp(-2 s)/(10 s + 1)",
        Controller(sample_time=0.01, feedback=False, disturbance_feedforward=path),
        Trial(60.0, 0.0, 2.0),
    )
    trace = run(whole, NOMINAL)[0].disturbance
    assert np.abs(trace.y).max() < 2e-3
    assert trace.u[-1] == pytest.approx(-1.5 * (1.0 + math.exp(-59.0 / 5.0)), abs=1e-9)
    held = replace(whole, loop=replace(whole.loop, manipulated=Manipulated(low=0.0, high=0.0)))
    late = np.maximum(trace.t - 3.0, 0.0)
    assert run(held, NOMINAL)[0].disturbance.y == pytest.approx(3.0 * (1.0 - np.exp(-late / 5.0)), abs=1e-9)


def test_a_family_is_its_members_one_by_one() -> None:
    """A batch gives each member the same bits as a run of its own, members of fewer states too."""
    whole = heater()
    members = (*family(whole.plant, 5), replace(family(whole.plant, 1)[0], values={"gain": 1.0, "delay": 0, "lag": 0}))
    together = run(whole, members)
    for member, traces in zip(members, together, strict=True):
        alone = run(whole, (member,))[0]
        assert np.array_equal(alone.reference.y, traces.reference.y)
        assert np.array_equal(alone.disturbance.u, traces.disturbance.u)


def test_what_a_trace_says_of_itself() -> None:
    """Points, sample instants and limits fit together; a run without limits and resolution is linear."""
    whole = replace(heater(), sensor=Sensor(), loop=replace(heater().loop, manipulated=Manipulated()))
    trace = run(whole, family(whole.plant, 1))[0].reference
    assert len(trace.t) == len(trace.r) == len(trace.y) == len(trace.u) == 1201
    assert trace.t[trace.sample_index[3]] == 1.5
    assert trace.limited.shape == trace.sample_index.shape
    assert trace.linear
    assert not run(replace(whole, sensor=Sensor(resolution=0.1)), family(whole.plant, 1))[0].reference.linear


def test_an_unstable_loop_stays_finite() -> None:
    """A loop that grows without bound is held at 1e12 times its step."""
    wild = Controller(sample_time=0.1, gain_1=1e3)
    found = run(sheet("1/(s (s + 1))", wild, Trial(200.0, 2.0, 1.0)), NOMINAL)[0]
    for trace in (found.reference, found.disturbance):
        assert np.isfinite(trace.y).all()
        assert np.isfinite(trace.u).all()
        assert np.abs(trace.y).max() > 1e9
    assert np.abs(found.reference.y).max() <= 2e12


@pytest.mark.parametrize("scale", [1e-6, 1e6])
def test_time_may_be_of_any_size(scale: float) -> None:
    """The same loop in microseconds or megaseconds has the same curves."""
    fast = Controller(
        sample_time=0.1 * scale, gain_1=2.0, gain_2=1.0 / scale, gain_3=0.3 * scale, filter_time=0.05 * scale
    )
    whole = sheet(f"exp(-{0.33 * scale:.17g} s)/({scale:.17g} s + 1)^2", fast, Trial(12.0 * scale))
    plain = sheet("exp(-0.33 s)/(s + 1)^2", Controller("parallel", 0.1, 2.0, 1.0, 0.3, 0.05), Trial(12.0))
    one, other = run(whole, NOMINAL)[0].reference, run(plain, NOMINAL)[0].reference
    assert one.y == pytest.approx(other.y, abs=1e-10)


def test_actuator_and_sensor_lags_are_in_the_loop_but_not_in_the_output() -> None:
    """The output is that of the plant, the measurement lags behind it: at rest in the end both are the reference."""
    whole = replace(
        sheet("2/(s + 1)", Controller(sample_time=0.1, gain_1=0.4, gain_2=0.3), Trial(40.0)),
        actuator=Actuator(0.3),
        sensor=Sensor(0.5),
    )
    trace = run(whole, NOMINAL)[0].reference
    way = chain(realise(whole.plant, {}), 0.3, 0.5)
    assert way.order == 3
    assert trace.y[-1] == pytest.approx(1.0, abs=1e-3)


def test_a_notch_above_half_the_sampling_frequency_is_refused() -> None:
    """The sentence names both frequencies."""
    whole = sheet("1/(s + 1)", Controller(sample_time=1.0, gain_1=1.0, notch=Notch(4.0)), Trial(5.0))
    with pytest.raises(LoopError) as caught:
        run(whole, NOMINAL)
    assert str(caught.value) == "the notch at 4 rad per time unit lies above half the sampling frequency, 3.14159"
