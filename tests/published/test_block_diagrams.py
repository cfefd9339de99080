"""Block-diagram algebra against python-control, a general-purpose reference library, on random structures.

Small trees of blocks in series, in parallel and in feedback; and the whole loop with feedforward from the reference and
from a measured disturbance, a reference filter and every block on the measurement, wired by names with `interconnect`.
"""

from dataclasses import replace

import control
import numpy as np
import pytest

from tuner.model.controller import (
    Controller,
    DisturbanceFeedforward,
    Feedforward,
    LeadLag,
    Notch,
    ReferenceFilter,
)
from tuner.model.family import family_of
from tuner.model.loop import Loop
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial
from tuner.simulate.algebra import feedback, parallel, series
from tuner.simulate.linear import Linear, from_zeros_poles
from tuner.simulate.realise import realise_expression
from tuner.simulate.traces import ComplexArray
from tuner.simulate.trial import run

W = np.geomspace(1e-2, 1e2, 41)


def leaf(random: np.random.Generator) -> tuple[Linear, control.StateSpace]:
    """Return one block, as ours and as theirs."""
    poles = -(10.0 ** random.uniform(-1.0, 1.0, int(random.integers(1, 3))))
    zeros = random.normal(size=int(random.integers(0, len(poles) + 1)))
    made = from_zeros_poles(zeros.tolist(), poles.tolist(), float(random.uniform(0.2, 2.0)))
    return made, control.ss(control.zpk(zeros, poles, made.gain))


def tree(random: np.random.Generator, depth: int) -> tuple[Linear, control.StateSpace]:
    """Return a random structure, as ours and as theirs."""
    if depth == 0:
        return leaf(random)
    (one, first), (other, second) = tree(random, depth - 1), tree(random, depth - 1)
    kind = int(random.integers(0, 3))
    if kind == 0:
        return series(one, other), control.series(first, second)
    if kind == 1:
        return parallel(one, other), control.parallel(first, second)
    return feedback(one, other), control.feedback(first, second)


@pytest.mark.parametrize("seed", range(40))
def test_random_structures(seed: int) -> None:
    """The frequency response of a tree of four blocks is that of python-control, and so are its poles."""
    ours, theirs = tree(np.random.default_rng(seed), 2)
    found: ComplexArray = ours.response(1j * W)
    assert found == pytest.approx(np.asarray(theirs(1j * W)), rel=1e-6, abs=1e-9)
    expected = np.sort_complex(theirs.poles())
    assert np.sort_complex(ours.poles) == pytest.approx(expected, rel=1e-4, abs=1e-6)


def random_sheet(seed: int) -> Sheet:
    """Return a random linear sampled loop in which every block may be there or not."""
    random = np.random.default_rng(1000 + seed)

    there = random.random(4) < 0.6
    lag, slow = random.uniform(2.0, 6.0), random.uniform(0.3, 1.0)
    forward = [
        None,
        Feedforward("static", gain=random.uniform(-0.5, 1.0)),
        Feedforward("inverse", filter_time=random.uniform(0.3, 2.0)),
    ]
    law = Controller(
        sample_time=0.2,
        gain_1=random.uniform(0.3, 1.5),
        gain_2=random.uniform(0.05, 0.3),
        gain_3=random.uniform(0.0, 0.4),
        filter_time=random.uniform(0.0, 0.5),
        b=random.uniform(0.0, 1.0),
        c=random.uniform(0.0, 1.0),
        feedforward=forward[int(random.integers(0, 3))],
        measurement_filter=random.uniform(0.1, 0.5) if random.random() < 0.6 else 0.0,
    )
    path = DisturbanceFeedforward(f"0.7/({1.5 * lag:.6g} s + 1)^2", filter_time=0.5)
    law = replace(
        law,
        reference_filter=ReferenceFilter(random.uniform(0.3, 2.0), int(random.integers(1, 4))) if there[0] else None,
        lead_lag=LeadLag(random.uniform(0.0, 0.6), random.uniform(0.1, 0.5)) if there[1] else None,
        notch=Notch(random.uniform(2.0, 8.0), random.uniform(0.1, 0.6), random.uniform(0.3, 1.2)) if there[2] else None,
        disturbance_feedforward=path if there[3] else None,
    )
    return Sheet(
        loop=Loop("Drawn"),
        plant=ExpressionPlant(f"1.3/(({lag:.6g} s + 1)({slow:.6g} s + 1))"),
        controller=law,
        trial=Trial(40.0, reference=1.0, disturbance=1.0),
        actuator=Actuator(0.4),
        sensor=Sensor(0.3),
    )


