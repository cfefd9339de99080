"""A box to choose one of several words, which scrolling by does not change."""

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QPainter, QPaintEvent, QPen, QPolygonF, QWheelEvent
from PySide6.QtWidgets import QComboBox

from tuner.window.theme import Theme

_FROM_RIGHT, _HALF_WIDTH, _HALF_HEIGHT = 14.0, 4.0, 2.0


class Chooser(QComboBox):
    """A combination box as narrow as its column, with its own arrow."""

    def __init__(self, theme: Theme, name: str) -> None:
        super().__init__()
        self._theme = theme
        self.setAccessibleName(name)
        self.setSizeAdjustPolicy(QComboBox.SizeAdjustPolicy.AdjustToMinimumContentsLengthWithIcon)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)

    def wheelEvent(self, event: QWheelEvent) -> None:
        """Turn through the words only where the focus is."""
        if self.hasFocus():
            super().wheelEvent(event)
        else:
            event.ignore()

    def paintEvent(self, event: QPaintEvent) -> None:
        """Paint the box, and an arrow that tells it from a line to type into."""
        super().paintEvent(event)
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(QPen(self._theme.colour("quiet"), 1.5))
        x, y = self.width() - _FROM_RIGHT, self.height() / 2.0
        tip = QPointF(x, y + _HALF_HEIGHT)
        ends = (QPointF(x - _HALF_WIDTH, y - _HALF_HEIGHT), QPointF(x + _HALF_WIDTH, y - _HALF_HEIGHT))
        painter.drawPolyline(QPolygonF([ends[0], tip, ends[1]]))
        painter.end()
