"""The face of a slider: the places of the edges beside marks and handle."""

from itertools import pairwise

import pytest
from PySide6.QtGui import QImage, QPainter

from tuner.footing.classes import FIRM, SOFT, Edge
from tuner.session.ruler_range import RulerRange
from tuner.session.tunings import Mark
from tuner.window.rulers.face import TRACK_TOP, Face, paint_face, written_edges
from tuner.window.theme import Theme

SPAN = RulerRange(0.1, 100.0, has_off=True)
EDGE = Edge(10.0, FIRM, SOFT)


def above(face: Face, theme: Theme, left: float, right: float) -> int:
    """Return how many pixels above the track are written on, in a stretch of it."""
    image = QImage(face.width, 40, QImage.Format.Format_RGB32)
    page = theme.colour("page")
    image.fill(page)
    painter = QPainter(image)
    paint_face(painter, face, theme)
    painter.end()
    places = [(x, y) for x in range(round(left), round(right)) for y in range(TRACK_TOP - 1)]
    return sum(image.pixelColor(x, y) != page for x, y in places)


def face(value: float, *marks: Mark, edges: tuple[Edge, ...] = (EDGE,)) -> Face:
    """Return a face 516 pixels wide."""
    return Face(SPAN, 516, None, marks, value, edges)


@pytest.mark.parametrize(("value", "side"), [(1.0, 1), (50.0, -1)])
def test_the_place_of_an_edge_is_written_away_from_the_handle(theme: Theme, value: float, side: int) -> None:
    """A handle that comes near its edge does not cover the number."""
    shown = face(value)
    x = shown.x_of(EDGE.value)
    beyond = sorted((x + side * 2.0, x + side * 30.0))
    before = sorted((x - side * 30.0, x - side * 2.0))
    assert above(shown, theme, *beyond) > 20
    assert above(shown, theme, *before) == 0
    assert above(face(value, edges=()), theme, *beyond) == 0


def test_a_mark_goes_before_the_place_of_an_edge(theme: Theme) -> None:
    """Where a mark stands, the number is written behind it, and not at all where marks leave no room near the edge."""
    mark = Mark("reset", "as opened", 10.5)
    shown, alone = face(1.0, mark), face(1.0, mark, edges=())
    x = shown.x_of(10.5)
    assert above(shown, theme, x - 6, x + 6) == above(alone, theme, x - 6, x + 6)
    assert above(shown, theme, x + 7, x + 40) > 20
    crowd = [Mark("reset", "as opened", 10.0 * 1.06**step) for step in range(-6, 6)]
    shown, alone = face(1.0, *crowd), face(1.0, *crowd, edges=())
    assert above(shown, theme, 0, 516) == above(alone, theme, 0, 516)


def test_a_number_is_written_past_the_handle(theme: Theme) -> None:
    """A handle that stands on the edge does not cover its place."""
    shown = face(9.9)
    x = shown.x_of(9.9)
    assert above(shown, theme, x + 6, x + 40) > 20


def test_numbers_of_edges_never_overlap() -> None:
    """However near edges lie to one another and to the handle; the nearest to the handle are written first."""
    for share in (1.0, 1.02, 1.05, 1.1, 1.3, 2.0):
        for value in (10.0 / share, 10.0, 10.0 * share**2):
            edges = tuple(Edge(10.0 * share**step, FIRM, SOFT) for step in range(4))
            shown = face(value, edges=edges)
            written = written_edges(shown, lambda text: 7.0 * len(text))
            taken = [(one.left, one.left + one.width) for one in written]
            taken.append((shown.x_of(value) - 5.0, shown.x_of(value) + 5.0))
            taken.sort()
            assert all(end <= start for (_, end), (start, _) in pairwise(taken))
            nearest = min(edges, key=lambda edge: abs(shown.x_of(edge.value) - shown.x_of(value)))
            assert written[0].x == shown.x_of(nearest.value)
    assert len(written) == 4


def test_an_edge_outside_the_scale_is_not_written(theme: Theme) -> None:
    """The change from off to the low end has no place on the scale."""
    assert above(face(1.0, edges=(Edge(0.05, SOFT, FIRM),)), theme, 0, 60) == 0


def test_the_pointer_is_a_line_across_the_track(theme: Theme) -> None:
    """Where the mouse points, and only there, a line reaches over the track."""
    shown = Face(SPAN, 516, None, (), 1.0, pointer=300.0)
    assert above(shown, theme, 299, 302) > 0
    assert above(face(1.0, edges=()), theme, 299, 302) == 0
