"""The layers below and above the curves paint areas, lines and words where they belong, in pixels."""

from collections.abc import Iterator
from math import inf

import pyqtgraph as pg
import pytest
from PySide6.QtCore import QRectF
from PySide6.QtGui import QColor, QImage, QPainter, QTransform
from pytestqt.qtbot import QtBot

from tuner.window.plots.layers import GroundLayer, Layer, MarkLayer
from tuner.window.plots.marks import Area, Marks, Stroke, Words, rectangle
from tuner.window.plots.still import StillPicture
from tuner.window.theme import Theme

FRAME = QRectF(0.0, 0.0, 200.0, 100.0)
UPWARDS = QTransform(2.0, 0.0, 0.0, -1.0, 0.0, 100.0)
"""Takes 0 to 100 by 0 to 100, upwards, to the pixels of the frame."""


@pytest.fixture
def box(qtbot: QtBot) -> Iterator[object]:
    """Return a view to add layers to, in a plot that is kept as long."""
    plot = pg.PlotWidget()
    qtbot.addWidget(plot)
    yield plot.getPlotItem().getViewBox()
    plot.hide()


def painted(layer: Layer, theme: Theme) -> QImage:
    """Return what a layer paints on the page."""
    image = QImage(200, 100, QImage.Format.Format_RGB32)
    image.fill(theme.colour("page"))
    painter = QPainter(image)
    layer.draw(painter, UPWARDS, FRAME)
    painter.end()
    return image


def colour(image: QImage, x: float, y: float) -> QColor:
    """Return the colour at a place in the plot's coordinates."""
    return image.pixelColor(int(2.0 * x), int(100.0 - y))


def inked(image: QImage, theme: Theme) -> set[tuple[int, int]]:
    """Return the pixels that are not the page's."""
    page = theme.colour("page")
    return {(x, y) for x in range(200) for y in range(100) if image.pixelColor(x, y) != page}


def test_an_area_is_filled_to_its_edges(box: object, theme: Theme) -> None:
    """Inside it has the colour of its role, outside the page's."""
    ground = GroundLayer(box, theme, StillPicture(pg.GraphicsView()))
    ground.areas = (Area(rectangle(20.0, 60.0, 30.0, 70.0), "limit_zone"),)
    image = painted(ground, theme)
    for x, y in ((21.0, 31.0), (40.0, 50.0), (59.0, 69.0)):
        assert colour(image, x, y) == theme.colour("limit_zone")
    for x, y in ((18.0, 50.0), (62.0, 50.0), (40.0, 27.0), (40.0, 73.0)):
        assert colour(image, x, y) == theme.colour("page")


def test_an_endless_area_reaches_the_frame(box: object, theme: Theme) -> None:
    """Corners at infinity lie at the edge of what is seen."""
    ground = GroundLayer(box, theme, StillPicture(pg.GraphicsView()))
    ground.areas = (Area(rectangle(-inf, inf, 80.0, inf), "limit_zone"),)
    image = painted(ground, theme)
    assert {colour(image, x, 99.0).name() for x in (0.5, 50.0, 99.0)} == {theme.colour("limit_zone").name()}
    assert colour(image, 50.0, 75.0) == theme.colour("page")


def test_a_wedge_is_filled_as_far_as_it_is_seen(box: object, theme: Theme) -> None:
    """A shape whose corners are far outside is cut to the frame."""
    ground = GroundLayer(box, theme, StillPicture(pg.GraphicsView()))
    ground.areas = (Area(((0.0, 0.0), (1e9, 0.0), (1e9, 1e9)), "limit_zone"),)
    image = painted(ground, theme)
    assert colour(image, 80.0, 40.0) == theme.colour("limit_zone")
    assert colour(image, 20.0, 60.0) == theme.colour("page")


def test_a_hatched_area_is_told_by_its_pattern(box: object, theme: Theme) -> None:
    """Some of its pixels are the page's, some are not, and none outside."""
    ground = GroundLayer(box, theme, StillPicture(pg.GraphicsView()))
    ground.areas = (Area(rectangle(0.0, 50.0, 0.0, 100.0), "lost", hatched=True),)
    marked = inked(painted(ground, theme), theme)
    share = len(marked) / (100 * 100)
    assert 0.05 < share < 0.6
    assert max(x for x, _ in marked) <= 101


def test_the_grid_is_sharp(box: object, theme: Theme) -> None:
    """A line of the grid is one column or one row of pixels, from edge to edge."""
    ground = GroundLayer(box, theme, StillPicture(pg.GraphicsView()))
    ground.columns, ground.rows = (50.0,), (25.0,)
    image = painted(ground, theme)
    marked = inked(image, theme)
    assert marked == {(100, y) for y in range(100)} | {(x, 75) for x in range(200)}
    assert image.pixelColor(100, 10) == theme.colour("grid")


