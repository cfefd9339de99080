"""Feedforward against published results: the ideal compensator of a measured disturbance, and perfect inversion.

The compensator -Gd/Gp for Gp = 2 exp(-2 s)/(10 s + 1), Gd = 1.5 exp(-3 s)/(5 s + 1) is
-0.75 (10 s + 1) exp(-s)/(5 s + 1) (the standard textbook result, from memory): static gain -0.75, causal since the
disturbance is the later one.
With y = G F r and F = M/G0, an exact model gives the filter M alone (internal model principle of open-loop inversion;
Morari and Zafiriou, Robust Process Control, from memory), and a gain that has drifted gives y(end)/r = G(0)/G0(0).
"""

from dataclasses import replace

import numpy as np
import pytest

from tuner.assess import assess
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward
from tuner.model.family import family_of
from tuner.model.loop import Loop
from tuner.model.plant import ExpressionPlant, PlantParameter, spread_percent
from tuner.model.sheet import Sheet, Trial
from tuner.simulate.feedforward import disturbance_feedforward
from tuner.simulate.realise import realise_expression
from tuner.simulate.trial import run

PLANT, PATH = "2 exp(-2 s)/(10 s + 1)", "1.5 exp(-3 s)/(5 s + 1)"


def sheet(law: Controller, plant: ExpressionPlant | None = None) -> Sheet:
    """Return a loop that is open, feedforward alone."""
    return Sheet(Loop("Published"), plant or ExpressionPlant(PLANT), law, Trial(200.0, reference=1.0, disturbance=1.0))


def test_the_ideal_compensator() -> None:
    """Its gain, its lead, its lag and its dead time are those of the published result."""
    path, process = realise_expression(PATH, {}), realise_expression(PLANT, {})
    found = disturbance_feedforward(DisturbanceFeedforward(PATH), path, process)
    s = 1j * np.geomspace(1e-3, 10.0, 25)
    assert found.response(s) == pytest.approx(-0.75 * (10.0 * s + 1.0) * np.exp(-s) / (5.0 * s + 1.0), rel=1e-12)
    static = disturbance_feedforward(DisturbanceFeedforward(PATH, kind="static"), path, process)
    assert static.static_gain() == pytest.approx(-0.75, rel=1e-14)


@pytest.mark.parametrize("step", [0.5, 0.1])
def test_the_disturbance_is_cancelled_at_the_samples(step: float) -> None:
    """With exact models the output stays at rest, but for what a held effort leaves: less the shorter the sample."""
    law = Controller(sample_time=step, feedback=False, disturbance_feedforward=DisturbanceFeedforward(PATH))
    loop = sheet(law)
    (traces,) = run(loop, family_of(loop, 1))
    alone = 1.5 * (1.0 - np.exp(-np.maximum(traces.disturbance.t - 3.0, 0.0) / 5.0))
    assert np.abs(alone).max() > 1.4
    assert np.abs(traces.disturbance.y).max() < 0.06 * step
    assert traces.disturbance.y[-1] == pytest.approx(0.0, abs=1e-6)


def test_a_continuous_compensator_leaves_nothing() -> None:
    """Without samples the exact models cancel to the accuracy of the traces, 1e-3 of the step."""
    law = Controller(feedback=False, disturbance_feedforward=DisturbanceFeedforward(PATH))
    loop = sheet(law)
    (traces,) = run(loop, family_of(loop, 1))
    assert np.abs(traces.disturbance.y).max() < 1e-3


def test_perfect_inversion_is_the_filter() -> None:
    """The output of an exact model is the filter's step response behind the dead time, which nothing can undo."""
    law = Controller(feedback=False, feedforward=Feedforward("inverse", filter_time=4.0))
    loop = sheet(law)
    (traces,) = run(loop, family_of(loop, 1))
    expected = 1.0 - np.exp(-np.maximum(traces.reference.t - 2.0, 0.0) / 4.0)
    assert traces.reference.y == pytest.approx(expected, abs=1e-3)


@pytest.mark.parametrize("drift", [10.0, 25.0])
def test_a_drifted_gain_leaves_its_drift(drift: float) -> None:
    """y(end)/r = G(0)/G0(0): feedforward alone pays for every per cent of drift with a per cent of error."""
    gain = PlantParameter("gain", 2.0, spread=spread_percent(2.0, drift))
    plant = ExpressionPlant("gain exp(-2 s)/(10 s + 1)", (gain,))
    law = Controller(sample_time=0.5, feedback=False, feedforward=Feedforward("inverse", filter_time=4.0))
    found = assess(sheet(law, plant))
    errors = {member.name: member.measures["steady_state_error"] or 0.0 for member in found.members}
    assert errors["nominal"] == pytest.approx(0.0, abs=1e-9)
    assert max(errors.values()) == pytest.approx(drift, rel=1e-9)
    assert min(errors.values()) == pytest.approx(-drift, rel=1e-9)
    assert found.verdict == "met"


def test_feedback_beside_it_takes_the_drift_away() -> None:
    """The same plants with an integral: no error is left, whatever the drift."""
    gain = PlantParameter("gain", 2.0, spread=spread_percent(2.0, 25.0))
    plant = ExpressionPlant("gain exp(-2 s)/(10 s + 1)", (gain,))
    law = Controller(sample_time=0.5, gain_1=1.0, gain_2=0.1, feedforward=Feedforward("inverse", filter_time=4.0))
    found = assess(replace(sheet(law, plant), trial=Trial(400.0, reference=1.0)))
    for member in found.members:
        assert member.measures["steady_state_error"] == pytest.approx(0.0, abs=1e-9)
