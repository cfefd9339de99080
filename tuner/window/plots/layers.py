"""Layers below and above the curves: areas and grid lines, and strokes and words, painted in pixels."""

from collections.abc import Iterable, Iterator
from dataclasses import replace
from math import isinf

import pyqtgraph as pg
from PySide6.QtCore import QPointF, QRectF, QSizeF, Qt
from PySide6.QtGui import QBrush, QColor, QFontMetricsF, QPainter, QPen, QPolygonF, QTransform
from PySide6.QtWidgets import QStyleOptionGraphicsItem, QWidget

from tuner.window.plots.marks import Area, Marks, Stroke, Words
from tuner.window.plots.placing import Box, place_words
from tuner.window.plots.still import StillPicture
from tuner.window.theme import Theme

_GAP = 4.0
_REMEMBERED = 500
"""Texts whose width is remembered."""


class Layer(pg.GraphicsObject):  # type: ignore[misc]  # pyqtgraph publishes no types
    """Paints over the whole view, in pixels, whatever the ranges of the axes are."""

    def __init__(self, view: pg.ViewBox, theme: Theme, depth: float) -> None:
        super().__init__()
        self._theme = theme
        self.setZValue(depth)
        view.addItem(self, ignoreBounds=True)
        view.sigRangeChanged.connect(self._view_changed)
        view.sigResized.connect(self._view_changed)
        self._view = view

    def boundingRect(self) -> QRectF:
        """Return the visible part of the plot, in its coordinates."""
        return QRectF(self._view.viewRect())

    def paint(self, painter: QPainter, _option: QStyleOptionGraphicsItem, _widget: QWidget | None) -> None:
        """Paint in pixels."""
        self.paint_pixels(painter)

    def paint_pixels(self, painter: QPainter) -> None:
        """Turn to pixels and paint."""
        place = painter.worldTransform()
        frame = place.mapRect(self.boundingRect())
        painter.save()
        painter.resetTransform()
        painter.setClipRect(frame)
        self.draw(painter, place, frame)
        painter.restore()

    def draw(self, painter: QPainter, place: QTransform, frame: QRectF) -> None:
        """Paint in pixels: `place` takes the plot's coordinates there, `frame` is what is seen."""
        raise NotImplementedError

    def _view_changed(self) -> None:
        self.prepareGeometryChange()
        self.update()


class GroundLayer(Layer):
    """Areas, then grid lines, below the curves; it is part of a picture."""

    def __init__(self, view: pg.ViewBox, theme: Theme, still: StillPicture) -> None:
        self._still = still
        super().__init__(view, theme, -100.0)
        self._areas: tuple[Area, ...] = ()
        self.columns: tuple[float, ...] = ()
        self.rows: tuple[float, ...] = ()

    @property
    def areas(self) -> tuple[Area, ...]:
        """The areas."""
        return self._areas

    @areas.setter
    def areas(self, areas: tuple[Area, ...]) -> None:
        if areas != self._areas and not self._looks_like(areas):
            self._areas = areas
            self.update()

    def _looks_like(self, areas: tuple[Area, ...]) -> bool:
        """Tell whether areas would be the same picture: none of their corners moves by a quarter of a pixel."""
        width, height = self._view.viewPixelSize()
        pairs = zip(areas, self._areas, strict=False)
        return len(areas) == len(self._areas) and all(
            replace(one, corners=()) == replace(other, corners=()) and _is_near(one, other, 0.25 * width, 0.25 * height)
            for one, other in pairs
        )

    def update(self, *area: QRectF) -> None:
        """Be painted anew, with the picture."""
        self._still.forget()
        super().update(*area)

    def paint(self, painter: QPainter, _option: QStyleOptionGraphicsItem, _widget: QWidget | None) -> None:
        """Paint nothing: it is in the picture."""

    def paint_still(self, painter: QPainter) -> None:
        """Paint into the picture."""
        self.paint_pixels(painter)

    def clip(self) -> QRectF | None:
        """Return no frame: the layer finds its own."""
        return None

    def draw(self, painter: QPainter, place: QTransform, frame: QRectF) -> None:
        """Paint the areas and the grid."""
        for area in sorted(self.areas, key=lambda area: area.hatched):
            _fill(painter, area, _polygon(area, place, frame), self._theme.colour(area.role))
        painter.setPen(QPen(self._theme.colour("grid"), 1.0))
        for at in self.columns:
            x = _crisp(place.map(QPointF(at, 0.0)).x())
            painter.drawLine(QPointF(x, frame.top()), QPointF(x, frame.bottom()))
        for at in self.rows:
            y = _crisp(place.map(QPointF(0.0, at)).y())
            painter.drawLine(QPointF(frame.left(), y), QPointF(frame.right(), y))


