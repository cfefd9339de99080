"""Tab goes from control to control as they are laid out."""

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QHBoxLayout, QLabel, QLineEdit, QVBoxLayout, QWidget
from pytestqt.qtbot import QtBot

from tuner.window.tab_order import order_tabs, stops


class Ground:
    """Lines "a" to "d", made in another order than they stand: "b" and "c" in a box, "d" in a layout of its own."""

    def __init__(self) -> None:
        self.widget = QWidget()
        self.lines = {name: QLineEdit() for name in "dcba"}
        for name, line in self.lines.items():
            line.setAccessibleName(name)
        box, inside, below = QWidget(), QHBoxLayout(), QHBoxLayout()
        box.setLayout(inside)
        self.column = QVBoxLayout(self.widget)
        below.addWidget(self.lines["d"])
        inside.addWidget(self.lines["c"])
        inside.insertWidget(0, self.lines["b"])
        self.column.addWidget(QLabel("only read"))
        self.column.addWidget(self.lines["a"])
        self.column.addStretch(1)
        self.column.addWidget(box)
        self.column.addLayout(below)


def test_stops_are_found_in_their_order(qtbot: QtBot) -> None:
    """Boxes and inner layouts are gone through where they stand; what cannot have the focus is left out."""
    ground = Ground()
    qtbot.addWidget(ground.widget)
    assert [stop.accessibleName() for stop in stops(ground.column)] == ["a", "b", "c", "d"]


def test_tab_follows_the_layout(qtbot: QtBot) -> None:
    """Whatever was made first, the keys go down, and a line put between later has its turn between."""
    ground = Ground()
    qtbot.addWidget(ground.widget)
    ground.widget.show()
    late = QLineEdit()
    late.setAccessibleName("late")
    ground.column.insertWidget(2, late)
    late.show()
    order_tabs(ground.lines["a"], ground.column)
    ground.lines["a"].setFocus()
    qtbot.waitUntil(ground.lines["a"].hasFocus)
    walked = []
    for _ in range(4):
        QTest.keyClick(ground.widget, Qt.Key.Key_Tab)
        focused = QApplication.focusWidget()
        assert focused is not None
        walked.append(focused.accessibleName())
    assert walked == ["late", "b", "c", "d"]
