"""The painted track of a ruler: classes along it as colour and pattern."""

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QColor, QImage

from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN
from tuner.window.theme import Theme

_DOT, _HATCH, _HATCH_WIDTH = 4, 6, 2
_FADED = 0.55
"""How far paint that is out of date goes over into the page."""


def class_strip(classes: NDArray[np.integer], width: int, height: int, theme: Theme, *, faded: bool = False) -> QImage:
    """Return the picture of a track.

    Parameters
    ----------
    classes : ndarray of int, shape (n,)
        Classes of n equal pieces of the track, from the left; with one for each column of pixels they are exact.
    width, height : int
        Size of the picture, pixels.
    theme : Theme
        Gives the colours: firm plain, soft dotted, lost hatched, unknown grey.
    faded : bool
        Paint paler, since the loop has changed and nothing newer is known yet.
    """
    columns = _columns(np.asarray(classes), width)
    marked = _marked(columns, height)
    pixels = np.ascontiguousarray(_colours(theme, faded)[columns[np.newaxis, :], marked.astype(np.intp)])
    # The copy owns its pixels; a picture over the array would outlive it.
    return QImage(pixels.data, width, height, 4 * width, QImage.Format.Format_RGB32).copy()


def _columns(classes: NDArray[np.integer], width: int) -> NDArray[np.intp]:
    """Return the class of every column of pixels, shape (width,)."""
    pieces = np.arange(width) * len(classes) // width
    known = np.where((classes >= FIRM) & (classes <= LOST), classes, UNKNOWN)
    return known[pieces].astype(np.intp)


def _marked(columns: NDArray[np.intp], height: int) -> NDArray[np.bool_]:
    """Return where the second colour of a pattern goes, shape (height, width): dots, or slanting lines."""
    across, down = np.arange(len(columns))[np.newaxis, :], np.arange(height)[:, np.newaxis]
    dots = (across % _DOT == 1) & (down % _DOT == 1)
    lines = (across + down) % _HATCH < _HATCH_WIDTH
    return np.where(columns == SOFT, dots, np.where(columns == LOST, lines, False))


def _colours(theme: Theme, faded: bool) -> NDArray[np.uint32]:
    """Return plain and pattern colour of each class, shape (4, 2)."""
    ink, page = QColor("#000000"), theme.colour("page")
    pairs = [
        (theme.colour("firm"), theme.colour("firm")),
        (theme.colour("soft"), _between(theme.colour("soft"), ink, 0.55)),
        (theme.colour("lost"), _between(theme.colour("lost"), page, 0.7)),
        (theme.colour("line"), theme.colour("line")),
    ]
    share = _FADED if faded else 0.0
    return np.array([[_between(one, page, share).rgb() for one in pair] for pair in pairs], dtype=np.uint32)


def _between(one: QColor, other: QColor, share: float) -> QColor:
    pairs = ((one.red(), other.red()), (one.green(), other.green()), (one.blue(), other.blue()))
    return QColor(*(round(a + share * (b - a)) for a, b in pairs))
