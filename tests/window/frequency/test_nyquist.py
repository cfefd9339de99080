"""The Nyquist plot keeps circles round, and shows how near the loop comes to the critical point."""

import numpy as np
import pytest
from pytestqt.qtbot import QtBot

from tests.window.frequency.looked_at import answer, curves_in, limited, sample, slower, with_feedback
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


def scales(panel: NyquistPanel) -> tuple[float, float]:
    """Return how many pixels a unit takes across and upwards."""
    (across, upwards), box = panel.ranges(), panel.view.getPlotItem().getViewBox()
    return box.width() / across.span, box.height() / upwards.span


@pytest.mark.parametrize("size", [(640, 400), (400, 700), (1400, 500)])
def test_both_axes_have_one_scale(panel: NyquistPanel, size: tuple[int, int]) -> None:
    """Whatever the shape of the plot, with the critical point and the circle of one in sight."""
    panel.widget.resize(*size)
    across, upwards = panel.ranges()
    assert scales(panel)[0] == pytest.approx(scales(panel)[1], rel=0.01)
    assert across.low <= -2.4
    assert across.high >= 1.0
    assert upwards.low <= -1.5


def test_a_closer_look_keeps_one_scale(panel: NyquistPanel) -> None:
    """Also when only one axis is drawn out."""
    before = scales(panel)[0]
    panel.view.getPlotItem().getViewBox().scaleBy(x=0.5)
    assert scales(panel)[0] == pytest.approx(scales(panel)[1], rel=0.01)
    assert scales(panel)[0] != pytest.approx(before, rel=0.1)


def test_the_circle_of_the_limit_is_where_the_sensitivity_is_the_limit(panel: NyquistPanel) -> None:
    """Its points lie 1/Ms from the critical point."""
    x, y = panel.limit.getData()
    most = dict(answer().sheet.limits)["max_sensitivity"]
    assert np.hypot(x + 1.0, y) == pytest.approx(np.full(x.size, 1.0 / most))


def test_the_circle_that_the_curve_touches(panel: NyquistPanel) -> None:
    """No point of the loop gain lies within it, and one on it: its radius is the inverse of the peak."""
    margins = answer().assessment.nominal.margins
    assert margins is not None
    x, y = panel.touched.getData()
    radius = 1.0 / margins.max_sensitivity
    assert np.hypot(x + 1.0, y) == pytest.approx(np.full(x.size, radius), rel=1e-6)
    assert np.abs(1.0 + curves_in(answer()).gain[0]).min() == pytest.approx(radius, rel=1e-6)
    said = f"peak of |S| {margins.max_sensitivity:.3g} at {margins.max_sensitivity_at:.3g} rad/s"
    assert any(word.text == said for word in panel.marks.words)


def test_without_margins_no_circle_is_touched(panel: NyquistPanel) -> None:
    """A loop that is open comes near nothing; its curve is drawn all the same."""
    panel.show(answer(limited(with_feedback(sample(), on=False), {})))
    assert panel.touched.xData.size == 0
    assert panel.limit.xData.size == 0
    assert panel.own.xData.size > 100


def test_the_worst_plant_can_be_pressed(panel: NyquistPanel) -> None:
    """It is drawn and named by its drift."""
    plant = answer().assessment.worst["max_sensitivity"].plant
    curves = curves_in(answer())
    row = curves.gain[curves.plants.index(plant)]
    x, y = panel.worst.getData()
    assert np.hypot(x + 1.0, y).min() == pytest.approx(np.abs(1.0 + row).min(), rel=1e-9)
    assert any(word.plant == plant for word in panel.marks.words)


def test_curves_stay_near_the_picture(panel: NyquistPanel) -> None:
    """An integrator goes to infinity; what is painted does not."""
    for curve in (panel.own, panel.family, panel.worst):
        x, y = curve.getData()
        assert np.hypot(x, y).max() <= 20.0 * (1.0 + 1e-9)


@pytest.mark.parametrize(("view", "drawn"), [("both", True), ("band", True), ("none", False)])
def test_the_family_is_shown_as_wanted(panel: NyquistPanel, view: str, drawn: bool) -> None:
    """Its ground is that of its curves here."""
    panel.show(answer(family_view=view))
    assert bool(panel.family.xData.size) is drawn


def test_the_pointer_reads_the_curve_when_it_is_near(panel: NyquistPanel) -> None:
    """Near the curve the loop in words, far from it nothing."""
    nearest = panel._nearest()
    assert nearest is not None
    found = panel.read(nearest.real, nearest.imag)
    assert found is not None
    assert "rad/s" in found[1]
    assert panel.read(0.9, 1.4) is None


def test_keys_walk_along_the_curve(panel: NyquistPanel) -> None:
    """From the point that is nearest to the critical one, towards higher frequencies."""
    panel.view.stepped.emit(1)
    first = panel.marks.pointer
    panel.view.stepped.emit(1)
    gain = curves_in(answer()).gain[0]
    assert first is not None
    assert panel.marks.pointer is not None
    places = [int(np.abs(gain - complex(*at)).argmin()) for at in (first, panel.marks.pointer)]
    assert places[1] == places[0] + 3


def test_tunings_to_compare_with_have_their_curve_and_name(panel: NyquistPanel) -> None:
    """Behind the present one; gone with them."""
    panel.show(answer(kept=(slower(),)))
    assert panel.kept.xData.size
    assert any(word.text == "A" for word in panel.marks.words)
    panel.show(answer())
    assert not panel.kept.xData.size
    assert not any(word.text == "A" for word in panel.marks.words)
