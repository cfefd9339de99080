"""A line to type into: when it takes, when it keeps, what it says."""

import pytest
from PySide6.QtCore import QEvent, Qt
from PySide6.QtGui import QHelpEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QLineEdit, QToolTip, QWidget
from pytestqt.qtbot import QtBot

from tests.window.editors.typing import enter, replace_text
from tuner.errors import LoopError
from tuner.session import typed
from tuner.window.editors.intake import PAUSE, Words
from tuner.window.editors.typed_line import TypedLine
from tuner.window.theme import Theme


class Desk:
    """A line that shows 1, beside another place to go to; it notes what was taken, and refuses 13."""

    def __init__(self, theme: Theme, *, live: bool) -> None:
        self.taken: list[float] = []
        self.faults: list[str] = []
        self.ground = QWidget()
        self.line = TypedLine(theme, 1.0, Words(typed.number, typed.shown), self._take, live=live)
        self.line.setParent(self.ground)
        self.other = QLineEdit(self.ground)
        self.line.intake.faulted.connect(self.faults.append)

    def _take(self, value: float) -> None:
        if value == 13.0:
            raise LoopError("not that one")
        self.taken.append(value)


@pytest.fixture
def desk(qtbot: QtBot, theme: Theme) -> Desk:
    """Return a desk in sight, its line live."""
    desk = Desk(theme, live=True)
    qtbot.addWidget(desk.ground)
    desk.ground.show()
    return desk


def test_enter_takes(desk: Desk) -> None:
    """Enter takes the value at once, and the text is tidied."""
    enter(desk.line, "2,50")
    assert desk.taken == [2.5]
    assert desk.line.text() == "2.5"


def test_a_pause_takes(desk: Desk, qtbot: QtBot) -> None:
    """A number is taken after a short pause, without tidying under the hand."""
    replace_text(desk.line, "2,50")
    assert desk.taken == []
    qtbot.waitUntil(lambda: desk.taken == [2.5], timeout=10 * PAUSE)
    assert desk.line.text() == "2,50"


def test_leaving_takes(desk: Desk, qtbot: QtBot) -> None:
    """Going elsewhere takes what was typed."""
    replace_text(desk.line, "3")
    qtbot.waitUntil(desk.line.hasFocus)
    desk.other.setFocus()
    assert desk.taken == [3.0]


def test_a_line_that_is_not_live_waits(qtbot: QtBot, theme: Theme) -> None:
    """Without live taking only Enter and leaving take."""
    desk = Desk(theme, live=False)
    qtbot.addWidget(desk.ground)
    desk.ground.show()
    replace_text(desk.line, "2")
    qtbot.wait(2 * PAUSE)
    assert desk.taken == []


@pytest.mark.parametrize(("text", "sentence"), [("2..", 'expected a number, found "2.."'), ("13", "not that one")])
def test_what_is_wrong_stays_and_is_said(desk: Desk, text: str, sentence: str) -> None:
    """Text that cannot be read, or whose value is refused, stays underlined; put right, nothing is said any more."""
    enter(desk.line, text)
    assert (desk.line.text(), desk.taken, desk.faults) == (text, [], [sentence])
    assert desk.line.accessibleDescription() == sentence
    enter(desk.line, "4")
    assert (desk.taken, desk.faults[-1]) == ([4.0], "")


def test_the_underline_is_painted(desk: Desk, theme: Theme) -> None:
    """What is wrong is underlined in the colour of what is lost."""
    enter(desk.line, "2..")
    image = desk.line.grab().toImage()
    assert image.pixelColor(image.width() // 2, image.height() - 1) == theme.colour("lost")


def test_escape_brings_the_last_value_back(desk: Desk) -> None:
    """Escape forgets what was typed."""
    enter(desk.line, "2..")
    QTest.keyClick(desk.line, Qt.Key.Key_Escape)
    assert (desk.line.text(), desk.faults[-1]) == ("1", "")


def test_an_echo_leaves_the_text_alone(desk: Desk, qtbot: QtBot) -> None:
    """The value just taken, shown again, does not disturb the typing; another value does."""
    replace_text(desk.line, "2,50")
    qtbot.waitUntil(lambda: desk.taken == [2.5], timeout=10 * PAUSE)
    qtbot.waitUntil(desk.line.hasFocus)
    desk.line.intake.show_value(2.5)
    assert desk.line.text() == "2,50"
    desk.line.intake.show_value(1.0)
    assert desk.line.text() == "1"


def test_wrong_text_outlives_what_others_do(desk: Desk) -> None:
    """Showing the same value again keeps the wrong text; another sheet does not."""
    enter(desk.line, "2..")
    desk.line.intake.show_value(1.0)
    assert desk.line.text() == "2.."
    desk.line.intake.show_value(1.0, anew=True)
    assert desk.line.text() == "1"


def test_a_text_that_does_not_fit_is_said_whole_on_hovering(desk: Desk, monkeypatch: pytest.MonkeyPatch) -> None:
    """Hovering a line that is too short for its text shows all of it; one that is long enough adds nothing."""
    said: list[str] = []
    monkeypatch.setattr(QToolTip, "showText", lambda _place, text, _widget: said.append(text))
    desk.line.resize(60, 24)
    place = desk.line.rect().center()
    for text in ("2", "0.016666666666666666"):
        replace_text(desk.line, text)
        QApplication.sendEvent(desk.line, QHelpEvent(QEvent.Type.ToolTip, place, desk.line.mapToGlobal(place)))
    assert said == ["0.016666666666666666"]