def held(system: control.TransferFunction, step: float, name: str, ends: tuple[str, str]) -> control.StateSpace:
    """Return a continuous block behind a hold, between two signals."""
    sampled = control.sample_system(control.ss(system), step, "zoh")
    return control.ss(sampled, name=name, inputs=ends[0], outputs=ends[1])


def block(system: control.TransferFunction, name: str, ends: tuple[str, str]) -> control.StateSpace:
    """Return a sampled block between two signals."""
    return control.ss(control.tf2ss(system), name=name, inputs=ends[0], outputs=ends[1])


def formula(text: str) -> control.TransferFunction:
    """Return a formula of ours with real zeros and poles as theirs."""
    made = realise_expression(text, {})
    return control.zpk(made.zeros.real, made.poles.real, made.gain)


def ways(sheet: Sheet) -> tuple[control.TransferFunction, control.TransferFunction]:
    """Return the ways from the effort and from the disturbance to the output."""
    against = sheet.controller.disturbance_feedforward
    g = formula(sheet.plant.expression)  # type: ignore[union-attr]  # it is a formula
    return g / (0.4 * control.tf("s") + 1.0), formula(against.expression) if against else g


def process(sheet: Sheet) -> control.StateSpace:
    """Return effort and disturbance to output and measurement: one continuous system of two inputs under one hold."""
    sense = 1.0 / (0.3 * control.tf("s") + 1.0)
    way = control.append(*(control.ss(one) for one in ways(sheet)))
    seen = control.append(*(control.ss(one * sense) for one in ways(sheet)))
    both = control.append(way, seen)
    joined = control.ss(
        both.A,
        both.B[:, :2] + both.B[:, 2:],
        np.vstack((both.C[:2].sum(0), both.C[2:].sum(0))),
        np.zeros((2, 2)),
    )
    sampled = control.sample_system(joined, sheet.controller.sample_time, "zoh")
    return control.ss(sampled, name="process", inputs=["u", "d"], outputs=["y", "ym"])


def measured(law: Controller, z: control.TransferFunction, back: control.TransferFunction) -> control.TransferFunction:
    """Return the filter, the lead-lag and the notch one after the other."""
    found = control.tf([1.0], [1.0], law.sample_time)
    if law.measurement_filter:
        found = found / (law.measurement_filter * back + 1.0)
    if law.lead_lag:
        found = found * (law.lead_lag.lead * back + 1.0) / (law.lead_lag.lag * back + 1.0)
    if law.notch:
        w0, depth, width = law.notch.frequency, law.notch.depth, law.notch.width
        x = w0 / np.tan(0.5 * w0 * law.sample_time) * (z - 1.0) / (z + 1.0)
        found = found * (x**2 + depth * width * w0 * x + w0**2) / (x**2 + width * w0 * x + w0**2)
    return found


def fed(sheet: Sheet) -> tuple[control.TransferFunction, control.TransferFunction, control.TransferFunction]:
    """Return the reference filter and both feedforwards."""
    law, s = sheet.controller, control.tf("s")
    smooth, forward, undo = control.tf([1.0], [1.0]), control.tf([0.0], [1.0]), control.tf([0.0], [1.0])
    effort, disturbance = (control.tf(way) for way in ways(sheet))
    if law.reference_filter:
        smooth = 1.0 / (law.reference_filter.time * s + 1.0) ** law.reference_filter.order
    if law.feedforward and law.feedforward.kind == "static":
        forward = control.tf([law.feedforward.gain], [1.0])
    elif law.feedforward:
        forward = control.minreal(1.0 / effort / (law.feedforward.filter_time * s + 1.0) ** 3, verbose=False)
    if law.disturbance_feedforward:
        undo = control.minreal(-disturbance / effort / (0.5 * s + 1.0), verbose=False)
    return smooth, forward, undo


def wired(sheet: Sheet) -> control.StateSpace:
    """Return the loop as python-control wires it by names: inputs r and d, outputs y and u, at the samples."""
    law, step = sheet.controller, sheet.controller.sample_time
    z = control.tf([1.0, 0.0], [1.0], step)
    back = (1.0 - 1.0 / z) / step
    gains = law.parallel()
    integral, derivative = gains.ki * step / (z - 1.0), gains.kd * back / (law.filter_time * back + 1.0)
    smooth, forward, undo = fed(sheet)
    return control.interconnect(
        [
            process(sheet),
            block(measured(law, z, back), "measurement", ("ym", "found")),
            held(smooth, step, "smooth", ("r", "asked")),
            held(forward, step, "forward", ("r", "uf")),
            held(undo, step, "undo", ("d", "ud")),
            block(law.b * gains.kp + integral + law.c * derivative, "ahead", ("asked", "ua")),
            block(gains.kp + integral + derivative, "behind", ("found", "ub")),
            control.summing_junction(["ua", "-ub", "uf", "ud"], "u", name="sum"),
        ],
        inputs=["r", "d"],
        outputs=["y", "u"],
    )


