"""The line under the rulers, in words and as painted."""

from typing import Any

import pytest
from PySide6.QtGui import QAccessible
from pytestqt.qtbot import QtBot

from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN
from tuner.window.rulers.reading_line import ReadingLine
from tuner.window.theme import Theme


@pytest.fixture
def line(qtbot: QtBot, theme: Theme) -> ReadingLine:
    """Return a line that is wide enough."""
    line = ReadingLine(theme)
    qtbot.addWidget(line)
    line.resize(1200, 20)
    line.show()
    return line


def colours(line: ReadingLine) -> set[str]:
    """Return the colours of the pixels of the line."""
    image = line.grab().toImage()
    return {image.pixelColor(x, y).name() for x in range(image.width()) for y in range(image.height())}


def test_it_explains_the_patterns(line: ReadingLine, theme: Theme) -> None:
    """With no place to read, the three classes are shown as they are painted, each with its meaning."""
    for word in ("firm: ", "soft: ", "lost: ", "Alt and an arrow key"):
        assert word in line.text()
    assert {theme.colour(role).name() for role in ("firm", "soft", "lost")} <= colours(line)


@pytest.mark.parametrize(
    ("grade", "word", "role"), [(FIRM, "firm", "firm"), (SOFT, "soft", "soft"), (LOST, "lost", "lost")]
)
def test_it_says_what_holds_at_a_place(line: ReadingLine, theme: Theme, grade: int, word: str, role: str) -> None:
    """The place, the class in words and as painted, and why; the other classes are not in sight."""
    line.show_place("kp 4.2 %", grade, "why it is so")
    assert line.text() == f"kp 4.2 %  {word}  why it is so"
    painted = {name for name in ("firm", "soft", "lost") if theme.colour(name).name() in colours(line)}
    assert painted == {role}


def test_a_class_that_is_not_known_is_said_so(line: ReadingLine) -> None:
    """Grey is no class."""
    line.show_place("kp 4.2 %", UNKNOWN, "")
    assert line.text() == "kp 4.2 %  not known yet"


def test_why_the_rulers_are_grey_is_said(line: ReadingLine) -> None:
    """Why the rulers are grey takes the place of the legend, until the legend comes back."""
    legend = line.text()
    line.show_note("the loop has no gain")
    assert line.text() == "the loop has no gain"
    line.show_legend()
    assert line.text() == legend


def test_what_does_not_fit_is_in_its_tip(line: ReadingLine) -> None:
    """A narrow line asks for no more room, and says the whole sentence in its tip."""
    assert line.toolTip() == ""
    line.resize(200, 20)
    assert line.toolTip() == line.text()
    assert line.minimumSizeHint().width() == 0
    line.show_note("short")
    assert line.toolTip() == ""


def test_its_words_are_told_to_assistive_technology(line: ReadingLine) -> None:
    """The name of the line is what it says."""
    line.show_place("kp 4.2 %", FIRM, "all limits met")
    interface: Any = QAccessible.queryAccessibleInterface(line)
    assert interface.text(QAccessible.Text.Name) == line.text()
