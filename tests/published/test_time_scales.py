"""The same loop in microseconds or in weeks: with every time multiplied by a factor, the answer scales by algebra.

All curves and numbers agree to 1e-9 of themselves; what remains is rounding, for powers of ten are not exact in binary.
"""

from math import isinf

import numpy as np
import pytest

from tests.published.drawn import continuous_sheet, sampled_sheet, scaled
from tests.published.test_random_loops import RUNAWAY, judged
from tuner.judge.assessment import MemberResult

TIMES = ("peak_time", "rise_time", "settling_time", "disturbance_recovery", "iae_reference", "iae_disturbance",
         "delay_margin")  # fmt: skip
RATES = ("bandwidth",)
ROUNDING = 1e-9
FACTORS = (1e-6, 1e-3, 1e3, 1e6)


@pytest.mark.parametrize("factor", FACTORS)
@pytest.mark.parametrize("seed", range(21))
def test_a_sampled_loop_in_another_unit_of_time(seed: int, factor: float) -> None:
    """A sampled loop, of every kind: curves, poles and every measure."""
    sheet, other = sampled_sheet(seed), scaled(sampled_sheet(seed), factor)
    found, again = judged(sheet), judged(other)
    # In z, for the logarithm of a z next to 0 is good to fewer digits.
    z, z_again = np.exp(found.poles * sheet.controller.sample_time), np.exp(again.poles * other.controller.sample_time)
    assert np.abs(z - z_again).max() < ROUNDING
    _same(found, again, factor)


@pytest.mark.parametrize("factor", FACTORS)
@pytest.mark.parametrize("seed", range(12))
def test_a_continuous_loop_in_another_unit_of_time(seed: int, factor: float) -> None:
    """A continuous loop, half of them with dead time: curves, poles and every measure."""
    sheet = continuous_sheet(seed, dead_time=seed % 2 == 1)
    found, again = judged(sheet), judged(scaled(sheet, factor))
    assert np.abs(found.poles - again.poles * factor).max() < ROUNDING * np.abs(found.poles).max()
    _same(found, again, factor)


def _same(plain: MemberResult, other: MemberResult, factor: float) -> None:
    assert plain.stable == other.stable
    for one, two in (
        (plain.traces.reference, other.traces.reference),
        (plain.traces.disturbance, other.traces.disturbance),
    ):
        assert two.y.size == one.y.size
        moved = np.maximum.accumulate(np.maximum(np.abs(one.y), 1.0))
        assert (np.abs(one.y - two.y) / moved)[moved < RUNAWAY].max() < ROUNDING
    for name, value in plain.measures.items():
        scale = factor if name in TIMES else 1.0 / factor if name in RATES else 1.0
        found = other.measures[name]
        if value is None or isinf(value):
            assert found == value, name
        else:
            assert found is not None, name
            assert found / scale == pytest.approx(value, rel=ROUNDING, abs=ROUNDING), name
