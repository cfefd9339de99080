"""The family behind the main curve is drawn once for as long as it stays."""

import numpy as np
import pytest
from pytestqt.qtbot import QtBot

from tuner.window.plots.extent import Extent
from tuner.window.plots.family_picture import NO_FAMILY, FamilyPicture
from tuner.window.plots.lines import Family
from tuner.window.plots.panel import PlotView
from tuner.window.theme import Theme

SEEN = Extent(-1.0, 2.0)
FAMILY = Family(np.linspace(0.0, 1.0, 50), np.outer(np.arange(3.0) / 3.0, np.ones(50)))


@pytest.fixture
def view(qtbot: QtBot) -> PlotView:
    """Return a plot."""
    made = PlotView("plot")
    qtbot.addWidget(made)
    return made


def test_ground_and_curves_are_drawn(view: PlotView, theme: Theme) -> None:
    """The ground reaches from the lowest to the highest curve, and each curve is its own."""
    picture = FamilyPicture(view, theme)
    picture.draw(FAMILY, "both", SEEN, 100)
    assert (picture.band.yData.min(), picture.band.yData.max()) == (0.0, pytest.approx(2.0 / 3.0))
    assert np.count_nonzero(picture.curves.opts["connect"] == 0) == 3


def test_the_same_family_is_not_drawn_again(view: PlotView, theme: Theme) -> None:
    """Only another family, range, width or view of it is another picture."""
    picture = FamilyPicture(view, theme)
    picture.draw(FAMILY, "both", SEEN, 100)
    drawn = picture.curves.yData
    picture.draw(FAMILY, "both", SEEN, 100)
    assert picture.curves.yData is drawn
    picture.draw(FAMILY, "both", SEEN, 90)
    assert picture.curves.yData is not drawn
    picture.draw(NO_FAMILY, "both", SEEN, 90)
    assert picture.curves.yData.size == picture.band.yData.size == 0


def test_a_second_family_has_no_ground(view: PlotView, theme: Theme) -> None:
    """Two grounds over each other would hide one."""
    picture = FamilyPicture(view, theme, second=True)
    picture.draw(FAMILY, "both", SEEN, 100)
    assert picture.band.xData is None or not picture.band.xData.size
    assert picture.curves.opts["pen"].color() == theme.colour("band")
