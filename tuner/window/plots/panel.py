"""One plot with its words: a title, the axis in words, what is missed here, and what the pointer reads."""

from collections.abc import Sequence
from typing import ClassVar, Generic, Protocol, TypeVar

import pyqtgraph as pg
from PySide6.QtCore import QEvent, QObject, QPointF, QRectF, Qt, Signal
from PySide6.QtGui import QContextMenuEvent, QFocusEvent, QKeyEvent, QPainter, QResizeEvent
from PySide6.QtWidgets import QHBoxLayout, QSizePolicy, QVBoxLayout, QWidget

from tuner.window.elided import ElidedLabel, RoleLabel
from tuner.window.plots.extent import Extent
from tuner.window.plots.items import Axis
from tuner.window.plots.layers import GroundLayer, MarkLayer
from tuner.window.plots.still import StillPicture
from tuner.window.plots.ticks import Tick, ticks
from tuner.window.theme import Theme

Answer = TypeVar("Answer")
"""What a plot shows."""

_LEFT_AXIS = 52
_BOTTOM_AXIS = 22
_OVERHANG = 24
"""Pixels that the numbers at the ends of an axis may stand out beyond it."""
_TICK_WIDTH, _TICK_HEIGHT = 80, 28


class Click(Protocol):
    """A press of the mouse, as the scene tells it."""

    def button(self) -> Qt.MouseButton:
        """Return which button."""
        ...

    def scenePos(self) -> QPointF:
        """Return where in the scene."""
        ...


