"""The loop that goes on: piece by piece what the trial does in one go, and what changes carry over."""

from dataclasses import replace

import numpy as np
import pytest

from tests.rehearse.loops import LAW, RICH, oven
from tuner.kernels.loop import Array
from tuner.law import pid
from tuner.model.controller import Controller
from tuner.model.family import family_of
from tuner.rehearse.bench import Bench
from tuner.simulate.batch import simulate
from tuner.simulate.grid import Grid

COUNT = 300


def bench(law: Controller = LAW) -> Bench:
    """Return a loop at rest."""
    made = oven(law)
    return Bench(made, family_of(made, 1)[0])


def going(one: Bench, pieces: tuple[int, ...], reference: float, disturbance: float = 0.0) -> Array:
    """Let it go on, piece by piece, and return what was seen."""
    seen = [one.advance(np.full(n, reference), np.zeros(n), np.full(n, disturbance), 40.0) for n in pieces]
    return np.concatenate(seen, axis=1)


@pytest.mark.parametrize("law", [LAW, RICH], ids=["plain", "rich"])
@pytest.mark.parametrize("which", [0, 1])
def test_it_is_the_trial_to_the_bit(law: Controller, which: int) -> None:
    """Reference and disturbance run, in pieces of any length, through the rows of the very same kernel text."""
    made = oven(law)
    exact = simulate(made, family_of(made, 1), Grid(0.5, 1, COUNT))
    step, push = ((made.trial.reference, 0.0), (0.0, made.trial.disturbance))[which]
    seen = going(bench(law), (1, 0, 7, 200, COUNT - 208), 72.0 + step, push)
    assert np.array_equal(seen[0], exact.y[0, which])
    assert np.array_equal(seen[2], exact.u[0, which])
    assert np.array_equal(seen[3] > 0.0, exact.limited[0, which])


def test_other_gains_take_hold_and_the_filters_go_on() -> None:
    """A bench retuned to what it has goes on as one that was left alone, its filters where they were."""
    one, other = bench(RICH), bench(RICH)
    going(one, (100,), 77.0)
    going(other, (100,), 77.0)
    one.retune(oven(RICH), 77.0, 3.0)
    assert np.array_equal(going(one, (50,), 77.0), going(other, (50,), 77.0))


def test_a_new_filter_begins_settled() -> None:
    """Feedforward of a reference that has been there for long adds its steady effort at once and no transient."""
    one = bench(replace(LAW, sample_time=0.5, feedback=False))
    going(one, (50,), 77.0)
    one.retune(oven(replace(RICH, feedback=False)), 77.0, 3.0)
    effort = going(one, (200,), 77.0)[2]
    assert effort[-1] == pytest.approx(5.0 / 0.9, rel=1e-9)
    steady = effort[np.abs(effort) > 5.0 / 0.9 - 1e-9]
    assert steady.max() == pytest.approx(5.0 / 0.9, rel=1e-9)


def test_a_longer_dead_time_remembers_the_past() -> None:
    """The effort that is on its way arrives later, and none is lost or made up."""
    one = bench(replace(LAW, feedback=False))
    one.set_mode(pid.MANUAL)
    n = 60
    one.advance(np.full(n, 72.0), np.zeros(n), np.zeros(n), 60.0)
    before = one.output()
    member = one.member
    one.change_plant(replace(member, values=member.values | {"delay": 40.2}))
    assert one.output() == before
    after = one.advance(np.full(400, 72.0), np.zeros(400), np.zeros(400), 60.0)[0]
    assert after[-1] == pytest.approx(0.9 * 20.0, rel=0.01)


def test_another_gain_lets_the_output_stay() -> None:
    """The output moves to where the new plant settles, from where it is."""
    one = bench(replace(LAW, feedback=False))
    one.set_mode(pid.MANUAL)
    seen = one.advance(np.full(900, 72.0), np.zeros(900), np.zeros(900), 50.0)[0]
    one.change_plant(replace(one.member, values=one.member.values | {"gain": 1.8}))
    after = one.advance(np.full(900, 72.0), np.zeros(900), np.zeros(900), 50.0)[0]
    assert after[0] == pytest.approx(seen[-1], rel=1e-6)
    assert after[-1] == pytest.approx(18.0, rel=1e-3)


def test_a_loop_that_runs_away_stands_still() -> None:
    """Without limits and far too much gain: fewer samples than asked, all of them finite, until it is restarted."""
    made = oven(replace(LAW, gain_1=4000.0), limited=False)
    one = Bench(made, family_of(made, 1)[0])
    n = 5000
    seen = one.advance(np.full(n, 77.0), np.zeros(n), np.zeros(n), 40.0)
    assert one.ran_away
    assert seen.shape[1] < n
    assert np.isfinite(seen).all()
    one.restart()
    assert (one.ran_away, one.output(), one.effort) == (False, 0.0, 0.0)
