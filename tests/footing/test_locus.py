"""Crossings of the border: where, how many poles, and at which frequency."""

from math import inf

import numpy as np
import pytest

from tuner.footing.chains import chains_of
from tuner.footing.locus import crossings
from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.plant import ExpressionPlant
from tuner.model.sheet import Sheet, Trial

WHOLE = (1e-9, inf)


def found(expression: str, controller: Controller, name: str = "kp") -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Return gains, changes and frequencies of the crossings, rising."""
    sheet = Sheet(Loop("known"), ExpressionPlant(expression), controller, Trial(20.0))
    (chains,) = chains_of(sheet, 1)
    _, q, change, w = crossings(controller, name, chains, WHOLE)
    order = np.argsort(q)
    return q[order], change[order], w[order]


def test_a_pair_leaves_at_the_ultimate_gain() -> None:
    """1/(s + 1)^3 at 8, with sqrt(3) rad per time unit; both poles together."""
    q, change, w = found("1/(s + 1)^3", Controller(gain_1=1.0))
    assert q == pytest.approx([8.0])
    assert change.tolist() == [2]
    assert w == pytest.approx([3.0**0.5])


def test_a_real_pole_comes_back_at_the_least_gain() -> None:
    """1/(s - 1) with kp: the pole at 1 - kp is stable above 1."""
    q, change, _ = found("1/(s - 1)", Controller(gain_1=2.0))
    assert q == pytest.approx([1.0])
    assert change.tolist() == [-1]


def test_a_real_pole_of_a_sampled_loop_leaves_at_minus_one() -> None:
    """1/s under the hold of 0.2: at a gain of 10."""
    q, change, w = found("1/s", Controller(sample_time=0.2, gain_1=1.0))
    assert q == pytest.approx([10.0], rel=1e-6)
    assert change.tolist() == [1]
    assert w == pytest.approx([np.pi / 0.2], rel=1e-3)


def test_dead_time_sends_pair_after_pair() -> None:
    """exp(-s)/s crosses at (pi/2 + 2 pi k), each time with another pair."""
    q, change, _ = found("exp(-s)/s", Controller(gain_1=0.5))
    assert q[:3] == pytest.approx([np.pi / 2.0, np.pi * 2.5, np.pi * 4.5])
    assert set(change[:3].tolist()) == {2}
