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


def wired(sheet: Sheet) -> control.StateSpace:
    """Return the loop as python-control wires it by names: inputs r and d, outputs y and u, at the samples."""
    law, step = sheet.controller, sheet.controller.sample_time
    z = control.tf([1.0, 0.0], [1.0], step)
    s = control.tf("s")
    back = (1.0 - 1.0 / z) / step

    def held(system: control.TransferFunction, name: str, inputs: str, outputs: str) -> control.StateSpace:
        state = control.ss(system)
        return control.ss(control.sample_system(state, step, "zoh"), name=name, inputs=inputs, outputs=outputs)

    def block(system: object, name: str, inputs: str, outputs: str) -> control.StateSpace:
        return control.ss(control.tf2ss(system), name=name, inputs=inputs, outputs=outputs)

    plant = realise_expression(sheet.plant.expression, {})  # type: ignore[union-attr]  # it is a formula
    g = control.zpk(plant.zeros.real, plant.poles.real, plant.gain)
    act, sense = 1.0 / (0.4 * s + 1.0), 1.0 / (0.3 * s + 1.0)
    against = law.disturbance_feedforward
    path = realise_expression(against.expression, {}) if against else None
    pd = control.zpk(path.zeros.real, path.poles.real, path.gain) if path is not None else g
    # Effort and disturbance to output and measurement, as one continuous system of two inputs under one hold.
    way = control.append(control.ss(g * act), control.ss(pd))
    seen = control.append(control.ss(g * act * sense), control.ss(pd * sense))
    both = control.ss(
        np.block([[way.A, np.zeros((way.nstates, seen.nstates))], [np.zeros((seen.nstates, way.nstates)), seen.A]]),
        np.vstack((way.B, seen.B)),
        np.block([[way.C.sum(0, keepdims=True), np.zeros((1, seen.nstates))],
                  [np.zeros((1, way.nstates)), seen.C.sum(0, keepdims=True)]]),
        np.zeros((2, 2)),
    )  # fmt: skip
    process = control.ss(
        control.sample_system(both, step, "zoh"), name="process", inputs=["u", "d"], outputs=["y", "ym"]
    )
    gains = law.parallel()
    integral, derivative = gains.ki * step / (z - 1.0), gains.kd * back / (law.filter_time * back + 1.0)
    measured = control.tf([1.0], [1.0], step)
    if law.measurement_filter:
        measured = measured / (law.measurement_filter * back + 1.0)
    if law.lead_lag:
        measured = measured * (law.lead_lag.lead * back + 1.0) / (law.lead_lag.lag * back + 1.0)
    if law.notch:
        w0, depth, width = law.notch.frequency, law.notch.depth, law.notch.width
        x = w0 / np.tan(0.5 * w0 * step) * (z - 1.0) / (z + 1.0)
        measured = measured * (x**2 + depth * width * w0 * x + w0**2) / (x**2 + width * w0 * x + w0**2)
    smooth, forward, undo = control.tf([1.0], [1.0]), control.tf([0.0], [1.0]), control.tf([0.0], [1.0])
    if law.reference_filter:
        smooth = 1.0 / (law.reference_filter.time * s + 1.0) ** law.reference_filter.order
    if law.feedforward and law.feedforward.kind == "static":
        forward = control.tf([law.feedforward.gain], [1.0])
    elif law.feedforward:
        forward = control.minreal(
            1.0 / control.tf(g * act) / (law.feedforward.filter_time * s + 1.0) ** 3, verbose=False
        )
    if path is not None:
        undo = control.minreal(-control.tf(pd) / control.tf(g * act) / (0.5 * s + 1.0), verbose=False)
    return control.interconnect(
        [
            process,
            block(measured, "measurement", "ym", "found"),
            held(smooth, "smooth", "r", "asked"),
            held(forward, "forward", "r", "uf"),
            held(undo, "undo", "d", "ud"),
            block(law.b * gains.kp + integral + law.c * derivative, "ahead", "asked", "ua"),
            block(gains.kp + integral + derivative, "behind", "found", "ub"),
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


def test_what_was_compared_has_every_block() -> None:
    """So that no block is left out unseen, in all its combinations with the feedforwards."""
    laws = [random_sheet(seed).controller for seed in range(24)]
    assert {law.feedforward and law.feedforward.kind for law in laws} == {None, "static", "inverse"}
    for name in ("reference_filter", "lead_lag", "notch", "disturbance_feedforward", "measurement_filter"):
        assert {bool(getattr(law, name)) for law in laws} == {True, False}
