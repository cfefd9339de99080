"""What the map looks like: areas, contours, scales, marks, the present gains and the place looked at."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from PySide6.QtCore import QPointF, QRect, QRectF, Qt
from PySide6.QtGui import QColor, QImage, QPainter, QPen, QPolygonF

from tuner.footing.classes import WORDS
from tuner.judge.wording import quantity
from tuner.session.ruler_range import POSITIONS
from tuner.window.gain_map.areas import Room
from tuner.window.gain_map.axis import Axis
from tuner.window.gain_map.contours import Contour
from tuner.window.rulers.reading_line import ROLES
from tuner.window.theme import Theme

LEFT, TOP, RIGHT, BOTTOM = 76, 8, 16, 44
"""Room around the map for its scales, pixels."""

_RING = 8.0
_DARK = "#14181b"
"""Lines over the classes, whose colours are of middle brightness in both shades."""

_LEAST_LABELLED = 70.0
_LOW = 300
"""Under this height, pixels, there is room for half of the contours."""

_LEAST_GAP = 18


@dataclass(frozen=True, slots=True)
class Spot:
    """A tuning on the map: shares of both axes, what it is called; the present one has no name."""

    x: float
    y: float
    name: str = ""


@dataclass(frozen=True, slots=True, eq=False)
class Scene:
    """Everything that is painted.

    Parameters
    ----------
    x, y : Axis
    frame : QRect
        Where the map is.
    areas : QImage or None
        The classes; None while none are known.
    rooms : sequence of Room
        Where the classes are named.
    contours : sequence of Contour
    unit : str
        Of the contours.
    spots : sequence of Spot
        Tunings worth finding again.
    present : Spot or None
    pointer : Spot or None
    sentence : str
        Why there is no map.
    has_focus : bool
        Whether keys go to the map.
    """

    x: Axis
    y: Axis
    frame: QRect
    areas: QImage | None = None
    rooms: Sequence[Room] = ()
    contours: Sequence[Contour] = ()
    unit: str = ""
    spots: Sequence[Spot] = ()
    present: Spot | None = None
    pointer: Spot | None = None
    sentence: str = ""
    has_focus: bool = False

    def at(self, x: float, y: float) -> QPointF:
        """Return the place of two shares."""
        frame = self.frame
        return QPointF(frame.left() + x * frame.width(), frame.top() + (1.0 - y) * frame.height())


def frame_of(width: int, height: int) -> QRect:
    """Return where the map is in a widget of some size."""
    return QRect(LEFT, TOP, max(width - LEFT - RIGHT, 1), max(height - TOP - BOTTOM, 1))


def paint_scene(painter: QPainter, scene: Scene, theme: Theme) -> None:
    """Paint the map with all that is over it."""
    painter.setFont(theme.font("small"))
    _paint_scales(painter, scene, theme)
    if scene.areas is None:
        _paint_nothing(painter, scene, theme)
    else:
        painter.drawImage(scene.frame.topLeft(), scene.areas)
        _paint_off(painter, scene, theme)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.save()
    painter.setClipRect(scene.frame)
    _paint_contours(painter, scene, theme)
    _paint_words(painter, scene, theme)
    _paint_pointer(painter, scene, theme)
    painter.restore()
    named: list[QRectF] = []
    for spot in scene.spots:
        _paint_spot(painter, scene, spot, named, theme)
    if scene.present is not None:
        _paint_present(painter, scene, scene.present, theme)


def _paint_nothing(painter: QPainter, scene: Scene, theme: Theme) -> None:
    painter.setPen(QPen(theme.colour("line"), 1.0))
    painter.setBrush(theme.colour("field"))
    painter.drawRect(scene.frame)
    painter.setPen(theme.colour("quiet"))
    painter.setFont(theme.font())
    room = scene.frame.adjusted(24, 24, -24, -24)
    painter.drawText(room, Qt.AlignmentFlag.AlignCenter | Qt.TextFlag.TextWordWrap, scene.sentence)
    painter.setFont(theme.font("small"))


def _paint_off(painter: QPainter, scene: Scene, theme: Theme) -> None:
    """Set the strips in which a gain is off apart from the scales."""
    page, frame = theme.colour("page"), scene.frame
    if scene.x.start:
        painter.fillRect(round(scene.at(scene.x.start, 0.0).x()) - 2, frame.top(), 3, frame.height(), page)
    if scene.y.start:
        painter.fillRect(frame.left(), round(scene.at(0.0, scene.y.start).y()) - 1, frame.width(), 3, page)


# Scales ---------------------------------------------------------------------------------------------------------


def _paint_scales(painter: QPainter, scene: Scene, theme: Theme) -> None:
    _paint_scale_across(painter, scene, theme)
    _paint_scale_upwards(painter, scene, theme)
    painter.setPen(theme.colour("ink"))
    frame = scene.frame
    below = QRectF(frame.left(), frame.bottom() + 22, frame.width(), 20)
    painter.drawText(below, Qt.AlignmentFlag.AlignCenter, scene.x.title)
    painter.save()
    painter.translate(12.0, frame.center().y())
    painter.rotate(-90.0)
    beside = QRectF(-frame.height() / 2.0, -10.0, frame.height(), 20.0)
    painter.drawText(beside, Qt.AlignmentFlag.AlignCenter, scene.y.title)
    painter.restore()


def _paint_scale_across(painter: QPainter, scene: Scene, theme: Theme) -> None:
    frame, free = scene.frame, -1e9
    metrics = painter.fontMetrics()
    if scene.x.start:
        painter.setPen(theme.colour("quiet"))
        painter.drawText(QPointF(frame.left(), frame.bottom() + 17.0), "off")
        free = frame.left() + metrics.horizontalAdvance("off ")
    for tick in scene.x.ticks():
        at = scene.at(tick.position / POSITIONS, 0.0).x()
        colour = theme.colour("quiet" if tick.main else "line")
        painter.fillRect(round(at), frame.bottom() + 2, 1, 5 if tick.main else 3, colour)
        width = metrics.horizontalAdvance(tick.text)
        left = min(at - width / 2.0, frame.right() + RIGHT - width)
        if tick.main and left >= free:
            painter.setPen(colour)
            painter.drawText(QPointF(left, frame.bottom() + 17.0), tick.text)
            free = left + width + 8.0


def _paint_scale_upwards(painter: QPainter, scene: Scene, theme: Theme) -> None:
    frame, free = scene.frame, float(scene.frame.bottom() + 1)
    metrics = painter.fontMetrics()
    end = frame.left() - 8.0
    if scene.y.start:
        first = scene.at(0.0, scene.y.start).y() + metrics.ascent() / 2.0 - 1.0
        off = max(free, first + metrics.ascent() + 1.0)  # the end of the scale has its number first
        painter.setPen(theme.colour("quiet"))
        painter.drawText(QPointF(end - metrics.horizontalAdvance("off"), off), "off")
        free = first
    for tick in scene.y.ticks():
        at = scene.at(0.0, tick.position / POSITIONS).y()
        colour, length = theme.colour("quiet" if tick.main else "line"), 5 if tick.main else 3
        painter.fillRect(frame.left() - 2 - length, round(at), length, 1, colour)
        base = max(at + metrics.ascent() / 2.0 - 1.0, float(frame.top() + metrics.ascent() - 4))
        if tick.main and base <= free:
            painter.setPen(colour)
            painter.drawText(QPointF(end - metrics.horizontalAdvance(tick.text), base), tick.text)
            free = base - _LEAST_GAP


# Over the areas -------------------------------------------------------------------------------------------------


def _paint_contours(painter: QPainter, scene: Scene, theme: Theme) -> None:
    """Paint the lines, that of the limit over the others, and then their numbers, its own first."""
    contours = _told_apart(scene)
    for contour in contours:
        for line in _polygons(scene, contour):
            for width, colour in _strokes(contour, theme):
                painter.setPen(QPen(colour, width))
                painter.drawPolyline(line)
    taken = [_around(scene.at(spot.x, spot.y)) for spot in (*scene.spots, scene.present) if spot is not None]
    for contour in sorted(contours, key=lambda contour: not contour.is_limit):
        said = quantity(contour.level, scene.unit, 3)
        text = f"limit {said}" if contour.is_limit else said
        _paint_label(
            painter, _polygons(scene, contour), text, "limit_word" if contour.is_limit else "ink", taken, theme
        )


def _told_apart(scene: Scene) -> list[Contour]:
    """Return the contours, on a low map every other one: its lines would lie too close together."""
    plain = [contour for contour in scene.contours if not contour.is_limit]
    limits = [contour for contour in scene.contours if contour.is_limit]
    return (plain[1::2] if scene.frame.height() < _LOW and len(plain) > 2 else plain) + limits


def _strokes(contour: Contour, theme: Theme) -> Sequence[tuple[float, QColor]]:
    if contour.is_limit:
        return (5.0, QColor(_DARK)), (3.0, theme.colour("limit"))
    return ((1.0, QColor(_DARK)),)


def _polygons(scene: Scene, contour: Contour) -> list[QPolygonF]:
    return [QPolygonF([scene.at(x, y) for x, y in line.tolist()]) for line in contour.lines]


def _paint_label(  # noqa: PLR0913, PLR0917 - what is said, where, and what it must not cover
    painter: QPainter, lines: Sequence[QPolygonF], text: str, role: str, taken: list[QRectF], theme: Theme
) -> None:
    """Write the value on its longest line, where no other stands yet."""
    longest = max(lines, key=_length)
    if _length(longest) < _LEAST_LABELLED:
        return
    for share in (0.5, 0.35, 0.65, 0.2, 0.8):
        plate = _plate(painter, text, longest.at(int(share * (longest.size() - 1))))
        room = QRectF(painter.clipBoundingRect())
        if room.contains(plate) and not any(plate.intersects(other) for other in taken):
            taken.append(plate)
            _paint_plate(painter, plate, text, theme.colour(role), theme)
            return


def _around(at: QPointF) -> QRectF:
    return QRectF(at.x() - 18.0, at.y() - 18.0, 36.0, 36.0)


def _length(line: QPolygonF) -> float:
    box = line.boundingRect()
    return float(np.hypot(box.width(), box.height()))


def _plate(painter: QPainter, text: str, middle: QPointF) -> QRectF:
    metrics = painter.fontMetrics()
    width, height = metrics.horizontalAdvance(text) + 8.0, metrics.height() + 2.0
    return QRectF(middle.x() - width / 2.0, middle.y() - height / 2.0, width, height)


def _paint_plate(painter: QPainter, plate: QRectF, text: str, colour: QColor, theme: Theme) -> None:
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(theme.colour("page"))
    painter.drawRoundedRect(plate, 2.0, 2.0)
    painter.setPen(colour)
    painter.drawText(plate, Qt.AlignmentFlag.AlignCenter, text)


def _paint_words(painter: QPainter, scene: Scene, theme: Theme) -> None:
    """Name the classes where there is room."""
    painter.setFont(theme.font("body", strong=True))
    for room in scene.rooms:
        middle = QPointF(scene.frame.left() + room.x, scene.frame.top() + room.y)
        word = WORDS[room.grade]
        _paint_plate(painter, _plate(painter, word, middle), word, theme.colour(ROLES[room.grade]), theme)
    painter.setFont(theme.font("small"))


# Places ---------------------------------------------------------------------------------------------------------


def _paint_pointer(painter: QPainter, scene: Scene, theme: Theme) -> None:
    if scene.pointer is None:
        return
    at, frame = scene.at(scene.pointer.x, scene.pointer.y), scene.frame
    for width, colour in ((3.0, theme.colour("page")), (1.0, theme.colour("ink"))):
        painter.setPen(QPen(colour, width))
        painter.drawLine(QPointF(at.x(), frame.top()), QPointF(at.x(), frame.bottom() + 1))
        painter.drawLine(QPointF(frame.left(), at.y()), QPointF(frame.right() + 1, at.y()))


def _paint_present(painter: QPainter, scene: Scene, spot: Spot, theme: Theme) -> None:
    """Paint the present gains: a ring with a cross through it."""
    at = scene.at(spot.x, spot.y)
    painter.setBrush(Qt.BrushStyle.NoBrush)
    accent = theme.colour("nominal" if scene.has_focus else "ink")
    for width, colour in ((5.0, theme.colour("page")), (2.0, accent)):
        painter.setPen(QPen(colour, width))
        painter.drawEllipse(at, _RING, _RING)
        for x, y in ((1.0, 0.0), (-1.0, 0.0), (0.0, 1.0), (0.0, -1.0)):
            inner, outer = QPointF(3.0 * x, 3.0 * y), QPointF((_RING + 6.0) * x, (_RING + 6.0) * y)
            painter.drawLine(at + inner, at + outer)


def _paint_spot(painter: QPainter, scene: Scene, spot: Spot, taken: list[QRectF], theme: Theme) -> None:
    """Paint a tuning worth finding again: a small square with its name, beside it where no other name stands."""
    at = scene.at(spot.x, spot.y)
    square = QRectF(at.x() - 4.0, at.y() - 4.0, 8.0, 8.0)
    painter.setPen(QPen(theme.colour("ink"), 1.5))
    painter.setBrush(theme.colour("page"))
    painter.drawRect(square)
    plates = _beside(_plate(painter, spot.name, at))
    room = QRectF(scene.frame)
    free = (one for one in plates if room.contains(one) and not any(one.intersects(other) for other in taken))
    plate = next(free, plates[0])
    taken.append(plate)
    _paint_plate(painter, plate, spot.name, theme.colour("ink"), theme)


def _beside(plate: QRectF) -> list[QRectF]:
    """Return a plate moved off the mark in its middle: to the right, left, up and down, the nearest first."""
    across, upwards = plate.width() / 2.0 + 10.0, plate.height() / 2.0 + 8.0
    moves = ((across, 0.0), (-across, 0.0), (0.0, -upwards), (0.0, upwards), (across, -upwards), (across, upwards))
    return [plate.translated(x, y) for x, y in moves]
