"""What pyqtgraph paints for us, by the rules that keep it fast while a loop rings or runs away.

A smoothed stroke two pixels wide takes Qt a hundred times longer on a curve that crosses itself often, so a strong
curve is a smoothed stroke of one pixel painted four times, a fraction of a pixel apart; families are one item with a
connect array, and the ground they cover is one item of vertical strokes.
"""

import numpy as np
import pyqtgraph as pg
from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPolygonF, QTransform
from PySide6.QtWidgets import QStyleOptionGraphicsItem, QWidget

from tuner.window.plots.still import StillPicture
from tuner.window.plots.thinning import Points

_STRONG = ((-0.4, -0.4), (0.4, 0.4), (-0.4, 0.4), (0.4, -0.4))
_PLAIN = ((0.0, 0.0),)


class _Joining(pg.GraphicsObject):  # type: ignore[misc]  # pyqtgraph publishes no types
    """What curves and poles have in common: they may become part of a picture of what stays; see `still`."""

    _still: StillPicture | None = None

    def join(self, still: StillPicture) -> None:
        """Become part of a picture of what stays while others move."""
        self._still = still
        still.add(self)

    def update(self, *area: QRectF) -> None:
        """Be painted anew, with the picture if it is part of one."""
        if self._still is not None:
            self._still.forget()
        super().update(*area)

    def clip(self) -> QRectF | None:
        """Return the frame of the plot."""
        return QRectF(self.getViewBox().sceneBoundingRect())


class Curve(_Joining, pg.PlotCurveItem):  # type: ignore[misc]  # pyqtgraph publishes no types
    """One curve or several, in one colour.

    Parameters
    ----------
    strong : bool
        Twice as wide as a plain one.
    smooth : bool
        Whether edges are smoothed; not for families, whose curves may cross themselves by the thousand.
    """

    def __init__(self, *, strong: bool = False, smooth: bool = True, depth: float = 0.0) -> None:
        super().__init__(antialias=smooth, skipFiniteCheck=True)
        self._offsets = _STRONG if strong else _PLAIN
        self._bounds = QRectF()
        self._colour = QColor()
        self.setZValue(depth)
        self.setSegmentedLineMode("on")

    def set_colour(self, colour: QColor) -> None:
        """Take a colour; does nothing when it has it, since another pen is another picture."""
        if colour != self._colour:
            self._colour = colour
            self.setPen(pen(colour))

    def show_points(self, points: Points) -> None:
        """Show the points of a curve, or of several joined by their connect array."""
        self._bounds = _bounds(points)
        connect = "all" if points.connect is None else points.connect
        self.setData(points.x, points.y, connect=connect)

    def show_pairs(self, points: Points) -> None:
        """Show every two points as a stroke of its own."""
        self._bounds = _bounds(points)
        self.setData(points.x, points.y, connect="pairs")

    def clear_points(self) -> None:
        """Show nothing."""
        self._bounds = QRectF()
        self.setData(np.empty(0), np.empty(0), connect="all")

    def boundingRect(self) -> QRectF:
        """Return where the points lie, with room for the stroke; found once for each curve, not at every question."""
        return self._bounds

    def paint(self, painter: QPainter, option: QStyleOptionGraphicsItem, widget: QWidget | None) -> None:
        """Paint the stroke, unless it is part of a picture."""
        if self._still is None:
            self._paint_strokes(painter, option, widget)

    def paint_still(self, painter: QPainter) -> None:
        """Paint the stroke into the picture."""
        self._paint_strokes(painter, QStyleOptionGraphicsItem(), None)

    def _paint_strokes(self, painter: QPainter, option: QStyleOptionGraphicsItem, widget: QWidget | None) -> None:
        """Paint the stroke, several times when it is a strong one."""
        if self.xData is None or not len(self.xData):
            return
        place = painter.worldTransform()
        for x, y in self._offsets:
            painter.setWorldTransform(place * QTransform.fromTranslate(x, y))
            super().paint(painter, option, widget)
        painter.setWorldTransform(place)


