"""Bode plots and sensitivities show what the curves are, with margins and limits marked."""

from math import log10

import numpy as np
import pytest
from pytestqt.qtbot import QtBot

from tests.window.frequency.looked_at import answer
from tests.window.plots.answers import seen
from tuner.window.frequency.bode import MagnitudePanel, PhasePanel, SensitivityPanel, decibels, phases
from tuner.window.theme import Theme


def test_sizes_and_phases() -> None:
    """20 log10 of the size; phases without jumps."""
    assert decibels(np.array([1.0 + 0j, 10.0 + 0j, 0.1j])) == pytest.approx([0.0, 20.0, -20.0])
    turning = np.exp(-1j * np.linspace(0.0, 10.0, 50))
    found = phases(turning)
    assert found[-1] - found[0] == pytest.approx(-np.degrees(10.0))


def test_the_phase_is_on_the_turn_of_half_a_turn_at_crossover() -> None:
    """A plant that begins at -270 degrees, and so at 90, is shown at -270."""
    s = 1j * np.geomspace(0.01, 100.0, 400)
    gain = -5.0 * (0.5 * s + 1.0) / (s * (1.0 - s))
    found = phases(gain)
    at = np.abs(np.log(np.abs(gain))).argmin()
    assert -360.0 <= found[at] <= 0.0
    assert np.exp(1j * np.radians(found)) == pytest.approx(gain / np.abs(gain))


def test_the_gain_margin_is_marked_where_it_is(theme: Theme, qtbot: QtBot) -> None:
    """A stroke from the curve up to one, and the value in words."""
    panel = MagnitudePanel("Bode magnitude", theme)
    seen(panel, qtbot)
    panel.show(answer())
    margins = answer().assessment.nominal.margins
    assert margins is not None
    stroke = next(one for one in panel._marks.strokes if one.role == "nominal")
    assert stroke.x0 == pytest.approx(log10(margins.gain_margin_at or 1.0))
    assert stroke.y0 == pytest.approx(-20.0 * log10(margins.gain_margin))
    assert any(word.text.startswith(f"gain margin {margins.gain_margin:.3g}") for word in panel._marks.words)


def test_the_phase_margin_is_marked_where_it_is(theme: Theme, qtbot: QtBot) -> None:
    """A stroke as long as the margin, from half a turn."""
    panel = PhasePanel("Bode phase", theme)
    seen(panel, qtbot)
    panel.show(answer())
    margins = answer().assessment.nominal.margins
    assert margins is not None
    stroke = next(one for one in panel._marks.strokes if one.role == "nominal")
    assert abs(stroke.y1 - stroke.y0) == pytest.approx(margins.phase_margin, abs=0.1)


def test_limits_of_both_sensitivities_are_drawn(theme: Theme, qtbot: QtBot) -> None:
    """The level of the sheet's limit, and the peak in words."""
    panel = SensitivityPanel("Sensitivity", theme)
    seen(panel, qtbot)
    panel.show(answer())
    limits = dict(answer().sheet.limits)
    assert any(one.y0 == limits["max_sensitivity"] and one.role == "limit" for one in panel._marks.strokes)
    assert any(word.text.startswith("peak ") for word in panel._marks.words)
    own = panel._own[0].getData()[1]
    margins = answer().assessment.nominal.margins
    assert margins is not None
    assert own.max() == pytest.approx(margins.max_sensitivity, rel=1e-3)
