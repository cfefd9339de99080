"""Classes as colour and pattern: firm plain, soft dotted, lost hatched, what is not known grey."""

from functools import lru_cache

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QColor, QImage

from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN
from tuner.window.palette import Shade, palette
from tuner.window.theme import Theme

_DOT, _HATCH, _HATCH_WIDTH = 4, 6, 2
_FADED = 0.55
"""How far paint that is out of date goes over into the page."""


def class_picture(classes: NDArray[np.integer], theme: Theme, *, faded: bool = False) -> QImage:
    """Return a picture with a class for each of its pixels.

    Parameters
    ----------
    classes : ndarray of int, shape (height, width)
        From the top left; codes that mean nothing are unknown.
    theme : Theme
        Gives the colours.
    faded : bool
        Paint paler, since the loop has changed and nothing newer is known yet.
    """
    height, width = classes.shape
    known = np.where((classes >= FIRM) & (classes <= LOST), classes, UNKNOWN)
    dots, lines = _patterns(width, height)
    marked = (dots & (known == SOFT)) | (lines & (known == LOST))
    pixels = np.ascontiguousarray(_colours(theme.palette.shade, faded)[2 * known + marked])
    # The copy owns its pixels; a picture over the array would outlive it.
    return QImage(pixels.data, width, height, 4 * width, QImage.Format.Format_RGB32).copy()


@lru_cache(maxsize=6)
def _patterns(width: int, height: int) -> tuple[NDArray[np.bool_], NDArray[np.bool_]]:
    """Return where the second colour of dots and of slanting lines goes, shape (height, width) each."""
    across, down = np.arange(width)[np.newaxis, :], np.arange(height)[:, np.newaxis]
    return (across % _DOT == 1) & (down % _DOT == 1), (across + down) % _HATCH < _HATCH_WIDTH


@lru_cache
def _colours(shade: Shade, faded: bool) -> NDArray[np.uint32]:
    """Return plain and pattern colour of each class, one after the other, shape (8,)."""
    colours = {role: QColor(colour) for role, colour in palette(shade).colours.items()}
    ink, page = QColor("#000000"), colours["page"]
    pairs = [
        (colours["firm"], colours["firm"]),
        (colours["soft"], _between(colours["soft"], ink, 0.55)),
        (colours["lost"], _between(colours["lost"], page, 0.7)),
        (colours["line"], colours["line"]),
    ]
    share = _FADED if faded else 0.0
    return np.array([_between(one, page, share).rgb() for pair in pairs for one in pair], dtype=np.uint32)


def _between(one: QColor, other: QColor, share: float) -> QColor:
    pairs = ((one.red(), other.red()), (one.green(), other.green()), (one.blue(), other.blue()))
    return QColor(*(round(a + share * (b - a)) for a, b in pairs))
