"""Closed-loop poles against an independent library, against long iteration of the law itself, and at the edges."""

from dataclasses import replace

import control
import numpy as np
import pytest

from tests.simulate import drawn
from tests.simulate.lone_law import AT_REST, State, constants_of, sample
from tuner.model.controller import Controller
from tuner.simulate.linear import Linear, from_zeros_poles
from tuner.simulate.loop import ContinuousLoop, Loop, SampledLoop, loops_around
from tuner.simulate.poles import Poles, closed_loop_poles, family_poles
from tuner.simulate.traces import ComplexArray


def poles_of(chain: Linear, controller: Controller) -> Poles:
    """Return the poles of a loop."""
    return closed_loop_poles(loops_around(controller, [chain])[0])


def matched(found: ComplexArray, expected: ComplexArray) -> float:
    """Return the largest distance from an expected pole to the nearest found, relative to its size or to one."""
    distance = np.abs(np.asarray(found)[:, None] - np.asarray(expected)[None, :]).min(0)
    return float(np.max(distance / np.maximum(np.abs(expected), 1.0), initial=0.0))


@pytest.mark.parametrize("seed", range(120))
def test_continuous_loops_against_python_control(seed: int) -> None:
    """The poles are those of python-control's `feedback` around the same state spaces, to 1e-6."""
    loop = drawn.loop(seed, sampled=False)
    chain, settings = loop.chain, replace(loop.controller, notch=None)
    loop = loops_around(settings, [chain])[0]
    gains, s = settings.parallel(), control.tf("s")
    law = gains.kp + gains.kd * s / (settings.filter_time * s + 1) if gains.kd else control.tf([gains.kp], [1.0])
    law = law + gains.ki / s if gains.ki else law
    law = law / (settings.measurement_filter * s + 1) if settings.measurement_filter else law
    led = settings.lead_lag
    law = law * (led.lead * s + 1) / (led.lag * s + 1) if led else law
    plant = control.ss(chain.a, chain.b[:, None], chain.c[None], chain.d)
    expected = control.feedback(control.series(plant, control.ss(law)), 1).poles()
    found = closed_loop_poles(loop)
    assert found.complete
    assert len(found.values) == len(expected)
    assert matched(found.values, expected) < 1e-6
    assert found.stable == bool(np.all(expected.real < 0.0))


@pytest.mark.parametrize("sampled", [False, True])
def test_loops_of_several_controllers_together(sampled: bool) -> None:
    """Have the poles that each has alone, also where their gains have equally many factors."""
    chain = from_zeros_poles((), (-1.0, -2.0, -5.0), 10.0)
    base = Controller(sample_time=0.1 if sampled else 0.0, gain_1=1.5, gain_2=0.8, gain_3=0.4, filter_time=0.2)
    laws = [base, replace(base, gain_1=0.0), replace(base, filter_time=0.01), replace(base, gain_2=60.0, gain_3=0.0)]
    laws += [replace(base, gain_2=0.0), replace(base, gain_1=90.0, filter_time=0.01)]
    loops = [loop for law in laws for loop in loops_around(law, [chain, replace(chain, b=2.0 * chain.b)])]
    together, alone = family_poles(loops), [closed_loop_poles(loop) for loop in loops]
    for one, other in zip(together, alone, strict=True):
        assert one.stable == other.stable
        assert matched(one.values, other.values) < 1e-9
    assert {one.stable for one in alone} == {False, True}


@pytest.mark.parametrize("seed", range(60))
def test_sampled_loops_against_python_control(seed: int) -> None:
    """Under proportional control the poles are those of `sample_system` and `feedback`, to 1e-6."""
    random = np.random.default_rng(seed)
    chain, step = drawn.plant(random, least_excess=1), float(10.0 ** random.uniform(-1.0, 0.3))
    held = control.sample_system(control.ss(chain.a, chain.b[:, None], chain.c[None], chain.d), step, method="zoh")
    gain = float(10.0 ** random.uniform(-1.0, 0.5))
    expected = control.feedback(held, control.ss([], [], [], gain, dt=step)).poles()
    found = poles_of(chain, Controller(gain_1=gain, sample_time=step))
    expected = expected[np.abs(expected) > 1e-6]
    assert matched(np.exp(found.values * step), expected) < 1e-6
    assert len(found.values) == len(expected)
    assert found.stable == bool(np.all(np.abs(expected) < 1.0))


