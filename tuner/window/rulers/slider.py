"""The slider of a ruler: a strip with a scale and marks, moved by mouse, wheel and keys."""

from collections.abc import Sequence
from typing import ClassVar

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QPointF, QRect, QRectF, QSize, Qt, QTimer, Signal
from PySide6.QtGui import QColor, QImage, QKeyEvent, QMouseEvent, QPainter, QPaintEvent, QPen, QPolygonF, QWheelEvent
from PySide6.QtWidgets import QSizePolicy, QSlider, QWidget

from tuner.session.ruler_range import POSITIONS, RulerRange, Step, place, position, stepped, ticks, value_at
from tuner.session.tunings import Mark
from tuner.window.rulers.strip import class_strip
from tuner.window.theme import Theme

MARGIN = 8
"""Pixels left and right of the track, so that handle and first number fit."""

TRACK_TOP, TRACK_HEIGHT = 12, 12
HEIGHT = 40
WHEEL_PAUSE = 400
"""Milliseconds after the last turn of the wheel when the hand counts as off."""

_LEAST_GAP = 4  # pixels between two lines of the scale
_MARK_HEIGHT = 6


class RulerSlider(QSlider):
    """A slider along a `RulerRange`.

    It never changes what it shows by itself: it says what the hand wants, and is told what holds.
    """

    wanted = Signal(object)
    """The value that the hand wants; None for an absent one."""
    grasped = Signal()
    let_go = Signal()
    reset_wanted = Signal()

    _STEPS: ClassVar[dict[Qt.Key, tuple[Step, int]]] = {
        Qt.Key.Key_Right: ("fine", 1),
        Qt.Key.Key_Up: ("fine", 1),
        Qt.Key.Key_Left: ("fine", -1),
        Qt.Key.Key_Down: ("fine", -1),
        Qt.Key.Key_PageUp: ("coarse", 1),
        Qt.Key.Key_PageDown: ("coarse", -1),
    }

    def __init__(self, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(Qt.Orientation.Horizontal, parent)
        self._theme = theme
        self._span = RulerRange(1.0, 10.0)
        self._marks: tuple[Mark, ...] = ()
        self._value: float | None = None
        self._classes: NDArray[np.integer] | None = None
        self._strip: QImage | None = None
        self._grasp = ""
        self.pressed_twice = False
        self.setRange(0, POSITIONS)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self._wheel_pause = QTimer(self, singleShot=True, interval=WHEEL_PAUSE)
        self._wheel_pause.timeout.connect(lambda: self._let_go("wheel"))
        theme.changed.connect(self._repaint_strip)

    def show_value(self, span: RulerRange, marks: Sequence[Mark], value: float | None) -> None:
        """Show a value on a range, with the marks beside it; the value is not altered by the slider's whole steps."""
        if (span, tuple(marks), value) == (self._span, self._marks, self._value):
            return
        self._span, self._marks, self._value = span, tuple(marks), value
        self.setValue(position(span, value))
        self.update()

    def paint_classes(self, classes: NDArray[np.integer] | None) -> None:
        """Paint the track by the classes of equal pieces of it, from the left; grey when there are none."""
        self._classes = classes
        self._repaint_strip()

    @property
    def marks(self) -> tuple[Mark, ...]:
        """The marks shown."""
        return self._marks

    def x_of(self, value: float | None) -> float:
        """Return the place of a value, pixels from the left."""
        return MARGIN + place(self._span, value) / POSITIONS * self._length

    @property
    def _length(self) -> int:
        return max(self.width() - 2 * MARGIN, 1)

    # The hand ---------------------------------------------------------------------------------------------------

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Jump to where the button went down, and follow from there."""
        if event.button() == Qt.MouseButton.LeftButton:
            self._take_hold("mouse")
            self._follow(event)
            event.accept()

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        """Follow the hand."""
        if self._grasp == "mouse":
            self._follow(event)

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        """Let go."""
        if event.button() == Qt.MouseButton.LeftButton:
            self._let_go("mouse")

    def mouseDoubleClickEvent(self, event: QMouseEvent) -> None:
        """Ask for the value as opened."""
        if event.button() == Qt.MouseButton.LeftButton:
            self.pressed_twice = True
            self.reset_wanted.emit()
            self.pressed_twice = False

    def wheelEvent(self, event: QWheelEvent) -> None:
        """Step by the wheel, only where the focus is, so that scrolling by never changes a gain."""
        turn = event.angleDelta().y() or event.angleDelta().x()
        if not self.hasFocus() or not turn:
            event.ignore()
            return
        self._take_hold("wheel")
        self._want_step(_pace(event.modifiers(), "fine"), 1 if turn > 0 else -1)
        self._wheel_pause.start()
        event.accept()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Step by the keys: arrows fine, with Shift or by page coarse, Home and End to the ends, Backspace resets."""
        key = Qt.Key(event.key())
        if key in self._STEPS:
            pace, direction = self._STEPS[key]
            self._take_hold("key")
            self._want_step(_pace(event.modifiers(), pace), direction)
        elif key in (Qt.Key.Key_Home, Qt.Key.Key_End):
            self._take_hold("key")
            self.wanted.emit(value_at(self._span, 0 if key == Qt.Key.Key_Home else POSITIONS))
        elif key in (Qt.Key.Key_Backspace, Qt.Key.Key_Delete):
            self.reset_wanted.emit()
        else:
            super().keyPressEvent(event)

    def keyReleaseEvent(self, event: QKeyEvent) -> None:
        """Let go once the key is up, not between its repeats."""
        if not event.isAutoRepeat():
            self._let_go("key")
        super().keyReleaseEvent(event)

    def _follow(self, event: QMouseEvent) -> None:
        per_pixel = POSITIONS / self._length
        at = round((event.position().x() - MARGIN) * per_pixel)
        value = value_at(self._span, min(max(at, 0), POSITIONS), per_pixel)
        if value != self._value:
            self.wanted.emit(value)

    def _want_step(self, pace: Step, direction: int) -> None:
        value = stepped(self._span, self._value, pace, direction)
        if value != self._value:
            self.wanted.emit(value)

    def _take_hold(self, grasp: str) -> None:
        if self._grasp and self._grasp != grasp:
            self._let_go(self._grasp)
        if not self._grasp:
            self._grasp = grasp
            self.setSliderDown(grasp == "mouse")
            self.grasped.emit()

    def _let_go(self, grasp: str) -> None:
        if self._grasp == grasp:
            self._grasp = ""
            self.setSliderDown(False)
            self.let_go.emit()

    # Painting ---------------------------------------------------------------------------------------------------

    def sizeHint(self) -> QSize:
        """Return the wished size: as long as there is room, two lines high."""
        return QSize(320, HEIGHT)

    def minimumSizeHint(self) -> QSize:
        """Return the least size at which the scale can be read."""
        return QSize(120, HEIGHT)

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint track, scale, marks and handle."""
        painter = QPainter(self)
        self._paint_track(painter)
        self._paint_scale(painter)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        for mark in reversed(self._marks):
            if mark.kind == "kept":
                self._paint_kept(painter, mark)
            else:
                self._paint_triangle(painter, mark)
        self._paint_handle(painter)
        painter.end()

    def _repaint_strip(self) -> None:
        self._strip = None
        self.update()

    def _track(self) -> QRect:
        return QRect(MARGIN, TRACK_TOP, self._length, TRACK_HEIGHT)

    def _paint_track(self, painter: QPainter) -> None:
        track = self._track()
        if self._classes is None or not len(self._classes):
            painter.fillRect(track, self._theme.colour("line"))
        else:
            if self._strip is None or self._strip.width() != track.width():
                self._strip = class_strip(self._classes, track.width(), track.height(), self._theme)
            painter.drawImage(track.topLeft(), self._strip)
        if self._span.has_off:
            edge = round(MARGIN + self._span.start / POSITIONS * self._length)
            painter.fillRect(edge - 2, track.top(), 3, track.height(), self._theme.colour("page"))

    def _paint_scale(self, painter: QPainter) -> None:
        painter.setFont(self._theme.font("small"))
        quiet, line = self._theme.colour("quiet"), self._theme.colour("line")
        bottom, last, free = TRACK_TOP + TRACK_HEIGHT, -1e9, -1e9
        for tick in ticks(self._span):
            x = MARGIN + tick.position / POSITIONS * self._length
            if not tick.main and x - last < _LEAST_GAP:
                continue
            last = x
            painter.fillRect(round(x), bottom + 1, 1, 4 if tick.main else 2, quiet if tick.main else line)
            if tick.main and x > free:
                free = self._paint_number(painter, x, tick.text)
        if self._span.has_off:
            painter.setPen(quiet)
            painter.drawText(QPointF(0.0, bottom + 15.0), "off")

    def _paint_number(self, painter: QPainter, x: float, text: str) -> float:
        """Write a number under its line, kept within the widget; return where the next may begin."""
        width = painter.fontMetrics().horizontalAdvance(text)
        least = painter.fontMetrics().horizontalAdvance("off ") if self._span.has_off else 0
        left = min(max(x - width / 2.0, float(least)), float(self.width() - width))
        painter.setPen(self._theme.colour("quiet"))
        painter.drawText(QPointF(left, TRACK_TOP + TRACK_HEIGHT + 15.0), text)
        return left + width * 1.5 + 8.0

    def _paint_kept(self, painter: QPainter, mark: Mark) -> None:
        """Paint a kept tuning: a line across the track with its name; names at one value stand beside one another."""
        x = self.x_of(mark.value)
        colour = self._theme.colour("kept_word")
        painter.fillRect(round(x), 1, 1, TRACK_TOP + TRACK_HEIGHT - 1, colour)
        painter.setPen(colour)
        painter.setFont(self._theme.font("small"))
        before = [other for other in self._marks[: self._marks.index(mark)] if other.kind == "kept"]
        near = sum(abs(self.x_of(other.value) - x) < 8.0 for other in before)
        painter.drawText(QPointF(x + 6.0 + 8.0 * near, TRACK_TOP - 2.0), mark.label)

    def _paint_triangle(self, painter: QPainter, mark: Mark) -> None:
        """Paint a mark above the track: as opened a full triangle, as found a hollow one around it."""
        x = self.x_of(mark.value)
        full = mark.kind == "reset"
        colour = self._theme.colour("ink" if full else "quiet")
        painter.setPen(QPen(colour, 1.0))
        painter.setBrush(colour if full else self._theme.colour("page"))
        tip, top = float(TRACK_TOP - 1), float(TRACK_TOP - 1 - _MARK_HEIGHT)
        half = _MARK_HEIGHT / 2.0 + (0.0 if full else 2.0)
        painter.drawPolygon(QPolygonF([QPointF(x, tip), QPointF(x - half, top), QPointF(x + half, top)]))

    def _paint_handle(self, painter: QPainter) -> None:
        x = self.x_of(self._value)
        ink, page = self._theme.colour("ink"), self._theme.colour("page")
        accent = self._theme.colour("nominal") if self.hasFocus() else ink
        for width, beyond, colour in ((9.0, 5.0, page), (7.0, 4.0, accent), (1.0, 1.0, page)):
            bar = QRectF(x - width / 2.0, TRACK_TOP - beyond, width, TRACK_HEIGHT + 2.0 * beyond)
            _bar(painter, bar, colour)


def _bar(painter: QPainter, bar: QRectF, colour: QColor) -> None:
    painter.setPen(Qt.PenStyle.NoPen)
    painter.setBrush(colour)
    painter.drawRoundedRect(bar, bar.width() / 4.0, bar.width() / 4.0)


def _pace(modifiers: Qt.KeyboardModifier, otherwise: Step) -> Step:
    return "coarse" if modifiers & Qt.KeyboardModifier.ShiftModifier else otherwise
