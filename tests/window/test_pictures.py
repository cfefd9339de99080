"""A plot becomes a picture, twice the size of the screen, and not a blank one."""

from pathlib import Path

import pytest
from PySide6.QtGui import QColor, QGuiApplication, QImage
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window.plots.answers import answer, seen
from tuner.errors import TrimwrightError
from tuner.window.pictures import copy_picture, save_picture
from tuner.window.plots.panel import Panel
from tuner.window.plots.trace_panel import ReferencePanel
from tuner.window.shown import Shown
from tuner.window.theme import Theme


@pytest.fixture
def panel(theme: Theme, qtbot: QtBot, qapp: QApplication) -> Panel[Shown]:
    """Return a plot with curves."""
    theme.dress(qapp)
    made = seen(ReferencePanel("Reference step", theme), qtbot, 400, 300)
    made.show(answer(2.2))
    return made


def test_a_saved_picture_shows_the_curve(panel: Panel[Shown], theme: Theme, tmp_path: Path) -> None:
    """Twice 400 by 300, the page's colour in the corner, the nominal blue, if smoothed a little, along a curve."""
    path = tmp_path / "plot.png"
    save_picture(panel.widget, path)
    image = QImage(str(path))
    assert (image.width(), image.height()) == (800, 600)
    assert image.pixelColor(1, 1) == theme.colour("page")
    wanted = theme.colour("nominal")
    seen = (image.pixelColor(x, y) for x in range(0, 800, 2) for y in range(0, 600, 2))
    found = sum(_far(one, wanted) < 24 for one in seen)
    assert found > 100


def test_a_picture_goes_to_the_clipboard(panel: Panel[Shown]) -> None:
    """What is copied can be pasted."""
    copy_picture(panel.widget)
    assert QGuiApplication.clipboard().image().width() == 800


def test_a_place_that_cannot_be_written_is_said(panel: Panel[Shown], tmp_path: Path) -> None:
    """One sentence with the path."""
    path = tmp_path / "no" / "plot.png"
    with pytest.raises(TrimwrightError, match="the picture cannot be written there"):
        save_picture(panel.widget, path)


def _far(one: QColor, other: QColor) -> int:
    """Return by how much two colours differ in the channel in which they differ most."""
    pairs = ((one.red(), other.red()), (one.green(), other.green()), (one.blue(), other.blue()))
    return max(abs(a - b) for a, b in pairs)
