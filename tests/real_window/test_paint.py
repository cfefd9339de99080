"""The paint of a real window's rulers is the verdict of the whole road at the values under its pixels."""

from dataclasses import replace

import pytest
from PySide6.QtCore import QPoint
from PySide6.QtGui import QImage
from pytestqt.qtbot import QtBot

from tests.real_window.hand import press, xdotool
from tuner.assess import assess
from tuner.footing.classes import FIRM, LOST, SOFT, tuned
from tuner.session.ruler_range import values_along
from tuner.window.main_window import MainWindow
from tuner.window.rulers.face import MARGIN, TRACK_HEIGHT, TRACK_TOP
from tuner.window.rulers.painted import PaintedRulers
from tuner.window.rulers.ruler import Ruler

PATIENCE = 120_000
VERDICTS = {"met": FIRM, "missed": SOFT, "unstable": LOST}
COLUMNS = 23
"""Columns of pixels that are looked at, evenly along the track."""

CLEAR = 8
"""Pixels beside the handle where it covers the track."""


@pytest.fixture
def painted(window: MainWindow, qtbot: QtBot) -> MainWindow:
    """Return the window once its rulers are painted."""
    (keeper,) = window.rulers.findChildren(PaintedRulers)
    qtbot.waitUntil(lambda: keeper.painting is not None, timeout=PATIENCE)
    return window


def test_pixels_are_verdicts(painted: MainWindow) -> None:
    """Along every ruler, each column looked at has the colour of the verdict that `assess` gives at its value."""
    for name, ruler in painted.rulers.rulers.items():
        assert ruler.painted is not None
        length = ruler.slider.width() - 2 * MARGIN
        values = values_along(painted.document.range_of(ruler.parameter), length)
        image = ruler.slider.grab().toImage()
        for x in range(length // COLUMNS // 2, length, length // COLUMNS):
            if _is_covered(ruler, x, length):
                continue
            sheet = painted.document.sheet
            asked = replace(sheet, controller=tuned(sheet.controller, name, float(values[x])))
            expected = {VERDICTS[assess(asked).verdict]}
            assert _classes(painted, image, MARGIN + x) == expected, f"{name} at {values[x]:.5g}"


def test_the_mouse_reads_a_ruler(painted: MainWindow, qtbot: QtBot) -> None:
    """A mouse that rests over the far end of kp's ruler reads there that and why the loop runs away."""
    slider = painted.rulers.rulers["kp"].slider
    at = slider.mapToGlobal(QPoint(slider.width() - 30, TRACK_TOP + 4))
    xdotool("mousemove", at.x(), at.y())
    qtbot.waitUntil(lambda: "  lost  " in painted.rulers.line.text(), timeout=PATIENCE)
    qtbot.waitUntil(lambda: "rad/s" in painted.rulers.line.text(), timeout=PATIENCE)
    assert painted.rulers.line.text().startswith("kp ")
    xdotool("mousemove", at.x(), at.y() - 400)
    qtbot.waitUntil(lambda: painted.rulers.line.text().startswith("firm: "))


def test_keys_go_to_the_edges(painted: MainWindow, qtbot: QtBot) -> None:
    """Alt and an arrow stop before the first edge, where all limits are still met, then behind it, where one is not."""
    ruler = painted.rulers.rulers["kp"]
    ruler.slider.setFocus()
    verdicts = []
    for _ in range(2):
        with qtbot.waitSignal(ruler.slider.wanted):
            press("alt+Right")
        verdicts.append(assess(painted.document.sheet).verdict)
    assert verdicts == ["met", "missed"]
    assert "Footing: soft; lost from" in ruler.slider.accessibleDescription()


def _is_covered(ruler: Ruler, x: int, length: int) -> bool:
    """Tell whether a column lies under the handle, beside an edge, or at the end of the off notch."""
    handle = abs(MARGIN + x - ruler.slider.x_of(ruler._document.sheet.controller.value(ruler.parameter.name)))
    edges = [abs(MARGIN + x - ruler.slider.x_of(edge.value)) for edge in ruler.painted.edges] if ruler.painted else []
    notch = abs(x - length * ruler._document.range_of(ruler.parameter).start / 10_000)
    return handle < CLEAR or min(edges, default=99.0) < 1.5 or notch < 4.0


def _classes(window: MainWindow, image: QImage, x: int) -> set[int]:
    """Return the classes whose plain colour is in a column of the track."""
    colours = {window.theme.colour(role).name(): grade for grade, role in enumerate(("firm", "soft", "lost"))}
    names = {image.pixelColor(x, y).name() for y in range(TRACK_TOP, TRACK_TOP + TRACK_HEIGHT)}
    return {colours[name] for name in names & set(colours)}
