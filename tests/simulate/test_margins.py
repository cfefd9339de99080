"""Margins against an independent library, against stability itself, and at the edges."""

from dataclasses import replace
from math import inf, isinf, pi

import control
import numpy as np
import pytest

from tests.simulate import drawn
from tuner.model.controller import Controller
from tuner.simulate.frequency import at_end, at_zero, loop_response
from tuner.simulate.linear import Linear, from_zeros_poles
from tuner.simulate.loop import ContinuousLoop, Loop, SampledLoop, loops_around
from tuner.simulate.margins import Margins, margins
from tuner.simulate.poles import closed_loop_poles

STABLE = "a stable loop"


def loop_of(chain: Linear, controller: Controller | None = None) -> Loop:
    """Return a loop; unit gain unless told otherwise."""
    return loops_around(controller or Controller(gain_1=1.0), [chain])[0]


def margins_of(loop: Loop) -> Margins:
    """Return the margins of a loop that is stable."""
    poles = closed_loop_poles(loop)
    assert poles.stable, STABLE
    return margins([loop], [poles.values])[0]


def stable_loops(count: int, **kind: bool) -> list[int]:
    """Return the first seeds whose random loops are stable."""
    seeds = (seed for seed in range(10 * count) if closed_loop_poles(drawn.loop(seed, **kind)).stable)
    return [seed for seed, _ in zip(seeds, range(count), strict=False)]


def louder(loop: Loop, factor: float) -> Loop:
    """Return the same loop with all gains of the controller larger by a factor."""
    settings = loop.controller
    more = replace(
        settings, gain_1=settings.gain_1 * factor, gain_2=settings.gain_2 * factor, gain_3=settings.gain_3 * factor
    )
    return loops_around(more, [loop.chain])[0]


def later(loop: Loop, delay: float) -> Loop:
    """Return the same loop with more dead time."""
    return loops_around(loop.controller, [replace(loop.chain, dead_time=loop.chain.dead_time + delay)])[0]


def as_control(loop: ContinuousLoop) -> control.TransferFunction:
    """Return the loop gain as python-control has it: as many digits as its polynomials keep."""
    factors = loop.factors
    return control.zpk(factors.zeros, factors.poles, factors.gain)


@pytest.mark.parametrize("seed", stable_loops(120, sampled=False))
def test_continuous_loops_against_python_control(seed: int) -> None:
    """Smallest gain margin above one, phase margin and Ms are those among python-control's, to 1e-6."""
    loop = drawn.loop(seed, sampled=False)
    assert isinstance(loop, ContinuousLoop)
    found = margins_of(loop)
    gains, phases, distances, *_ = control.stability_margins(as_control(loop), returnall=True)
    above = [gain for gain in gains if gain > 1.0 + 1e-9]
    assert found.gain_margin == pytest.approx(min(above, default=inf), rel=1e-6)
    wrapped = [abs((phase + 180.0) % 360.0 - 180.0) for phase in phases]
    assert found.phase_margin == pytest.approx(min(wrapped, default=inf), rel=1e-6)
    # The library looks inside the frequency axis only, not at its ends.
    reached = [*(1.0 / distance for distance in distances), 1.0, 1.0 / abs(1.0 + at_zero(loop.factors))]
    assert found.max_sensitivity == pytest.approx(max(reached), rel=1e-6)


@pytest.mark.parametrize(
    "kind", [{"sampled": True}, {"sampled": True, "dead_time": True}, {"sampled": False, "dead_time": True}]
)
def test_no_frequency_is_worse(kind: dict[str, bool]) -> None:
    """On a grid of 40,000 frequencies nothing is found beyond the peaks, nor a crossing inside the margins."""
    for seed in stable_loops(40, **kind):
        loop = drawn.loop(seed, **kind)
        found = margins_of(loop)
        top = pi / loop.sample_time if loop.sample_time else 100.0
        w = np.unique(np.concatenate((np.geomspace(1e-4, top, 20_000), np.linspace(1e-4, top, 20_000))))
        gain = loop_response(loop, w)
        assert np.max(np.abs(1.0 / (1.0 + gain))) <= found.max_sensitivity * (1.0 + 1e-9)
        assert np.max(np.abs(gain / (1.0 + gain))) <= found.max_complementary * (1.0 + 1e-9)
        angle = np.angle(-gain)
        through = (angle[:-1] * angle[1:] < 0.0) & (np.abs(angle[:-1] - angle[1:]) < 1.0)
        sizes = np.minimum(np.abs(gain[:-1]), np.abs(gain[1:]))[through]
        assert not np.any((sizes < 1.0) & (sizes > 1.001 / found.gain_margin))
        crossing = (np.abs(gain[:-1]) > 1.0) != (np.abs(gain[1:]) > 1.0)
        assert not np.any(np.degrees(np.abs(angle[:-1][crossing])) < found.phase_margin - 1.0)


