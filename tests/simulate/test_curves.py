"""The response over frequency of a family, on frequencies that show everything."""

from collections.abc import Callable
from dataclasses import replace
from math import pi

import control
import numpy as np
import pytest

from tests.simulate import invented
from tuner.model.controller import Controller
from tuner.model.family import family_of
from tuner.model.sheet import Sheet, Trial
from tuner.simulate.curves import FrequencyCurves, decibels, frequency_curves, phases
from tuner.simulate.frequency import loop_response
from tuner.simulate.loop import loops_of
from tuner.simulate.margins import margins
from tuner.simulate.poles import family_poles
from tuner.simulate.traces import ComplexArray


def curves_of(sheet: Sheet, size: int = 3) -> FrequencyCurves:
    """Return the curves of a sheet with a family of some plants."""
    members = family_of(sheet, size)
    loops = loops_of(sheet, members)
    poles = [one.values for one in family_poles(loops)]
    return frequency_curves(loops, poles[0], margins(loops, poles), tuple(member.name for member in members))


def test_every_member_has_its_own_loop_gain() -> None:
    """Each row is what the loop's own response is at the same frequencies, up to half the sampling frequency."""
    sheet = invented.heater()
    found = curves_of(sheet)
    loops = loops_of(sheet, family_of(sheet, 3))
    assert found.gain.shape == (3, len(found.w))
    for row, loop in zip(found.gain, loops, strict=True):
        assert row == pytest.approx(loop_response(loop, found.w), rel=1e-9)
    assert found.nyquist == pytest.approx(2.0 * pi)
    assert found.w[-1] == found.nyquist
    assert found.plants == tuple(member.name for member in family_of(sheet, 3))


def test_a_continuous_loop_agrees_with_python_control() -> None:
    """L = 2 (1 + 1/(3 s)) / ((s + 1)(0.2 s + 1)), by an independent library."""
    controller = Controller(gain_1=2.0, gain_2=2.0 / 3.0)
    sheet = invented.sheet("1/((s + 1)(0.2 s + 1))", controller, Trial(10.0))
    found = curves_of(sheet, 1)
    s = control.tf("s")
    expected = control.frequency_response(2.0 * (1.0 + 1.0 / (3.0 * s)) / ((s + 1.0) * (0.2 * s + 1.0)), found.w)
    assert found.gain[0] == pytest.approx(np.squeeze(expected.frdata), rel=1e-9)
    assert found.sensitivity[0] == pytest.approx(np.abs(1.0 / (1.0 + np.squeeze(expected.frdata))), rel=1e-9)


def test_the_grid_holds_the_margins_of_every_plant() -> None:
    """The largest sensitivity on the grid is the peak itself, so that curve and mark agree."""
    sheet = invented.heater()
    loops = loops_of(sheet, family_of(sheet, 3))
    known = margins(loops, [one.values for one in family_poles(loops)])
    found = curves_of(sheet)
    for row, one in zip(found.sensitivity, known, strict=True):
        assert row.max() == pytest.approx(one.max_sensitivity, rel=1e-9)
        assert np.isclose(found.w, one.gain_margin_at or 0.0, rtol=1e-12).any()
        assert np.isclose(found.w, one.phase_margin_at or 0.0, rtol=1e-12).any()


def test_sizes_in_decibels() -> None:
    """20 log10 of the size; a gain of zero is far down, not infinitely."""
    assert decibels(np.array([1.0 + 0j, 10.0 + 0j, 0.1j, 0j])) == pytest.approx([0.0, 20.0, -20.0, -240.0])


def test_phases_are_without_jumps() -> None:
    """However often they turn."""
    turning = np.exp(-1j * np.linspace(0.0, 30.0, 500))[None, :]
    assert phases(turning)[0] == pytest.approx(-np.degrees(np.linspace(0.0, 30.0, 500)))


@pytest.mark.parametrize(
    ("gain", "begins"),
    [
        (lambda s: -5.0 * (0.5 * s + 1.0) / (s * (1.0 - s)), -270.0),
        (lambda s: 1.0 / s**2, -180.0),
        (lambda s: (10.0 * s + 1.0) / (s + 1.0), 0.0),
        (lambda s: 1.0 / s, -90.0),
        (lambda s: 1.0 / (s - 1.0), -180.0),
    ],
)
def test_a_phase_begins_where_it_is_drawn_by_habit(gain: Callable[[ComplexArray], ComplexArray], begins: float) -> None:
    """An integrator at -90 degrees, two at -180; one that would begin at 90 begins at -270."""
    s = np.asarray(1j * np.geomspace(1e-3, 100.0, 400), dtype=np.complex128)
    found = phases(gain(s)[None, :])[0]
    assert found[0] == pytest.approx(begins, abs=1.0)
    assert np.exp(1j * np.radians(found)) == pytest.approx(gain(s) / np.abs(gain(s)))


def test_phases_of_a_family_begin_together() -> None:
    """Two plants on either side of the turn where a phase may begin are drawn beside each other."""
    pair = np.exp(1j * np.radians([[60.5, 40.0], [59.5, 40.0]]))
    found = phases(pair)
    assert found[0, 0] == pytest.approx(-299.5)
    assert found[1, 0] == pytest.approx(-300.5)


def test_a_phase_beyond_a_whole_turn_at_crossover_is_drawn_there() -> None:
    """A long dead time turns it so far, in a loop that runs away."""
    found = curves_of(invented.sheet("20 exp(-5 s)/(s + 1)", Controller(gain_1=1.0), Trial(10.0)), 1)
    at = int(np.abs(found.decibels[0]).argmin())
    w = found.w[at]
    assert found.phase[0, at] == pytest.approx(-np.degrees(5.0 * w + np.arctan(w)), abs=1e-6)
    assert found.phase[0, at] < -1000.0


def test_a_large_family_is_evaluated_in_pieces() -> None:
    """Every plant has its row, whatever piece it is in."""
    sheet = invented.heater()
    loops = loops_of(sheet, family_of(sheet, 230))
    found = frequency_curves(loops, family_poles(loops[:1])[0].values, [])
    for place in (0, 99, 100, 229):
        assert found.gain[place] == pytest.approx(loop_response(loops[place], found.w), rel=1e-9)


def test_a_pole_met_by_a_frequency_is_infinite_and_no_fault() -> None:
    """An undamped pair lies on a point of the grid when its margins say so."""
    controller = Controller(gain_1=1.0)
    found = curves_of(invented.sheet("1/(s^2 + 1)", controller, Trial(10.0)), 1)
    assert not np.isnan(found.sensitivity).any()
    assert not np.isnan(found.decibels).any()


def test_an_open_loop_has_no_curves() -> None:
    """Without feedback there is no loop gain."""
    sheet = invented.heater()
    sheet = replace(sheet, controller=replace(sheet.controller, feedback=False))
    loops = loops_of(sheet, family_of(sheet, 2))
    assert frequency_curves(loops, family_poles(loops)[0].values, []).w.size == 0
