"""The painted track of a ruler: classes along it as colour and pattern."""

import numpy as np
from numpy.typing import NDArray
from PySide6.QtGui import QImage

from tuner.window.class_picture import class_picture
from tuner.window.theme import Theme


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
    pieces = np.asarray(classes)
    columns = pieces if len(pieces) == width else pieces[np.arange(width) * len(pieces) // width]
    return class_picture(np.broadcast_to(columns, (height, width)), theme, faded=faded)
