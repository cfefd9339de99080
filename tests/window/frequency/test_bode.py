"""Bode plots and sensitivities show what the curves are, with margins and limits marked."""

import numpy as np
import pytest
from pytestqt.qtbot import QtBot

from tests.window.frequency.looked_at import answer, curves_in, limited, sample, with_feedback
from tests.window.plots.answers import seen
from tuner.window.frequency.bode import MagnitudePanel, PhasePanel, SensitivityPanel
from tuner.window.frequency.panel import FrequencyPanel
from tuner.window.theme import Theme

PANELS = (MagnitudePanel, PhasePanel, SensitivityPanel)


@pytest.mark.parametrize("kind", PANELS)
def test_curves_are_those_of_the_answer(theme: Theme, qtbot: QtBot, kind: type[FrequencyPanel]) -> None:
    """At every point that is drawn and seen."""
    made = kind("plot", theme)
    seen(made, qtbot)
    made.show(answer())
    curves = curves_in(answer())
    expected = {
        MagnitudePanel: (curves.decibels,),
        PhasePanel: (curves.phase,),
        SensitivityPanel: (curves.sensitivity, curves.complementary),
    }[kind]
    for item, values in zip(made.own, expected, strict=True):
        x, y = item.getData()
        inside = (y > made.ranges()[1].low) & (y < made.ranges()[1].high)
        known = np.interp(x[inside], np.log10(curves.w), values[0])
        assert inside.sum() > 20
        assert y[inside] == pytest.approx(known, abs=1e-9)


@pytest.mark.parametrize(
    ("kind", "said"),
    [
        (MagnitudePanel, "gain margin "),
        (PhasePanel, "phase margin "),
        (PhasePanel, "delay margin "),
        (SensitivityPanel, "peak "),
        (SensitivityPanel, "|S| at most 1.8"),
        (MagnitudePanel, "half the sampling frequency"),
        (PhasePanel, "half the sampling frequency"),
        (SensitivityPanel, "half the sampling frequency"),
    ],
)
def test_margins_and_limits_are_told(theme: Theme, qtbot: QtBot, kind: type[FrequencyPanel], said: str) -> None:
    """In words in the plot."""
    made = kind("plot", theme)
    seen(made, qtbot)
    made.show(answer())
    assert any(word.text.startswith(said) for word in made.marks.words)


@pytest.mark.parametrize("kind", PANELS)
def test_curves_without_margins_are_drawn(theme: Theme, qtbot: QtBot, kind: type[FrequencyPanel]) -> None:
    """Of a loop that is open, with the words why."""
    made = kind("plot", theme)
    seen(made, qtbot)
    made.show(answer(limited(with_feedback(sample(), on=False), {})))
    assert made.own[0].xData.size > 20
    assert made._missed.text() == "feedback off, so no margins: curves as if it were closed"


def test_the_worst_peak_of_t_is_drawn_on_its_own_curve(theme: Theme, qtbot: QtBot) -> None:
    """Where the limit on T is the one missed by most."""
    made = SensitivityPanel("Sensitivity", theme)
    seen(made, qtbot)
    shown = answer(limited(sample(), {"max_complementary": 0.5}))
    made.show(shown)
    curves = curves_in(shown)
    row = curves.complementary[curves.plants.index(shown.assessment.worst["max_complementary"].plant)]
    assert made.worst.yData.max() == pytest.approx(row.max(), rel=1e-6)
