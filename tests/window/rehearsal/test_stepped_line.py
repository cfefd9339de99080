"""A number that is typed or stepped."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tuner.session.typed import Bounds
from tuner.window.rehearsal.stepped_line import SPEEDS, SteppedLine, next_speed
from tuner.window.theme import Theme


@pytest.mark.parametrize(
    ("speed", "way", "expected"),
    [(1.0, 1, 2.0), (1.0, -1, 0.5), (3.0, 1, 5.0), (3.0, -1, 2.0), (100.0, 1, 100.0), (0.1, -1, 0.1)],
)
def test_speeds_go_by_the_logarithm(speed: float, way: int, expected: float) -> None:
    """1, 2, 5 and so on, from any speed in between, and not beyond the ends."""
    assert next_speed(speed, way) == expected
    assert (SPEEDS[0], SPEEDS[-1]) == (0.1, 100.0)


def test_buttons_step_and_keys_type(qtbot: QtBot, theme: Theme) -> None:
    """Both say what the hand wants; a number beyond the bounds is answered with a sentence."""
    line = SteppedLine(theme, "speed", Bounds(0.1, 100.0), next_speed)
    qtbot.addWidget(line)
    line.show()
    wanted: list[float] = []
    faults: list[str] = []
    line.wanted.connect(wanted.append)
    line.faulted.connect(faults.append)
    line.show_value(1.0, "times")
    QTest.mouseClick(line.more, Qt.MouseButton.LeftButton)
    QTest.mouseClick(line.less, Qt.MouseButton.LeftButton)
    line.line.selectAll()
    QTest.keyClicks(line.line, "7,5 times")
    QTest.keyClick(line.line, Qt.Key.Key_Return)
    line.line.selectAll()
    QTest.keyClicks(line.line, "700")
    QTest.keyClick(line.line, Qt.Key.Key_Return)
    assert wanted == [2.0, 1.0, 7.5]
    assert faults[-1] == 'expected a number of at least 0.1 and at most 100, found "700"'


def test_every_part_has_a_name(qtbot: QtBot, theme: Theme) -> None:
    """For assistive technology; buttons show only where there is a step."""
    line = SteppedLine(theme, "reference")
    qtbot.addWidget(line)
    line.show()
    names = [part.accessibleName() for part in (line.less, line.line, line.more)]
    assert names == ["reference down", "reference", "reference up"]
    assert line.less.isHidden()


def test_steps_leave_no_crumbs(qtbot: QtBot, theme: Theme) -> None:
    """Sums of tenths are shown as tenths."""
    line = SteppedLine(theme, "size", step=lambda value, way: value + 0.1 * way)
    qtbot.addWidget(line)
    line.show()
    line.show_value(0.2)
    QTest.mouseClick(line.more, Qt.MouseButton.LeftButton)
    assert line.line.text() == "0.3"
