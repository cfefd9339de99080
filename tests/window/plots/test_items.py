"""A strong curve is a stroke of one pixel painted a few times, and stays as quick as one when it rings."""

import numpy as np
import pytest
from PySide6.QtGui import QImage, QPainter
from pytestqt.qtbot import QtBot

from tuner.window.plots.items import Curve, Ground, pen
from tuner.window.plots.thinning import Points
from tuner.window.theme import Theme


@pytest.mark.usefixtures("qtbot")
def test_a_strong_curve_covers_more_than_a_plain_one(theme: Theme) -> None:
    """Painted as a level line, it darkens more than one row of pixels."""

    def rows(*, strong: bool) -> int:
        curve = Curve(strong=strong)
        curve.setPen(pen(theme.colour("ink")))
        curve.show_points(Points(np.array([0.0, 40.0]), np.array([10.5, 10.5])))
        image = QImage(40, 20, QImage.Format.Format_RGB32)
        image.fill(theme.colour("page"))
        painter = QPainter(image)
        curve.paint(painter, None, None)  # type: ignore[arg-type]  # the item needs neither
        painter.end()
        return sum(image.pixelColor(20, y) != theme.colour("page") for y in range(20))

    assert rows(strong=True) > rows(strong=False)


@pytest.mark.usefixtures("qtbot")
def test_an_empty_curve_paints_nothing() -> None:
    """Before any points, and after they were cleared, there is nothing to fail on."""
    curve = Curve()
    image = QImage(4, 4, QImage.Format.Format_RGB32)
    painter = QPainter(image)
    curve.paint(painter, None, None)  # type: ignore[arg-type]  # the item needs neither
    curve.show_pairs(Points(np.array([0.0, 1.0]), np.array([0.0, 1.0])))
    assert curve.opts["connect"] == "pairs"
    curve.clear_points()
    curve.paint(painter, None, None)  # type: ignore[arg-type]  # the item needs neither
    painter.end()
    assert curve.xData.size == 0


def test_the_pen_is_one_that_qt_draws_fast(theme: Theme, qtbot: QtBot) -> None:
    """Opaque, solid, cosmetic."""
    del qtbot
    made = pen(theme.colour("nominal"))
    assert made.isCosmetic()  # type: ignore[attr-defined]  # a QPen
    assert made.color().alpha() == 255  # type: ignore[attr-defined]  # a QPen


def test_grounds_show_through_each_other(theme: Theme, qtbot: QtBot) -> None:
    """Two translucent ones over one another are darker than one, and outside of them nothing is painted."""
    del qtbot
    image = QImage(30, 30, QImage.Format.Format_RGB32)
    image.fill(theme.colour("page"))
    painter = QPainter(image)
    colour = theme.colour("ink")
    colour.setAlphaF(0.3)
    for low, high in ((5.0, 20.0), (10.0, 25.0)):
        ground = Ground()
        ground.show_pairs(Points(np.array([0.0, 0.0, 30.0, 30.0]), np.array([low, high, low, high])), colour)
        ground.paint(painter, None, None)  # type: ignore[arg-type]  # the item needs neither
    painter.end()
    rows = [image.pixelColor(15, y).lightness() for y in (2, 7, 15, 22, 28)]
    assert rows[0] == rows[4] == theme.colour("page").lightness()
    assert rows[2] < rows[1] == rows[3] < rows[0]
