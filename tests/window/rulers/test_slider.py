"""The slider of a ruler under mouse, wheel and keys."""

from typing import Any

import numpy as np
import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QColor, QWheelEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tuner.session.ruler_range import POSITIONS, RulerRange
from tuner.session.tunings import Mark
from tuner.window.rulers.slider import MARGIN, TRACK_HEIGHT, TRACK_TOP, RulerSlider
from tuner.window.rulers.strip import FIRM, LOST
from tuner.window.theme import Theme

SPAN = RulerRange(0.1, 100.0, has_off=True)
MIDDLE = TRACK_TOP + TRACK_HEIGHT // 2


class Hand:
    """A slider that is told what it wants, as a document would; it notes every value."""

    def __init__(self, slider: RulerSlider) -> None:
        self.slider = slider
        self.values: list[float | None] = []
        slider.wanted.connect(self._take)

    def _take(self, value: float | None) -> None:
        self.values.append(value)
        self.slider.show_value(SPAN, (), value)

    def x(self, value: float | None) -> int:
        """Return the place of a value, whole pixels."""
        return round(self.slider.x_of(value))


@pytest.fixture
def hand(qtbot: QtBot, theme: Theme) -> Hand:
    """Return a slider 516 pixels wide that shows 3."""
    slider = RulerSlider(theme)
    qtbot.addWidget(slider)
    slider.resize(500 + 2 * MARGIN, 40)
    slider.show_value(SPAN, (), 3.0)
    slider.show()
    slider.setFocus()
    return Hand(slider)


def test_it_jumps_to_the_click(hand: Hand) -> None:
    """A click anywhere on the track takes the value there, at once."""
    QTest.mouseClick(hand.slider, Qt.MouseButton.LeftButton, pos=QPoint(hand.x(10.0), MIDDLE))
    assert hand.values == [10.0]


def test_a_drag_follows_and_ends(hand: Hand) -> None:
    """A drag is grasped once, wants a value for every place, and is let go once, also outside the widget."""
    events: list[str] = []
    hand.slider.grasped.connect(lambda: events.append("grasped"))
    hand.slider.let_go.connect(lambda: events.append("let go"))
    QTest.mousePress(hand.slider, Qt.MouseButton.LeftButton, pos=QPoint(hand.x(3.0), MIDDLE))
    for x in range(hand.x(3.0), 700, 20):
        QTest.mouseMove(hand.slider, QPoint(x, MIDDLE))
        QApplication.processEvents()
    assert events == ["grasped"]
    assert hand.slider.isSliderDown()
    QTest.mouseRelease(hand.slider, Qt.MouseButton.LeftButton, pos=QPoint(700, MIDDLE))
    assert events == ["grasped", "let go"]
    assert hand.values[-1] == 100.0
    assert hand.values == sorted(value for value in hand.values if value is not None)
    assert not hand.slider.isSliderDown()


def test_a_drag_to_the_left_end_is_off(hand: Hand) -> None:
    """The notch at the left end means off, a gain of 0."""
    QTest.mouseClick(hand.slider, Qt.MouseButton.LeftButton, pos=QPoint(MARGIN + 3, MIDDLE))
    assert hand.values == [0.0]


def test_a_value_between_two_positions_is_not_altered(hand: Hand) -> None:
    """Showing a value of many digits wants nothing, whatever the slider rounds to."""
    hand.slider.show_value(SPAN, (), 3.0123456789)
    assert hand.values == []
    assert 0 < hand.slider.value() < POSITIONS


@pytest.mark.parametrize(
    ("key", "modifier", "value"),
    [
        (Qt.Key.Key_Right, Qt.KeyboardModifier.NoModifier, 3.03),
        (Qt.Key.Key_Up, Qt.KeyboardModifier.NoModifier, 3.03),
        (Qt.Key.Key_Left, Qt.KeyboardModifier.NoModifier, 2.97),
        (Qt.Key.Key_Right, Qt.KeyboardModifier.ShiftModifier, 3.3),
        (Qt.Key.Key_PageUp, Qt.KeyboardModifier.NoModifier, 3.3),
        (Qt.Key.Key_PageDown, Qt.KeyboardModifier.NoModifier, 2.727),
        (Qt.Key.Key_Home, Qt.KeyboardModifier.NoModifier, 0.0),
        (Qt.Key.Key_End, Qt.KeyboardModifier.NoModifier, 100.0),
    ],
)
def test_keys_step(hand: Hand, key: Qt.Key, modifier: Qt.KeyboardModifier, value: float) -> None:
    """Arrows are fine steps, Shift and the page keys coarse ones, Home and End the ends."""
    QTest.keyClick(hand.slider, key, modifier)
    assert hand.values == [value]