def test_strokes_are_drawn_from_end_to_end(box: object, theme: Theme) -> None:
    """A stroke is one pixel high; a dashed one has gaps; one to infinity goes to the edge."""
    layer = MarkLayer(box, theme)
    layer.show_marks(Marks(strokes=(Stroke(10.0, 80.0, 40.0, 80.0, "limit"),)))
    plain = inked(painted(layer, theme), theme)
    assert {y for _, y in plain} == {20}
    assert (min(plain)[0], max(plain)[0]) == (20, 80)
    layer.show_marks(Marks(strokes=(Stroke(10.0, 80.0, 40.0, 80.0, "limit", dashed=True),)))
    assert 0.3 < len(inked(painted(layer, theme), theme)) / len(plain) < 0.9
    layer.show_marks(Marks(strokes=(Stroke(10.0, 80.0, inf, 80.0, "limit"),)))
    assert max(inked(painted(layer, theme), theme))[0] == 199


@pytest.mark.parametrize(
    ("word", "left", "above"),
    [
        (Words(50.0, 50.0, "band", "limit_word", "left", "above"), False, True),
        (Words(50.0, 50.0, "band", "limit_word", "right", "above"), True, True),
        (Words(50.0, 50.0, "band", "limit_word", "right", "below"), True, False),
    ],
)
def test_words_stand_beside_their_place(box: object, theme: Theme, word: Words, *, left: bool, above: bool) -> None:
    """To the left or right of it, above or below."""
    layer = MarkLayer(box, theme)
    layer.show_marks(Marks(words=(word,)))
    marked = inked(painted(layer, theme), theme)
    assert marked
    assert all((x < 100) is left for x, _ in marked)
    assert all((y <= 50) is above for _, y in marked)


def test_words_do_not_cover_words(box: object, theme: Theme) -> None:
    """Two texts at one place stand above one another, both whole; the names of curves come after the marks."""
    layer = MarkLayer(box, theme)
    word = Words(50.0, 50.0, "settling band", "limit_word")
    layer.show_marks(Marks(words=(word,)))
    one = len(inked(painted(layer, theme), theme))
    layer.show_marks(Marks(words=(word,)), (Words(50.0, 50.0, "settling band", "limit_word"),))
    assert layer.words == (word, word)
    assert len(inked(painted(layer, theme), theme)) == pytest.approx(2 * one, rel=0.1)


def test_the_pointer_is_a_line_with_a_ring(box: object, theme: Theme) -> None:
    """It stands at the time pointed at, over the whole height, and rings the value."""
    layer = MarkLayer(box, theme)
    assert inked(painted(layer, theme), theme) == set()
    layer.pointer = (25.0, 50.0)
    marked = inked(painted(layer, theme), theme)
    assert {y for x, y in marked if x == 50} >= set(range(46)) | set(range(55, 100))
    assert {x for x, y in marked if abs(y - 50) <= 4} >= {47, 53}
    assert {x for x, y in marked if abs(y - 50) > 4} == {50}


def test_the_width_of_words_is_measured_once(box: object, theme: Theme, monkeypatch: pytest.MonkeyPatch) -> None:
    """The same words with every answer are not measured again; what is remembered has an end."""
    from tuner.window.plots import layers

    monkeypatch.setattr(layers, "_REMEMBERED", 3)
    layer = MarkLayer(box, theme)
    for index in range(10):
        layer.show_marks(Marks(words=(Words(50.0, 50.0, f"plant {index}", "quiet"),)))
        for _ in range(2):
            painted(layer, theme)
    assert len(layer._widths) <= 4


def test_a_layer_covers_what_is_seen(box: pg.ViewBox, theme: Theme) -> None:
    """Its bounds follow the ranges of the axes, and it never stretches them."""
    layer = GroundLayer(box, theme, StillPicture(pg.GraphicsView()))
    layer.areas = (Area(rectangle(-1e6, 1e6, 0.0, 1.0), "limit_zone"),)
    for x, y in (((0.0, 10.0), (0.0, 1.0)), ((5.0, 6.0), (-3.0, 3.0))):
        box.setRange(xRange=x, yRange=y, padding=0.0)
        bounds = layer.boundingRect()
        assert (bounds.left(), bounds.right()) == pytest.approx(x)
        assert (bounds.top(), bounds.bottom()) == pytest.approx(y)


def test_areas_that_hardly_move_are_not_painted_anew(box: object, theme: Theme) -> None:
    """Less than a quarter of a pixel is no other picture; more is, and so is another role or another shape."""
    still = StillPicture(pg.GraphicsView())
    ground = GroundLayer(box, theme, still)
    near = Area(rectangle(0.2, 0.6, 0.3, inf), "limit_zone")
    ground.areas = (near,)
    width, height = ground._view.viewPixelSize()
    for areas, is_new in (
        ((Area(rectangle(0.2 + 0.1 * width, 0.6, 0.3 + 0.1 * height, inf), "limit_zone"),), False),
        ((Area(rectangle(0.2 + 0.5 * width, 0.6, 0.3, inf), "limit_zone"),), True),
        ((Area(rectangle(0.2, 0.6, 0.3 + 0.5 * height, inf), "limit_zone"),), True),
        ((Area(near.corners, "lost"),), True),
        ((Area(near.corners[:3], "limit_zone"),), True),
        ((), True),
    ):
        ground.areas = (near,)
        ground.areas = areas
        assert (ground.areas == areas) is is_new
