"""From classes at the points of a grid to the class of every pixel, and where in the areas there is room for a word."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN

Array = NDArray[np.float64]
Classes = NDArray[np.int8]

_SOFTENING = 0.8
"""How far edges are drawn smooth, in steps of the grid."""

_LEAST = 0.05
_EDGE = 6


@dataclass(frozen=True, slots=True)
class Room:
    """Where a word about a class fits: the middle of the room, pixels from left and top."""

    grade: int
    x: float
    y: float


def raster(classes: Classes, columns: Array, rows: Array) -> Classes:
    """Return the class of every pixel; at the points of the grid it is the one found there.

    Parameters
    ----------
    classes : ndarray of int, shape (ny, nx)
        At the points of the grid.
    columns, rows : ndarray, shape (width,) and (height,)
        Where each column and row of pixels lies among the points, as fractional indices.

    Returns
    -------
    ndarray of int, shape (height, width)
    """
    out = np.zeros((len(rows), len(columns)), dtype=np.int8)
    for grade in (SOFT, LOST, UNKNOWN):
        above = classes >= grade
        if above.all():
            out += 1
        elif above.any():
            out += _between(_softened(above), columns, rows) > 0.0
    return out


def rooms(pixels: Classes, width: float, height: float) -> tuple[Room, ...]:
    """Return where a word of some width and height fits best in each class's area; a class without room is left out.

    Parameters
    ----------
    pixels : ndarray of int, shape (h, w)
        The class of every pixel.
    """
    from scipy.ndimage import distance_transform_edt

    found = []
    coarse = pixels[::_EDGE, ::_EDGE]
    for grade in (FIRM, SOFT, LOST):
        inside = np.pad(coarse == grade, 1)
        if not inside.any():
            continue
        # Across, a word needs more room than upwards; the grid is stretched so that it needs the same.
        away = distance_transform_edt(inside, sampling=(_EDGE * width / height, _EDGE))
        at = np.unravel_index(int(away.argmax()), away.shape)
        if away[at] > 0.5 * width:
            found.append(Room(grade, float((at[1] - 0.5) * _EDGE), float((at[0] - 0.5) * _EDGE)))
    return tuple(found)


def _softened(above: NDArray[np.bool_]) -> NDArray[np.float32]:
    """Return a field that is above 0 exactly where told so at the points, and smooth between them."""
    from scipy.ndimage import gaussian_filter

    field = gaussian_filter(above - np.float32(0.5), _SOFTENING, mode="nearest").astype(np.float32)
    return np.where(above, np.maximum(field, _LEAST), np.minimum(field, -_LEAST)).astype(np.float32)


def _between(field: NDArray[np.float32], columns: Array, rows: Array) -> NDArray[np.float32]:
    """Return a field between its points, linear in both directions."""
    across = _mixed(field.T, columns).T
    return _mixed(across, rows)


def _mixed(field: NDArray[np.float32], at: Array) -> NDArray[np.float32]:
    low = np.clip(np.floor(at).astype(np.intp), 0, max(len(field) - 2, 0))
    share = (at - low).astype(np.float32)[:, np.newaxis]
    high = np.minimum(low + 1, len(field) - 1)
    mixed: NDArray[np.float32] = field[low] * (1.0 - share) + field[high] * share
    return mixed