class Ground(_Joining):
    """The ground between a lower and an upper curve, translucent, so that several may lie over one another."""

    def __init__(self, *, depth: float = 0.0) -> None:
        super().__init__()
        self._polygon, self._bounds, self._colour = QPolygonF(), QRectF(), QColor()
        self.setZValue(depth)

    def show_pairs(self, points: Points, colour: QColor) -> None:
        """Show every two points as lower and upper edge, filled with a colour."""
        self.prepareGeometryChange()
        self._bounds, self._colour = _bounds(points), colour
        x = np.concatenate((points.x[::2], points.x[-1::-2]))
        y = np.concatenate((points.y[::2], points.y[-1::-2]))
        self._polygon = pg.functions.arrayToQPolygonF(x, y) if x.size else QPolygonF()
        self.update()

    def boundingRect(self) -> QRectF:
        """Return where the corners lie."""
        return self._bounds

    def paint(self, painter: QPainter, _option: QStyleOptionGraphicsItem, _widget: QWidget | None) -> None:
        """Paint it, unless it is part of a picture."""
        if self._still is None:
            self.paint_still(painter)

    def paint_still(self, painter: QPainter) -> None:
        """Paint it into the picture."""
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(self._colour)
        painter.drawPolygon(self._polygon)


class Axis(pg.AxisItem):  # type: ignore[misc]  # pyqtgraph publishes no types
    """An axis that is part of a picture."""

    def __init__(self, side: str, still: StillPicture) -> None:
        self._still = still
        super().__init__(side)

    def update(self, *area: QRectF) -> None:
        """Be painted anew, with the picture."""
        self._still.forget()
        super().update(*area)

    def paint(self, _painter: QPainter, _option: QStyleOptionGraphicsItem, _widget: QWidget | None) -> None:
        """Paint nothing: it is in the picture."""

    def paint_still(self, painter: QPainter) -> None:
        """Paint the axis into the picture."""
        super().paint(painter, None, None)

    def clip(self) -> QRectF | None:
        """Return no frame: numbers stand out beyond the axis."""
        return None


class Poles(_Joining, pg.ScatterPlotItem):  # type: ignore[misc]  # pyqtgraph publishes no types
    """Poles as crosses, or marked by rings around them."""

    def __init__(self, *, size: int, depth: float, rings: bool = False) -> None:
        super().__init__(symbol="o" if rings else "x", size=size, pxMode=True, useCache=True)
        self.setZValue(depth)

    def show_poles(self, re: np.ndarray, im: np.ndarray, colour: QColor, width: float) -> None:
        """Show them at real and imaginary parts."""
        self.setData(re, im, pen=pg.mkPen(colour, width=width), brush=None)

    def paint(self, painter: QPainter, option: QStyleOptionGraphicsItem, widget: QWidget | None) -> None:
        """Paint them, unless they are part of a picture."""
        if self._still is None:
            super().paint(painter, option, widget)

    def paint_still(self, painter: QPainter) -> None:
        """Paint them into the picture."""
        super().paint(painter, None, self.getViewWidget())


def _bounds(points: Points) -> QRectF:
    """Return a rectangle around points, wider by a hundredth of their reach: a few pixels at any size of plot."""
    if not points.x.size:
        return QRectF()
    left, right = float(points.x.min()), float(points.x.max())
    low, high = float(points.y.min()), float(points.y.max())
    x, y = 0.01 * (right - left), 0.01 * (high - low) + 1e-9
    return QRectF(left - x, low - y, right - left + 2.0 * x, high - low + 2.0 * y)


def pen(colour: QColor, width: float = 1.0) -> object:
    """Return an opaque, solid pen of so many pixels, the one that Qt draws fast."""
    return pg.mkPen(colour, width=width, style=Qt.PenStyle.SolidLine)