def scaled(state: State, size: float) -> State:
    """Return a state of the law divided by a size: it is linear while nothing limits it."""
    *memories, mode, limited, fault = state
    one, two, three, four, five, six, seven, eight = (memory / size for memory in memories)
    return one, two, three, four, five, six, seven, eight, mode, limited, fault


def iterated_growth(loop: SampledLoop, samples: int) -> float:
    """Return by what factor a loop grows in each sample: the law itself, sample after sample, around the held chain."""
    settings, held = loop.controller, loop.held
    constants, step = constants_of(settings), settings.sample_time
    x, past = np.random.default_rng(1).normal(size=loop.chain.order), [0.0] * (held.steps + 2)
    state, sizes, scale = AT_REST, [], 0.0
    for _ in range(samples):
        state = sample(float(held.c @ x + held.d * past[held.steps]), state, constants)
        past = [state[0], *past[:-1]]
        x = x + held.growth @ x + held.old * past[held.steps + 1] + held.new * past[held.steps]
        size = float(np.abs(x).max()) + max(map(abs, past)) + 1e-300
        if size > 1e30 or size < 1e-30:
            x, past, state = x / size, [u / size for u in past], scaled(state, size)
            scale += np.log(size)
            size = 1.0
        sizes.append(scale + np.log(size))
    half = samples // 2
    # A line through all of the second half: what rings within a cycle evens out.
    return float(np.polyfit(np.arange(half, samples), sizes[half:], 1)[0]) / step


@pytest.mark.parametrize("seed", range(60))
def test_stability_is_what_the_law_does(seed: int) -> None:
    """Left to itself for 6,000 samples the loop of the law grows or dies as its rightmost pole says."""
    loop = drawn.loop(seed, sampled=True, dead_time=True)
    assert isinstance(loop, SampledLoop)
    found = closed_loop_poles(loop)
    if abs(found.growth) * loop.sample_time > 2e-3:
        assert (iterated_growth(loop, 6000) < 0.0) == found.stable
        assert iterated_growth(loop, 6000) == pytest.approx(found.growth, rel=0.05)


def test_equal_poles_under_a_small_gain_keep_their_digits() -> None:
    """(s+1)^8 under a gain k has poles at -1 + (-k)^(1/8) exactly, where plain eigenvalues are lost."""
    for gain in (1e-8, 1e-3, 1.0):
        expected = -1.0 + gain ** (1 / 8) * np.exp(1j * np.pi * (2 * np.arange(8) + 1) / 8)
        found = poles_of(from_zeros_poles([], [-1.0] * 8, 1.0), Controller(gain_1=gain))
        assert matched(found.values, expected) < 1e-9


def test_an_improper_loop() -> None:
    """An unfiltered derivative around a plant that answers at once: (1 + s)(s + 1) + (s + 2) = s^2 + 3 s + 3."""
    found = poles_of(from_zeros_poles([-1.0], [-2.0], 1.0), Controller(gain_1=1.0, gain_3=1.0))
    assert np.sort(found.values.real) == pytest.approx(np.sort(np.roots([1.0, 3.0, 3.0]).real))
    assert np.sort(np.abs(found.values.imag)) == pytest.approx(np.sort(np.abs(np.roots([1.0, 3.0, 3.0]).imag)))


def test_an_algebraic_loop_is_not_stable() -> None:
    """When the loop gain is -1 at infinite frequency there is no effort to speak of: not stable, and it says so."""
    found = poles_of(from_zeros_poles([1.0], [-1.0], -1.0), Controller(gain_1=1.0))
    assert not found.stable
    assert found.reason == "the loop gain is -1 at infinite frequency: the effort has no unique value"


