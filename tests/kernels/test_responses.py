"""Bounds of margins hold the margins that Newton's method finds."""

import numpy as np
import pytest

from tests.footing.random_loops import sheet
from tuner.footing.chains import chains_of
from tuner.kernels import responses
from tuner.model.family import family_of
from tuner.simulate.loop import loops_of
from tuner.simulate.margins import margins
from tuner.simulate.poles import family_poles


@pytest.mark.parametrize("continuous", [False, True])
def test_bounds_hold_the_margins(continuous: bool) -> None:
    """For stable random loops, dead time included; one without a bandwidth has bounds at minus infinity."""
    looked_at = 0
    for seed in range(300, 420):
        found = sheet(seed, continuous=continuous)
        loops = loops_of(found, family_of(found, 1))
        poles = family_poles(loops)
        if not poles[0].stable:
            continue
        exact = margins(loops, [poles[0].values])[0]
        (chains,) = chains_of(found, 1)
        law = found.controller.parallel()
        gains = np.array([law.kp, law.ki, law.kd, found.controller.filter_time])
        derivative = np.zeros(chains.w.shape[1], dtype=complex)
        responses.lead(chains.at.x[0], chains.at.lead[0], found.controller.filter_time, derivative)
        low, high, work = np.zeros(6), np.zeros(6), np.zeros((2, chains.w.shape[1]))
        responses.bound(
            chains.w[0], chains.at.integral[0], derivative, chains.gain[0], gains, np.ones(6, dtype=np.uint8), work,
            low, high,
        )  # fmt: skip
        looked_at += 1
        for index, name in enumerate(responses.MEASURES):
            value = getattr(exact, name)
            value = -np.inf if value is None else value
            if value > 1e6 and low[index] > 1e6:
                continue  # so large a margin is none, on whatever far frequency it is found
            assert low[index] * (1.0 - 1e-9) <= value <= high[index] * (1.0 + 1e-9), (seed, name)
    assert looked_at >= 40
