"""The response over frequency of a family, on frequencies that show everything."""

from dataclasses import replace
from math import pi

import control
import numpy as np
import pytest

from tests.simulate import invented
from tuner.model.controller import Controller
from tuner.model.family import family_of
from tuner.model.sheet import Trial
from tuner.simulate.curves import FrequencyCurves, frequency_curves
from tuner.simulate.frequency import loop_response
from tuner.simulate.loop import loops_of
from tuner.simulate.margins import margins
from tuner.simulate.poles import family_poles


def curves_of(sheet: object, size: int = 3) -> FrequencyCurves:
    """Return the curves of a sheet with a family of some plants."""
    loops = loops_of(sheet, family_of(sheet, size))  # type: ignore[arg-type] # a sheet
    poles = family_poles(loops)
    return frequency_curves(loops, poles[0].values, margins(loops[:1], [poles[0].values])[0])


def test_every_member_has_its_own_loop_gain() -> None:
    """Each row is what the loop's own response is at the same frequencies, up to half the sampling frequency."""
    sheet = invented.heater()
    found = curves_of(sheet)
    loops = loops_of(sheet, family_of(sheet, 3))
    assert found.gain.shape == (3, len(found.w))
    for row, loop in zip(found.gain, loops, strict=True):
        assert row == pytest.approx(loop_response(loop, found.w), rel=1e-9)
    assert found.nyquist == pytest.approx(2.0 * pi)
    assert found.w[-1] <= found.nyquist * (1.0 + 1e-12)


def test_a_continuous_loop_agrees_with_python_control() -> None:
    """L = 2 (1 + 1/(3 s)) / ((s + 1)(0.2 s + 1)), by an independent library."""
    controller = Controller(gain_1=2.0, gain_2=2.0 / 3.0)
    sheet = invented.sheet("1/((s + 1)(0.2 s + 1))", controller, Trial(10.0))
    found = curves_of(sheet, 1)
    s = control.tf("s")
    expected = control.frequency_response(2.0 * (1.0 + 1.0 / (3.0 * s)) / ((s + 1.0) * (0.2 * s + 1.0)), found.w)
    assert found.gain[0] == pytest.approx(np.squeeze(expected.frdata), rel=1e-9)
    assert found.sensitivity()[0] == pytest.approx(1.0 / (1.0 + np.squeeze(expected.frdata)), rel=1e-9)


def test_the_grid_holds_the_margins() -> None:
    """The largest sensitivity on the grid is the peak itself, so that curve and mark agree."""
    sheet = invented.heater()
    loop = loops_of(sheet, family_of(sheet, 1))[0]
    poles = family_poles([loop])[0].values
    known = margins([loop], [poles])[0]
    found = curves_of(sheet, 1)
    assert np.abs(found.sensitivity()[0]).max() == pytest.approx(known.max_sensitivity, rel=1e-6)
    assert np.isclose(found.w, known.gain_margin_at or 0.0).any()


def test_an_open_loop_has_no_curves() -> None:
    """Without feedback there is no loop gain."""
    sheet = invented.heater()
    sheet = replace(sheet, controller=replace(sheet.controller, feedback=False))
    loops = loops_of(sheet, family_of(sheet, 2))
    assert frequency_curves(loops, family_poles(loops)[0].values, None).w.size == 0
