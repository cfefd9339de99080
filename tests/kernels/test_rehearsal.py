"""The loop that goes on, compiled: the bits of the kernel of the trial, in pieces, and of its own text."""

import numpy as np
import pytest

from tests.rehearse.loops import RICH, oven
from tuner.kernels.rehearsal import advance
from tuner.model.family import family_of
from tuner.rehearse import bench


@pytest.mark.parametrize("pieces", [(40,), (1,) * 40, (13, 27)])
def test_the_plain_text_gives_the_same_bits(pieces: tuple[int, ...], monkeypatch: pytest.MonkeyPatch) -> None:
    """Compiled or run by Python, in one go or in pieces."""
    made = oven(RICH)
    found = []
    for function in (advance, advance.py_func):  # type: ignore[attr-defined]  # given by numba
        monkeypatch.setattr(bench, "advance", function)
        one = bench.Bench(made, family_of(made, 1)[0])
        seen = [one.advance(np.full(n, 77.0), np.zeros(n), np.full(n, 4.0), 40.0) for n in pieces]
        found.append(np.concatenate(seen, axis=1))
    assert np.array_equal(found[0], found[1])
    assert found[0][2].any()