class PlotView(pg.PlotWidget):  # type: ignore[misc]  # pyqtgraph publishes no types
    """The plot itself: no menus, no automatic ranges; a wheel or a drag looks closer, a double click looks at all."""

    resized = Signal()
    left = Signal()
    menu_wanted = Signal(object)
    whole_wanted = Signal()
    stepped = Signal(int)
    """How many small steps the keyboard moves the pointer: to the right, or to the left when negative."""

    _STEPS: ClassVar[dict[Qt.Key, int]] = {
        Qt.Key.Key_Right: 1,
        Qt.Key.Key_Left: -1,
        Qt.Key.Key_PageUp: 10,
        Qt.Key.Key_PageDown: -10,
    }

    def __init__(self, name: str) -> None:
        self.still = StillPicture(self)
        self.axes = Axis("left", self.still), Axis("bottom", self.still)
        super().__init__(enableMenu=False, axisItems=dict(zip(("left", "bottom"), self.axes, strict=True)))
        item = self.getPlotItem()
        item.hideButtons()
        item.disableAutoRange()
        item.layout.setContentsMargins(0, _OVERHANG // 3, _OVERHANG, 0)
        item.getViewBox().setDefaultPadding(0.0)
        item.getAxis("left").setWidth(_LEFT_AXIS)
        item.getAxis("bottom").setHeight(_BOTTOM_AXIS)
        self.setFrameShape(self.Shape.NoFrame)
        # Every answer changes the whole picture, so that finding out what changed is time lost.
        self.setViewportUpdateMode(self.ViewportUpdateMode.FullViewportUpdate)
        self.scene().setItemIndexMethod(self.scene().ItemIndexMethod.NoIndex)
        # The picture of what stays is our own: Qt's would be too coarse for pictures of twice the size.
        self.setCacheMode(self.CacheModeFlag.CacheNone)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        # It covers its whole ground itself; without this Qt paints the ground of every parent first.
        self.viewport().setAttribute(Qt.WidgetAttribute.WA_OpaquePaintEvent)
        self.viewport().setFocusPolicy(Qt.FocusPolicy.NoFocus)
        self.setAccessibleName(name)
        self.is_pointing = False

    def drawBackground(self, painter: QPainter, _area: QRectF) -> None:
        """Lay down what stays."""
        self.still.draw(painter)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Move the pointer by the keys, and let it go with Escape, which means something else where there is none."""
        if event.key() in self._STEPS:
            self.stepped.emit(self._STEPS[Qt.Key(event.key())])
        elif event.key() == Qt.Key.Key_Escape and self.is_pointing:
            self.left.emit()
        else:
            event.ignore()

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Let go of the pointer."""
        super().focusOutEvent(event)
        self.left.emit()

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Say so when the room changes."""
        super().resizeEvent(event)
        self.resized.emit()

    def leaveEvent(self, event: QEvent) -> None:
        """Say so when the pointer leaves."""
        super().leaveEvent(event)
        self.left.emit()

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        """Ask for the menu of the panel."""
        self.menu_wanted.emit(event.globalPos())

    def mouseDoubleClickEvent(self, event: object) -> None:
        """Ask for the whole plot again."""
        super().mouseDoubleClickEvent(event)
        self.whole_wanted.emit()


class Panel(QObject, Generic[Answer]):
    """A plot with its words; what it shows, others say.

    Parameters
    ----------
    name : str
        What it is called, for menus, files and screen readers.
    theme : Theme
        The look.
    """

    menu_wanted = Signal(object)
    plant_wanted = Signal(str)
    """A plant of the family is to be looked at: its name was pressed."""

    def __init__(self, name: str, theme: Theme) -> None:
        super().__init__()
        self.name = name
        self.held = False
        self.stale = False
        self.shown: Answer | None = None
        self._theme = theme
        self._by_hand = False
        self._divided: tuple[object, ...] = ()
        self.view = PlotView(name)
        box = self.view.getPlotItem().getViewBox()
        self.ground = GroundLayer(box, theme, self.view.still)
        for item in (self.ground, *self.view.axes):
            self.view.still.add(item)
        self.marks = MarkLayer(box, theme)
        self.widget = self._arranged()
        self._connect()
        self.dress()

    # What subclasses say ----------------------------------------------------------------------------------------

    def draw(self, shown: Answer) -> None:
        """Take over the numbers of an answer and draw them in the ranges that they ask for."""
        raise NotImplementedError

    def redraw(self) -> None:
        """Draw what is shown once more in the ranges that hold now, after those or the look changed."""
        raise NotImplementedError

    def ask(self) -> tuple[Extent, Extent] | None:
        """Return the ranges that what is shown asks for, None before anything is shown."""
        raise NotImplementedError

    def read(self, x: float, y: float) -> tuple[tuple[float, float], str] | None:
        """Return the point that the pointer means and what it reads there, in words with units."""
        raise NotImplementedError

    def step(self, steps: int) -> tuple[float, float] | None:
        """Return where the pointer goes by so many steps of the keyboard, None when there is nowhere to go."""
        raise NotImplementedError

    # What the window says ---------------------------------------------------------------------------------------

    def show(self, shown: Answer) -> None:
        """Show an answer."""
        self.shown, self.stale = shown, False
        self.view.setVisible(True)
        self._empty.setVisible(False)
        self.draw(shown)

    def show_stale(self) -> None:
        """Grey the curves: they belong to an earlier sheet."""
        self.stale = True
        self.redraw()

    def hold(self, held: bool) -> None:
        """Say whether a hand is on a ruler; when it is off, the ranges narrow to what is shown."""
        self.held = held
        if not held and self.shown is not None:
            self.draw(self.shown)

    def show_whole(self) -> None:
        """Forget what was looked at more closely."""
        self._by_hand = False
        if self.shown is not None:
            self.draw(self.shown)

    def forget(self) -> None:
        """Forget ranges and curves: what comes next is another loop."""
        self._by_hand = False

    def say_empty(self, sentence: str) -> None:
        """Say why there is nothing to show yet."""
        self._empty.setText(sentence)

    @property
    def empty_words(self) -> str:
        """Why there is nothing to show."""
        return self._empty.text()

    def show_empty(self, sentence: str) -> None:
        """Show a sentence in place of curves: an answer has none."""
        self.shown = None
        self.view.setVisible(False)
        self._empty.setText(sentence)
        self._empty.setVisible(True)
        self.set_words("", "", bad=False)

    def dress(self) -> None:
        """Take over the colours of the theme."""
        self.view.setBackground(self._theme.colour("page"))
        item = self.view.getPlotItem()
        for side in ("left", "bottom"):
            axis = item.getAxis(side)
            axis.setStyle(
                tickFont=self._theme.font("small"), tickLength=0, tickTextOffset=4, hideOverlappingLabels=_OVERHANG
            )
            axis.setPen(pg.mkPen(self._theme.colour("line")))
            axis.setTextPen(pg.mkPen(self._theme.colour("quiet")))
        self._missed.dress()
        self.ground.update()
        self.marks.update()

    # For subclasses ---------------------------------------------------------------------------------------------

    def set_words(self, axis: str, missed: str, *, bad: bool) -> None:
        """Show the axis in words, and what is missed here, or that nothing is."""
        self._axis.setText(axis)
        self._missed.setText(missed)
        self._missed.set_role("lost_word" if bad else "quiet")
        self.widget.setAccessibleDescription(f"{axis}. {missed}")

    def set_ranges(self, x: Extent, y: Extent) -> None:
        """Show these ranges, unless a closer look was taken by hand."""
        if self._by_hand:
            return
        box = self.view.getPlotItem().getViewBox()
        (left, right), (low, high) = box.viewRange()
        if (left, right, low, high) != (x.low, x.high, y.low, y.high):
            box.setRange(xRange=(x.low, x.high), yRange=(y.low, y.high), padding=0.0, disableAutoRange=True)

    def ranges(self) -> tuple[Extent, Extent]:
        """Return the ranges that are shown."""
        x, y = self.view.getPlotItem().getViewBox().viewRange()
        return Extent(*x), Extent(*y)

    def set_ticks(self, x: Sequence[Tick], y: Sequence[Tick], x_unit: str) -> None:
        """Divide both axes and draw the grid; the unit stands behind the last number of the horizontal axis."""
        item = self.view.getPlotItem()
        named = [(tick.at, tick.text) for tick in x]
        if named and x_unit:
            named[-1] = (named[-1][0], f"{named[-1][1]} {x_unit}")
        item.getAxis("bottom").setTicks([named])
        item.getAxis("left").setTicks([[(tick.at, tick.text) for tick in y]])
        self.ground.columns = tuple(tick.at for tick in x)
        self.ground.rows = tuple(tick.at for tick in y)
        self.ground.update()

    def divide(self, x_unit: str, *, x_offset: float = 0.0, y_offset: float = 0.0, time: bool = True) -> None:
        """Divide the axes as finely as there is room."""
        x, y = self.ranges()
        box = self.view.getPlotItem().getViewBox()
        asked = (x, y, box.width(), box.height(), x_unit, x_offset, y_offset)
        if asked == self._divided:
            return
        self._divided = asked
        across = max(int(self.columns() / _TICK_WIDTH), 2)
        upwards = max(int(box.height() / _TICK_HEIGHT), 2)
        self.set_ticks(
            ticks(x.low, x.high, across, offset=x_offset, time=time),
            ticks(y.low, y.high, upwards, offset=y_offset),
            x_unit,
        )

    def columns(self) -> int:
        """Return how many pixels wide the plot is."""
        return max(int(self.view.getPlotItem().getViewBox().width()), 50)

    # Inside -----------------------------------------------------------------------------------------------------

    def _arranged(self) -> QWidget:
        widget = QWidget()
        widget.setAccessibleName(self.name)
        widget.setMinimumSize(240, 120)
        column = QVBoxLayout(widget)
        column.setContentsMargins(8, 2, 8, 2)
        column.setSpacing(0)
        column.addLayout(self._header())
        self._missed = RoleLabel(self._theme)
        self._missed.setFont(self._theme.font("small"))
        self._missed.setContentsMargins(0, 0, 0, 4)
        column.addWidget(self._missed)
        self._empty = ElidedLabel("Computing the first answer…", Qt.AlignmentFlag.AlignCenter)
        self._empty.setProperty("voice", "quiet")
        self._empty.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Expanding)
        column.addWidget(self._empty)
        column.addWidget(self.view, 1)
        self.view.setVisible(False)
        return widget

    def _header(self) -> QHBoxLayout:
        title, self._axis, self._readout = ElidedLabel(self.name, stretch=False), ElidedLabel(), ElidedLabel()
        title.setFont(self._theme.font("body", strong=True))
        self._axis.setProperty("voice", "quiet")
        self._readout.setAlignment(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        self._readout.setVisible(False)
        row = QHBoxLayout()
        row.setSpacing(8)
        row.addWidget(title)
        row.addWidget(self._axis, 1)
        row.addWidget(self._readout, 2)
        return row

    def _connect(self) -> None:
        self.view.resized.connect(self._resized)
        self.view.left.connect(self._leave)
        self.view.stepped.connect(self._step)
        self.view.menu_wanted.connect(self.menu_wanted)
        self.view.whole_wanted.connect(self.show_whole)
        self.view.scene().sigMouseMoved.connect(self._pointed)
        self.view.scene().sigMouseClicked.connect(self._clicked)
        box = self.view.getPlotItem().getViewBox()
        box.sigRangeChangedManually.connect(self._looked_closer)

    def _resized(self) -> None:
        if self.shown is not None:
            self.draw(self.shown)

    def _looked_closer(self) -> None:
        self._by_hand = True
        self.redraw()

    def _pointed(self, at: QPointF) -> None:
        box = self.view.getPlotItem().getViewBox()
        place = box.mapSceneToView(at)
        self._point(self.read(place.x(), place.y()) if box.sceneBoundingRect().contains(at) else None)
        shape = Qt.CursorShape.PointingHandCursor if self._plant_at(at) else Qt.CursorShape.ArrowCursor
        if self.view.viewport().cursor().shape() != shape:
            self.view.viewport().setCursor(shape)

    def _clicked(self, event: Click) -> None:
        """Ask for the plant whose name was pressed."""
        if event.button() == Qt.MouseButton.LeftButton and (plant := self._plant_at(event.scenePos())):
            self.plant_wanted.emit(plant)

    def _plant_at(self, at: QPointF) -> str:
        return self.marks.plant_at(QPointF(self.view.mapFromScene(at)))

    def _step(self, steps: int) -> None:
        if (at := self.step(steps)) is not None:
            self._point(self.read(*at))

    def _point(self, found: tuple[tuple[float, float], str] | None) -> None:
        """Show what is read at a point of the plot, in the header and to a screen reader."""
        self.view.setAccessibleDescription(found[1] if found else "")
        self.marks.pointer = found[0] if found else None
        self.view.is_pointing = found is not None
        self.marks.update()
        self._axis.setVisible(found is None)
        self._readout.setVisible(found is not None)
        self._readout.setText(found[1] if found else "")

    def _leave(self) -> None:
        self._point(None)
