"""Every pixel has the class found at the points of the grid, and words stand where there is room."""

import numpy as np
import pytest

from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN
from tuner.window.gain_map.areas import raster, rooms


def test_the_points_keep_their_classes() -> None:
    """However small an area is, its points are drawn as they were found."""
    classes = np.random.default_rng(1).integers(FIRM, UNKNOWN + 1, (17, 23)).astype(np.int8)
    drawn = raster(classes, np.linspace(0.0, 22.0, 221), np.linspace(0.0, 16.0, 161))
    assert np.array_equal(drawn[::10, ::10], classes)


def test_an_edge_is_in_the_middle_between_two_points() -> None:
    """Nothing more is known of it."""
    classes = np.repeat(np.array([[FIRM, FIRM, SOFT, SOFT]], dtype=np.int8), 4, axis=0)
    drawn = raster(classes, np.linspace(0.0, 3.0, 301), np.linspace(0.0, 3.0, 31))
    assert np.flatnonzero(np.diff(drawn[15]))[0] == pytest.approx(150, abs=2)


def test_a_slanting_edge_has_no_stairs() -> None:
    """It stays within half a step of the straight line."""
    rows, columns = np.mgrid[0:20, 0:20]
    classes = np.where(columns > 0.5 * rows + 5.2, LOST, FIRM).astype(np.int8)
    drawn = raster(classes, np.linspace(0.0, 19.0, 191), np.linspace(0.0, 19.0, 191))
    edge = np.argmax(drawn == LOST, axis=1) / 10.0
    away = edge - (0.5 * np.arange(191) / 10.0 + 5.2)
    assert np.max(np.abs(away[20:-20])) < 0.65


def test_one_class_alone() -> None:
    """A map of one class is all of it."""
    drawn = raster(np.full((3, 3), LOST, dtype=np.int8), np.linspace(0.0, 2.0, 7), np.linspace(0.0, 2.0, 5))
    assert np.array_equal(drawn, np.full((5, 7), LOST))


def test_words_stand_in_the_largest_room() -> None:
    """In the middle of the wide area; an area that is too small has no word."""
    pixels = np.full((200, 300), SOFT, dtype=np.int8)
    pixels[:, 200:] = LOST
    pixels[90:100, 90:100] = FIRM
    found = {room.grade: room for room in rooms(pixels, 60.0, 20.0)}
    assert set(found) == {SOFT, LOST}
    assert found[LOST].x == pytest.approx(250.0, abs=8.0)
    assert pixels[round(found[SOFT].y), round(found[SOFT].x)] == SOFT