@pytest.mark.parametrize("kind", [{"sampled": True}, {"sampled": True, "dead_time": True},
                                  {"sampled": False}, {"sampled": False, "dead_time": True}])  # fmt: skip
def test_the_gain_margin_is_where_stability_ends(kind: dict[str, bool]) -> None:
    """A millionth below the margin the closed-loop poles say stable, a millionth above they do not."""
    for seed in stable_loops(25, **kind):
        loop = drawn.loop(seed, **kind)
        margin = margins_of(loop).gain_margin
        if not isinf(margin):
            assert closed_loop_poles(louder(loop, margin * (1.0 - 1e-6))).growth < 0.0
            assert closed_loop_poles(louder(loop, margin * (1.0 + 1e-6))).growth > 0.0
        else:
            assert closed_loop_poles(louder(loop, 50.0)).stable


def test_the_delay_margin_is_where_stability_ends() -> None:
    """A millionth less extra dead time than the margin is stable, a millionth more is not: continuous loops."""
    for seed in stable_loops(30, sampled=False):
        loop = drawn.loop(seed, sampled=False)
        margin = margins_of(loop).delay_margin
        if 0.0 < margin < inf:
            assert closed_loop_poles(later(loop, margin * (1.0 - 1e-6))).stable
            assert not closed_loop_poles(later(loop, margin * (1.0 + 1e-6))).stable


def test_a_family_at_once_is_each_alone() -> None:
    """Loops of different shapes, delays and sampling together have the margins of each."""
    loops = [drawn.loop(seed, sampled=seed % 2 == 0, dead_time=True) for seed in range(40)]
    found = [closed_loop_poles(loop) for loop in loops]
    stable = [(loop, poles.values) for loop, poles in zip(loops, found, strict=True) if poles.stable]
    together = margins([loop for loop, _ in stable], [values for _, values in stable])
    for (loop, values), several in zip(stable, together, strict=True):
        alone = margins([loop], [values])[0]
        assert several.gain_margin == pytest.approx(alone.gain_margin, rel=1e-9)
        assert several.phase_margin == pytest.approx(alone.phase_margin, rel=1e-9)
        assert several.max_sensitivity == pytest.approx(alone.max_sensitivity, rel=1e-9)


@pytest.mark.parametrize("zeta", [1e-3, 1e-6])
def test_a_resonance_thinner_than_the_grid(zeta: float) -> None:
    """A resonance of any thinness whose gain passes one is seen: crossings on both flanks, and the peak of S."""
    pair = [complex(-zeta, np.sqrt(1.0 - zeta**2)), complex(-zeta, -np.sqrt(1.0 - zeta**2))]
    found = margins_of(loop_of(from_zeros_poles([0.0], pair, 4.0 * zeta)))
    assert found.phase_margin == pytest.approx(120.0, rel=1e-6)
    assert found.phase_margin_at is not None
    assert abs(found.phase_margin_at - 1.0) == pytest.approx(np.sqrt(3.0) * zeta, rel=0.01)
    assert found.max_complementary == pytest.approx(2.0 / 3.0, rel=1e-9)
    crossed = margins_of(loop_of(from_zeros_poles([0.0, -0.1], [*pair, -3.0], -4.0 * zeta)))
    assert crossed.max_sensitivity > 1.5


def test_a_conditionally_stable_loop() -> None:
    """The margin looks up, though stability also ends below: 10 (s+1)^2/s^3 is stable for gains above one twentieth."""
    chain = from_zeros_poles([-1.0, -1.0], [0.0, 0.0, 0.0], 10.0)
    found = margins_of(loop_of(chain))
    assert isinf(found.gain_margin)
    fast = from_zeros_poles([-1.0, -1.0], [0.0, 0.0, 0.0, -40.0, -40.0], 10.0 * 1600.0)
    both = margins_of(loop_of(fast))
    assert both.gain_margin > 1.0
    assert not closed_loop_poles(louder(loop_of(fast), both.gain_margin * 1.001)).stable
    assert not closed_loop_poles(louder(loop_of(fast), 0.04)).stable


