"""The Nyquist plot keeps circles round, and shows how near the loop comes to the critical point."""

import numpy as np
import pytest
from pytestqt.qtbot import QtBot

from tests.window.frequency.looked_at import answer
from tests.window.plots.answers import seen
from tuner.window.frequency.nyquist import NyquistPanel
from tuner.window.theme import Theme


@pytest.fixture
def panel(theme: Theme, qtbot: QtBot) -> NyquistPanel:
    """Return the plot with an answer."""
    made = NyquistPanel("Nyquist plot", theme)
    seen(made, qtbot)
    made.show(answer())
    return made


@pytest.mark.parametrize("size", [(640, 400), (400, 700), (1400, 500)])
def test_both_axes_have_one_scale(panel: NyquistPanel, size: tuple[int, int]) -> None:
    """A unit takes as many pixels across as upwards, whatever the shape of the plot."""
    panel.widget.resize(*size)
    (across, upwards), box = panel.ranges(), panel.view.getPlotItem().getViewBox()
    assert box.width() / across.span == pytest.approx(box.height() / upwards.span, rel=0.01)


def test_the_circle_of_the_limit_is_where_the_sensitivity_is_the_limit(panel: NyquistPanel) -> None:
    """Its points lie 1/Ms from the critical point."""
    x, y = panel.limit.getData()
    most = dict(answer().sheet.limits)["max_sensitivity"]
    assert np.hypot(x + 1.0, y) == pytest.approx(np.full(x.size, 1.0 / most))


def test_the_nearest_point_is_told(panel: NyquistPanel) -> None:
    """A stroke from the critical point, as long as the inverse of the peak of the sensitivity."""
    margins = answer().assessment.nominal.margins
    assert margins is not None
    stroke = next(one for one in panel._strokes() if one.role == "nominal")
    assert np.hypot(stroke.x1 + 1.0, stroke.y1) == pytest.approx(1.0 / margins.max_sensitivity, rel=1e-3)


def test_the_pointer_reads_the_curve_when_it_is_near(panel: NyquistPanel) -> None:
    """Near the curve the loop in words, far from it nothing."""
    nearest = panel._nearest()
    assert nearest is not None
    found = panel.read(nearest.real, nearest.imag)
    assert found is not None
    assert "rad/s" in found[1]
    assert panel.read(0.9, 1.4) is None
