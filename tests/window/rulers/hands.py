"""Hands that drag a ruler and type into it, for the tests."""

from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication

from tuner.window.rulers.ruler import Ruler


def drag(ruler: Ruler, start: float, end: float) -> None:
    """Drag the handle from one value to another, as a hand does."""
    slider = ruler.slider
    height = slider.height() // 2
    xs = [round(slider.x_of(value)) for value in (start, end)]
    QTest.mousePress(slider, Qt.MouseButton.LeftButton, pos=QPoint(xs[0], height))
    for step in range(1, 6):
        QTest.mouseMove(slider, QPoint(xs[0] + (xs[1] - xs[0]) * step // 5, height))
        QApplication.processEvents()
    QTest.mouseRelease(slider, Qt.MouseButton.LeftButton, pos=QPoint(xs[1], height))


def type_in(ruler: Ruler, text: str, *, enter: bool = True) -> None:
    """Type a text over what the box holds, and take it unless told otherwise."""
    ruler.box.setFocus()
    ruler.box.selectAll()
    if text:
        QTest.keyClicks(ruler.box, text)
    else:
        QTest.keyClick(ruler.box, Qt.Key.Key_Delete)
    if enter:
        QTest.keyClick(ruler.box, Qt.Key.Key_Return)
