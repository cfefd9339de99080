"""What is painted over the areas: scales with units, the limit's line, the marks and the pointer."""

from itertools import groupby

import numpy as np
from PySide6.QtCore import QRect
from PySide6.QtGui import QColor, QImage, QPainter

from tuner.session.ruler_range import RulerRange
from tuner.window.gain_map.axis import Axis
from tuner.window.gain_map.contours import Contour
from tuner.window.gain_map.picture import Scene, Spot, _told_apart, frame_of, paint_scene
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


def test_a_low_map_has_half_the_lines() -> None:
    """Every other one, and always that of the limit."""
    lines = [np.array([[0.0, at], [1.0, at]]) for at in (0.2, 0.35, 0.5, 0.65)]
    contours = [Contour(float(at), at == 3, (line,)) for at, line in enumerate(lines)]
    low = Scene(X, Y, QRect(0, 0, 400, 200), contours=contours)
    high = Scene(X, Y, QRect(0, 0, 400, 500), contours=contours)
    assert [contour.level for contour in _told_apart(low)] == [1.0, 3.0]
    assert [contour.level for contour in _told_apart(high)] == [0.0, 1.0, 2.0, 3.0]


def test_names_of_marks_at_one_place_stand_apart(theme: Theme) -> None:
    """Two tunings at nearly one place: the second name does not cover the first."""
    one, other = Spot(0.5, 0.5, "as opened"), Spot(0.505, 0.5, "A")
    first = changed(theme, spots=(one,))
    both = changed(theme, spots=(one, other))
    assert both.width() > first.width()
    assert painted(theme, spots=(one, other)).copy(first.adjusted(14, 0, 0, 0)) == painted(theme, spots=(one,)).copy(
        first.adjusted(14, 0, 0, 0)
    )


def test_the_end_of_the_scale_has_its_number_on_a_low_map(theme: Theme) -> None:
    """The number stands beside the end, and off below it: two lines of words that do not touch."""
    frame = frame_of(500, 240)
    image = QImage(500, 240, QImage.Format.Format_RGB32)
    image.fill(theme.colour("page"))
    painter = QPainter(image)
    paint_scene(painter, Scene(Y, X, frame), theme)
    painter.end()
    page = theme.colour("page").rgb()
    column = range(frame.left() - 30, frame.left() - 9)
    rows = [any(image.pixel(x, y) != page for x in column) for y in range(frame.bottom() - 24, frame.bottom() + 14)]
    words = [len(list(run)) for is_word, run in groupby(rows) if is_word]
    assert len(words) == 2