class MarkLayer(Layer):
    """Strokes and words, above the curves, and the cross of the pointer."""

    def __init__(self, view: pg.ViewBox, theme: Theme) -> None:
        super().__init__(view, theme, 100.0)
        self.strokes: tuple[Stroke, ...] = ()
        self.words: tuple[Words, ...] = ()
        self.pointer: tuple[float, float] | None = None
        self._metrics = QFontMetricsF(theme.font("small"))
        self._widths: dict[str, float] = {}

    def show_marks(self, marks: Marks, more: Iterable[Words] = ()) -> None:
        """Show strokes and words, and the names of curves beside them."""
        self.strokes, self.words = marks.strokes, (*marks.words, *more)
        self.update()

    def draw(self, painter: QPainter, place: QTransform, frame: QRectF) -> None:
        """Paint the strokes, then the words where there is room, then the pointer."""
        for stroke in self.strokes:
            painter.setPen(_stroke_pen(stroke, self._theme.colour(stroke.role)))
            painter.drawLine(_pixel(stroke.x0, stroke.y0, place, frame), _pixel(stroke.x1, stroke.y1, place, frame))
        self._draw_words(painter, place, frame)
        if self.pointer is not None:
            self._draw_pointer(painter, _pixel(*self.pointer, place, frame), frame)

    def _draw_words(self, painter: QPainter, place: QTransform, frame: QRectF) -> None:
        plain, pressed = self._theme.font("small"), self._theme.font("small")
        pressed.setUnderline(True)
        ground = self._theme.colour("page")
        ground.setAlpha(200)
        for word, box in self._placed(place, frame):
            painter.setFont(pressed if word.plant else plain)
            painter.fillRect(QRectF(box.left, box.top, box.width, box.height), ground)
            painter.setPen(self._theme.colour(word.role))
            painter.drawText(QPointF(box.left, box.top + self._metrics.ascent()), word.text)

    def plant_at(self, at: QPointF) -> str:
        """Return the plant that the words at a pixel of the plot name; '' where there are none to press."""
        view = self.getViewWidget()
        if view is None:
            return ""
        place = self.deviceTransform(view.viewportTransform())
        placed = self._placed(place, place.mapRect(self.boundingRect()))
        return next((word.plant for word, box in placed if word.plant and box.holds(at.x(), at.y())), "")

    def _placed(self, place: QTransform, frame: QRectF) -> Iterator[tuple[Words, Box]]:
        """Yield the words that have room, and where."""
        boxes = [_box(word, self._size(word.text), _pixel(word.x, word.y, place, frame)) for word in self.words]
        seen = Box(frame.left(), frame.top(), frame.right(), frame.bottom())
        for word, box in zip(self.words, place_words(boxes, seen), strict=True):
            if box is not None:
                yield word, box

    def _size(self, text: str) -> QSizeF:
        """Return the size of words; measured once, since the same ones come with every answer."""
        if len(self._widths) > _REMEMBERED:
            self._widths.clear()
        if text not in self._widths:
            self._widths[text] = self._metrics.horizontalAdvance(text)
        return QSizeF(self._widths[text], self._metrics.height())

    def _draw_pointer(self, painter: QPainter, at: QPointF, frame: QRectF) -> None:
        painter.setPen(QPen(self._theme.colour("quiet"), 1.0))
        x = _crisp(at.x())
        painter.drawLine(QPointF(x, frame.top()), QPointF(x, frame.bottom()))
        painter.setBrush(QBrush(self._theme.colour("page")))
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.drawEllipse(at, 3.0, 3.0)


def _is_near(one: Area, other: Area, x: float, y: float) -> bool:
    """Tell whether two areas have as many corners, each nearer to that of the other than x across and y upwards."""
    pairs = zip(one.corners, other.corners, strict=False)
    return len(one.corners) == len(other.corners) and all(
        (a == c or abs(a - c) < x) and (b == d or abs(b - d) < y) for (a, b), (c, d) in pairs
    )


def _stroke_pen(stroke: Stroke, colour: QColor) -> QPen:
    pen = QPen(colour, 1.0)
    if stroke.dashed:
        pen.setDashPattern([6.0, 4.0])
    return pen


def _fill(painter: QPainter, area: Area, polygon: QPolygonF, colour: QColor) -> None:
    style = Qt.BrushStyle.BDiagPattern if area.hatched else Qt.BrushStyle.SolidPattern
    if area.hatched:
        colour.setAlpha(110)
    brush = QBrush(colour, style)
    if area.upright:
        painter.fillRect(polygon.boundingRect(), brush)
        return
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(brush)
    painter.drawPolygon(polygon)


def _polygon(area: Area, place: QTransform, frame: QRectF) -> QPolygonF:
    """Return the part of an area that is seen, in pixels: filling what is not takes its time all the same."""
    whole = QPolygonF([_pixel(x, y, place, frame) for x, y in area.corners])
    near = frame.adjusted(-2.0, -2.0, 2.0, 2.0)
    if area.upright:
        return QPolygonF(whole.boundingRect().intersected(near))
    return whole.intersected(QPolygonF(near))


def _pixel(x: float, y: float, place: QTransform, frame: QRectF) -> QPointF:
    """Return where a point lies, crisp; infinity is the edge of the frame, and far away is not far beyond it."""
    at = place.map(QPointF(0.0 if isinf(x) else x, 0.0 if isinf(y) else y))
    left = frame.left() - 1.0 if x < 0 else frame.right() + 1.0
    top = frame.bottom() + 1.0 if y < 0 else frame.top() - 1.0
    return QPointF(_crisp(left if isinf(x) else at.x()), _crisp(top if isinf(y) else at.y()))


def _crisp(at: float) -> float:
    """Return the middle of a pixel, where a line of one pixel is sharp."""
    return float(int(max(min(at, 1e7), -1e7))) + 0.5


def _box(word: Words, size: QSizeF, at: QPointF) -> Box:
    """Return the box of words that touch a point, a gap away from it."""
    width, height = size.width(), size.height()
    left = {"left": at.x() + _GAP, "right": at.x() - width - _GAP, "centre": at.x() - width / 2}[word.anchor]
    top = {"above": at.y() - height - 1.0, "below": at.y() + 2.0, "middle": at.y() - height / 2}[word.side]
    return Box(left, top, left + width, top + height)
