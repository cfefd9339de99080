"""The face of a ruler's slider: the painted track, its edges, the scale, marks and handle."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import NamedTuple

from PySide6.QtCore import QPointF, QRect, QRectF, Qt
from PySide6.QtGui import QColor, QImage, QPainter, QPen, QPolygonF

from tuner.footing.classes import Edge
from tuner.session.ruler_range import POSITIONS, RulerRange, place, ticks
from tuner.session.tunings import Mark
from tuner.window.rulers.edges import edge_number
from tuner.window.theme import Theme

MARGIN = 8
"""Pixels left and right of the track, so that handle and first number fit."""

TRACK_TOP, TRACK_HEIGHT = 12, 12
_LEAST_GAP = 4  # pixels between two lines of the scale
_MARK_HEIGHT = 6
_LETTER = 12  # pixels that the name of a kept tuning takes
_RAIL = 4  # pixels that a track without classes is thinner above and below
_HANDLE = 5.0  # pixels that the handle takes on each side
_FARTHEST = 24.0  # pixels between an edge and its number


@dataclass(frozen=True, slots=True, eq=False)
class Face:
    """What a slider shows.

    Parameters
    ----------
    span : RulerRange
        Along the track.
    width : int
        Of the whole slider, pixels.
    strip : QImage or None
        The picture of the track; None while nobody computed its classes.
    marks : tuple of Mark
        Values worth finding again.
    value : float or None
        Where the handle stands.
    edges : tuple of Edge
        Those whose place is written at the track.
    pointer : float or None
        Where the mouse points, pixels; None while it does not.
    has_focus : bool
        Whether keys go to this slider.
    """

    span: RulerRange
    width: int
    strip: QImage | None
    marks: tuple[Mark, ...]
    value: float | None
    edges: tuple[Edge, ...] = ()
    pointer: float | None = None
    has_focus: bool = False

    @property
    def length(self) -> int:
        """Of the track, pixels."""
        return max(self.width - 2 * MARGIN, 1)

    def x_of(self, value: float | None) -> float:
        """Return the place of a value, pixels from the left."""
        return MARGIN + place(self.span, value) / POSITIONS * self.length


class WrittenEdge(NamedTuple):
    """The number of an edge above the track: place of the edge, left end and width of the text, pixels.

    `has_line` tells whether a line leads down to the edge; where something else stands there is none.
    """

    x: float
    left: float
    width: float
    text: str
    has_line: bool


def paint_face(painter: QPainter, face: Face, theme: Theme) -> None:
    """Paint a slider."""
    _paint_track(painter, face, theme)
    _paint_scale(painter, face, theme)
    _paint_edges(painter, face, theme)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    for mark in reversed(face.marks):
        if mark.kind == "kept":
            _paint_kept(painter, face, mark, theme)
        else:
            _paint_triangle(painter, face, mark, theme)
    _paint_handle(painter, face, theme)


def _paint_track(painter: QPainter, face: Face, theme: Theme) -> None:
    track = QRect(MARGIN, TRACK_TOP, face.length, TRACK_HEIGHT)
    if face.strip is None:  # a thin rail: grey of the full height might be taken for a class by those who see no green
        painter.fillRect(track.adjusted(0, _RAIL, 0, -_RAIL), theme.colour("line"))
    else:
        painter.drawImage(track.topLeft(), face.strip)
    if face.span.has_off:
        edge = round(MARGIN + face.span.start / POSITIONS * face.length)
        painter.fillRect(edge - 2, track.top(), 3, track.height(), theme.colour("page"))
    if face.pointer is not None:
        painter.fillRect(round(face.pointer) - 1, track.top() - 2, 3, track.height() + 4, theme.colour("page"))
        painter.fillRect(round(face.pointer), track.top() - 2, 1, track.height() + 4, theme.colour("ink"))


def _paint_scale(painter: QPainter, face: Face, theme: Theme) -> None:
    painter.setFont(theme.font("small"))
    quiet, line = theme.colour("quiet"), theme.colour("line")
    bottom, last, free = TRACK_TOP + TRACK_HEIGHT, -1e9, -1e9
    for tick in ticks(face.span):
        x = MARGIN + tick.position / POSITIONS * face.length
        if not tick.main and x - last < _LEAST_GAP:
            continue
        last = x
        painter.fillRect(round(x), bottom + 1, 1, 4 if tick.main else 2, quiet if tick.main else line)
        if tick.main and x > free:
            free = _paint_number(painter, face, x, tick.text, quiet)
    if face.span.has_off:
        painter.setPen(quiet)
        painter.drawText(QPointF(0.0, bottom + 15.0), "off")


def _paint_number(painter: QPainter, face: Face, x: float, text: str, colour: QColor) -> float:
    """Write a number under its line, kept within the widget; return where the next may begin."""
    width = painter.fontMetrics().horizontalAdvance(text)
    least = painter.fontMetrics().horizontalAdvance("off ") if face.span.has_off else 0
    left = min(max(x - width / 2.0, float(least)), float(face.width - width))
    painter.setPen(colour)
    painter.drawText(QPointF(left, TRACK_TOP + TRACK_HEIGHT + 15.0), text)
    return left + width * 1.5 + 8.0


def _paint_edges(painter: QPainter, face: Face, theme: Theme) -> None:
    ink = theme.colour("ink")
    painter.setPen(ink)
    for one in written_edges(face, lambda text: float(painter.fontMetrics().horizontalAdvance(text))):
        if one.has_line:
            painter.fillRect(round(one.x), 2, 1, TRACK_TOP - 2, ink)
        painter.drawText(QPointF(one.left, TRACK_TOP - 3.0), one.text)


def written_edges(face: Face, width_of: Callable[[str], float]) -> list[WrittenEdge]:
    """Return the edges that find room above the track, the nearest to the handle first: numbers never overlap.

    Parameters
    ----------
    width_of : callable
        Pixels that a text takes.
    """
    at = face.x_of(face.value)
    inside = [edge for edge in face.edges if face.span.low <= edge.value <= face.span.high]
    taken, written = _taken(face), list[WrittenEdge]()
    for edge in sorted(inside, key=lambda one: abs(face.x_of(one.value) - at)):
        x, text = face.x_of(edge.value), edge_number(edge)
        width, away = width_of(text), edge.value > (face.value or 0.0)
        sides = (_free_place(face, x, width, taken, to_the_right=side) for side in (away, not away))
        left = next((place for place in sides if place is not None), None)
        if left is not None:
            written.append(WrittenEdge(x, left, width, text, has_line=not _within(taken, x, x + 1.0)))
            taken.append((left, left + width))
    return written


def _free_place(
    face: Face, x: float, width: float, stretches: Sequence[tuple[float, float]], *, to_the_right: bool
) -> float | None:
    """Return where a number of some width begins beside a place, past what stands there; None when that is far."""
    left = x + 4.0 if to_the_right else x - 4.0 - width
    while taken := _within(stretches, left, left + width):
        left = max(end for _, end in taken) + 3.0 if to_the_right else min(start for start, _ in taken) - 3.0 - width
    gap = left - x if to_the_right else x - left - width
    return left if gap <= _FARTHEST and left >= 0.0 and left + width <= face.width else None


def _taken(face: Face) -> list[tuple[float, float]]:
    """Return the stretches above the track that marks and handle take."""
    at = face.x_of(face.value)
    taken = [(at - _HANDLE, at + _HANDLE)]
    for mark in face.marks:
        x = face.x_of(mark.value)
        taken.append((x - 1.0, x + _LETTER + 6.0) if mark.kind == "kept" else (x - _MARK_HEIGHT, x + _MARK_HEIGHT))
    return taken


def _within(stretches: Sequence[tuple[float, float]], left: float, right: float) -> list[tuple[float, float]]:
    """Return those of some stretches that reach into one."""
    return [(start, end) for start, end in stretches if start < right and end > left]


def _paint_kept(painter: QPainter, face: Face, mark: Mark, theme: Theme) -> None:
    """Paint a kept tuning: a line across the track with its name; names at one value stand beside one another."""
    x = face.x_of(mark.value)
    colour = theme.colour("kept_word")
    painter.fillRect(round(x), 1, 1, TRACK_TOP + TRACK_HEIGHT - 1, colour)
    painter.setPen(colour)
    painter.setFont(theme.font("small"))
    before = [other for other in face.marks[: face.marks.index(mark)] if other.kind == "kept"]
    near = sum(abs(face.x_of(other.value) - x) < 8.0 for other in before)
    painter.drawText(QPointF(x + 6.0 + 8.0 * near, TRACK_TOP - 2.0), mark.label)


def _paint_triangle(painter: QPainter, face: Face, mark: Mark, theme: Theme) -> None:
    """Paint a mark above the track: as opened a full triangle, as found a hollow one around it."""
    x = face.x_of(mark.value)
    full = mark.kind == "reset"
    colour = theme.colour("ink" if full else "quiet")
    painter.setPen(QPen(colour, 1.0))
    painter.setBrush(colour if full else theme.colour("page"))
    tip, top = float(TRACK_TOP - 1), float(TRACK_TOP - 1 - _MARK_HEIGHT)
    half = _MARK_HEIGHT / 2.0 + (0.0 if full else 2.0)
    painter.drawPolygon(QPolygonF([QPointF(x, tip), QPointF(x - half, top), QPointF(x + half, top)]))


def _paint_handle(painter: QPainter, face: Face, theme: Theme) -> None:
    x = face.x_of(face.value)
    ink, page = theme.colour("ink"), theme.colour("page")
    accent = theme.colour("nominal") if face.has_focus else ink
    for width, beyond, colour in ((9.0, 5.0, page), (7.0, 4.0, accent), (1.0, 1.0, page)):
        bar = QRectF(x - width / 2.0, TRACK_TOP - beyond, width, TRACK_HEIGHT + 2.0 * beyond)
        _paint_bar(painter, bar, colour)


def _paint_bar(painter: QPainter, bar: QRectF, colour: QColor) -> None:
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(colour)
    painter.drawRoundedRect(bar, bar.width() / 4.0, bar.width() / 4.0)
