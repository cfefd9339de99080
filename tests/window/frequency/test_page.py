"""The frequency page shows all plots, and says when there is no loop gain."""

from dataclasses import replace

import numpy as np
import pytest
from pytestqt.qtbot import QtBot

from tests.window.frequency.looked_at import answer, sample
from tuner.window.frequency.page import FrequencyPage
from tuner.window.frequency.words import NO_GAIN
from tuner.window.theme import Theme


@pytest.fixture
def page(theme: Theme, qtbot: QtBot) -> FrequencyPage:
    """Return the page, shown."""
    made = FrequencyPage(theme)
    qtbot.addWidget(made.widget)
    made.widget.resize(900, 700)
    made.widget.show()
    return made


def test_all_plots_show_an_answer(page: FrequencyPage) -> None:
    """Each has its curve."""
    page.show(answer())
    assert all(panel.view.isVisible() for panel in page.panels.values())


def test_a_loop_without_gain_is_told(page: FrequencyPage) -> None:
    """In place of the curves, which come back with the gains."""
    idle = sample()
    idle = replace(idle, controller=replace(idle.controller, gain_1=0.0, gain_2=0.0, gain_3=0.0))
    page.show(answer())
    page.show(answer(idle))
    assert all(panel._empty.text() == NO_GAIN for panel in page.panels.values())
    assert not any(panel.view.isVisible() for panel in page.panels.values())
    page.hold(held=False)
    page.show(answer())
    assert all(panel.view.isVisible() for panel in page.panels.values())


def test_an_answer_without_curves_changes_nothing(page: FrequencyPage) -> None:
    """It was asked for by another page."""
    page.show(replace(answer(), frequency=None))
    assert not any(panel.view.isVisible() for panel in page.panels.values())


def test_a_large_family_is_its_ground_and_its_worst_plants(page: FrequencyPage) -> None:
    """A hundred plants are not a hundred curves."""
    sheet = sample()
    shown = answer(replace(sheet, trial=replace(sheet.trial, family_size=100)))
    page.show(shown)
    (picture,) = page.panels["Bode magnitude"].pictures  # type: ignore[attr-defined] # of a plot over frequency
    worst = {limit.plant for limit in shown.assessment.limits} - {"nominal"}
    assert np.count_nonzero(picture.curves.opts["connect"] == 0) == len(worst)
    assert picture.band.xData.size