def test_a_held_key_is_one_grasp(hand: Hand) -> None:
    """The hand is on from the first press to the release, not between the repeats."""
    events: list[str] = []
    hand.slider.grasped.connect(lambda: events.append("grasped"))
    hand.slider.let_go.connect(lambda: events.append("let go"))
    for _ in range(3):
        QTest.keyPress(hand.slider, Qt.Key.Key_Right)
    QTest.keyRelease(hand.slider, Qt.Key.Key_Right)
    assert events == ["grasped", "let go"]
    assert len(hand.values) == 3


@pytest.mark.parametrize("key", [Qt.Key.Key_Backspace, Qt.Key.Key_Delete])
def test_backspace_asks_for_a_reset(hand: Hand, qtbot: QtBot, key: Qt.Key) -> None:
    """Backspace and Delete ask for the value as opened."""
    with qtbot.waitSignal(hand.slider.reset_wanted, timeout=500):
        QTest.keyClick(hand.slider, key)


def _wheel(slider: RulerSlider, turn: int) -> None:
    place = QPointF(50.0, MIDDLE)
    event = QWheelEvent(
        place,
        slider.mapToGlobal(place),
        QPoint(),
        QPoint(0, turn),
        Qt.MouseButton.NoButton,
        Qt.KeyboardModifier.NoModifier,
        Qt.ScrollPhase.NoScrollPhase,
        False,  # not inverted
    )
    QApplication.sendEvent(slider, event)


def test_the_wheel_steps_where_the_focus_is(hand: Hand, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch) -> None:
    """Each notch of the wheel is a fine step, and the hand counts as off a moment later."""
    monkeypatch.setattr(hand.slider, "hasFocus", lambda: True)
    with qtbot.waitSignal(hand.slider.let_go, timeout=2000):
        _wheel(hand.slider, 120)
        _wheel(hand.slider, -120)
    assert hand.values == [3.03, 3.0]


def test_scrolling_by_changes_nothing(hand: Hand, monkeypatch: pytest.MonkeyPatch) -> None:
    """A wheel turned over a slider without the focus leaves the gain alone."""
    monkeypatch.setattr(hand.slider, "hasFocus", lambda: False)
    _wheel(hand.slider, 120)
    assert hand.values == []


def _pixel(slider: RulerSlider, x: float, y: int) -> QColor:
    return slider.grab().toImage().pixelColor(round(x), y)


def test_the_track_is_grey_until_there_are_classes(hand: Hand, theme: Theme) -> None:
    """Nobody's guess is painted: grey without classes, their colours with them, grey again without."""
    x = hand.x(50.0)
    assert _pixel(hand.slider, x, MIDDLE) == theme.colour("line")
    hand.slider.paint_classes(np.array([LOST] * 32 + [FIRM] * 32))
    assert _pixel(hand.slider, x, MIDDLE) == theme.colour("firm")
    hand.slider.paint_classes(None)
    assert _pixel(hand.slider, x, MIDDLE) == theme.colour("line")


def test_another_look_repaints_the_track(hand: Hand, theme: Theme) -> None:
    """The colours follow the theme."""
    hand.slider.paint_classes(np.array([7]))
    theme.choose("dark")
    assert _pixel(hand.slider, hand.x(50.0), MIDDLE) == theme.colour("line")


def test_marks_and_handle_are_painted(hand: Hand, theme: Theme) -> None:
    """The handle lies at the value, the mark as opened above its own."""
    hand.slider.clearFocus()
    hand.slider.show_value(SPAN, (Mark("reset", "as opened", 20.0), Mark("kept", "A", 1.0)), 3.0)
    assert _pixel(hand.slider, hand.slider.x_of(3.0) - 2, MIDDLE) == theme.colour("ink")
    above = [_pixel(hand.slider, hand.slider.x_of(20.0), y) for y in range(TRACK_TOP)]
    assert theme.colour("ink") in above
    assert _pixel(hand.slider, hand.slider.x_of(1.0), TRACK_TOP + 4) == theme.colour("kept_word")


def test_its_value_is_told_to_assistive_technology(hand: Hand) -> None:
    """It stays a slider with a value between a least and a largest one."""
    from PySide6.QtGui import QAccessible

    interface: Any = QAccessible.queryAccessibleInterface(hand.slider)
    assert interface.role() == QAccessible.Role.Slider
    assert interface.valueInterface().maximumValue() == POSITIONS
