"""Classes as pictures: the same colours and patterns wherever a class is shown."""

import numpy as np

from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.window.class_picture import class_picture
from tuner.window.rulers.strip import class_strip
from tuner.window.theme import Theme


def test_each_pixel_has_its_own_class(theme: Theme) -> None:
    """Areas begin and end where the classes do, and unknown codes are grey."""
    classes = np.full((24, 36), FIRM)
    classes[12:, :18], classes[12:, 18:] = LOST, 99
    image = class_picture(classes, theme)
    firm = {image.pixelColor(x, y).name() for x in range(36) for y in range(12)}
    grey = {image.pixelColor(x, y).name() for x in range(18, 36) for y in range(12, 24)}
    lost = {image.pixelColor(x, y).name() for x in range(18) for y in range(12, 24)}
    assert firm == {theme.colour("firm").name()}
    assert grey == {theme.colour("line").name()}
    assert theme.colour("lost").name() in lost
    assert len(lost) == 2


def test_a_strip_is_a_picture_of_equal_rows(theme: Theme) -> None:
    """The ruler's track and an area of the same class have the same pixels."""
    classes = np.repeat([FIRM, SOFT, LOST], 20)
    assert class_strip(classes, 60, 12, theme) == class_picture(np.tile(classes, (12, 1)), theme)
