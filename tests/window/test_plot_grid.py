"""The plots stand side by side, and each has its own menu."""

import pytest
from PySide6.QtCore import QPoint
from pytestqt.qtbot import QtBot

from tests.window.plots.answers import answer
from tuner.window.plot_grid import DISTURBANCE, EFFORT, POLES, REFERENCE, PlotGrid
from tuner.window.theme import Theme


@pytest.fixture
def grid(theme: Theme, qtbot: QtBot) -> PlotGrid:
    """Return the plots, shown."""
    made = PlotGrid(theme)
    qtbot.addWidget(made.widget)
    made.widget.resize(1200, 700)
    made.widget.show()
    return made


def test_an_answer_reaches_every_plot(grid: PlotGrid) -> None:
    """All four show the same one."""
    shown = answer(2.0)
    grid.show(shown)
    assert {panel.shown for panel in grid.panels.values()} == {shown}


def test_axes_of_one_column_stand_in_line(grid: PlotGrid) -> None:
    """The plots of a column begin and end at the same pixel, so that times can be compared downwards."""
    grid.show(answer(2.0))
    for above, below in ((REFERENCE, EFFORT), (DISTURBANCE, POLES)):
        boxes = [grid.panels[name].view.getPlotItem().getViewBox().sceneBoundingRect() for name in (above, below)]
        assert boxes[0].left() == boxes[1].left()
        assert boxes[0].right() == pytest.approx(boxes[1].right(), abs=1.0)


def test_a_right_click_asks_for_the_menu_of_its_plot(grid: PlotGrid, qtbot: QtBot) -> None:
    """The plot and the place are told."""
    with qtbot.waitSignal(grid.menu_wanted) as wanted:
        grid.panels[EFFORT].view.menu_wanted.emit(QPoint(5, 6))
    assert wanted.args == [grid.panels[EFFORT], QPoint(5, 6)]


def test_the_whole_range_comes_back_everywhere(grid: PlotGrid) -> None:
    """After a closer look in one plot, `show_whole` shows all of it again."""
    grid.show(answer(2.0))
    panel = grid.panels[REFERENCE]
    whole = panel.ranges()
    box = panel.view.getPlotItem().getViewBox()
    box.setRange(xRange=(1.0, 2.0), yRange=(1.0, 2.0), padding=0.0)
    box.sigRangeChangedManually.emit([True, True])
    grid.show_whole()
    assert panel.ranges() == whole
