"""Filters run along a signal: the compiled loop against the plain functions, bit for bit."""

from collections import deque

import numpy as np
import pytest

from tuner.kernels.filters import filtered
from tuner.law.feedforward import scaled, section


@pytest.mark.parametrize("count", [0, 1, 3])
@pytest.mark.parametrize("delay", [0, 1, 7])
def test_the_kernel_is_the_plain_functions(count: int, delay: int) -> None:
    """Gain, delay and every section in turn, in two pieces; before the delay is over the signal is at rest."""
    random = np.random.default_rng(10 * count + delay)
    value, sections = 20.0 + random.normal(size=50), random.uniform(-0.4, 0.4, (count, 5))
    out = np.empty(50)
    kept, past, place = np.zeros((count, 2)), np.full(delay, 20.0), np.zeros(1, dtype=np.int64)
    for part in (slice(0, 13), slice(13, 50)):
        filtered(value[part], 20.0, 1.7, sections, kept, past, place, out[part])
    late, memories = deque([20.0] * delay), [(0.0, 0.0)] * count
    for found, given in zip(out.tolist(), value.tolist(), strict=True):
        late.append(given)
        passed = scaled(late.popleft(), 20.0, 1.7)
        for at, constants in enumerate(sections.tolist()):
            passed, *memory = section(passed, *memories[at], *constants)
            memories[at] = (memory[0], memory[1])
        assert found == passed
