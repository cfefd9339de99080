"""Signs that tell verdicts apart by shape: a tick, a cross, a curve that runs away, a ring."""

from typing import Literal

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPen, QPolygonF

Sign = Literal["tick", "cross", "runaway", "ring"]

_SHAPES: dict[Sign, tuple[tuple[tuple[float, float], ...], ...]] = {
    "tick": (((0.08, 0.55), (0.38, 0.86), (0.94, 0.14)),),
    "cross": (((0.14, 0.14), (0.86, 0.86)), ((0.86, 0.14), (0.14, 0.86))),
    "runaway": (((0.0, 0.5), (0.18, 0.36), (0.36, 0.66), (0.56, 0.2), (0.76, 0.88), (1.0, 0.0)),),
    "ring": (),
}


def draw_sign(painter: QPainter, sign: Sign, frame: QRectF, colour: QColor) -> None:
    """Paint a sign into a frame, with a stroke that suits its size."""
    painter.save()
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    pen = QPen(colour, max(frame.width() / 7.0, 1.6))
    pen.setCapStyle(Qt.PenCapStyle.RoundCap)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    painter.setPen(pen)
    painter.setBrush(Qt.BrushStyle.NoBrush)
    if sign == "ring":
        painter.drawEllipse(frame.adjusted(2, 2, -2, -2))
    for shape in _SHAPES[sign]:
        points = [QPointF(frame.left() + x * frame.width(), frame.top() + y * frame.height()) for x, y in shape]
        painter.drawPolyline(QPolygonF(points))
    painter.restore()
