"""A box that scrolling by does not change."""

import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QWheelEvent
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tuner.window.editors.chooser import Chooser
from tuner.window.theme import Theme


@pytest.mark.parametrize(("focus", "index"), [(True, 1), (False, 0)])
def test_the_wheel_turns_only_where_the_focus_is(
    qtbot: QtBot, theme: Theme, monkeypatch: pytest.MonkeyPatch, *, focus: bool, index: int
) -> None:
    """Scrolling a page leaves the boxes on it alone."""
    box = Chooser(theme, "forms")
    qtbot.addWidget(box)
    box.addItems(["one", "two"])
    monkeypatch.setattr(box, "hasFocus", lambda: focus)
    place = QPointF(5.0, 5.0)
    event = QWheelEvent(
        place,
        box.mapToGlobal(place),
        QPoint(),
        QPoint(0, -120),
        Qt.MouseButton.NoButton,
        Qt.KeyboardModifier.NoModifier,
        Qt.ScrollPhase.NoScrollPhase,
        False,  # not inverted
    )
    QApplication.sendEvent(box, event)
    assert box.currentIndex() == index
