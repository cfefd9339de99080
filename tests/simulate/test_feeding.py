"""Filters at the samples: exactly what they give to a signal that is held, and what a trial is fed."""

from dataclasses import replace

import numpy as np
import pytest
from scipy.linalg import expm

from tests.simulate.invented import sheet
from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, ReferenceFilter
from tuner.model.sheet import Actuator, Trial
from tuner.simulate.batch import nominal
from tuner.simulate.feeding import Digital, digital, fed, feeds_of
from tuner.simulate.linear import Linear, constant, from_zeros_poles
from tuner.simulate.traces import Array


def held_response(system: Linear, step: float, value: Array) -> Array:
    """Return the response to a held signal, by the exponential of the whole block matrix between all jumps."""
    order, out, x = system.order, [], np.zeros(system.order)
    block = np.zeros((order + 1, order + 1))
    block[:order, :order], block[:order, order] = system.a, system.b
    late = system.dead_time / step
    whole, rest = int(np.floor(late + 1e-9)), (late - np.floor(late + 1e-9)) * step

    def held(k: int) -> float:
        return float(value[k]) if k >= 0 else 0.0

    for k in range(len(value)):
        now = held(k - whole) if rest < 1e-9 else held(k - whole - 1)
        out.append(float(system.c @ x + system.d * now))
        for span, u in ((rest, held(k - whole - 1)), (step - rest, held(k - whole))):
            x = (expm(block * span) @ np.append(x, u))[:order]
    return np.array(out)


@pytest.mark.parametrize(("dead_time", "step"), [(0.0, 0.1), (0.3, 0.1), (0.25, 0.1), (0.31, 0.5)])
def test_the_sampled_step_response_is_the_continuous_one(dead_time: float, step: float) -> None:
    """(2 s + 3)/(s + 1) = 2 + 1/(s + 1): from each sample on, direct term included, dead time of any fraction."""
    system = from_zeros_poles((-1.5,), (-1.0,), 2.0, dead_time)
    late = np.arange(40) * step - dead_time
    expected = np.where(late > -1e-9, 3.0 - np.exp(-np.maximum(late, 0.0)), 0.0)
    assert digital(system, step).run(np.ones(40), 0.0) == pytest.approx(expected, abs=1e-12)


@pytest.mark.parametrize("seed", range(60))
def test_random_filters_of_any_signal(seed: int) -> None:
    """Up to six poles over three decades, pairs and repeated ones, up to as many zeros, dead time of any fraction."""
    random = np.random.default_rng(seed)
    poles: list[complex] = []
    for _ in range(int(random.integers(1, 4))):
        speed = 10.0 ** random.uniform(-2.0, 1.0)
        turn = random.choice([0.0, random.uniform(0.1, 1.4)])
        poles += [speed * complex(-np.cos(turn), np.sin(turn)), speed * complex(-np.cos(turn), -np.sin(turn))]
    zeros = [complex(-(10.0 ** random.uniform(-2.0, 1.0))) for _ in range(int(random.integers(0, len(poles) + 1)))]
    size = np.prod(np.abs(poles)) / np.prod(np.abs(zeros or [1.0]))
    step = float(10.0 ** random.uniform(-2.0, 0.0))
    late = float(random.choice([0.0, 3.0 * step, random.uniform(0.0, 4.0) * step]))
    system = from_zeros_poles(zeros, poles, float(size), late)
    value = np.cumsum(random.normal(size=300)) * 0.1 + 1.0
    expected = held_response(system, step, value)
    found = digital(system, step).run(value, 0.0)
    # The static gain is one, so what comes out is as large as the signal, or larger where the zeros are slow.
    assert found == pytest.approx(expected, rel=0.0, abs=1e-9 * max(np.abs(value).max(), np.abs(expected).max()))


def test_a_gain_needs_no_section() -> None:
    """Static feedforward is a number."""
    assert digital(constant(0.7), 0.5) == Digital(0.7)


def test_the_delay_of_a_gain() -> None:
    """A dead time between samples has passed at the next one."""
    assert digital(from_zeros_poles((), (), 2.0, 0.4), 0.25).run(np.ones(4), 0.0).tolist() == [0.0, 0.0, 2.0, 2.0]


def test_what_a_trial_is_fed() -> None:
    """The reference makes an effort and a filtered reference, the measured disturbance an effort in its own run."""
    law = Controller(
        sample_time=0.5,
        feedforward=Feedforward("static", gain=0.4),
        reference_filter=ReferenceFilter(2.0, 2),
        disturbance_feedforward=DisturbanceFeedforward("3/(4 s + 1)", kind="static", resting=7.0),
    )
    found = sheet("2/(5 s + 1)", law, Trial(10.0, reference=5.0, disturbance=2.0))
    given = fed(found, feeds_of(found, nominal(found), 0.5), 21)
    t = 0.5 * np.arange(21)
    assert given.effort[0] == pytest.approx(np.full(21, 2.0))
    assert given.effort[1] == pytest.approx(np.full(21, -3.0))
    assert given.asked[0] == pytest.approx(5.0 * (1.0 - np.exp(-t / 2.0) * (1.0 + t / 2.0)), abs=1e-12)
    assert not given.asked[1].any()


def test_without_filters_the_reference_is_asked_for_as_it_is() -> None:
    """No feedforward makes no effort."""
    found = sheet("2/(5 s + 1)", Controller(sample_time=0.5, gain_1=1.0), Trial(10.0, reference=5.0))
    given = fed(found, feeds_of(found, nominal(found), 0.5), 3)
    assert not given.effort.any()
    assert given.asked[0].tolist() == [5.0, 5.0, 5.0]


def test_the_actuator_is_part_of_what_is_inverted() -> None:
    """Its lag needs another lag of the filter; the inverse of both is what undoes them."""
    law = Controller(sample_time=0.1, feedforward=Feedforward("inverse", filter_time=0.5))
    plain = sheet("2/(5 s + 1)", law, Trial(10.0))
    lagging = replace(plain, actuator=Actuator(0.8))
    orders = [len(feeds_of(one, nominal(one), 0.1).reference.sections) for one in (plain, lagging)]  # type: ignore[union-attr]  # both have one
    assert orders == [1, 2]
