"""The painted track: colours and patterns of the classes."""

import numpy as np
import pytest
from PySide6.QtGui import QColor, QImage

from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN
from tuner.window.rulers.strip import class_strip
from tuner.window.theme import Theme


def _colours(image: QImage, columns: range) -> set[str]:
    return {image.pixelColor(x, y).name() for x in columns for y in range(image.height())}


def test_classes_are_told_apart_by_colour_and_pattern(theme: Theme) -> None:
    """Firm is plain, soft dotted, lost hatched, unknown plain grey; each on its own piece of the track."""
    image = class_strip(np.array([FIRM, SOFT, LOST, UNKNOWN]), 240, 12, theme)
    pieces = [_colours(image, range(start + 2, start + 58)) for start in (0, 60, 120, 180)]
    assert pieces[0] == {theme.colour("firm").name()}
    assert theme.colour("soft").name() in pieces[1]
    assert theme.colour("lost").name() in pieces[2]
    assert pieces[3] == {theme.colour("line").name()}
    assert [len(piece) for piece in pieces] == [1, 2, 2, 1]


@pytest.mark.parametrize("share", [SOFT, LOST])
def test_patterns_leave_the_colour_most_of_the_room(theme: Theme, share: int) -> None:
    """Dots and lines cover between a twentieth and a half of a piece."""
    image = class_strip(np.array([share]), 120, 12, theme)
    plain = theme.colour("soft" if share == SOFT else "lost").name()
    marked = sum(image.pixelColor(x, y).name() != plain for x in range(120) for y in range(12))
    assert 0.05 < marked / (120 * 12) < 0.5


def test_pieces_change_where_they_should(theme: Theme) -> None:
    """The border between two classes lies at their share of the width."""
    image = class_strip(np.array([FIRM] * 16 + [UNKNOWN] * 48), 256, 4, theme)
    firm = theme.colour("firm").name()
    assert [image.pixelColor(x, 0).name() == firm for x in (0, 63, 64, 255)] == [True, True, False, False]


def test_faded_classes_are_still_told_apart(theme: Theme) -> None:
    """Paler paint keeps its pattern, and lies between the paint and the page."""
    image = class_strip(np.array([FIRM, SOFT, LOST]), 180, 12, theme, faded=True)
    pieces = [_colours(image, range(start + 2, start + 58)) for start in (0, 60, 120)]
    assert [len(piece) for piece in pieces] == [1, 2, 2]
    (firm,) = pieces[0]
    assert theme.colour("firm").lightness() < QColor(firm).lightness() < theme.colour("page").lightness()


def test_classes_out_of_the_table_are_unknown(theme: Theme) -> None:
    """Codes that mean nothing are grey, not a wrong colour."""
    image = class_strip(np.array([-1, 17]), 20, 4, theme)
    assert _colours(image, range(20)) == {theme.colour("line").name()}
