"""The frequency page shows all plots, and says when there is no loop gain."""

from dataclasses import replace

import numpy as np
from pytestqt.qtbot import QtBot

from tests.window.frequency.looked_at import answer
from tuner.simulate.curves import FrequencyCurves
from tuner.window.frequency.page import OPEN, FrequencyPage
from tuner.window.theme import Theme


def test_all_plots_show_an_answer(theme: Theme, qtbot: QtBot) -> None:
    """Each has its curve."""
    page = FrequencyPage(theme)
    qtbot.addWidget(page.widget)
    page.widget.resize(900, 700)
    page.widget.show()
    page.show(answer())
    assert all(panel.view.isVisible() for panel in page.panels.values())


def test_an_open_loop_is_told(theme: Theme, qtbot: QtBot) -> None:
    """In place of the curves."""
    page = FrequencyPage(theme)
    qtbot.addWidget(page.widget)
    page.widget.show()
    page.show(replace(answer(), frequency=FrequencyCurves(np.zeros(0), np.zeros((1, 0), dtype=complex), 1.0)))
    assert all(panel._empty.text() == OPEN for panel in page.panels.values())


def test_an_answer_without_curves_changes_nothing(theme: Theme, qtbot: QtBot) -> None:
    """It was asked for by another page."""
    page = FrequencyPage(theme)
    qtbot.addWidget(page.widget)
    page.show(replace(answer(), frequency=None))
    assert not any(panel.view.isVisible() for panel in page.panels.values())
