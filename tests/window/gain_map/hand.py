"""Places on the map, and the mouse over it."""

from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QMouseEvent
from PySide6.QtWidgets import QApplication

from tuner.window.gain_map.page import GainMapPage


def at(page: GainMapPage, kp: float, ki: float) -> QPoint:
    """Return where a tuning is on the map."""
    return page.view.point((kp, ki)).toPoint()


def hover(page: GainMapPage, place: QPoint) -> None:
    """Move the mouse over the map, no button down."""
    none, modifier = Qt.MouseButton.NoButton, Qt.KeyboardModifier.NoModifier
    where = page.view.mapToGlobal(place)
    event = QMouseEvent(QMouseEvent.Type.MouseMove, QPointF(place), QPointF(where), none, none, modifier)
    QApplication.sendEvent(page.view, event)
