"""A page of four plots hands on whatever it is told."""

from collections.abc import Callable

import pytest
from PySide6.QtCore import QPoint
from pytestqt.qtbot import QtBot

from tests.window.plots.answers import answer
from tuner.window.panel_page import PanelPage
from tuner.window.plots.panel import Panel
from tuner.window.plots.pole_panel import PolePanel
from tuner.window.shown import Shown
from tuner.window.theme import Theme

NAMES = ["upper left", "upper right", "lower left", "lower right"]


@pytest.fixture
def page(theme: Theme, qtbot: QtBot) -> PanelPage:
    """Return a page, shown."""
    plots = [PolePanel(name, theme) for name in NAMES]
    made = PanelPage(theme, (plots[0], plots[2]), (plots[1], plots[3]))
    qtbot.addWidget(made.widget)
    made.widget.resize(1200, 700)
    made.widget.show()
    return made


def test_plots_are_counted_row_by_row(page: PanelPage) -> None:
    """As they are read, and as keys and menus count them."""
    assert list(page.panels) == NAMES


def test_an_answer_reaches_every_plot(page: PanelPage) -> None:
    """All four show the same one."""
    shown = answer()
    page.show(shown)
    assert {panel.shown for panel in page.panels.values()} == {shown}


@pytest.mark.parametrize(
    ("tell", "told"),
    [
        (lambda page: page.show_stale(), lambda panel: panel.stale),
        (lambda page: page.hold(held=True), lambda panel: panel.held),
        (lambda page: page.say_empty("why"), lambda panel: panel._empty.text() == "why"),
    ],
)
def test_what_is_told_reaches_every_plot(
    page: PanelPage, tell: Callable[[PanelPage], None], told: Callable[[Panel[Shown]], bool]
) -> None:
    """Each of them."""
    tell(page)
    assert all(told(panel) for panel in page.panels.values())


def test_one_plot_has_all_the_room(page: PanelPage) -> None:
    """The others are away until all are wanted again."""
    page.show_alone("lower right")
    assert [name for name, panel in page.panels.items() if panel.widget.isVisible()] == ["lower right"]
    assert not page.left.isVisible()
    page.show_alone("")
    assert all(panel.widget.isVisible() for panel in page.panels.values())


def test_wishes_of_a_plot_are_passed_on(page: PanelPage, qtbot: QtBot) -> None:
    """For its menu, with the place, and for a plant."""
    panel = page.panels["upper right"]
    with qtbot.waitSignal(page.menu_wanted) as wanted:
        panel.view.menu_wanted.emit(QPoint(1, 2))
    assert wanted.args == [panel, QPoint(1, 2)]
    with qtbot.waitSignal(page.plant_wanted) as wanted:
        panel.plant_wanted.emit("gain 2")
    assert wanted.args == ["gain 2"]