@pytest.mark.parametrize("seed", range(24))
def test_the_whole_loop(seed: int) -> None:
    """Both runs of the trial, at every sample, are those of the structure wired by names, to 1e-7 of the step."""
    sheet = random_sheet(seed)
    theirs = wired(sheet)
    (traces,) = run(sheet, family_of(sheet, 1))
    t = 0.2 * np.arange(len(traces.reference.sample_index))
    for which, trace in enumerate((traces.reference, traces.disturbance)):
        inputs = np.zeros((2, len(t)))
        inputs[which] = 1.0
        expected = control.forced_response(theirs, t, inputs).outputs
        size = max(1.0, float(np.abs(expected).max()))
        assert trace.y[trace.sample_index] == pytest.approx(expected[0], abs=1e-7 * size)
        assert trace.u[trace.sample_index] == pytest.approx(expected[1], abs=1e-7 * size)


def wired_continuously(sheet: Sheet) -> control.StateSpace:
    """Return the same loop with a continuous controller, wired by names."""
    law, s, gains = sheet.controller, control.tf("s"), sheet.controller.parallel()
    sense, found = 1.0 / (0.3 * s + 1.0), control.tf([1.0], [1.0])
    if law.measurement_filter:
        found = found / (law.measurement_filter * s + 1.0)
    if law.lead_lag:
        found = found * (law.lead_lag.lead * s + 1.0) / (law.lead_lag.lag * s + 1.0)
    if law.notch:
        w0, depth, width = law.notch.frequency, law.notch.depth, law.notch.width
        found = found * (s**2 + depth * width * w0 * s + w0**2) / (s**2 + width * w0 * s + w0**2)
    integral, derivative = gains.ki / s, gains.kd * s / (law.filter_time * s + 1.0)
    smooth, forward, undo = fed(sheet)
    effort, disturbance = ways(sheet)
    parts = [
        (effort, "effort", "u", "yu"),
        (disturbance, "disturbance", "d", "yd"),
        (sense * found, "measurement", "y", "found"),
        (smooth, "smooth", "r", "asked"),
        (forward, "forward", "r", "uf"),
        (undo, "undo", "d", "ud"),
        (law.b * gains.kp + integral + law.c * derivative, "ahead", "asked", "ua"),
        (gains.kp + integral + derivative, "behind", "found", "ub"),
    ]
    return control.interconnect(
        [
            *(control.ss(control.tf2ss(one), name=name, inputs=a, outputs=b) for one, name, a, b in parts),
            control.summing_junction(["yu", "yd"], "y", name="at the output"),
            control.summing_junction(["ua", "-ub", "uf", "ud"], "u", name="sum"),
        ],
        inputs=["r", "d"],
        outputs=["y"],
    )


@pytest.mark.parametrize("seed", range(12))
def test_the_whole_loop_with_a_continuous_controller(seed: int) -> None:
    """The same structures without samples: the traces are within 1e-3 of the step of the exact answer."""
    drawn = random_sheet(seed)
    law = replace(drawn.controller, sample_time=0.0, filter_time=max(drawn.controller.filter_time, 0.05))
    sheet = replace(drawn, controller=law)
    theirs = wired_continuously(sheet)
    (traces,) = run(sheet, family_of(sheet, 1))
    for which, trace in enumerate((traces.reference, traces.disturbance)):
        inputs = np.zeros((2, len(trace.t)))
        inputs[which] = 1.0
        expected = control.forced_response(theirs, trace.t, inputs).outputs
        assert trace.y == pytest.approx(np.atleast_2d(expected)[0], abs=1e-3 * max(1.0, float(np.abs(expected).max())))


def test_what_was_compared_has_every_block() -> None:
    """So that no block is left out unseen, in all its combinations with the feedforwards."""
    laws = [random_sheet(seed).controller for seed in range(24)]
    assert {law.feedforward and law.feedforward.kind for law in laws} == {None, "static", "inverse"}
    for name in ("reference_filter", "lead_lag", "notch", "disturbance_feedforward", "measurement_filter"):
        assert {bool(getattr(law, name)) for law in laws} == {True, False}