def test_two_crossings_within_a_step_of_the_grid() -> None:
    """A gain that only just passes one, between two points of any grid, is found by its turning point."""
    for over in (1e-3, 1e-6, 1e-9):
        chain = from_zeros_poles([0.0], [-1.0, -1.0], 2.0 * (1.0 + over))
        found = margins_of(loop_of(chain))
        assert found.phase_margin == pytest.approx(180.0, abs=3.0 * np.degrees(np.sqrt(over)))
        assert found.phase_margin_at == pytest.approx(1.0, abs=3.0 * np.sqrt(over))
    assert isinf(margins_of(loop_of(from_zeros_poles([0.0], [-1.0, -1.0], 2.0 * (1.0 - 1e-9)))).phase_margin)


def test_dead_time_long_against_everything() -> None:
    """A loop whose phase turns thousands of times below crossover keeps the margins of the closed form."""
    for dead_time in (1.0, 1e3):
        chain = from_zeros_poles([], [-1.0], 0.8, dead_time)
        found = margins_of(loop_of(chain))
        w = np.linspace(1e-6, 3.5 * pi / dead_time, 400_001)
        gain = loop_response(loop_of(chain), w)
        assert found.max_sensitivity == pytest.approx(np.max(np.abs(1.0 / (1.0 + gain))), rel=1e-6)
    resonant = from_zeros_poles([], [-0.01 + 5j, -0.01 - 5j, -0.1], 0.05, 40.0)
    loop = loop_of(resonant)
    w = np.linspace(4.5, 5.5, 400_001)
    top = np.max(np.abs(1.0 / (1.0 + loop_response(loop, w))))
    assert margins_of(loop).max_sensitivity >= top
    assert margins_of(loop).max_sensitivity == pytest.approx(top, rel=1e-5)


def test_a_loop_with_static_gain_only() -> None:
    """Without an integral the ends count: S and T at w = 0, and a margin there for a falling plant."""
    found = margins_of(loop_of(from_zeros_poles([], [-1.0], -0.5)))
    assert (found.gain_margin, found.gain_margin_at) == (2.0, 0.0)
    assert (found.max_sensitivity, found.max_sensitivity_at) == (2.0, 0.0)
    assert (found.max_complementary, found.max_complementary_at) == (1.0, 0.0)
    assert found.bandwidth is None


def test_gain_above_one_everywhere() -> None:
    """A loop that never falls below one tolerates no dead time, and has no phase margin to speak of."""
    found = margins_of(loop_of(from_zeros_poles([-5.0], [-1.0], 2.0)))
    assert isinf(found.phase_margin)
    assert (found.delay_margin, found.delay_margin_at) == (0.0, inf)


def test_gain_above_one_at_nyquist() -> None:
    """A loop that rings near the Nyquist frequency tolerates less than a sample more of dead time."""
    ringing = from_zeros_poles([], [-0.95 + 10.5j, -0.95 - 10.5j], -78.0)
    sampled = loop_of(ringing, Controller(gain_1=1.0, sample_time=0.3))
    assert isinstance(sampled, SampledLoop)
    assert at_end(sampled.factors) > 1.0
    assert margins_of(sampled).delay_margin == 0.3
    assert not closed_loop_poles(later(sampled, 0.3)).stable


@pytest.mark.parametrize("gain", [0.3, 1.0, 4.0])
def test_bandwidth_in_closed_form(gain: float) -> None:
    """k/s: |S| = w/sqrt(w^2 + k^2) reaches .707 at k .707/sqrt(1 - .707^2)."""
    found = margins_of(loop_of(from_zeros_poles([], [0.0], gain)))
    assert found.bandwidth == pytest.approx(gain * 0.707 / np.sqrt(1.0 - 0.707**2), rel=1e-12)


def test_no_bandwidth() -> None:
    """A loop whose sensitivity starts above .707 and stays there has none."""
    assert margins_of(loop_of(from_zeros_poles([], [-1.0], 0.2))).bandwidth is None
