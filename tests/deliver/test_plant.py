"""The sampled plant of the proof."""

import numpy as np
import pytest

from tests.deliver.samples import FULL
from tuner.deliver.plant import nominal_plant


def test_step_response_is_the_exact_one() -> None:
    """Actuator, plant with dead time, and sensor: the samples lie on the partial fractions of the three lags."""
    step = nominal_plant(FULL)()
    found = [step(1.0) for _ in range(100)]
    t = np.maximum(0.5 * np.arange(1, 101) - 1.3, 0.0)
    lags = np.array([12.0, 0.8, 0.4])
    weights = [lag**2 / np.prod([lag - other for other in lags if other != lag]) for lag in lags]
    expected = 0.9 * (1.0 - sum(w * np.exp(-t / lag) for w, lag in zip(weights, lags, strict=True)))
    assert found == pytest.approx(list(expected), abs=1e-12)


def test_every_plant_starts_at_rest() -> None:
    """A plant made anew knows nothing of the one before."""
    make = nominal_plant(FULL)
    first, second = make(), make()
    once = [first(1.0) for _ in range(9)]
    assert [second(1.0) for _ in range(9)] == once
    assert second(0.0) != once[0]
