"""The slider of a ruler: a strip with a scale and marks, moved by mouse, wheel and keys."""

from collections.abc import Sequence
from typing import ClassVar

from PySide6.QtCore import QEvent, QSize, Qt, QTimer, Signal
from PySide6.QtGui import QFocusEvent, QImage, QKeyEvent, QMouseEvent, QPainter, QPaintEvent, QWheelEvent
from PySide6.QtWidgets import QSizePolicy, QSlider, QWidget

from tuner.footing.classes import PaintedTrack
from tuner.session.ruler_range import POSITIONS, RulerRange, Step, place, position, stepped, value_at, values_along
from tuner.session.tunings import Mark
from tuner.window.rulers.edges import around, stop_beyond
from tuner.window.rulers.face import MARGIN, TRACK_HEIGHT, Face, paint_face
from tuner.window.rulers.strip import class_strip
from tuner.window.theme import Theme

HEIGHT = 40
WHEEL_PAUSE = 400
"""Milliseconds after the last turn of the wheel when the hand counts as off."""


class RulerSlider(QSlider):
    """A slider along a `RulerRange`.

    It never changes what it shows by itself: it says what the hand wants, and is told what holds.
    """

    wanted = Signal(object)
    """The value that the hand wants; None for an absent one."""
    grasped = Signal()
    let_go = Signal()
    reset_wanted = Signal()
    pointed = Signal(object)
    """The value under the mouse, the button up; None for an absent one."""
    focused = Signal()
    left = Signal()
    """Neither mouse nor keys are at this slider any more, or one of them left it to the other."""

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
        self._track: PaintedTrack | None = None
        self._faded = False
        self._strip: QImage | None = None
        self._pointer: float | None = None
        self._grasp = ""
        self.pressed_twice = False
        self.setRange(0, POSITIONS)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setMouseTracking(True)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self._wheel_pause = QTimer(self, singleShot=True, interval=WHEEL_PAUSE)
        self._wheel_pause.timeout.connect(lambda: self._let_go("wheel"))
        theme.changed.connect(self._repaint_strip)

    def show_value(self, span: RulerRange, marks: Sequence[Mark], value: float | None) -> None:
        """Show a value on a range, with the marks beside it; the value is not altered by the slider's whole steps."""
        if (span, tuple(marks), value) == (self._span, self._marks, self._value):
            return
        if span != self._span:
            self._strip = None
        self._span, self._marks, self._value = span, tuple(marks), value
        self.setValue(position(span, value))
        self.update()

    def show_footing(self, track: PaintedTrack | None, *, faded: bool = False) -> None:
        """Paint the track by its classes and edges, paler where they are out of date; grey when there are none."""
        if track is not self._track or faded != self._faded:
            self._track, self._faded = track, faded
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

    def event(self, event: QEvent) -> bool:
        """Show no tip over the track: the line under the rulers reads it, and a tip would cover the next ruler."""
        return event.type() == QEvent.Type.ToolTip or super().event(event)

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
        else:
            self._point(event)

    def leaveEvent(self, event: QEvent) -> None:
        """Forget where the mouse pointed."""
        super().leaveEvent(event)
        self._point_nowhere()
        self.left.emit()

    def focusInEvent(self, event: QFocusEvent) -> None:
        """Tell that keys go here."""
        super().focusInEvent(event)
        self.focused.emit()

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Tell that keys go elsewhere."""
        super().focusOutEvent(event)
        self.left.emit()

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
        """Step by the keys: arrows fine, with Shift or by page coarse, Home and End to the ends, Backspace resets.

        Alt and an arrow go to the next edge of the footing: first to its near side, then across it.
        """
        key = Qt.Key(event.key())
        if key in self._STEPS and event.modifiers() & Qt.KeyboardModifier.AltModifier:
            self._take_hold("key")
            self._want_edge(self._STEPS[key][1])
        elif key in self._STEPS:
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
        self._point_nowhere()
        value = self._value_under(event)
        if value != self._value:
            self.wanted.emit(value)

    def _point(self, event: QMouseEvent) -> None:
        self._pointer = min(max(event.position().x(), MARGIN), MARGIN + self._length - 1)
        self.update()
        self.pointed.emit(self._value_under(event))

    def _point_nowhere(self) -> None:
        if self._pointer is not None:
            self._pointer = None
            self.update()

    def _value_under(self, event: QMouseEvent) -> float | None:
        per_pixel = POSITIONS / self._length
        at = round((event.position().x() - MARGIN) * per_pixel)
        return value_at(self._span, min(max(at, 0), POSITIONS), per_pixel)

    def _want_edge(self, direction: int) -> None:
        value = stop_beyond(self._track, self._span, self._value, direction) if self._track else self._value
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
        """Paint track, edges, scale, marks and handle."""
        painter = QPainter(self)
        paint_face(painter, self._face(), self._theme)
        painter.end()

    def _face(self) -> Face:
        below_above = around(self._track, self._value) if self._track else ()
        return Face(
            self._span,
            self.width(),
            self._picture(),
            self._marks,
            self._value,
            tuple(edge for edge in below_above if edge),
            self._pointer,
            self.hasFocus(),
        )

    def _picture(self) -> QImage | None:
        """Return the picture of the track, made anew only when something about it changed."""
        if self._track is not None and (self._strip is None or self._strip.width() != self._length):
            classes = self._track.class_at(values_along(self._span, self._length))
            self._strip = class_strip(classes, self._length, TRACK_HEIGHT, self._theme, faded=self._faded)
        return self._strip if self._track is not None else None

    def _repaint_strip(self) -> None:
        self._strip = None
        self.update()


def _pace(modifiers: Qt.KeyboardModifier, otherwise: Step) -> Step:
    return "coarse" if modifiers & Qt.KeyboardModifier.ShiftModifier else otherwise
