"""The slider of a ruler under mouse, wheel and keys."""

from typing import Any

import numpy as np
import pytest
from PySide6.QtCore import QEvent, QPoint, QPointF, Qt
from PySide6.QtGui import QColor, QFocusEvent, QWheelEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tuner.footing.classes import FIRM, LOST, SOFT, Edge, PaintedTrack
from tuner.session.ruler_range import OFF_NOTCH, POSITIONS, RulerRange, notches, values_along
from tuner.session.tunings import Mark
from tuner.window.rulers.face import MARGIN, TRACK_HEIGHT, TRACK_TOP
from tuner.window.rulers.slider import RulerSlider
from tuner.window.theme import Theme

SPAN = RulerRange(0.1, 100.0, has_off=True)
VALUES = notches(SPAN)
TRACK = PaintedTrack(
    "kp",
    VALUES,
    np.where(VALUES < 1.0, LOST, np.where(VALUES < 8.0, FIRM, np.where(VALUES < 20.0, SOFT, FIRM))).astype(np.int8),
    (Edge(1.0, LOST, FIRM), Edge(8.0, FIRM, SOFT), Edge(20.0, SOFT, FIRM)),
)
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
    hand.slider.show_footing(TRACK)
    assert _pixel(hand.slider, x, MIDDLE) == theme.colour("firm")
    hand.slider.show_footing(None)
    assert _pixel(hand.slider, x, MIDDLE) == theme.colour("line")


def test_every_pixel_has_the_class_of_its_value(hand: Hand, theme: Theme) -> None:
    """Along the whole track each column of pixels is coloured by the class at the value in its middle."""
    hand.slider.show_footing(TRACK)
    hand.slider.show_value(SPAN, (), 0.0)
    image = hand.slider.grab().toImage()
    length = hand.slider.width() - 2 * MARGIN
    expected = TRACK.class_at(values_along(SPAN, length))
    plain = {theme.colour(role).name(): grade for role, grade in (("firm", FIRM), ("soft", SOFT), ("lost", LOST))}
    seen = [{image.pixelColor(MARGIN + x, y).name() for y in rows()} & set(plain) for x in range(length)]
    handle_and_notch = MARGIN + OFF_NOTCH * length // POSITIONS
    wrong = [x for x in range(handle_and_notch, length) if {plain[name] for name in seen[x]} != {expected[x]}]
    assert wrong == []
    assert set(expected) == {FIRM, SOFT, LOST}


def rows() -> range:
    """Return the rows of pixels of the track."""
    return range(TRACK_TOP, TRACK_TOP + TRACK_HEIGHT)


def test_paint_that_is_out_of_date_is_paler(hand: Hand, theme: Theme) -> None:
    """A faded track is neither what it was nor grey, and comes back as it was."""
    x = hand.x(50.0)
    hand.slider.show_footing(TRACK, faded=True)
    faded = _pixel(hand.slider, x, MIDDLE)
    assert theme.colour("firm").lightness() < faded.lightness() < theme.colour("page").lightness()
    hand.slider.show_footing(TRACK)
    assert _pixel(hand.slider, x, MIDDLE) == theme.colour("firm")


def test_another_range_moves_the_paint(hand: Hand, theme: Theme) -> None:
    """The paint belongs to values: on a wider range the same value keeps its class."""
    hand.slider.show_footing(TRACK)
    before = hand.x(50.0)
    hand.slider.show_value(RulerRange(0.1, 10_000.0, has_off=True), (), 0.0)
    assert hand.x(50.0) < before
    assert _pixel(hand.slider, hand.slider.x_of(50.0), MIDDLE) == theme.colour("firm")


def test_another_look_repaints_the_track(hand: Hand, theme: Theme) -> None:
    """The colours follow the theme."""
    hand.slider.show_footing(TRACK)
    light = theme.colour("page")
    theme.choose("dark")
    assert theme.colour("page") != light
    x = MARGIN + OFF_NOTCH * (hand.slider.width() - 2 * MARGIN) // POSITIONS
    assert _pixel(hand.slider, x, MIDDLE) == theme.colour("page")


@pytest.mark.parametrize(
    ("start", "key", "value"),
    [
        (3.0, Qt.Key.Key_Right, 7.92),
        (7.92, Qt.Key.Key_Right, 8.08),
        (8.08, Qt.Key.Key_Right, 19.8),
        (3.0, Qt.Key.Key_Left, 1.01),
        (0.99, Qt.Key.Key_Left, None),
    ],
)
def test_alt_and_an_arrow_go_to_the_next_edge(hand: Hand, start: float, key: Qt.Key, value: float | None) -> None:
    """First to the near side of an edge, then across it; where there is no edge any more nothing moves."""
    hand.slider.show_footing(TRACK)
    hand.slider.show_value(SPAN, (), start)
    QTest.keyClick(hand.slider, key, Qt.KeyboardModifier.AltModifier)
    assert hand.values == ([] if value is None else [value])


def test_without_paint_there_is_no_edge_to_go_to(hand: Hand) -> None:
    """On a grey track Alt and an arrow do nothing."""
    QTest.keyClick(hand.slider, Qt.Key.Key_Right, Qt.KeyboardModifier.AltModifier)
    assert hand.values == []


def test_it_tells_where_the_mouse_points(hand: Hand, qtbot: QtBot) -> None:
    """Pointing changes nothing; it names the value under the mouse, and its end is told."""
    pointed: list[float | None] = []
    hand.slider.pointed.connect(pointed.append)
    QTest.mouseMove(hand.slider, QPoint(hand.x(10.0), MIDDLE))
    QApplication.processEvents()
    assert pointed[-1] == 10.0
    assert hand.values == []
    with qtbot.waitSignal(hand.slider.left, timeout=500):
        QApplication.sendEvent(hand.slider, QEvent(QEvent.Type.Leave))


def test_it_tells_when_keys_come_and_go(hand: Hand) -> None:
    """The focus is told, and its loss."""
    heard: list[str] = []
    hand.slider.focused.connect(lambda: heard.append("focused"))
    hand.slider.left.connect(lambda: heard.append("left"))
    for kind in (QEvent.Type.FocusIn, QEvent.Type.FocusOut):
        QApplication.sendEvent(hand.slider, QFocusEvent(kind))
    assert heard == ["focused", "left"]


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
