"""The curves of the frequency page against `control.frequency_response`, on random loops of every kind.

python-control evaluates state spaces put together block by block from the sheet's numbers, dead time of a sampled loop
as states, that of a continuous one multiplied by its exact response exp(-j w delay). Ours are factors. Both are exact
but for rounding: they agree to 1e-7 of themselves, or of a millionth where the loop gain vanishes.
"""

from collections.abc import Callable

import control
import numpy as np
import pytest

from tests.published.continuous_by_control import cut
from tests.published.drawn import continuous_sheet, sampled_sheet
from tests.published.sampled_by_control import Array, Block, ComplexArray, law_in_z, process_in_z
from tuner.model.family import family_of
from tuner.model.sheet import Sheet
from tuner.simulate.curves import FrequencyCurves, frequency_curves
from tuner.simulate.loop import loops_of
from tuner.simulate.margins import margins
from tuner.simulate.poles import family_poles

SAMPLED = range(70)
CONTINUOUS = range(36)
AGREES = 1e-7


def curves_of(sheet: Sheet) -> FrequencyCurves:
    """Return the curves of the nominal plant."""
    loops = loops_of(sheet, family_of(sheet, 1))
    poles = family_poles(loops)[0]
    known = margins(loops, [poles.values])[0] if poles.stable else None
    return frequency_curves(loops, poles.values, [known])


def response(system: Block, w: Array) -> ComplexArray:
    """Return the response of a system of python-control, which has no types."""
    return np.asarray(np.squeeze(control.frequency_response(system, w).frdata)).reshape(w.shape)


def agree(found: FrequencyCurves, expected: Callable[[Array], ComplexArray]) -> None:
    """Hold loop gain, decibels, phase and both sensitivities to a loop gain."""
    w = found.w[found.w < found.nyquist * (1.0 - 1e-9)]
    gain, ours = expected(w), found.gain[0, : len(w)]
    assert len(w) > 100
    assert ours == pytest.approx(gain, rel=AGREES, abs=AGREES * 1e-6)
    large = np.abs(gain) > 1e-6
    assert found.decibels[0, : len(w)][large] == pytest.approx(control.mag2db(np.abs(gain[large])), abs=1e-5)
    turned = np.exp(1j * np.radians(found.phase[0, : len(w)][large]))
    assert turned == pytest.approx(gain[large] / np.abs(gain[large]), abs=1e-6)
    # Near the critical point the sensitivity tells apart what the loop gain does not.
    s = np.abs(1.0 / (1.0 + gain))
    off = AGREES * (1.0 + s) * (1.0 + np.abs(gain))
    assert (np.abs(found.sensitivity[0, : len(w)] / s - 1.0) < off).all()
    assert (np.abs(found.complementary[0, : len(w)] - s * np.abs(gain)) <= off * (1.0 + s * np.abs(gain))).all()


@pytest.mark.parametrize("seed", SAMPLED)
def test_a_sampled_loop(seed: int) -> None:
    """Up to half the sampling frequency, dead time with any fraction of a sample, computing delay and notch."""
    sheet = sampled_sheet(seed)
    found = curves_of(sheet)
    law, process = law_in_z(sheet.controller), process_in_z(sheet)
    if not found.w.size:
        assert not np.abs(response(law[0, 1], np.array([1e-3]))).any()
        return
    agree(found, lambda w: -response(process[1, 0], w) * response(law[0, 1], w))


@pytest.mark.parametrize("dead_time", [False, True])
@pytest.mark.parametrize("seed", CONTINUOUS)
def test_a_continuous_loop(seed: int, dead_time: bool) -> None:
    """Dead time is exact: no approximation of it is left in the curve."""
    sheet = continuous_sheet(seed, dead_time=dead_time)
    found, halves = curves_of(sheet), cut(sheet)
    if not found.w.size:
        assert not np.abs(response(halves.law[0, 1], np.array([1e-3]))).any()
        return

    def gain(w: Array) -> ComplexArray:
        rational = response(halves.plant[1, 0], w) * response(halves.law[0, 1], w)
        return np.asarray(-rational * np.exp(-1j * w * halves.dead_time))

    agree(found, gain)
