"""A few lines to type into: taking, keys, and the mark on what is wrong."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QColor
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QLineEdit, QVBoxLayout, QWidget
from pytestqt.qtbot import QtBot

from tests.window.editors.typing import enter, replace_text
from tuner.errors import FormulaError, LoopError
from tuner.window.editors.intake import PAUSE, Words
from tuner.window.editors.typed_text import TypedText
from tuner.window.theme import Theme


class Desk:
    """Two lines that show "gain", above another place to go to; "?" is a fault at its place, "bad" one of the whole."""

    def __init__(self, theme: Theme) -> None:
        self.taken: list[str] = []
        self.ground = QWidget()
        self.text: TypedText[str] = TypedText(theme, "gain", Words(self._read, str), self.taken.append, lines=2)
        self.other = QLineEdit()
        column = QVBoxLayout(self.ground)
        column.addWidget(self.text)
        column.addWidget(self.other)

    def _read(self, text: str) -> str:
        if "?" in text:
            raise FormulaError(text, text.index("?"), "a name", "'?'")
        if text == "bad":
            raise LoopError("that is no loop")
        return text


@pytest.fixture
def desk(qtbot: QtBot, theme: Theme) -> Desk:
    """Return a desk in sight."""
    desk = Desk(theme)
    qtbot.addWidget(desk.ground)
    desk.ground.resize(300, 160)
    desk.ground.show()
    return desk


def test_enter_takes(desk: Desk) -> None:
    """Where lines only wrap, Enter takes and begins no new one."""
    replace_text(desk.text, "1 / s")
    QTest.keyClick(desk.text, Qt.Key.Key_Return)
    assert (desk.taken, desk.text.typed()) == (["1 / s"], "1 / s")


def test_rows_are_parted_by_enter(desk: Desk) -> None:
    """Where lines are rows, Enter begins one, and with Ctrl takes."""
    desk.text.take_rows()
    replace_text(desk.text, "1 2")
    QTest.keyClick(desk.text, Qt.Key.Key_Return)
    QTest.keyClicks(desk.text, "3 4")
    assert (desk.taken, desk.text.typed()) == ([], "1 2\n3 4")
    QTest.keyClick(desk.text, Qt.Key.Key_Return, Qt.KeyboardModifier.ControlModifier)
    assert desk.taken == ["1 2\n3 4"]


def test_a_pause_and_leaving_take(desk: Desk, qtbot: QtBot) -> None:
    """A rest takes what is typed, and so does going elsewhere by Tab, which types nothing."""
    replace_text(desk.text, "a")
    qtbot.waitUntil(lambda: desk.taken == ["a"], timeout=10 * PAUSE)
    qtbot.waitUntil(desk.text.hasFocus)
    QTest.keyClicks(desk.text, "b")
    QTest.keyClick(desk.text, Qt.Key.Key_Tab)
    assert desk.taken == ["a", "ab"]
    assert desk.other.hasFocus()


def test_escape_brings_the_last_text_back(desk: Desk) -> None:
    """What was typed and not taken is forgotten, its mark too."""
    enter(desk.text, "ga?n")
    QTest.keyClick(desk.text, Qt.Key.Key_Escape)
    assert (desk.text.typed(), desk.taken, desk.text.marked_characters()) == ("gain", [], [])


@pytest.mark.parametrize(("text", "position", "marked"), [("ga?n", 2, [2]), ("bad", None, []), ("gain?", 4, [4])])
def test_the_character_to_blame_is_marked(desk: Desk, text: str, position: int | None, marked: list[int]) -> None:
    """Where one is; a screen reader hears the sentence."""
    enter(desk.text, text)
    assert (desk.text.fault_position(), desk.text.marked_characters()) == (position, marked)
    assert desk.text.accessibleDescription() == desk.text.intake.sentence != ""


def _bottom(text: TypedText[str]) -> QColor:
    image = text.viewport().grab().toImage()
    return image.pixelColor(image.width() // 2, image.height() - 1)


def test_a_fault_of_the_whole_underlines_the_whole(desk: Desk, theme: Theme) -> None:
    """The whole box is underlined where no one character is to blame, and only there."""
    enter(desk.text, "bad")
    assert _bottom(desk.text) == theme.colour("lost")
    enter(desk.text, "ga?n")
    assert _bottom(desk.text) != theme.colour("lost")
    enter(desk.text, "good")
    assert _bottom(desk.text) != theme.colour("lost")


def test_text_written_by_the_program_is_not_typed(desk: Desk) -> None:
    """Showing another value leaves nothing waiting to be taken."""
    desk.text.intake.show_value("lag")
    assert (desk.text.typed(), desk.text.intake.pending) == ("lag", False)


def test_text_out_of_sight_is_not_left(desk: Desk, qtbot: QtBot) -> None:
    """A page that is turned while something is typed on it keeps that waiting."""
    replace_text(desk.text, "half")
    qtbot.waitUntil(desk.text.hasFocus)
    desk.text.hide()
    assert (desk.taken, desk.text.intake.pending) == ([], True)