@pytest.mark.parametrize("step", [0.0, 0.25])
def test_an_open_loop_has_the_poles_of_its_chain(step: float) -> None:
    """With no feedback, or no gains, the modes of actuator, plant and sensor remain, and nothing of the law."""
    chain = from_zeros_poles([-3.0], [-1.0, -2.0, 0.0], 1.0)
    for controller in (
        Controller(gain_1=1.0, gain_2=1.0, feedback=False, sample_time=step),
        Controller(sample_time=step),
    ):
        found = poles_of(chain, controller)
        assert found.values.tolist() == [0.0, -1.0, -2.0]
        assert (found.stable, found.count_unstable) == (False, 1)
    assert poles_of(from_zeros_poles([], [-1.0], 1.0), Controller(sample_time=step)).stable


@pytest.mark.parametrize("step", [0.0, 0.25])
def test_the_law_without_effect_leaves_no_pole(step: float) -> None:
    """Filter time and wind-up time without a derivative or an integral make no pole, and none at z = 1."""
    silent = Controller(gain_1=1.0, filter_time=2.0, windup_time=3.0, sample_time=step)
    found = poles_of(from_zeros_poles([], [-1.0], 1.0), silent)
    assert len(found.values) == 1
    assert found.stable


@pytest.mark.parametrize("step", [0.0, 0.1])
def test_a_hidden_integrator_is_not_stable(step: float) -> None:
    """A pole at the origin under a zero there is not seen in the loop gain, and yet drifts."""
    found = poles_of(from_zeros_poles([0.0], [0.0, -1.0], 1.0), Controller(gain_1=1.0, sample_time=step))
    assert (found.stable, found.count_unstable) == (False, 1)
    assert found.values[0] == pytest.approx(0.0, abs=1e-9)


def test_conjugates_are_exact() -> None:
    """Complex poles come in exact pairs, rightmost first."""
    for seed in range(30):
        values = closed_loop_poles(drawn.loop(seed, sampled=seed % 2 == 0, dead_time=True)).values
        assert np.all(np.diff(values.real) <= 0.0)
        lone = [v for v in values.tolist() if v.imag and v.conjugate() not in values]
        assert all(np.isclose(v.imag * drawn.loop(seed, sampled=True, dead_time=True).sample_time, np.pi) for v in lone)


def test_a_family_at_once_is_each_alone() -> None:
    """Loops of different delays, orders and sampling together have the poles of each."""
    loops: list[Loop] = [drawn.loop(seed, sampled=seed % 2 == 0, dead_time=True) for seed in range(40)]
    for loop, several in zip(loops, family_poles(loops), strict=True):
        alone = closed_loop_poles(loop)
        assert (several.stable, several.count_unstable) == (alone.stable, alone.count_unstable)
        assert several.growth == pytest.approx(alone.growth, rel=1e-9, abs=1e-12)


def test_a_chain_too_long_for_eigenvalues() -> None:
    """Beyond 150 samples of delay the poles that decide are those of the whole matrix, and stability is the same."""
    for gain, dead_time in ((0.8, 20.0), (1.02, 20.0), (3.0, 25.0)):
        long = from_zeros_poles([], [-1.0], 1.0, dead_time)
        found = poles_of(long, Controller(gain_1=gain, sample_time=0.1))
        count = round(dead_time / 0.1)
        characteristic = np.zeros(count + 2)
        characteristic[0], characteristic[1] = 1.0, -np.exp(-0.1)
        characteristic[-1] += gain * (1.0 - np.exp(-0.1))
        z = np.roots(characteristic).astype(complex)
        assert not found.complete
        assert found.count_unstable == int((np.abs(z) >= 1.0).sum())
        nearest = np.abs(np.exp(found.values * 0.1)[:, None] - z[None, :]).min(1)
        assert np.max(nearest) < 1e-9
        assert found.growth == pytest.approx(np.log(np.abs(z).max()) / 0.1, rel=1e-8)


def test_a_continuous_loop_with_dead_time_is_not_complete() -> None:
    """It has infinitely many poles; listed are all right of a line, at least to three times the rightmost."""
    found = poles_of(from_zeros_poles([], [-1.0], 1.0, 1.0), Controller(gain_1=0.5))
    assert isinstance(loops_around(Controller(gain_1=0.5), [from_zeros_poles([], [-1.0], 1.0, 1.0)])[0], ContinuousLoop)
    assert not found.complete
    assert found.known_from <= 3.0 * found.growth
    assert np.all(found.values.real > found.known_from)
