"""The picture under a plot holds what stays, is painted anew when that changes, and is as sharp as what asks for it."""

from dataclasses import replace

import pytest
from PySide6.QtCore import QRect
from PySide6.QtGui import QColor, QImage
from pytestqt.qtbot import QtBot

from tests.window.plots.answers import answer, seen
from tuner.window.pictures import picture
from tuner.window.plots.pole_panel import PolePanel
from tuner.window.plots.trace_panel import ReferencePanel
from tuner.window.theme import Theme


@pytest.fixture
def panel(theme: Theme, qtbot: QtBot) -> ReferencePanel:
    """Return the plot of a reference step."""
    made = ReferencePanel("Reference step", theme)
    seen(made, qtbot)
    return made


def test_it_is_painted_once_for_many_first_answers(panel: ReferencePanel) -> None:
    """While only the curve of the plant that is looked at moves, the picture stays."""
    panel.hold(True)
    panel.show(answer(2.0))
    panel.view.grab()
    before = panel.view.still.taken
    for kp in (2.01, 2.02, 2.03):
        panel.show(answer(kp, whole=False))
        panel.view.grab()
    assert panel.view.still.taken == before


def test_it_is_painted_anew_for_another_family(panel: ReferencePanel) -> None:
    """And what is then seen is what a plot shows that never saw the one before."""
    panel.hold(True)
    panel.show(answer(2.0))
    panel.view.grab()
    panel.show(answer(2.4))
    after = panel.view.grab().toImage()
    panel.view.still.forget()
    assert panel.view.grab().toImage() == after


def test_the_family_is_in_it(panel: ReferencePanel, theme: Theme) -> None:
    """Its band and its curves are seen, and gone when they are not wanted."""
    shown = answer(3.0)
    panel.show(shown)
    assert _has(panel.view.grab().toImage(), theme.colour("band"))
    assert _has(panel.view.grab().toImage(), theme.colour("family"))
    panel.show(replace(shown, family_view="none"))
    assert not _has(panel.view.grab().toImage(), theme.colour("band"))
    assert not _has(panel.view.grab().toImage(), theme.colour("family"))


def test_axes_and_grid_follow_the_theme(panel: ReferencePanel, theme: Theme) -> None:
    """A change of theme paints the ground in the colours of the other."""
    panel.show(answer(2.0))
    panel.view.grab()
    theme.choose("dark")
    panel.dress()
    image = panel.view.grab().toImage()
    assert image.pixelColor(1, 1) == theme.colour("page")
    assert _has(image, theme.colour("grid"))


def test_a_picture_of_twice_the_size_is_as_sharp(panel: ReferencePanel, theme: Theme) -> None:
    """Its numbers are drawn in finer steps than those of a picture made larger; the plot itself stays as it was."""
    panel.show(answer(2.0))
    plain = panel.view.grab().toImage()
    before = panel.widget.grab().toImage()
    twice = picture(panel.widget)
    assert (twice.width(), twice.height()) == (2 * before.width(), 2 * before.height())
    assert _has(twice, theme.colour("grid"))
    numbers = QRect(0, panel.view.y(), 64, panel.view.height())
    larger = before.copy(numbers).scaled(numbers.size() * 2)
    doubled = QRect(numbers.topLeft() * 2, numbers.size() * 2)
    assert _pixels(twice.copy(doubled)) != _pixels(larger)
    assert panel.view.grab().toImage() == plain


def test_poles_of_the_family_are_in_it(theme: Theme, qtbot: QtBot) -> None:
    """They stay while those of the plant that is looked at move."""
    panel = PolePanel("Pole map", theme)
    seen(panel, qtbot)
    panel.hold(True)
    panel.show(answer(2.0))
    assert _has(panel.view.grab().toImage(), theme.colour("family"))
    before = panel.view.still.taken
    panel.show(answer(2.01, whole=False))
    panel.view.grab()
    assert panel.view.still.taken == before


def test_it_follows_the_size(panel: ReferencePanel) -> None:
    """Another size of the plot is another picture."""
    panel.show(answer(2.0))
    panel.view.grab()
    before = panel.view.still.taken
    panel.widget.resize(800, 500)
    panel.view.grab()
    assert panel.view.still.taken > before


def _pixels(image: QImage) -> list[int]:
    """Return every pixel of a picture, line by line."""
    return [image.pixel(x, y) for y in range(image.height()) for x in range(image.width())]


def _has(image: QImage, colour: QColor) -> bool:
    """Tell whether a colour is seen somewhere."""
    wanted = colour.rgb()
    return any(image.pixel(x, y) == wanted for x in range(image.width()) for y in range(image.height()))
