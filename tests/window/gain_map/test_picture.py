"""What is painted over the areas: scales with units, the limit's line, the marks and the pointer."""

import numpy as np
from PySide6.QtCore import QRect
from PySide6.QtGui import QColor, QImage, QPainter

from tuner.session.ruler_range import RulerRange
from tuner.window.gain_map.axis import Axis
from tuner.window.gain_map.contours import Contour
from tuner.window.gain_map.picture import Scene, Spot, frame_of, paint_scene
from tuner.window.theme import Theme

SIZE = (500, 400)
X, Y = Axis("kp", RulerRange(0.1, 100.0, has_off=True), "%/degC"), Axis("b", RulerRange(0.0, 1.5, logarithmic=False))


def painted(theme: Theme, **more: object) -> QImage:
    """Return the picture of a scene, its areas all white."""
    frame = frame_of(*SIZE)
    areas = QImage(frame.size(), QImage.Format.Format_RGB32)
    areas.fill(QColor("white"))
    scene = Scene(X, Y, frame, **({"areas": areas} | more))  # type: ignore[arg-type]  # the caller names its fields
    image = QImage(*SIZE, QImage.Format.Format_RGB32)
    image.fill(theme.colour("page"))
    painter = QPainter(image)
    paint_scene(painter, scene, theme)
    painter.end()
    return image


def changed(theme: Theme, **more: object) -> QRect:
    """Return the part of the picture that something more changes."""
    plain, other = painted(theme), painted(theme, **more)
    at = [(x, y) for x in range(SIZE[0]) for y in range(SIZE[1]) if plain.pixelColor(x, y) != other.pixelColor(x, y)]
    xs, ys = zip(*at, strict=True)
    return QRect(min(xs), min(ys), max(xs) - min(xs) + 1, max(ys) - min(ys) + 1)


def test_the_present_gains_are_a_mark_at_their_place(theme: Theme) -> None:
    """Its middle is at the shares."""
    middle = changed(theme, present=Spot(0.5, 0.25)).center()
    frame = frame_of(*SIZE)
    assert abs(middle.x() - (frame.left() + 0.5 * frame.width())) <= 1
    assert abs(middle.y() - (frame.top() + 0.75 * frame.height())) <= 1


def test_the_limit_is_a_thick_line_in_its_colour(theme: Theme) -> None:
    """Other contours are thin and dark."""
    line = np.array([[0.5, 0.0], [0.5, 1.0]])
    frame = frame_of(*SIZE)
    x, y = frame.left() + frame.width() // 2, frame.top() + 20
    limit = painted(theme, contours=(Contour(8.0, True, (line,)),), unit="%")
    assert limit.pixelColor(x, y).name() == theme.palette.colours["limit"]
    other = painted(theme, contours=(Contour(8.0, False, (line,)),), unit="%")
    assert other.pixelColor(x, y).lightness() < 140


def test_a_short_contour_has_no_number(theme: Theme) -> None:
    """It would hide the line; a long one has it on the line, within the map."""
    short = np.array([[0.5, 0.5], [0.52, 0.5]])
    long = np.array([[0.1 + 0.02 * step, 0.5] for step in range(40)])
    assert changed(theme, contours=(Contour(8.0, False, (short,)),), unit="%").height() < 6
    assert changed(theme, contours=(Contour(8.0, False, (long,)),), unit="%").height() > 12


def test_the_pointer_crosses_the_whole_map(theme: Theme) -> None:
    """From side to side, and not beyond."""
    frame = frame_of(*SIZE)
    assert frame.contains(changed(theme, pointer=Spot(0.3, 0.3)))
    assert changed(theme, pointer=Spot(0.3, 0.3)).width() > frame.width() - 4


def test_without_a_map_there_is_a_sentence(theme: Theme) -> None:
    """Said in the middle of where the map would be."""
    empty, said = painted(theme, areas=None), painted(theme, areas=None, sentence="The map is being computed.")
    frame = frame_of(*SIZE)
    row = range(frame.center().y() - 8, frame.center().y() + 8)
    assert any(empty.pixelColor(x, y) != said.pixelColor(x, y) for x in range(*SIZE[:1]) for y in row)
