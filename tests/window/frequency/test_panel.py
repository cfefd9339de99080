"""A plot over frequency: its family, its worst plant, what it reads, and what stays."""

from dataclasses import replace

import numpy as np
import pytest
from pytestqt.qtbot import QtBot

from tests.window.frequency.looked_at import answer, curves_in, sample, slower
from tests.window.plots.answers import seen
from tuner.window.frequency.bode import MagnitudePanel
from tuner.window.frequency.panel import worst_places
from tuner.window.plots.extent import Extent
from tuner.window.theme import Theme


@pytest.fixture
def panel(theme: Theme, qtbot: QtBot) -> MagnitudePanel:
    """Return one such plot with an answer."""
    made = MagnitudePanel("Bode magnitude", theme)
    seen(made, qtbot)
    made.show(answer())
    return made


def test_the_pointer_reads_the_loop(panel: MagnitudePanel) -> None:
    """Frequency, size, phase and both sensitivities, with units; nothing outside of what is known."""
    found = panel.read(-1.0, 0.0)
    assert found is not None
    assert found[0][0] == pytest.approx(-1.0, abs=0.01)
    assert float(found[1].split()[0]) == pytest.approx(0.1, rel=0.02)
    assert panel.read(9.0, 0.0) is None


def test_the_worst_plant_is_drawn_and_named(panel: MagnitudePanel) -> None:
    """In the colour of limits; pressing its name looks at it."""
    shown = answer()
    plant = shown.assessment.worst["gain_margin"].plant
    curves = curves_in(shown)
    row = curves.decibels[curves.plants.index(plant)]
    x, y = panel.worst.getData()
    assert y == pytest.approx(np.clip(np.interp(x, np.log10(curves.w), row), y.min(), y.max()), abs=0.2)
    assert panel.worst.opts["pen"].color() == panel._theme.colour("limit")
    assert any(word.plant == plant and word.text.startswith("worst: ") for word in panel.marks.words)


def test_the_worst_plant_is_not_drawn_twice(theme: Theme, qtbot: QtBot) -> None:
    """When it is looked at it is the main curve."""
    made = MagnitudePanel("Bode magnitude", theme)
    seen(made, qtbot)
    made.show(answer(looked_at=answer().assessment.worst["gain_margin"].plant))
    assert made.worst.xData.size == 0


def test_worst_plants_of_limits_are_known(panel: MagnitudePanel) -> None:
    """Rows behind the first, so that those of a large family are drawn whatever is left out."""
    del panel
    shown = answer()
    curves = curves_in(shown)
    found = {curves.plants[1:][place] for place in worst_places(shown, curves)}
    assert found == {limit.plant for limit in shown.assessment.limits} - {"nominal"}


@pytest.mark.parametrize(
    ("view", "ground", "curves"), [("both", True, True), ("curves", False, True), ("none", False, False)]
)
def test_the_family_is_shown_as_wanted(theme: Theme, qtbot: QtBot, view: str, ground: bool, curves: bool) -> None:
    """As in the plots over time."""
    made = MagnitudePanel("Bode magnitude", theme)
    seen(made, qtbot)
    made.show(answer(family_view=view))
    (picture,) = made.pictures
    assert (bool(picture.band.xData.size), bool(picture.curves.xData.size)) == (ground, curves)


def test_the_family_stays_until_a_whole_answer_comes(panel: MagnitudePanel) -> None:
    """A quick answer moves the plant's own curve alone, and says nothing new of the family."""
    before, worst, said = panel.pictures[0].curves.yData, panel.worst.yData.copy(), panel._axis.text()
    panel.show(answer(whole=False))
    assert panel.pictures[0].curves.yData is before
    assert np.array_equal(panel.worst.yData, worst)
    assert panel._axis.text() == said


def test_another_loop_is_another_picture(panel: MagnitudePanel) -> None:
    """Nothing stays of a loop that was left."""
    panel.forget()
    panel.show(answer(sample("chiller")))
    assert panel.ranges()[0].low < -4.0


def test_the_unit_of_frequency_is_always_seen(theme: Theme, qtbot: QtBot) -> None:
    """Also where a decade lies at the right end of the axis: its number would have no room for the unit."""
    made = MagnitudePanel("Bode magnitude", theme)
    seen(made, qtbot)
    made.show(answer(sample("levitation")))
    made.set_ranges(Extent(-1.0, 5.0), made.ranges()[1])
    made.redraw()
    (named,) = made.view.getPlotItem().getAxis("bottom")._tickLevels
    assert named[-1] == (4.0, "10000 rad/s")


def test_keys_walk_along_the_frequencies(panel: MagnitudePanel) -> None:
    """A step is a hundredth of what is seen; the first one is at the lowest frequency."""
    panel.view.stepped.emit(1)
    first = panel.marks.pointer
    panel.view.stepped.emit(10)
    assert first is not None
    assert first[0] == pytest.approx(np.log10(curves_in(answer()).w[0]), abs=0.02)
    assert panel.marks.pointer is not None
    assert panel.marks.pointer[0] - first[0] == pytest.approx(0.1 * panel.ranges()[0].span, rel=0.2)


def test_a_stale_picture_is_grey(panel: MagnitudePanel, theme: Theme) -> None:
    """The main curve and the worst one."""
    panel.show_stale()
    for curve in (panel.own[0], panel.worst):
        assert curve.opts["pen"].color() == theme.colour("kept")


def test_tunings_to_compare_with_are_drawn_and_named(panel: MagnitudePanel) -> None:
    """In grey, at the size of their own loop gain; gone with them."""
    kept = slower()
    panel.show(answer(kept=(kept,)))
    own = answer(replace(sample(), controller=kept.controller))
    x, y = panel.kept[0].getData()
    expected = np.interp(x, np.log10(curves_in(own).w), curves_in(own).decibels[0])
    inside = (y > panel.ranges()[1].low) & (y < panel.ranges()[1].high)
    assert y[inside] == pytest.approx(expected[inside], abs=0.2)
    assert panel.kept[0].opts["pen"].color() == panel._theme.colour("kept")
    assert any(word.text == "A" for word in panel.marks.words)
    panel.show(answer())
    assert not panel.kept[0].xData.size
    assert not any(word.text == "A" for word in panel.marks.words)
