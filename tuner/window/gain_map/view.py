"""The map itself: shows classes over two gains, and says what mouse and keys want."""

from collections.abc import Sequence
from typing import ClassVar

from PySide6.QtCore import QEvent, QPointF, QRect, QSize, Qt, Signal
from PySide6.QtGui import QFocusEvent, QFontMetrics, QImage, QKeyEvent, QMouseEvent, QPainter, QPaintEvent, QResizeEvent
from PySide6.QtWidgets import QSizePolicy, QWidget

from tuner.footing.classes import UNKNOWN
from tuner.session.ruler_range import RulerRange, Step
from tuner.window.class_picture import class_picture
from tuner.window.gain_map.areas import Classes, Room, raster, rooms
from tuner.window.gain_map.axis import Axis
from tuner.window.gain_map.picture import Scene, Spot, frame_of, paint_scene
from tuner.window.gain_map.question import MapAnswer, Values
from tuner.window.theme import Theme

_NOWHERE = Axis("", RulerRange(1.0, 10.0))


class MapView(QWidget):
    """A map that never changes what it shows by itself: it says what the hand wants, and is told what holds."""

    wanted = Signal(object)
    """The `Values` that the hand wants."""
    grasped = Signal()
    let_go = Signal()
    withdrawn = Signal()
    """The hand takes back what it did since it grasped."""
    place_changed = Signal()
    """Mouse or keys look at another place, or at none."""
    map_changed = Signal()
    """Another map is shown, or none."""

    _ARROWS: ClassVar[dict[Qt.Key, tuple[int, int]]] = {
        Qt.Key.Key_Right: (0, 1),
        Qt.Key.Key_Left: (0, -1),
        Qt.Key.Key_Up: (1, 1),
        Qt.Key.Key_Down: (1, -1),
    }

    def __init__(self, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._theme = theme
        self._axes = (_NOWHERE, _NOWHERE)
        self._values: Values = (None, None)
        self._spots: tuple[tuple[str, Values], ...] = ()
        self._answer: MapAnswer | None = None
        self._faded, self._sentence = False, ""
        self._pixels: Classes | None = None
        self._areas: QImage | None = None
        self._rooms: tuple[Room, ...] = ()
        self._pointer: QPointF | None = None
        self._grasp = ""
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setMouseTracking(True)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Expanding)
        self.setAccessibleName("Gain map")
        theme.changed.connect(self._redraw)

    # What is shown ----------------------------------------------------------------------------------------------

    def show_values(self, x: Axis, y: Axis, values: Values, spots: Sequence[tuple[str, Values]]) -> None:
        """Show the present gains on their axes, and the tunings worth finding again by name."""
        if (x, y) != self._axes:
            self.show_map(None)
        self._axes, self._values, self._spots = (x, y), values, tuple(spots)
        self.update()

    def show_map(self, answer: MapAnswer | None, *, faded: bool = False) -> None:
        """Show classes and contours, paler when they are out of date."""
        self._answer, self._faded = answer, faded
        self._pixels = None
        self._redraw()
        self.map_changed.emit()

    def say(self, sentence: str) -> None:
        """Say why there is no map, for as long as there is none."""
        self._sentence = sentence
        self.update()

    @property
    def axes(self) -> tuple[Axis, Axis]:
        """The gains across and upwards."""
        return self._axes

    @property
    def values(self) -> Values:
        """The present gains."""
        return self._values

    @property
    def answer(self) -> MapAnswer | None:
        """What is shown."""
        return self._answer

    @property
    def faded(self) -> bool:
        """Whether it is shown as out of date."""
        return self._faded

    @property
    def place(self) -> Values | None:
        """The place looked at: where the mouse points, else the present gains while keys go here."""
        if self._pointer is not None:
            return self._values_at(self._pointer)
        return self._values if self.hasFocus() else None

    def grade_at(self, values: Values) -> int:
        """Return the class painted at a place."""
        frame, at = self.frame, self.point(values)
        if self._drawn_pixels() is None or self._pixels is None:
            return UNKNOWN
        column = min(max(int(at.x()) - frame.left(), 0), frame.width() - 1)
        row = min(max(int(at.y()) - frame.top(), 0), frame.height() - 1)
        return int(self._pixels[row, column])

    def point(self, values: Values) -> QPointF:
        """Return where two values are, in pixels."""
        spot = self._spot(values)
        frame = self.frame
        return QPointF(frame.left() + spot.x * frame.width(), frame.top() + (1.0 - spot.y) * frame.height())

    @property
    def frame(self) -> QRect:
        """Where the map is in the widget."""
        return frame_of(self.width(), self.height())

    # The hand ---------------------------------------------------------------------------------------------------

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Set both gains where the button went down, and follow from there."""
        if event.button() == Qt.MouseButton.LeftButton:
            self._take_hold("mouse")
            self._follow(event.position())
            event.accept()

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        """Follow the hand."""
        if self._grasp == "mouse":
            self._follow(event.position())
        elif not event.buttons():
            self._point(event.position())

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        """Let go."""
        if event.button() == Qt.MouseButton.LeftButton:
            self._let_go("mouse")

    def leaveEvent(self, event: QEvent) -> None:
        """Forget where the mouse pointed."""
        super().leaveEvent(event)
        self._point(None)

    def focusInEvent(self, event: QFocusEvent) -> None:
        """Tell that keys go here."""
        super().focusInEvent(event)
        self._look()

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Tell that keys go elsewhere."""
        super().focusOutEvent(event)
        self._let_go("key")
        self._look()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Nudge by the arrows, with Shift by more; Escape takes back a drag, or forgets the place looked at."""
        key = Qt.Key(event.key())
        if key in self._ARROWS:
            self._nudge(*self._ARROWS[key], _pace(event.modifiers()))
        elif key == Qt.Key.Key_Escape:
            self._end()
        else:
            super().keyPressEvent(event)

    def keyReleaseEvent(self, event: QKeyEvent) -> None:
        """Let go once the key is up, not between its repeats."""
        if not event.isAutoRepeat():
            self._let_go("key")
        super().keyReleaseEvent(event)

    def _follow(self, at: QPointF) -> None:
        self._point(None)
        values = self._values_at(at)
        if values != self._values:
            self.wanted.emit(values)

    def _point(self, at: QPointF | None) -> None:
        inside = at is not None and self.frame.adjusted(-2, -2, 2, 2).contains(at.toPoint())
        pointer = at if inside else None
        if pointer != self._pointer:
            self._pointer = pointer
            self._look()

    def _look(self) -> None:
        self.update()
        self.place_changed.emit()

    def _nudge(self, which: int, direction: int, pace: Step) -> None:
        self._point(None)
        self._take_hold("key")
        moved = list(self._values)
        moved[which] = self._axes[which].step(moved[which], pace, direction)
        if tuple(moved) != self._values:
            self.wanted.emit((moved[0], moved[1]))

    def _end(self) -> None:
        if self._grasp:
            self.withdrawn.emit()
            self._let_go(self._grasp)
        else:
            self._point(None)
            self.clearFocus()

    def _take_hold(self, grasp: str) -> None:
        if self._grasp and self._grasp != grasp:
            self._let_go(self._grasp)
        if not self._grasp:
            self._grasp = grasp
            self.grasped.emit()

    def _let_go(self, grasp: str) -> None:
        if self._grasp == grasp:
            self._grasp = ""
            self.let_go.emit()

    def _values_at(self, at: QPointF) -> Values:
        frame = self.frame
        across, upwards = (at.x() - frame.left()) / frame.width(), 1.0 - (at.y() - frame.top()) / frame.height()
        return self._axes[0].value(across, frame.width()), self._axes[1].value(upwards, frame.height())

    # Painting ---------------------------------------------------------------------------------------------------

    def sizeHint(self) -> QSize:
        """Ask for as much room as there is."""
        return QSize(640, 480)

    def minimumSizeHint(self) -> QSize:
        """Return the least size at which the scales can be read."""
        return QSize(240, 180)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Draw the areas anew in another size."""
        super().resizeEvent(event)
        self._pixels = None
        self._redraw()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the map."""
        painter = QPainter(self)
        paint_scene(painter, self.scene(), self._theme)
        painter.end()

    def scene(self) -> Scene:
        """Return everything that is painted."""
        x, y = self._axes
        return Scene(
            x,
            y,
            self.frame,
            self._picture(),
            self._rooms,
            self._answer.contours if self._answer is not None else (),
            self._answer.unit if self._answer is not None else "",
            tuple(self._spot(values, name) for name, values in self._spots),
            self._spot(self._values),
            None if self._pointer is None else self._spot(self._values_at(self._pointer)),
            self._sentence,
            self.hasFocus(),
        )

    def _spot(self, values: Values, name: str = "") -> Spot:
        return Spot(self._axes[0].share(values[0]), self._axes[1].share(values[1]), name)

    def _picture(self) -> QImage | None:
        """Return the picture of the areas, made anew only when something about it changed."""
        pixels = self._drawn_pixels()
        if pixels is not None and self._areas is None:
            self._areas = class_picture(pixels, self._theme, faded=self._faded)
        return self._areas

    def _drawn_pixels(self) -> Classes | None:
        """Return the class of every pixel."""
        if self._answer is not None and self._pixels is None:
            x, y = self._axes
            frame, found = self.frame, self._answer.map
            rows = y.indices(frame.height(), found.y.values)[::-1]
            self._pixels = raster(found.classes, x.indices(frame.width(), found.x.values), rows)
            metrics = QFontMetrics(self._theme.font("body", strong=True))
            self._rooms = rooms(self._pixels, metrics.horizontalAdvance("lost ") + 24.0, metrics.height() + 12.0)
        return self._pixels if self._answer is not None else None

    def _redraw(self) -> None:
        self._areas = None
        if self._answer is None:
            self._pixels, self._rooms = None, ()
        self.update()


def _pace(modifiers: Qt.KeyboardModifier) -> Step:
    return "coarse" if modifiers & Qt.KeyboardModifier.ShiftModifier else "fine"
