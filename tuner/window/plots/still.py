"""What stays from one answer to the next, painted once into a picture that lies under all that moves.

While a hand moves a ruler, axes, grid, areas and the family stay for many frames in which one curve runs elsewhere;
laying them down as one opaque picture costs next to nothing.
"""

from typing import Protocol

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QBrush, QPainter, QPixmap, QTransform
from PySide6.QtWidgets import QGraphicsView


class StillItem(Protocol):
    """An item of the plot that paints into the picture, and nothing where the others paint."""

    def isVisible(self) -> bool:
        """Tell whether it is to be painted."""
        ...

    def deviceTransform(self, place: QTransform) -> QTransform:
        """Return what takes its coordinates to pixels."""
        ...

    def clip(self) -> QRectF | None:
        """Return the pixels that it keeps to, None for all."""
        ...

    def paint_still(self, painter: QPainter) -> None:
        """Paint, in its own coordinates."""


class StillPicture:
    """The picture of one view; items say `forget` when they have changed."""

    def __init__(self, view: QGraphicsView) -> None:
        self._view = view
        self._items: list[StillItem] = []
        self._picture = QPixmap()
        self._is_true = False
        self.taken = 0
        """How many times it was painted anew."""

    def add(self, item: StillItem) -> None:
        """Take an item in, above those before it."""
        self._items.append(item)
        self.forget()

    def forget(self) -> None:
        """Paint it anew when it is needed next."""
        self._is_true = False

    def draw(self, painter: QPainter) -> None:
        """Lay the picture over the whole view."""
        ratio = painter.paintEngine().paintDevice().devicePixelRatio()
        size = self._view.viewport().size()
        if self._picture.size() != size * ratio or self._picture.devicePixelRatio() != ratio:
            self._picture = QPixmap(size * ratio)
            self._picture.setDevicePixelRatio(ratio)
            self._is_true = False
        if not self._is_true:
            self._take()
        painter.save()
        painter.resetTransform()
        painter.drawPixmap(0, 0, self._picture)
        painter.restore()

    def _take(self) -> None:
        self.taken += 1
        self._is_true = True
        painter = QPainter(self._picture)
        painter.fillRect(self._view.viewport().rect(), _opaque(self._view.backgroundBrush()))
        for item in self._items:
            if item.isVisible():
                self._paint(painter, item)
        painter.end()

    def _paint(self, painter: QPainter, item: StillItem) -> None:
        painter.save()
        if (frame := item.clip()) is not None:
            painter.setClipRect(frame)
        painter.setWorldTransform(item.deviceTransform(self._view.viewportTransform()))
        item.paint_still(painter)
        painter.restore()


def _opaque(brush: QBrush) -> QBrush:
    """Return a brush that covers all, for a view that has not been given a ground yet."""
    return brush if brush.style() != Qt.BrushStyle.NoBrush else QBrush(Qt.GlobalColor.white)
