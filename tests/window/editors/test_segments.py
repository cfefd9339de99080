"""A few words, one of them chosen."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tuner.window.editors.segments import Segments
from tuner.window.theme import Theme


@pytest.fixture
def segments(qtbot: QtBot, theme: Theme) -> Segments:
    """Return three words of which "two" may not be chosen."""

    def choose(word: str) -> None:
        if word != "two":
            made.show_choice(word)

    made = Segments(("one", "two", "three"), theme, choose)
    qtbot.addWidget(made)
    made.show_choice("one")
    made.show()
    return made


def _checked(segments: Segments) -> list[str]:
    return [word for word, button in segments.buttons.items() if button.isChecked()]


def test_a_click_chooses(segments: Segments) -> None:
    """A word clicked is chosen; clicked again it stays chosen."""
    for _ in range(2):
        QTest.mouseClick(segments.buttons["three"], Qt.MouseButton.LeftButton)
        assert _checked(segments) == ["three"]


def test_a_refused_word_is_not_shown_as_chosen(segments: Segments) -> None:
    """What was not taken does not look taken."""
    QTest.mouseClick(segments.buttons["two"], Qt.MouseButton.LeftButton)
    assert _checked(segments) == ["one"]


@pytest.mark.parametrize(("key", "word"), [(Qt.Key.Key_Left, "three"), (Qt.Key.Key_Right, "one")])
def test_arrows_go_round(segments: Segments, key: Qt.Key, word: str) -> None:
    """The arrows choose the neighbour; a refused one is not passed over by surprise."""
    QTest.keyClick(segments.buttons["one"], key)
    assert _checked(segments) == [word]
