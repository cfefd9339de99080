"""What of the loop diagram can be pressed: a block, a place where a block can be put in, a switch."""

from PySide6.QtCore import QPointF, QRectF, QSize, Qt, Signal
from PySide6.QtGui import QContextMenuEvent, QKeyEvent, QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QAbstractButton, QWidget

from tuner.session.blocks import Block
from tuner.window.theme import Theme

_ARROWS = {
    Qt.Key.Key_Left: QPointF(-1.0, 0.0),
    Qt.Key.Key_Right: QPointF(1.0, 0.0),
    Qt.Key.Key_Up: QPointF(0.0, -1.0),
    Qt.Key.Key_Down: QPointF(0.0, 1.0),
}
_TWO_LINES = 30
"""Height, pixels, from which a block has room for what it is set to."""


class Part(QAbstractButton):
    """Something to press; the arrow keys go on to the next one in their direction."""

    went = Signal(QPointF)
    """An arrow key was pressed: the direction."""

    def __init__(self, theme: Theme, parent: QWidget) -> None:
        super().__init__(parent)
        self._theme = theme
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setCursor(Qt.CursorShape.PointingHandCursor)
        theme.changed.connect(self.update)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Press by Enter as well as by Space, and go on by the arrows."""
        key = Qt.Key(event.key())
        if key in _ARROWS:
            self.went.emit(_ARROWS[key])
        elif key in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self.click()
        else:
            super().keyPressEvent(event)

    def sizeHint(self) -> QSize:
        """Return the size that it has: its place is laid out elsewhere."""
        return self.size()

    def say(self, words: str) -> None:
        """Say what it is to the pointer and to assistive technology."""
        self.setAccessibleName(words)
        self.setToolTip(words)

    def _pen(self, role: str, width: float = 1.0) -> QPen:
        return QPen(self._theme.colour(role), width)

    def _is_lively(self) -> bool:
        return self.underMouse() or self.hasFocus()


class BlockPart(Part):
    """A block that is there, or the place where one may be put in."""

    removal_wanted = Signal()
    menu_wanted = Signal(object)
    """Where on the screen."""

    def __init__(self, block: Block, theme: Theme, parent: QWidget) -> None:
        super().__init__(theme, parent)
        self.block, self.is_chosen, self.is_idle = block, False, False
        self.say(block.sentence())

    def show_block(self, block: Block, *, chosen: bool, idle: bool) -> None:
        """Show a block; `idle` says that nothing goes through it, for its path is open."""
        if (block, chosen, idle) != (self.block, self.is_chosen, self.is_idle):
            self.block, self.is_chosen, self.is_idle = block, chosen, idle
            self.say(block.sentence())
            self.update()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Take the block out by Delete."""
        if event.key() == Qt.Key.Key_Delete and self.block.there and self.block.may_go:
            self.removal_wanted.emit()
        else:
            super().keyPressEvent(event)

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        """Ask for a menu."""
        self.menu_wanted.emit(event.globalPos())

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw the block, or the plus of one that is not there."""
        del event
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        (self._paint_block if self.block.there else self._paint_plus)(painter)

    def _paint_block(self, painter: QPainter) -> None:
        inner = QRectF(self.rect()).adjusted(0.5, 0.5, -0.5, -0.5)
        painter.setPen(self._pen("nominal" if self.hasFocus() else "quiet" if not self.is_idle else "line"))
        painter.setBrush(self._theme.colour("hover" if self.underMouse() else "field"))
        painter.drawRect(inner)
        if self.is_chosen:
            painter.fillRect(
                QRectF(inner.left(), inner.bottom() - 2.0, inner.width(), 2.0), self._theme.colour("nominal")
            )
        two = self.height() >= _TWO_LINES and bool(self.block.detail)
        upper = QRectF(inner.left(), inner.top() + 2.0, inner.width(), 14.0) if two else inner
        painter.setPen(self._theme.colour("quiet" if self.is_idle else "ink"))
        self._write(painter, upper, self.block.title, "small" if two or self.width() < 96 else "body")
        if two:
            painter.setPen(self._theme.colour("quiet"))
            self._write(
                painter, QRectF(inner.left(), inner.top() + 15.0, inner.width(), 14.0), self.block.detail, "small"
            )

    def _write(self, painter: QPainter, room: QRectF, words: str, size: str) -> None:
        painter.setFont(self._theme.font("small" if size == "small" else "body"))
        cut = painter.fontMetrics().elidedText(words, Qt.TextElideMode.ElideRight, int(room.width()) - 4)
        painter.drawText(room, Qt.AlignmentFlag.AlignCenter, cut)

    def _paint_plus(self, painter: QPainter) -> None:
        lively = self._is_lively()
        middle = QRectF(self.rect()).center()
        painter.setPen(self._pen("nominal" if lively else "line"))
        painter.setBrush(self._theme.colour("field" if lively else "page"))
        painter.drawEllipse(middle, 7.0, 7.0)
        painter.setPen(self._pen("nominal" if lively else "quiet", 1.4))
        painter.drawLine(middle - QPointF(3.0, 0.0), middle + QPointF(3.0, 0.0))
        painter.drawLine(middle - QPointF(0.0, 3.0), middle + QPointF(0.0, 3.0))


class SwitchPart(Part):
    """A switch in a path: closed or open."""

    def __init__(self, path: str, theme: Theme, parent: QWidget) -> None:
        super().__init__(theme, parent)
        self._path = path
        self.is_closed = True
        self.show_closed(closed=True)

    def show_closed(self, *, closed: bool) -> None:
        """Show whether the path is closed."""
        self.is_closed = closed
        self.say(f"{self._path} path, {'closed: open it' if closed else 'open: close it'}")
        self.update()

    def paintEvent(self, event: QPaintEvent) -> None:
        """Draw two contacts and the blade between them."""
        del event
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.fillRect(self.rect(), self._theme.colour("page"))
        left, right, y = 4.0, self.width() - 4.0, self.height() / 2.0 + (0.0 if self.is_closed else 3.0)
        role = "nominal" if self._is_lively() else "ink" if self.is_closed else "lost_word"
        painter.setPen(self._pen(role, 1.8))
        painter.drawLine(QPointF(left, y), QPointF(right, y if self.is_closed else y - 9.0))
        painter.setBrush(self._theme.colour("page"))
        for x in (left, right):
            painter.setPen(self._pen(role, 1.2))
            painter.drawEllipse(QPointF(x, y), 2.5, 2.5)
